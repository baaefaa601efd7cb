import { describe, expect, it } from 'vitest'
import { light } from '../../../shared/design/tokens.ts'
import { comparisonFigure, totalSeriesData } from '../../../shared/figures/series/comparisonFigure.ts'
import { decimated, lowerBound, runsOf } from '../../../shared/figures/series/data.ts'
import { timeSeriesFigure } from '../../../shared/figures/series/timeSeriesFigure.ts'
import { timeTicks } from '../../../shared/figures/ticks.ts'
import { expectSound, readSvg } from './expectSound.ts'
import { widths } from './hostile.ts'
import { noise, sampleComparison, sampleRun } from './sampleRun.ts'
import type { FigureSeries, SeriesData } from '../../../shared/figures/series/data.ts'

const of = (mjd: number[], value: (number | null)[], rest: Partial<FigureSeries> = {}): SeriesData => ({
  title: 'Mass', unit: 'Gt', series: [{ label: 'mass', role: 'loss', mjd, value, ...rest }],
})

const hostile: Record<string, SeriesData> = {
  'nothing': of([], []),
  'one value': of([53005], [5]),
  'gaps everywhere': of([53005, 53036, 53067, 53098], [1, null, Number.NaN, 4], { sigma: [1, null, 1, Number.NaN] }),
  'a constant': of([53005, 53036], [7, 7]),
  'a tiny constant': of([53005, 53036], [1e-12, 1e-12]),
  'huge values': of([53005, 53036, 60000], [0, -3e12, 5e15]),
  'a few days': of([53005, 53006, 53009], [1, 2, 1]),
  'three thousand years': of([-600000, 60000], [1, 2]),
  'long names': { ...of([53005, 53400], [1, 2]), series: ['loss', 'gain', 'model', 'observed'].map((role, i) => ({ label: `The <great> & long name of the Halcyon "dome" ${i}`, role: role as 'loss', mjd: [53005, 53400], value: [i, 2] })) },
  'twelve that end together': { ...of([], []), series: Array.from({ length: 12 }, (_, i) => ({ label: `R${i}`, role: 'neutral' as const, mjd: [53005, 53400], value: [i, 1] })) },
  'coverage and a span': { ...of([53005, 54000, 55000], [1, 3, 2]), coverage: [{ label: 'Series A', spans: [[53005, 53500], [54000, 55000]] }, { label: 'Series B, outside', spans: [[10, 20]] }], highlight: { fromMjd: 52000, toMjd: 53500 } },
}

describe('timeSeriesFigure', () => {
  for (const [name, data] of Object.entries(hostile)) {
    it.each(widths)(`draws ${name} soundly at %i px`, width => expectSound(timeSeriesFigure(data, { width, theme: 'dark', id: 's' })))
  }

  it('does not join what a gap parts', () => {
    const svg = readSvg(timeSeriesFigure(of([1, 2, 3, 4, 5].map(i => 53000 + i), [1, 2, null, 3, 4]), { width: 600, theme: 'light', id: 's' }).svg)
    const line = [...svg.querySelectorAll('path')].find(path => path.getAttribute('stroke') === light.loss)!
    expect(line.getAttribute('d')!.match(/M/g)).toHaveLength(2)
    expect(runsOf({ label: '', role: 'loss', mjd: [0, 1, 40, 41], value: [1, 1, 1, 1], maxGapDays: 30 })).toHaveLength(2)
  })

  it('gives scales that find the drawn points again', () => {
    const figure = timeSeriesFigure(of([53005, 54000, 55000], [0, 10, 5]), { width: 600, theme: 'light', id: 's' })
    const { x, y } = figure.panels[0]!
    const at = (scale: typeof x, value: number) => scale.range[0] + (value - scale.domain[0]) / (scale.domain[1] - scale.domain[0]) * (scale.range[1] - scale.range[0])
    const d = [...readSvg(figure.svg).querySelectorAll('path')].find(path => path.getAttribute('stroke') === light.loss)!.getAttribute('d')!
    const points = d.slice(1).split('L').map(point => point.split(',').map(Number))
    expect(points[1]![0]).toBeCloseTo(at(x, 54000), 0)
    expect(points[1]![1]).toBeCloseTo(at(y, 10), 0)
  })

  it('opens sixty years of daily values in three lines quickly and keeps extremes', () => {
    const n = 22_000
    const random = noise(5)
    const mjd = Float64Array.from({ length: n }, (_, i) => 37665 + i)
    const value = Float64Array.from({ length: n }, () => random())
    value[12_345] = 9
    const series = ['observed', 'model', 'residual'].map(role => ({ label: role, role: role as 'model', mjd, value }))
    const figure = timeSeriesFigure({ title: 'Daily', unit: 'ms', series }, { width: 900, theme: 'light', id: 's' })
    expectSound(figure)
    expect(figure.svg.length).toBeLessThan(300_000)
    const [run] = runsOf(series[0]!)
    const thin = decimated(run!, day => (day - 37665) / n * 900)
    expect(thin.mjd.length).toBeLessThanOrEqual(4 * 900)
    expect(Math.max(...thin.value)).toBe(9)
    expect(Math.min(...thin.value)).toBe(Math.min(...run!.value))
    expect([thin.mjd[0], thin.mjd.at(-1)]).toEqual([37665, 37665 + n - 1])
    expect(thin.mjd.every((day, i) => i === 0 || day > thin.mjd[i - 1]!)).toBe(true)
  })

  it('finds its place in a sorted list', () => {
    expect([[0, 0], [1, 0], [1.5, 1], [3, 2], [4, 3]].map(([x]) => lowerBound([1, 2, 3], x!))).toEqual([0, 0, 1, 2, 3])
  })
})

describe('comparisonFigure', () => {
  const run = sampleRun()
  const comparison = sampleComparison(run)
  it.each(widths)('draws observed, model and residual at %i px', (width) => {
    for (const quantity of ['lod', 'chi1', 'chi2'] as const) {
      const figure = comparisonFigure(comparison, quantity, { width, theme: 'print', id: quantity })!
      expectSound(figure)
      expect(figure.panels).toHaveLength(2)
      expect(figure.panels[0]!.x).toEqual(figure.panels[1]!.x)
    }
    expectSound(timeSeriesFigure(totalSeriesData(run.epochsMjd, run.total.series, 'lod'), { width, theme: 'light', id: 't' }))
  })
  it('says nothing where nothing was observed', () => {
    expect(comparisonFigure({ ...comparison, lod: null }, 'lod', { width: 500, theme: 'light', id: 'c' })).toBeNull()
  })
})

describe('timeTicks', () => {
  it.each([
    [37665, 59945, 7, ['1970', '1980', '1990', '2000', '2010', '2020']],
    [53005, 54466, 5, ['2004', '2005', '2006', '2007', '2008']],
    [53005, 53400, 6, ['2004', 'Apr 2004', 'Jul 2004', 'Oct 2004', '2005']],
    [53005, 53009, 6, ['1 Jan', '2 Jan', '3 Jan', '4 Jan', '5 Jan']],
  ])('divides %i to %i', (from, to, count, texts) => {
    expect(timeTicks(from, to, count).map(tick => tick.text)).toEqual(texts)
  })
})
