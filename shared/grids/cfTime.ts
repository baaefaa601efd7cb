import { daysInYear, isLeapYear, mjdFromCalendar } from '../earth/time/epochs.ts'

/** Calendars of the CF conventions (1.11, §4.4.1). */
export const cfCalendars = ['standard', 'proleptic_gregorian', 'julian', 'noleap', 'all_leap', '360_day'] as const
export type CfCalendar = typeof cfCalendars[number]

const aliases: Record<string, CfCalendar> = { 'gregorian': 'standard', 'none': 'standard', '365_day': 'noleap', '366_day': 'all_leap' }
/** 0 h of the first day of the Gregorian calendar, 15 October 1582, MJD. */
const GREGORIAN_MJD = -100_840

/** Days of the units that CF allows for times; months and years are not, since their length is not fixed. */
const unitDays: [RegExp, number][] = [
  [/^(?:seconds?|secs?|s)$/, 1 / 86_400], [/^(?:minutes?|mins?)$/, 1 / 1440], [/^(?:hours?|hrs?|h)$/, 1 / 24], [/^(?:days?|d)$/, 1]
]

export interface CfTimeUnits { calendar: CfCalendar, perDay: number | 'months' | 'years', reference: { year: number, month: number, day: number, days: number } }

/**
 * What `units` like “days since 2002-01-01 00:00:00” and `calendar` say. “Months since” and “years since” are taken as calendar months
 * and years, as those mean it who write them, not as the 30.44 and 365.24 days of UDUNITS.
 *
 * @throws RangeError for units or a calendar that are not understood
 */
export function cfTimeUnits(units: string, calendarName: string | null): CfTimeUnits {
  const match = /^\s*(\w+)\s+since\s+(-?\d{1,4})-(\d{1,2})-(\d{1,2})(?:[T\s]+(\d{1,2}):(\d{1,2})(?::(\d{1,2}(?:\.\d*)?))?)?\s*(?:Z|UTC|GMT|([+-]\d{1,2})(?::?(\d{2}))?)?\s*$/i.exec(units)
  if (!match) throw new RangeError(`units of time must be like “days since 2002-01-01”, got “${units.slice(0, 60)}”`)
  const unit = match[1]!.toLowerCase()
  const perDay = unitDays.find(([pattern]) => pattern.test(unit))?.[1] ?? (/^months?$/.test(unit) ? 'months' : /^(?:years?|yrs?|common_years?)$/.test(unit) ? 'years' : null)
  if (perDay === null) throw new RangeError(`units of time must be seconds, minutes, hours, days, months or years, got “${unit}”`)
  const name = (calendarName ?? 'standard').trim().toLowerCase()
  const calendar = aliases[name] ?? cfCalendars.find(known => known === name)
  if (!calendar) throw new RangeError(`calendar must be one of ${cfCalendars.join(', ')}, got “${name}”`)
  const [year, month, day] = [match[2], match[3], match[4]].map(Number) as [number, number, number]
  const zone = Number(match[8] ?? 0) * 60 + Math.sign(Number(match[8] ?? 0) || 1) * Number(match[9] ?? 0)
  const minutes = Number(match[5] ?? 0) * 60 + Number(match[6] ?? 0) + Number(match[7] ?? 0) / 60 - zone
  return { calendar, perDay, reference: { year, month, day, days: minutes / 1440 } }
}

/**
 * MJD (UTC, Gregorian) of a time in CF units. Dates of calendars that the sky does not keep are put on the same date of the Gregorian
 * calendar; those of 360 days a year, and 29 February where there is none, on the same part of the year.
 */
export function mjdFromCf(time: number, { calendar, perDay, reference }: CfTimeUnits): number {
  const { year, month, day, days } = reference
  if (typeof perDay === 'string') {
    const months = (year * 12 + month - 1) + time * (perDay === 'years' ? 12 : 1)
    const whole = Math.floor(months)
    const at = (m: number): number => mjdFromCalendar(Math.floor(m / 12), m % 12 + 1, 1)
    return at(whole) + (months - whole) * (at(whole + 1) - at(whole)) + day - 1 + days
  }
  const elapsed = days + time * perDay
  switch (calendar) {
    case 'proleptic_gregorian': return mjdFromCalendar(year, month, day) + elapsed
    case 'julian': return mjdFromJulian(year, month, day) + elapsed
    case 'standard': {
      const gregorian = mjdFromCalendar(year, month, day)
      return (gregorian >= GREGORIAN_MJD ? gregorian : mjdFromJulian(year, month, day)) + elapsed
    }
    case '360_day': {
      const total = year * 360 + (month - 1) * 30 + day - 1 + elapsed
      const y = Math.floor(total / 360)
      return mjdFromCalendar(y, 1, 1) + (total - 360 * y) / 360 * daysInYear(y)
    }
    default: return mjdOfFixedYear(year, month, day, elapsed, calendar === 'all_leap' ? 366 : 365)
  }
}

/** Calendars whose years all have 365 or 366 days. */
function mjdOfFixedYear(year: number, month: number, day: number, elapsed: number, length: 365 | 366): number {
  // A year of that length shows where its months begin.
  const model = length === 366 ? 2000 : 2001
  const dayOfYear = mjdFromCalendar(model, month, day) - mjdFromCalendar(model, 1, 1)
  const total = year * length + dayOfYear + elapsed
  const y = Math.floor(total / length)
  const inYear = total - length * y
  const january = mjdFromCalendar(y, 1, 1)
  const leap = isLeapYear(y)
  if (length === 365) return january + inYear + (leap && inYear >= 59 ? 1 : 0)
  if (leap) return january + inYear
  return january + (inYear >= 60 ? inYear - 1 : Math.min(inYear, 59))
}

/** MJD at 0 h of a date of the Julian calendar. Meeus (1998), Astronomical Algorithms, ch. 7. */
function mjdFromJulian(year: number, month: number, day: number): number {
  const y = month > 2 ? year : year - 1
  const m = month > 2 ? month : month + 12
  return Math.floor(365.25 * (y + 4716)) + Math.floor(30.6001 * (m + 1)) + day - 1524.5 - 2_400_000.5
}
