import { describe, expect, it } from 'vitest'
import { comparedPanels, polePaths, ut1Panel } from '../../../app/attribution/panels'
import { angleLines, bandRows, budgetDrift, budgetHeads, budgetLines, correlationLines, factorHeads, factorLines, noiseRows, spectrumLines } from '../../../app/attribution/tables'
import type { AttributionBudget, AttributionRow } from '#shared/attribution/budget'
import type { ComparisonStatistics } from '#shared/attribution/comparisonStatistics'
import type { Identifiability } from '#shared/attribution/identifiability'
import type { TrendNoiseReport } from '#shared/earth/time/trendNoise'

const hard = '\u00a0'
const rate = (value: number, sigma: number) => ({ value, sigma })
const row = (key: string, kind: AttributionRow['kind'], more: Partial<AttributionRow> = {}): AttributionRow => ({
  key, name: key.toUpperCase(), kind, massGtPerYear: null, lodMicrosecondsPerYear: rate(1.5, 0.5), chi1MasPerYear: rate(1, 0.1), chi2MasPerYear: rate(-2, 0.2),
  driftCovariance: { c11: 0.01, c12: 0, c22: 0.04 }, shareOfModel: { lod: null, pole: null }, ofObservedDrift: null, ...more,
})
const shares = { along: rate(1, 0.1), across: rate(0.2, 0.1), shareAlong: rate(0.62, 0.11), shareAcross: rate(0.12, 0.09) }
const budget = {
  rows: [row('a', 'region', { massGtPerYear: rate(-50, 5), shareOfModel: { lod: 0.4, pole: 0.9 }, ofObservedDrift: shares }), row('b', 'background')],
  model: row('model', 'model'), observed: row('observed', 'observed'), residual: row('residual', 'residual'),
  correlation: { lod: [[1, -0.31], [-0.31, 1]], chi1: [[1, null], [null, 1]], chi2: [[1, 0.001], [0.001, 1]] }, closure: { quoted: false, reason: '' }, driftChain: [], sentences: [],
} as AttributionBudget

describe('the budget of an attribution', () => {
  it('has the same columns in every row, and for the day a share of the model alone', () => {
    const lines = budgetLines(budget)
    expect(lines.map(line => line.key)).toEqual(['a', 'b', 'model', 'observed', 'residual'])
    for (const line of lines) expect(line.cells).toHaveLength(budgetHeads.length)
    expect(lines[0]!.cells).toEqual([`−50.0${hard}±${hard}5.0`, `+1.50${hard}±${hard}0.50`, `+1.00${hard}±${hard}0.10`, `−2.00${hard}±${hard}0.20`, `+40${hard}%`, `+90${hard}%`, `62${hard}±${hard}11${hard}%`, `12.0${hard}±${hard}9.0${hard}%`])
    expect(lines[3]!.cells.slice(4)).toEqual(['–', '–', '–', '–'])
    expect(budgetHeads.join()).not.toMatch(/observed.*day|day.*of the observed/)
  })
  it('draws background without a sign of mass', () => {
    const drift = budgetDrift(budget)
    expect(drift.items.map(({ name, mass }) => [name, mass])).toEqual([['A', -50], ['B', 0]])
    expect(drift.observed).toMatchObject({ chi1: 1, chi2: -2 })
    expect(budgetDrift({ ...budget, observed: row('observed', 'observed', { chi1MasPerYear: null }) }).observed).toBeNull()
  })
  it('lists correlations that are there, each pair once', () => {
    expect(correlationLines(budget, 'lod')).toEqual([{ key: 'a b', a: 'A', b: 'B', text: '−0.31' }])
    expect(correlationLines(budget, 'chi1')).toEqual([])
    expect(correlationLines(budget, 'chi2')).toEqual([])
  })
})

describe('bands and noise', () => {
  it('show rms, variance explained and coherence with what chance reaches', () => {
    const statistics = {
      rms: { observed: 0.2, model: 0.1, residual: 0.15 }, varianceExplained: 0.4375,
      bands: [{ band: 'annual', varianceObserved: 0.04, varianceModel: 0.01, varianceResidual: 0.01, varianceExplained: -0.25, coherence: 0.81, coherenceThreshold95: 0.39, reason: null },
        { band: 'decadal', varianceObserved: 1, varianceModel: 1, varianceResidual: 1, varianceExplained: null, coherence: null, coherenceThreshold95: null, reason: 'too short' }],
    } as unknown as ComparisonStatistics
    const rows = bandRows(statistics)
    expect(rows.map(({ name }) => name.split(',')[0])).toEqual(['all', 'annual', 'decadal'])
    expect(rows[1]).toMatchObject({ observed: '0.20', model: '0.10', explained: `−25${hard}%`, coherence: '0.81 (0.39)' })
    expect(rows[2]).toMatchObject({ coherence: '–', note: 'too short' })
  })
  it('mark the error that is to be quoted, also where a short record has one only', () => {
    const fits = (quote: 'white' | 'ar1' | 'power-law', models: object[]) => ({ simple: { value: 0.002, sigmaWhite: 0.0001, sigma: 0.0003, r1: 0.8 }, models, quote, sentence: 'So.' }) as unknown as TrendNoiseReport
    const long = fits('power-law', [{ model: 'white', value: 0.001, sigma: 0.0001 }, { model: 'ar1', value: 0.001, sigma: 0.0002 }, { model: 'power-law', value: 0.0012, sigma: 0.0009 }])
    const rows = noiseRows({ observed: long, model: fits('ar1', [{ model: 'white', value: 0.002, sigma: 0.0001 }]), residual: long }, 1000)
    expect(rows[0]!.cells.map(cell => cell.quoted)).toEqual([false, false, true])
    expect(rows[0]!.cells[2]!.text).toBe(`+1.20${hard}±${hard}0.90`)
    expect(rows[1]!.cells.map(cell => cell.text)).toEqual([`+2.00${hard}±${hard}0.10`, `+2.00${hard}±${hard}0.30`, '–'])
  })
})

