import { describe, expect, it } from 'vitest'
import { light } from '../../../shared/design/tokens.ts'
import { beamFigure } from '../../../shared/figures/beam/beamFigure.ts'
import { beamData, beamSegments } from '../../../shared/figures/beam/data.ts'
import { expectSound, readSvg } from './expectSound.ts'
import { hostileRegions, widths } from './hostile.ts'
import { sampleRun, sixRegions } from './sampleRun.ts'

const draw = (regions = sixRegions, width = 820) => beamFigure(beamData(sampleRun(regions)), { width, theme: 'light', id: 'b' })

describe('beamFigure', () => {
  for (const [name, regions] of Object.entries(hostileRegions)) {
    it.each(widths)(`draws ${name} soundly at %i px`, width => expectSound(draw(regions, width)))
  }

  it('lays regions head to tail from zero, the largest nearest to the pivot', () => {
    const segments = beamSegments(beamData(sampleRun()))
    expect(segments.map(({ name }) => name)[0]).toBe('Northern ice dome')
    for (const side of [1, -1]) {
      const own = segments.filter(segment => Math.sign(segment.value) === side)
      expect(own[0]!.from).toBe(0)
      own.slice(1).forEach((segment, i) => expect(segment.from).toBe(own[i]!.to))
    }
    expect(segments.reduce((sum, { from, to }) => sum + to - from, 0)).toBeCloseTo(9.63, 10)
  })

  it('gives each bar the width of its value, the side of its sign and the colour of its mass', () => {
    const bars = [...readSvg(draw([
      { name: 'A', mass: -1, lod: 4, chi1: 0, chi2: 0 }, { name: 'B', mass: 1, lod: 2, chi1: 0, chi2: 0 }, { name: 'C', mass: -1, lod: -2, chi1: 0, chi2: 0 },
    ]).svg).querySelectorAll('rect')].map(rect => ({
      x: Number(rect.getAttribute('x')), width: Number(rect.getAttribute('width')), height: Number(rect.getAttribute('height')), fill: rect.getAttribute('fill'),
    })).filter(bar => bar.height === 26 && !bar.fill!.startsWith('url'))
    expect(bars.map(bar => bar.fill)).toEqual([light.loss, light.gain, light.loss])
    // One pixel stays free between neighbours.
    expect((bars[0]!.width + 1) / (bars[1]!.width + 1)).toBeCloseTo(2, 2)
    expect(bars[1]!.x).toBeCloseTo(bars[0]!.x + bars[0]!.width + 1, 1)
    expect(bars[2]!.x + bars[2]!.width + 1).toBeCloseTo(bars[0]!.x, 1)
  })

  it('names every region once, however narrow', () => {
    for (const width of widths) {
      const texts = draw(hostileRegions['twelve with long names'], width).labels.map(label => label.text)
      expect(texts.filter(text => /^(Region|The gr)/.test(text))).toHaveLength(12)
    }
  })

  it('leaves out what is switched off and draws nothing for names that are markup', () => {
    const run = sampleRun()
    const fewer = { ...run, regions: run.regions.map((region, i) => ({ ...region, scale: i ? 1 : 0 })) }
    expect(beamData(fewer).items.map(item => item.name)).not.toContain('Northern ice dome')
    const svg = readSvg(draw(hostileRegions['names that are markup']).svg)
    expect(svg.querySelector('script')).toBeNull()
    expect(svg.querySelectorAll('svg')).toHaveLength(0)
    expect(svg.textContent).toContain('<script>alert(1)</script>')
  })

  it('follows the page through CSS variables in the live theme', () => {
    const { svg } = beamFigure(beamData(sampleRun()), { width: 600, theme: 'live', id: 'b' })
    expect(svg).toContain('var(--loss)')
    expect(svg).not.toMatch(/#[0-9a-f]{6}/)
  })
})
