import { readFileSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import { beforeAll, describe, expect, it } from 'vitest'
import { mjdFromIsoDate } from '../../../shared/earth/time/epochs.ts'
import { fitTrend } from '../../../shared/earth/time/trend.ts'
import { parseObserved } from '../../../shared/observed/parse.ts'
import type { ParsedObserved } from '../../../shared/observed/parse.ts'
import { reduceObserved } from '../../../shared/observed/reduce.ts'
import type { ReducedSeries } from '../../../shared/observed/reduce.ts'

// The real EOP 14 C04 series of the IERS, 1962 to 2022 (fixtures/README.md names the source).
let c04: ParsedObserved
let reduced: ReducedSeries
beforeAll(() => {
  c04 = parseObserved(gunzipSync(readFileSync(new URL('../../fixtures/eop14c04_1962_2022.txt.gz', import.meta.url))).toString('latin1'))
  reduced = reduceObserved(c04, { zonalTides: true })
})

/** Variance of a series at one period, from the sine and cosine fitted to it. */
function varianceAt(mjd: number[], value: (number | null)[], periodDays: number): number {
  const fit = fitTrend({ mjd, value: value as number[] }, { seasonal: false, aliasPeriodDays: periodDays })
  return (fit.coefficients[2]! ** 2 + fit.coefficients[3]! ** 2) / 2
}

describe('length of day of the C04 series', () => {
  it('has the decadal means and the range of the published file', () => {
    const mean = (from: string, to: string): number => {
      const values = [...c04.lodMs].filter((_, i) => c04.mjd[i]! >= mjdFromIsoDate(from) && c04.mjd[i]! < mjdFromIsoDate(to))
      return values.reduce((a, b) => a + b) / values.length
    }
    // Computed apart from the same file: 2.33 ms in 1962–72, 0.63 ms in 2013–22, daily values from −1.59 to +4.36 ms.
    expect(mean('1962-01-01', '1973-01-01')).toBeCloseTo(2.33, 1)
    expect(mean('2013-01-01', '2023-01-01')).toBeCloseTo(0.63, 1)
    expect(Math.min(...c04.lodMs)).toBeCloseTo(-1.59, 2)
    expect(Math.max(...c04.lodMs)).toBeCloseTo(4.36, 2)
  })

  it.each([13.6608, 27.5545])('loses more than 95 per cent of its variance at %f days when the tides are taken out', period => {
    // From 1984 on, when daily values resolve the fortnight.
    const part = reduceObserved(c04, { zonalTides: true, from: '1984-01-01', excitation: false })
    const before = varianceAt(part.mjd, part.lodMs, period)
    expect(varianceAt(part.mjd, part.lodReducedMs, period) / before).toBeLessThan(0.05)
    // The sign matters: adding them instead would make it four times as large.
    expect(before).toBeGreaterThan(0.001)
  })

  it('changes its trend over a decade by 3.7 ms per century at most when the tides are taken out', () => {
    const decade = { from: '1997-01-01', to: '2006-12-31', excitation: false }
    const raw = reduceObserved(c04, decade)
    const clean = reduceObserved(c04, { ...decade, zonalTides: true })
    const bias = (raw.trends.lodMsPerYear!.value - clean.trends.lodMsPerYear!.value) * 100
    expect(Math.abs(bias)).toBeGreaterThan(1)
    // 3.73 here, over ten years on the steepest flank of the nodal tide.
    expect(Math.abs(bias)).toBeLessThan(3.75)
  })
})

describe('pole of the C04 series', () => {
  it('drifts like the secular pole of the IERS Conventions, 1976 to 2015, in sign, direction and size', () => {
    // IERS Conventions (2010), ch. 7, 2018 update: 1.677 and 3.460 mas/yr. The secular pole is adjusted to a longer record; about 2000
    // the drift turned eastwards (Chen et al. 2013, GRL 40, 2625; Adhikari & Ivins 2016), so that the years to 2015 have less in y,
    // 2.4 mas/yr, while those to 1999 still have the secular rate of y and less in x. Forty years of data: some tenths of a mas/yr.
    const whole = reduceObserved(c04, { from: '1976-01-01', to: '2015-12-31', monthly: true }).trends
    const before = reduceObserved(c04, { from: '1976-01-01', to: '1999-12-31', monthly: true }).trends
    expect(Math.abs(whole.xMasPerYear!.value - 1.677)).toBeLessThan(0.3)
    expect(Math.abs(before.yMasPerYear!.value - 3.460)).toBeLessThan(0.3)
    expect(whole.yMasPerYear!.value).toBeLessThan(before.yMasPerYear!.value - 0.8)
    expect(whole.yMasPerYear!.value).toBeGreaterThan(2)
    // Excitation drifts with the pole: χ₁ = x_p, χ₂ = −y_p; towards 64.1° W for the secular pole, 10° to the east of it here.
    expect(Math.abs(whole.chi1MasPerYear!.value - whole.xMasPerYear!.value)).toBeLessThan(0.3)
    expect(Math.abs(whole.chi2MasPerYear!.value + whole.yMasPerYear!.value)).toBeLessThan(0.3)
    const direction = Math.atan2(whole.chi2MasPerYear!.value, whole.chi1MasPerYear!.value) * 180 / Math.PI
    expect(direction).toBeGreaterThan(-64.1)
    expect(direction).toBeLessThan(-45)
  })

  it('has an annual excitation of some 10 to 25 mas', () => {
    // Published annual geodetic excitation: about 4 to 15 mas in χ₁ and 15 to 25 mas in χ₂ (e.g. Gross et al. 2003, JGR 108, 2405: order of size).
    const part = reduceObserved(c04, { from: '1984-01-01', monthly: true })
    const amplitude = (name: 'chi1Mas' | 'chi2Mas'): number => {
      const fit = fitTrend({ mjd: part.chiMjd, value: part[name] as number[] })
      return Math.hypot(fit.coefficients[2]!, fit.coefficients[3]!)
    }
    expect(amplitude('chi1Mas')).toBeGreaterThan(3)
    expect(amplitude('chi1Mas')).toBeLessThan(25)
    expect(amplitude('chi2Mas')).toBeGreaterThan(10)
    expect(amplitude('chi2Mas')).toBeLessThan(30)
  })

  it('gives excitation at the midpoints of days, trimmed by one', () => {
    expect(reduced.chiMjd).toHaveLength(reduced.count - 1)
    expect(reduced.chiMjd[0]).toBe(37665.5)
    expect([reduced.format, reduced.from, reduced.to, reduced.count]).toEqual(['eop14c04', '1962-01-01', '2022-11-29', 22248])
  })
})
