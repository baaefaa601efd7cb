import { describe, expect, it } from 'vitest'
import type { Prediction } from '~/regions/types'
import { countedFrom, queryOfZero, zeroOfQuery } from '~/regions/zero'
import { dateOfMjd, mjdOfDate } from '~/utils/timeSpan'

// MJD 53005 is 1 January 2004, 53036 1 February, 53065 1 March (IERS).
const prediction = {
  mjd: [53005, 53036, 53065], massGt: [10, 20, 60], sigmaMassGt: [3, 3, 3], perGt: { lodMicroseconds: -2, chi1Mas: 1, chi2Mas: 0 }, lodMicroseconds: [40, 20, -60],
} as unknown as Prediction
const zero = (text?: string) => zeroOfQuery(text, mjdOfDate)

describe('what a chart counts from', () => {
  it('is what is stored, the first epoch, or a mean, and mass and day go together', () => {
    expect(countedFrom(prediction, zero()).prediction).toBe(prediction)
    expect(countedFrom(prediction, zero('first')).prediction.massGt).toEqual([0, 10, 50])
    expect(countedFrom(prediction, zero('mean')).prediction).toMatchObject({ massGt: [-20, -10, 30], lodMicroseconds: [40, 20, -60] })
    const { prediction: shifted, sentence } = countedFrom(prediction, zero('2004-01-01_2004-02-15'))
    expect(shifted.massGt).toEqual([-5, 5, 45])
    // The mean of two epochs of ± 3 Gt each: 3/√2.
    expect(sentence).toMatch(/known to ±\s2\.1\sGt/)
  })

  it('says where no epoch lies in the span, and keeps the chart', () => {
    expect(countedFrom(prediction, zero('2010-01-01_2011-01-01'))).toMatchObject({ fault: expect.stringMatching(/No epoch/) as string, prediction })
  })

  it('stands in the address', () => {
    for (const text of [undefined, 'first', 'mean', 'span', '2004-01-01_2009-12-31', '2004-01-01_']) expect(queryOfZero(zero(text), dateOfMjd)).toBe(text)
    expect(zero('nonsense').kind).toBe('stored')
  })
})
