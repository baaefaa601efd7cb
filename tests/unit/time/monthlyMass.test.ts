import { describe, expect, it } from 'vitest'
import { calendarMonth } from '../../../shared/earth/time/epochs.ts'
import { monthlyMass } from '../../../shared/earth/time/monthlyMass.ts'

// Closed forms: what a mean and a straight line give without the code.
const middles = Array.from({ length: 12 }, (_, k) => calendarMonth(2010, k + 1).middleMjd)
const ofMonths = (massGt: number[], sigmaGt: number[] | null = massGt.map(() => 2), mjd = middles, sharedRates: { source: string, sigmaGtPerYear: number }[] = []) =>
  monthlyMass({ mjd, massGt, sigmaGt, sharedRates })

describe('monthly mass of a region', () => {
  it('is the value of the month less the mean of all months', () => {
    const { months, massGt, sigmaGt } = ofMonths(middles.map((_, k) => 7 + 10 * k))
    expect(months.map(({ month }) => month)).toEqual([1, 2, 3, 4, 5, 6, 7, 8, 9, 10, 11, 12])
    massGt.forEach((value, k) => expect(value).toBeCloseTo(10 * k - 55, 9))
    // One of twelve equal errors against the mean of all: σ √(1 − 1/12).
    for (const sigma of sigmaGt) expect(sigma).toBeCloseTo(2 * Math.sqrt(11 / 12), 9)
  })

  it('leaves a gap longer than two months empty, and its neighbours as they are', () => {
    const kept = [0, 1, 2, 7, 8, 9, 10, 11]
    const { months, massGt, sigmaGt } = ofMonths(kept.map(() => 3), kept.map(() => 1), kept.map(k => middles[k]!))
    expect(months).toHaveLength(12)
    expect(massGt.map((value, k) => value === null ? k : -1).filter(k => k >= 0)).toEqual([3, 4, 5, 6])
    expect(sigmaGt[4]).toBeNull()
    for (const k of kept) expect(massGt[k]).toBeCloseTo(0, 12)
  })

  it('lets an error of the trend grow from the middle of the record', () => {
    const { sigmaGt } = ofMonths(middles.map(() => 0), middles.map(() => 0), middles, [{ source: 'model', sigmaGtPerYear: 3 }, { source: 'other', sigmaGtPerYear: 4 }])
    const mean = middles.reduce((a, b) => a + b) / 12
    sigmaGt.forEach((sigma, k) => expect(sigma).toBeCloseTo(5 * Math.abs(middles[k]! - mean) / 365.25, 9))
  })

  it('has no months without epochs', () => {
    expect(ofMonths([], [], [])).toEqual({ months: [], massGt: [], sigmaGt: [] })
  })
})
