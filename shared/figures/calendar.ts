const unixEpochMjd = 40587
const dayMs = 86_400_000

/** MJD of 1 January, 0 h UTC. */
export function yearStart(year: number): number {
  const date = new Date(0)
  date.setUTCFullYear(year, 0, 1)
  return date.getTime() / dayMs + unixEpochMjd
}

/** Calendar year and fraction of an MJD (UTC). */
export function decimalYear(mjd: number): number {
  const year = new Date((mjd - unixEpochMjd) * dayMs).getUTCFullYear()
  const start = yearStart(year)
  return year + (mjd - start) / (yearStart(year + 1) - start)
}

/** First days of the calendar months inside a span, at most 600; month 0 is January. */
export function monthStarts(fromMjd: number, toMjd: number): { mjd: number, month: number, year: number }[] {
  const starts: { mjd: number, month: number, year: number }[] = []
  const date = new Date((fromMjd - unixEpochMjd) * dayMs)
  date.setUTCHours(0, 0, 0, 0)
  if (date.getUTCDate() !== 1 || date.getTime() < (fromMjd - unixEpochMjd) * dayMs) date.setUTCMonth(date.getUTCMonth() + 1, 1)
  while (starts.length < 600) {
    const mjd = date.getTime() / dayMs + unixEpochMjd
    if (mjd > toMjd) break
    starts.push({ mjd, month: date.getUTCMonth(), year: date.getUTCFullYear() })
    date.setUTCMonth(date.getUTCMonth() + 1, 1)
  }
  return starts
}
