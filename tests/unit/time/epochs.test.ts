import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  calendarFromMjd, decimalYearFromMjd, isoDateFromMjd, mjdFromCalendar, mjdFromDecimalYear, mjdFromIsoDate, monthsBetween
} from '../../../shared/earth/time/epochs.ts'

describe('dates against the MJD column of IERS files', () => {
  // EOP 14 C04 (first and last row), finals2000A (first row, a leap day's neighbour): IERS, by way of Debian's python3-astropy 5.2.1.
  it.each([
    ['1962-01-01', 37665], ['2022-11-29', 59912], ['1973-01-02', 41684], ['2015-01-26', 57048], ['2015-02-01', 57054], ['2015-03-26', 57107]
  ])('%s is MJD %i', (date, mjd) => {
    expect(mjdFromIsoDate(date)).toBe(mjd)
    expect(isoDateFromMjd(mjd)).toBe(date)
    expect(isoDateFromMjd(mjd + 0.999)).toBe(date)
  })

  it('has its zero at 1858-11-17 and J2000.0 at 2000-01-01 12 h', () => {
    expect(mjdFromIsoDate('1858-11-17')).toBe(0)
    expect(mjdFromIsoDate('2000-01-01T12:00:00Z')).toBe(51544.5)
  })
})

describe('decimal years are calendar-year fractions', () => {
  it('puts the half of a leap year on 2 July and of a common year at noon of 2 July', () => {
    expect(mjdFromDecimalYear(2004.5)).toBe(mjdFromIsoDate('2004-07-02'))
    expect(mjdFromDecimalYear(2005.5)).toBe(mjdFromIsoDate('2005-07-02T12:00'))
  })

  it('round-trips to a second', () => {
    fc.assert(fc.property(fc.double({ min: 0, max: 80000, noNaN: true }), mjd => {
      expect(Math.abs(mjdFromDecimalYear(decimalYearFromMjd(mjd)) - mjd)).toBeLessThan(1e-5)
    }))
  })
})

describe('calendar', () => {
  it('round-trips every day of 400 years and steps by one day', () => {
    let previous = mjdFromCalendar(1799, 12, 31)
    for (let mjd = previous + 1; mjd < previous + 146097; mjd++) {
      const { year, month, day } = calendarFromMjd(mjd)
      const back = mjdFromCalendar(year, month, day)
      if (back !== mjd) expect.fail(`MJD ${mjd} became ${year}-${month}-${day}, MJD ${back}`)
    }
    previous = mjdFromIsoDate('2000-02-28')
    expect(isoDateFromMjd(previous + 1)).toBe('2000-02-29')
    expect(isoDateFromMjd(mjdFromIsoDate('1900-02-28') + 1)).toBe('1900-03-01')
  })

  it('agrees with the platform calendar', () => {
    fc.assert(fc.property(fc.integer({ min: -100000, max: 150000 }), mjd => {
      const platform = new Date((mjd - 40587) * 86400000).toISOString().slice(0, 10)
      expect(isoDateFromMjd(mjd)).toBe(platform)
    }))
  })

  it.each(['2001-02-29', '2001-13-01', '2001-00-10', '2001-04-31', '01-04-2001', '2001-4-1', '2001', '', '2001-01-01T25:00'])(
    'refuses "%s"', text => expect(() => mjdFromIsoDate(text)).toThrow(RangeError)
  )

  it('lists the months whose middles lie in a span', () => {
    const months = monthsBetween(mjdFromIsoDate('2003-12-20'), mjdFromIsoDate('2004-03-16'))
    expect(months.map(m => `${m.year}-${m.month}`)).toEqual(['2004-1', '2004-2'])
    expect(months[1]!.middleMjd).toBe(mjdFromIsoDate('2004-02-15T12:00'))
    expect(monthsBetween(10, 5)).toEqual([])
  })
})
