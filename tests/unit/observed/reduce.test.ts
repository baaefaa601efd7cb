import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { excitationFromPole } from '../../../shared/earth/time/polarMotion.ts'
import { zonalTideLodMs } from '../../../shared/earth/time/zonalTides.ts'
import { parseObserved } from '../../../shared/observed/parse.ts'
import { reduceObserved } from '../../../shared/observed/reduce.ts'
import type { ReduceOptions } from '../../../shared/observed/reduceOptions.ts'
import { InputError } from '../../../shared/types/issue.ts'
import type { ObservedSeries } from '../../../shared/types/run.ts'

const text = (name: string): string => readFileSync(new URL(`../../fixtures/${name}`, import.meta.url), 'latin1')
const finals = parseObserved(text('finals2000A_excerpt.txt'))

/** Ten years of days with a straight day, a season and a pole at rest. */
const world = (): ObservedSeries => {
  const mjd = Float64Array.from({ length: 3660 }, (_, i) => 52000 + i)
  const nan = mjd.map(() => Number.NaN)
  return {
    format: 'csv', mjd, xMas: mjd.map(t => 50 + (t - 52000) / 365.25), yMas: mjd.map(() => 300), sigmaXMas: nan, sigmaYMas: nan, sigmaLodMs: nan,
    lodMs: mjd.map(t => 1 + 0.02 * (t - 52000) / 365.25 + 0.3 * Math.cos(2 * Math.PI * t / 365.25)), predicted: new Uint8Array(mjd.length), emptyRows: 0, rowsRead: mjd.length
  }
}

function codes(options: ReduceOptions): string[] {
  try {
    reduceObserved(finals, options)
  } catch (error) {
    if (error instanceof InputError) return error.issues.map(issue => issue.code)
    throw error
  }
  return []
}

describe('a reduction', () => {
  it('leaves out predictions and gives plain JSON', () => {
    const reduced = reduceObserved(finals, { zonalTides: true })
    expect([reduced.from, reduced.to, reduced.count]).toEqual(['2015-01-26', '2015-03-19', 53])
    expect(JSON.parse(JSON.stringify(reduced))).toEqual(reduced)
    expect(reduceObserved(finals, { includePredictions: true }).count).toBe(60)
  })

  it('takes the tides off the length of day and nothing else', () => {
    const reduced = reduceObserved(finals, { zonalTides: 'all' })
    const tide = zonalTideLodMs(reduced.mjd)
    reduced.lodMs.forEach((lod, i) => {
      expect(reduced.tideMs[i]).toBe(tide[i])
      expect(reduced.lodReducedMs[i]).toBe(lod === null ? null : lod - tide[i]!)
    })
    expect(reduced.lodMs[0]).toBe(1.2748)
    expect(reduced.lodMs.at(-1)).toBeNull()
  })

  it('removes nothing unless asked', () => {
    const reduced = reduceObserved(finals)
    expect(reduced.lodReducedMs).toEqual(reduced.lodMs)
    expect(reduced.tideMs.every(t => t === 0)).toBe(true)
    expect(reduced.warnings.map(w => w.code)).toEqual(['tides-in'])
  })

  it('quotes no trend of the day with only the short tides removed', () => {
    const reduced = reduceObserved(world(), { zonalTides: 'under-35-days' })
    expect(reduced.trends.lodMsPerYear).toBeNull()
    expect(reduced.trends.chi1MasPerYear).not.toBeNull()
    expect(reduced.warnings.map(w => w.code)).toEqual(['no-trend'])
    expect(reduceObserved(world(), { zonalTides: 'all' }).trends.lodMsPerYear).not.toBeNull()
  })

  it('turns the pole into excitation with the period and Q that are given', () => {
    const series = world()
    const own = excitationFromPole(series.mjd, series.xMas, series.yMas, { periodDays: 430, q: 100 })
    const reduced = reduceObserved(series, { chandlerPeriodDays: 430, q: 100 })
    expect(reduced.chi1Mas).toEqual(Array.from(own.chi1Mas))
    expect(reduced.chi1Mas).not.toEqual(reduceObserved(series).chi1Mas)
    expect(reduced.excitationValidFromDays).toBe(13)
    expect(reduceObserved(series, { excitation: false })).toMatchObject({ chiMjd: [], chi1Mas: [], trends: { chi1MasPerYear: null } })
    // A pole that drifts by 1 mas per year along x is excited by a drift of the same size.
    expect(reduced.trends.chi1MasPerYear!.value).toBeCloseTo(1, 6)
    expect(reduced.trends.chi2MasPerYear!.value).toBeCloseTo(0, 6)
  })

  it('makes monthly means with the number of independent days', () => {
    const reduced = reduceObserved(world(), { monthly: true })
    expect(reduced.count).toBe(120)
    expect(reduced.samples!.slice(0, 2)).toEqual([30, 31])
    reduced.effectiveSamples!.forEach((n, j) => {
      expect(n).toBeGreaterThanOrEqual(1 - 1e-9)
      expect(n).toBeLessThanOrEqual(reduced.samples![j]!)
    })
    expect(reduced.trends.lodMsPerYear!.value).toBeCloseTo(0.02, 4)
  })

  it('takes seasons out and smooths', () => {
    const reduced = reduceObserved(world(), { removeSeasons: true })
    reduced.lodReducedMs.forEach((lod, i) => expect(lod!).toBeCloseTo(1 + 0.02 * i / 365.25, 9))
    const smooth = reduceObserved(world(), { smoothing: { kind: 'boxcar', widthDays: 365.25 } })
    expect(smooth.lodReducedMs[1800]!).toBeCloseTo(1 + 0.02 * 1800 / 365.25, 3)
    const gauss = reduceObserved(world(), { removeSeasons: true, smoothing: { kind: 'gaussian', widthDays: 60 } })
    expect(gauss.lodReducedMs[1800]!).toBeCloseTo(1 + 0.02 * 1800 / 365.25, 6)
  })

  it('keeps a missing day missing, through every step', () => {
    const series = world()
    series.lodMs[100] = Number.NaN
    series.xMas[200] = Number.NaN
    const reduced = reduceObserved(series, { zonalTides: true, removeSeasons: true })
    expect(reduced.lodReducedMs[100]).toBeNull()
    expect(reduced.lodReducedMs.filter(v => v === null)).toHaveLength(1)
    expect(reduced.chiMjd).toHaveLength(3660 - 3)
  })

  it('names the options that do not hold', () => {
    expect(codes({ chandlerPeriodDays: 300 })).toEqual(['chandler-band'])
    expect(codes({ q: 0, from: 'soon' })).toEqual(['chandler-band', 'bad-date'])
    expect(codes({ from: '2016-01-01', to: '2015-01-01' })).toEqual(['empty-span'])
    expect(codes({ from: '2030-01-01' })).toEqual(['no-rows'])
    expect(codes({ tides: true } as ReduceOptions)).toEqual(['unknown-option'])
    expect(codes({ zonalTides: 'half', monthly: 1 } as unknown as ReduceOptions)).toEqual(['not-a-boolean', 'unknown-setting'])
  })
})
