/**
 * Epochs. Inside the core every epoch is a Modified Julian Date (UTC, days; MJD 0 = 1858-11-17 0 h). Calendar dates are
 * Gregorian throughout, also before 1582.
 */

/** Days of a Julian year, the year of every rate. */
export const JULIAN_YEAR_DAYS = 365.25
/** MJD of J2000.0 (2000-01-01 12 h). */
export const J2000_MJD = 51544.5

export interface CalendarDate { year: number, month: number, day: number }

/** Whether a Gregorian year has 366 days. */
export function isLeapYear(year: number): boolean {
  return year % 4 === 0 && (year % 100 !== 0 || year % 400 === 0)
}

/** Days in a Gregorian year: 365 or 366. */
export function daysInYear(year: number): number {
  return isLeapYear(year) ? 366 : 365
}

/** Days in a calendar month, month 1…12. */
export function daysInMonth(year: number, month: number): number {
  if (month === 2) return isLeapYear(year) ? 29 : 28
  return month === 4 || month === 6 || month === 9 || month === 11 ? 30 : 31
}

/**
 * MJD at 0 h of a Gregorian date. `day` may carry a fraction. Proleptic before 1582.
 * Algorithm: days from a March-based year (Fliegel & Van Flandern 1968, Comm. ACM 11, 657, in floor arithmetic).
 */
export function mjdFromCalendar(year: number, month: number, day: number): number {
  const marchYear = month > 2 ? year : year - 1
  const marchMonth = (month + 9) % 12
  const era = Math.floor(marchYear / 400)
  const yearOfEra = marchYear - era * 400
  const dayOfYear = Math.floor((153 * marchMonth + 2) / 5)
  const dayOfEra = yearOfEra * 365 + Math.floor(yearOfEra / 4) - Math.floor(yearOfEra / 100) + dayOfYear
  // 0000-03-01 is MJD −678 881.
  return era * 146097 + dayOfEra - 678881 + (day - 1)
}

/** Gregorian date of an MJD; `day` is a whole number, the fraction of the day is dropped. */
export function calendarFromMjd(mjd: number): CalendarDate {
  requireFinite('mjd', mjd)
  const days = Math.floor(mjd) + 678881
  const era = Math.floor(days / 146097)
  const dayOfEra = days - era * 146097
  const yearOfEra = Math.floor((dayOfEra - Math.floor(dayOfEra / 1460) + Math.floor(dayOfEra / 36524) - Math.floor(dayOfEra / 146096)) / 365)
  const dayOfYear = dayOfEra - (365 * yearOfEra + Math.floor(yearOfEra / 4) - Math.floor(yearOfEra / 100))
  const marchMonth = Math.floor((5 * dayOfYear + 2) / 153)
  const day = dayOfYear - Math.floor((153 * marchMonth + 2) / 5) + 1
  const month = marchMonth < 10 ? marchMonth + 3 : marchMonth - 9
  return { year: yearOfEra + era * 400 + (month <= 2 ? 1 : 0), month, day }
}

const isoPattern = /^(\d{4})-(\d{2})-(\d{2})(?:[T ](\d{2}):(\d{2})(?::(\d{2}(?:\.\d+)?))?Z?)?$/

/**
 * MJD of an ISO 8601 date, `YYYY-MM-DD`, with an optional time of day in UTC (`T06:30`, `T06:30:15Z`). A date alone
 * means 0 h UTC. Throws RangeError for anything else, dates that do not exist included.
 */
export function mjdFromIsoDate(text: string): number {
  const match = isoPattern.exec(text.trim())
  if (!match) throw new RangeError(`date must be like 2002-04-17, got "${text}"`)
  const year = Number(match[1])
  const month = Number(match[2])
  const day = Number(match[3])
  const hour = Number(match[4] ?? 0)
  const minute = Number(match[5] ?? 0)
  const second = Number(match[6] ?? 0)
  if (month < 1 || month > 12 || day < 1 || day > daysInMonth(year, month)) {
    throw new RangeError(`date must exist in the calendar, got "${text}"`)
  }
  if (hour > 24 || minute > 59 || second >= 61 || (hour === 24 && (minute > 0 || second > 0))) {
    throw new RangeError(`time of day must be between 00:00 and 24:00, got "${text}"`)
  }
  return mjdFromCalendar(year, month, day) + (hour * 3600 + minute * 60 + second) / 86400
}

/** Calendar date `YYYY-MM-DD` (UTC) on which an MJD falls; the time of day is dropped. Years 0…9999. */
export function isoDateFromMjd(mjd: number): string {
  const { year, month, day } = calendarFromMjd(mjd)
  if (year < 0 || year > 9999) throw new RangeError(`mjd must fall in the years 0 to 9999, got ${mjd}`)
  return `${String(year).padStart(4, '0')}-${String(month).padStart(2, '0')}-${String(day).padStart(2, '0')}`
}

/** MJD of a decimal year taken as a calendar-year fraction: 2004.5 is 183 days into 2004, 2005.5 is 182.5 into 2005. */
export function mjdFromDecimalYear(decimalYear: number): number {
  requireFinite('decimalYear', decimalYear)
  const year = Math.floor(decimalYear)
  return mjdFromCalendar(year, 1, 1) + (decimalYear - year) * daysInYear(year)
}

/** Decimal year (calendar-year fraction) of an MJD; the inverse of `mjdFromDecimalYear`. */
export function decimalYearFromMjd(mjd: number): number {
  const { year } = calendarFromMjd(mjd)
  return year + (mjd - mjdFromCalendar(year, 1, 1)) / daysInYear(year)
}

/** Time since J2000.0 in Julian years of 365.25 d. */
export function julianYearsFromMjd(mjd: number): number {
  return (mjd - J2000_MJD) / JULIAN_YEAR_DAYS
}

export interface CalendarMonth { year: number, month: number, startMjd: number, middleMjd: number, endMjd: number }

/** One calendar month: start (0 h of the 1st), middle and end (0 h of the next 1st), MJD. */
export function calendarMonth(year: number, month: number): CalendarMonth {
  const startMjd = mjdFromCalendar(year, month, 1)
  const days = daysInMonth(year, month)
  return { year, month, startMjd, middleMjd: startMjd + days / 2, endMjd: startMjd + days }
}

/** The calendar months whose middles lie in [fromMjd, toMjd], in order. */
export function monthsBetween(fromMjd: number, toMjd: number): CalendarMonth[] {
  requireFinite('fromMjd', fromMjd)
  requireFinite('toMjd', toMjd)
  const months: CalendarMonth[] = []
  let { year, month } = calendarFromMjd(fromMjd)
  for (;;) {
    const candidate = calendarMonth(year, month)
    if (candidate.middleMjd > toMjd) return months
    if (candidate.middleMjd >= fromMjd) months.push(candidate)
    month++
    if (month > 12) {
      month = 1
      year++
    }
  }
}

function requireFinite(name: string, value: number): void {
  if (!Number.isFinite(value)) throw new RangeError(`${name} must be a finite number, got ${value}`)
}