describe('factors and angles', () => {
  it('tell prior, data alone, resolution, pull and what carries each', () => {
    const [known, open] = factorLines([
      { key: 'a', name: 'A', prior: { mean: 1, sigma: 0.5 }, posterior: rate(1.31, 0.12), dataOnly: rate(1.33, 0.13), resolution: 0.94, pull: 2.61, carriedBy: { lod: 0.1, chi2: 0.9 }, sigmaWithout: {} },
      { key: 'b', name: 'B', prior: { mean: 1, sigma: 0.5 }, posterior: rate(1, 0.5), dataOnly: null, resolution: 0, pull: 0, carriedBy: {}, sigmaWithout: {} },
    ])
    expect(known!.cells).toHaveLength(factorHeads.length)
    expect(known!.cells).toEqual([`1.31${hard}±${hard}0.12`, '1.00 ± 0.50', `1.33${hard}±${hard}0.13`, `94${hard}%`, '+2.6 σ', `ΔLOD 10${hard}%, χ₂ 90${hard}%`])
    expect(open!.cells[2]).toBe('not determined')
  })
  it('name the pair with its angles, and combinations without what is next to nothing', () => {
    const angle = (foldedDeg: number, told: boolean) => ({ angleDeg: foldedDeg, foldedDeg, separation: 0.53, told })
    const told = {
      groups: [{ key: 'a', name: 'A', strength: 3, resolution: 1 }, { key: 'b', name: 'B', strength: 3, resolution: 1 }],
      pairs: [{ a: 'a', b: 'b', pole: angle(2.7, false), day: null, all: angle(2.7, false) }],
      spectra: [{ set: 'pole', values: [1.41, 0.03], vectors: [[0.71, 0.71], [0.999, -0.01]], rank: 2, seen: 1 }], sentences: [],
    } as Identifiability
    expect(angleLines(told)).toEqual([{ key: 'a b', a: 'A', b: 'B', told: false, cells: ['2.7°', '–', '2.7°', '0.53 σ'] }])
    expect(spectrumLines(told).map(({ value, combination }) => [value, combination])).toEqual([['1.410', '+0.71 A, +0.71 B'], ['0.030', '+1.00 A']])
  })
})

describe('figures of an attribution', () => {
  it('cover the months that are there, observed and model apart', () => {
    const data = { unit: 'ms' as const, observed: [1, null, 2, 3], model: [1, 1, 1, null], modelSigma: [0, 0, 0, 0], residual: [0, null, 1, null], statistics: null, trends: null }
    const [above, below] = comparedPanels([10, 40, 70, 100], 'lod', data)
    expect(above!.coverage).toEqual([{ label: 'observed', spans: [[10, 10], [70, 100]] }, { label: 'model', spans: [[10, 70]] }])
    expect(below!.series[0]!.role).toBe('residual')
  })
  it('put y, which points to 90° W, on the axis to 90° E with its sign turned', () => {
    const stretch = { mjd: [1, 2], xMas: [1, 2], yMas: [3, null], observedXMas: [5, 6], observedYMas: [7, 8], freeWobbleMas: 1, rmsMas: 1 }
    const [secular, observed, predicted] = polePaths({ stretches: [{ ...stretch, mjd: [51544.5, 51544.5 + 3652.5] }], sentence: '' })
    // IERS Conventions (2010), ch. 7, update of 2018: x = 55.0 + 1.677 (t − 2000), y = 320.5 + 3.460 (t − 2000) mas.
    expect([secular!.label, secular!.chi1[0], secular!.chi2[0]]).toEqual(['secular pole', 55, -320.5])
    expect(Array.from(secular!.chi2).at(-1)).toBeCloseTo(-355.1, 9)
    expect([observed!.chi2, predicted!.chi2, predicted!.chi1]).toEqual([[-7, -8], [-3, null], [1, 2]])
    expect(ut1Panel({ stretches: [], caution: '' })).toBeNull()
  })
})
