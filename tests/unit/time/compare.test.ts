import { readFileSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import { describe, expect, it } from 'vitest'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { compareRun } from '../../../shared/earth/time/compare.ts'
import { poleFromExcitation } from '../../../shared/earth/time/polarMotion.ts'
import { computeRun } from '../../../shared/earth/time/run.ts'
import { zonalTideLodMs } from '../../../shared/earth/time/zonalTides.ts'
import { parseObserved } from '../../../shared/observed/parse.ts'
import type { ObservedSeries } from '../../../shared/types/run.ts'
import { box, everyMonth, normals, region, runInput } from './runFixtures.ts'

const model = loadEarthModel()
const mjd = everyMonth(121)
const run = computeRun(runInput([region('a', box(-50, 65, -40, 75), 0, {
  series: { mjd, massGt: mjd.map(t => -200 * (t - 53000) / 365.25 + 80 * Math.cos(2 * Math.PI * t / 365.25)), sigmaGt: mjd.map(() => 5), sharedRates: [{ source: 'gia', sigmaGtPerYear: 20 }] }
})]), model)
const perGt = run.regions[0]!.perGt

/** Daily rotation that the mass of the run makes, with the tides added where asked. */
function world(options: { tides?: boolean, noise?: number } = {}): ObservedSeries {
  const days = Float64Array.from({ length: 4400 }, (_, i) => 52000 + i)
  const mass = days.map(t => -200 * (t - 53000) / 365.25 + 80 * Math.cos(2 * Math.PI * t / 365.25))
  const { xMas, yMas } = poleFromExcitation(days, mass.map(m => m * perGt.chi1Mas), mass.map(m => m * perGt.chi2Mas), { xMas: 100, yMas: 300 })
  const tide = options.tides ? zonalTideLodMs(days) : days.map(() => 0)
  const normal = normals(7)
  const nan = days.map(() => Number.NaN)
  return {
    format: 'csv', mjd: days, xMas, yMas, sigmaXMas: nan, sigmaYMas: nan, sigmaLodMs: nan, predicted: new Uint8Array(days.length), emptyRows: 0, rowsRead: days.length,
    lodMs: mass.map((m, i) => 2 + m * perGt.lodMicroseconds * 1e-3 + tide[i]! + (options.noise ?? 0) * normal())
  }
}

describe('a run beside the rotation that it makes', () => {
  const comparison = compareRun(run, world())

  it('leaves nothing, in the day and in the pole', () => {
    // Monthly means against values at the middles of months: the season's curvature over a month is left, 1 % of its amplitude.
    expect(comparison.lod!.rmsResidual).toBeLessThan(0.01 * 80 * Math.abs(perGt.lodMicroseconds) * 1e-3)
    expect(comparison.chi1!.rmsResidual).toBeLessThan(0.01 * 80 * Math.hypot(perGt.chi1Mas, perGt.chi2Mas))
    expect(comparison.chi2!.rmsResidual).toBeLessThan(0.01 * 80 * Math.hypot(perGt.chi1Mas, perGt.chi2Mas))
    expect(comparison.lod!.trends.observed.value / (-200 * perGt.lodMicroseconds * 1e-3)).toBeCloseTo(1, 3)
    expect(comparison.chi2!.trends.model.value / (-200 * perGt.chi2Mas)).toBeCloseTo(1, 3)
  })

  it('covers the months that both have and says what is still in', () => {
    expect(comparison.epochsMjd).toEqual(run.epochsMjd)
    expect(comparison.notRemoved.join('; ')).toContain('zonal tides')
    expect(comparison.warnings.map(w => w.code)).toEqual(['tides-in', 'core'])
  })

  it('quotes a model error that holds the systematic rate', () => {
    expect(comparison.lod!.trends.model.sigma).toBeGreaterThanOrEqual(20 * Math.abs(perGt.lodMicroseconds) * 1e-3)
    expect(comparison.lod!.trends.residual.sigma).toBeGreaterThanOrEqual(20 * Math.abs(perGt.lodMicroseconds) * 1e-3)
  })
})

describe('what a comparison must not do', () => {
  it('has trends that add up and anomalies with mean zero over the months that both have', () => {
    const { lod } = compareRun(run, world({ noise: 0.05, tides: true }))
    const { observed, model: made, residual } = lod!.trends
    expect(observed.value - made.value).toBeCloseTo(residual.value, 12)
    const shared = lod!.residual.filter(v => v !== null)
    expect(shared.reduce((sum, v) => sum + v!, 0)).toBeCloseTo(0, 9)
  })

  it('takes the tides out when asked: the residual falls, and the text changes', () => {
    const seen = world({ tides: true })
    const without = compareRun(run, seen)
    const taken = compareRun(run, seen, { zonalTides: 'all' })
    expect(without.lod!.rmsResidual).toBeGreaterThan(20 * taken.lod!.rmsResidual)
    expect(taken.lod!.trends.residual.value).toBeCloseTo(0, 5)
    // Up to 3.7 ms per century over ten years, whatever is fitted beside it.
    expect(Math.abs(without.lod!.trends.residual.value)).toBeGreaterThan(0.005)
    expect(Math.abs(without.lod!.trends.residual.value)).toBeLessThan(0.037)
    expect(taken.notRemoved.join('; ')).not.toContain('zonal tides')
    expect(taken.warnings.map(w => w.code)).toEqual(['core'])
  })

  it('leaves out predictions, and months that are mostly missing', () => {
    const seen = world()
    const half = seen.mjd.findIndex(t => t >= run.epochsMjd[60]!)
    seen.predicted.fill(1, half)
    for (let i = 0; i < 20; i++) seen.lodMs[seen.mjd.findIndex(t => t >= run.epochsMjd[10]!) - 13 + i] = Number.NaN
    const comparison = compareRun(run, seen)
    expect(comparison.epochsMjd.at(-1)).toBe(run.epochsMjd[60])
    expect(comparison.lod!.observed[10]).toBeNull()
    expect(comparison.lod!.residual[10]).toBeNull()
    expect(comparison.lod!.model[10]).not.toBeNull()
    expect(comparison.chi1!.observed[10]).not.toBeNull()
  })

  it('takes no tide off excitation that comes from gravity, and does not speak of the core there', () => {
    const seen = { ...world(), from: 'gravity' as const }
    const comparison = compareRun(run, seen, { zonalTides: 'all' })
    expect(comparison.lod!.rmsResidual).toBeLessThan(0.01 * 80 * Math.abs(perGt.lodMicroseconds) * 1e-3)
    expect(comparison.warnings).toEqual([])
    expect(comparison.notRemoved.join(' ')).not.toContain('core')
  })

  it('gives null for what is not observed, and warns where there is nothing in common', () => {
    const seen = world()
    seen.lodMs.fill(Number.NaN)
    expect(compareRun(run, seen).lod).toBeNull()
    expect(compareRun(run, seen).chi1).not.toBeNull()
    const later = world()
    later.mjd.forEach((t, i) => { later.mjd[i] = t + 20000 })
    const none = compareRun(run, later)
    expect([none.lod, none.chi1, none.epochsMjd.length]).toEqual([null, null, 0])
    expect(none.warnings.map(w => w.code)).toEqual(['no-common-span'])
  })
})

describe('beside the real C04 series', () => {
  it('compares ten years of months', () => {
    const c04 = parseObserved(gunzipSync(readFileSync(new URL('../../fixtures/eop14c04_1962_2022.txt.gz', import.meta.url))).toString('latin1'))
    const comparison = compareRun(run, c04, { zonalTides: 'all' })
    expect(comparison.epochsMjd).toHaveLength(run.epochsMjd.length)
    expect(comparison.lod!.observed.every(v => v !== null)).toBe(true)
    // Monthly length of day without tides varies by some tenths of a ms; excitation by some tens of mas.
    expect(comparison.lod!.rmsObserved).toBeGreaterThan(0.1)
    expect(comparison.lod!.rmsObserved).toBeLessThan(1)
    expect(comparison.chi2!.rmsObserved).toBeGreaterThan(5)
    expect(comparison.chi2!.rmsObserved).toBeLessThan(100)
  })
})
