import { describe, expect, it } from 'vitest'
import { light } from '../../../shared/design/tokens.ts'
import { driftData, ellipseOf } from '../../../shared/figures/drift/data.ts'
import { driftFigure } from '../../../shared/figures/drift/driftFigure.ts'
import { polePathFigure } from '../../../shared/figures/drift/polePathFigure.ts'
import { polePlaneSmall } from '../../../shared/figures/drift/polePlaneSmall.ts'
import { cmPerMas, driftOf } from '../../../shared/figures/drift/vector.ts'
import { niceStep } from '../../../shared/figures/drift/view.ts'
import { segmentMeets } from '../../../shared/figures/layout.ts'
import { expectSound, readSvg } from './expectSound.ts'
import { hostileRegions, widths } from './hostile.ts'
import { sampleComparison, sampleRun } from './sampleRun.ts'

const exact = (value: number, sigma = 0) => ({ value, sigmaWhite: sigma, sigma })

describe('driftOf', () => {
  it('gives length, ground distance and east longitude of the secular pole', () => {
    // IERS Conventions (2010), chapter 7, 2018 update: x_s +1.677, y_s +3.460 mas per year, so χ = (1.677, −3.460); 3.845 mas,
    // 11.9 cm per year towards 64.1° W.
    const drift = driftOf(exact(1.677), exact(-3.460))
    expect(drift.mas.value).toBeCloseTo(3.845, 3)
    expect(drift.cm.value).toBeCloseTo(11.9, 1)
    expect(drift.direction!.value).toBeCloseTo(-64.1, 1)
  })
  it('is 3.09 cm per mas', () => expect(cmPerMas).toBeCloseTo(3.0887, 4))
  it('propagates errors along and across', () => {
    const drift = driftOf(exact(2, 0.3), exact(0, 0.1))
    expect(drift.mas.sigma).toBeCloseTo(0.3, 12)
    expect(drift.direction!.sigma).toBeCloseTo(0.05 * 180 / Math.PI, 12)
    const turned = driftOf(exact(1, 0.3), exact(1, 0.3), { c11: 0.09, c12: 0.09, c22: 0.09 })
    expect(turned.mas.sigma).toBeCloseTo(0.3 * Math.SQRT2, 12)
    expect(turned.direction!.sigma).toBeCloseTo(0, 6)
  })
  it('has no direction without a drift and (−180, 180] else', () => {
    expect(driftOf(exact(0, 1), exact(0, 1)).direction).toBeNull()
    expect(driftOf(exact(-1), exact(-0)).direction!.value).toBe(180)
  })
})

describe('ellipseOf', () => {
  it('finds axes and orientation', () => {
    expect(ellipseOf({ c11: 9, c12: 0, c22: 4 })).toEqual({ a: 3, b: 2, angle: 0 })
    const tilted = ellipseOf({ c11: 5, c12: 4, c22: 5 })
    expect([tilted.a, tilted.b, tilted.angle]).toEqual([3, 1, Math.PI / 4])
  })
})

describe('driftFigure', () => {
  for (const [name, regions] of Object.entries(hostileRegions)) {
    it.each(widths)(`draws ${name} soundly at %i px, with and without observation`, (width) => {
      const run = sampleRun(regions)
      for (const comparison of [null, sampleComparison(run)]) {
        expectSound(driftFigure(driftData(run, comparison), { width, theme: 'light', id: 'd' }))
      }
    })
  }

  it('puts 0° to the right and 90° E up', () => {
    const tipOf = (chi1: number, chi2: number) => {
      const svg = readSvg(driftFigure({ items: [], total: { name: 'model', chi1, chi2, covariance: null }, observed: null }, { width: 400, theme: 'light', id: 'd' }).svg)
      const line = [...svg.querySelectorAll('line')].find(candidate => candidate.getAttribute('stroke') === light.model)!
      const [x1, y1, x2, y2] = ['x1', 'y1', 'x2', 'y2'].map(key => Number(line.getAttribute(key))) as [number, number, number, number]
      return [Math.sign(Math.round(x2 - x1)), Math.sign(Math.round(y2 - y1))]
    }
    expect(tipOf(1, 0)).toEqual([1, 0])
    expect(tipOf(0, 1)).toEqual([0, -1])
    expect(tipOf(-1, 0)).toEqual([-1, 0])
    expect(tipOf(0, -1)).toEqual([0, 1])
  })

  it('draws the observed drift dashed and regions head to tail up to the sum', () => {
    const run = sampleRun()
    const svg = readSvg(driftFigure(driftData(run, sampleComparison(run)), { width: 800, theme: 'light', id: 'd' }).svg)
    const dashed = [...svg.querySelectorAll('line')].filter(line => line.getAttribute('stroke-dasharray'))
    expect(dashed.length).toBeGreaterThanOrEqual(1)
    expect(dashed.every(line => line.getAttribute('stroke') === light.observed)).toBe(true)
  })

  it('keeps names off the vectors', () => {
    const run = sampleRun()
    const figure = driftFigure(driftData(run), { width: 440, theme: 'light', id: 'd' })
    const lines = [...readSvg(figure.svg).querySelectorAll('line')].filter(line => [light.loss, light.gain, light.model].includes(line.getAttribute('stroke')!))
    for (const label of figure.labels.filter(({ text }) => run.regions.some(region => region.name === text))) {
      for (const line of lines) {
        const [x1, y1, x2, y2] = ['x1', 'y1', 'x2', 'y2'].map(key => Number(line.getAttribute(key))) as [number, number, number, number]
        expect(segmentMeets([x1, y1], [x2, y2], label), label.text).toBe(false)
      }
    }
  })
})

describe('small pole plane and path', () => {
  it.each([[1.9, -1.33], [0, 0], [1e-9, 0], [Number.NaN, 1]])('draws a shift of %d, %d', (chi1, chi2) => {
    for (const width of [150, 260]) {
      const figure = polePlaneSmall({ chi1: exact(chi1, 0.1), chi2: exact(chi2, 0.1), unit: 'mas/yr', groundUnit: 'cm/yr' }, { width, theme: 'live', id: 'p' })
      expectSound(figure)
    }
  })
  it.each(widths)('draws paths at %i px', (width) => {
    const run = sampleRun()
    const seen = sampleComparison(run)
    const model = { label: 'model', role: 'model' as const, mjd: run.epochsMjd, chi1: run.total.series.chi1Mas, chi2: run.total.series.chi2Mas }
    const observed = { label: 'observed', role: 'observed' as const, mjd: seen.epochsMjd, chi1: seen.chi1!.observed.map((v, i) => i === 50 ? null : v), chi2: seen.chi2!.observed }
    for (const paths of [[model, observed], [model], [], [{ ...model, chi1: model.chi1.map(() => null) }], [{ ...model, mjd: [53005], chi1: [1], chi2: [2] }]]) {
      expectSound(polePathFigure(paths, { width, theme: 'light', id: 'p' }))
    }
  })
  it('chooses steps of one, two and five', () => {
    expect([0.0013, 0.2, 0.21, 3, 7, 1].map(niceStep)).toEqual([0.002, 0.2, 0.5, 5, 10, 1])
  })
})
