import { noFigure } from './digits.ts'

export const monthNames = [
  'January', 'February', 'March', 'April', 'May', 'June',
  'July', 'August', 'September', 'October', 'November', 'December',
] as const

/** MJD of 1 January 1970, 0 h. */
const unixEpochMjd = 40587
const dayMs = 86_400_000

/** Calendar of an MJD (UTC); null outside what a calendar can name. */
function calendar(mjd: number | null | undefined): { year: number, month: number, day: number } | null {
  if (mjd === null || mjd === undefined || !Number.isFinite(mjd)) return null
  const date = new Date((mjd - unixEpochMjd) * dayMs)
  if (Number.isNaN(date.getTime())) return null
  return { year: date.getUTCFullYear(), month: date.getUTCMonth() + 1, day: date.getUTCDate() }
}

const two = (n: number) => String(n).padStart(2, '0')

/** MJD (UTC) as an ISO date, 2004-03-16. */
export function formatDate(mjd: number | null | undefined): string {
  const date = calendar(mjd)
  return date ? `${String(date.year).padStart(4, '0')}-${two(date.month)}-${two(date.day)}` : noFigure
}

/** MJD (UTC) as 16 March 2004. */
export function formatLongDate(mjd: number | null | undefined): string {
  const date = calendar(mjd)
  return date ? `${date.day}\u00a0${monthNames[date.month - 1]} ${date.year}` : noFigure
}

/** MJD (UTC) as March 2004. */
export function formatMonth(mjd: number | null | undefined): string {
  const date = calendar(mjd)
  return date ? `${monthNames[date.month - 1]} ${date.year}` : noFigure
}

/** MJD (UTC) as 2004. */
export function formatYear(mjd: number | null | undefined): string {
  const date = calendar(mjd)
  return date ? String(date.year) : noFigure
}

/**
 * A span of time as people say it: 2004–2024; with months below three years. An end at 0 h of 1 January closes the year
 * before, so that 1 January 2004 to 1 January 2024 is 2004–2023.
 */
export function formatSpan(fromMjd: number | null | undefined, toMjd: number | null | undefined): string {
  const from = calendar(fromMjd)
  const to = calendar(toMjd === null || toMjd === undefined ? toMjd : lastMoment(fromMjd ?? toMjd, toMjd))
  if (!from || !to) return noFigure
  if (toMjd! - fromMjd! >= 3 * 365) return `${from.year}–${to.year}`
  const [first, last] = [formatMonth(fromMjd), `${monthNames[to.month - 1]} ${to.year}`]
  if (first === last) return first
  return from.year === to.year ? `${monthNames[from.month - 1]}–${last}` : `${first} – ${last}`
}

function lastMoment(fromMjd: number, toMjd: number): number {
  return Number.isInteger(toMjd) && toMjd > fromMjd ? toMjd - 0.5 : toMjd
}

/** An ISO instant as 16 March 2004, 14:05 UTC. */
export function formatInstant(iso: string): string {
  const ms = Date.parse(iso)
  if (Number.isNaN(ms)) return noFigure
  const date = new Date(ms)
  return `${formatLongDate(unixEpochMjd + ms / dayMs)}, ${two(date.getUTCHours())}:${two(date.getUTCMinutes())} UTC`
}
