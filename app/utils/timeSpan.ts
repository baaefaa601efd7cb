import { isoDateFromMjd, mjdFromIsoDate } from '#shared/earth/time/epochs'

/** A stretch of time on screen, MJD; null leaves an end where the data end. */
export interface TimeSpan { fromMjd: number | null, toMjd: number | null }

/** MJD of an ISO date that came from an address or a field; null for anything else. */
export function mjdOfDate(text: unknown): number | null {
  if (typeof text !== 'string' || !/^\d{4}-\d{2}-\d{2}$/.test(text)) return null
  try {
    return mjdFromIsoDate(text)
  }
  catch {
    return null
  }
}

/** ISO date of an MJD for a field; empty for none. */
export function dateOfMjd(mjd: number | null | undefined): string {
  return mjd === null || mjd === undefined || !Number.isFinite(mjd) ? '' : isoDateFromMjd(mjd).slice(0, 10)
}

/** The span that an address asks for. An end before its beginning counts as none. */
export function spanOfQuery(query: { from?: unknown, to?: unknown }): TimeSpan {
  const [fromMjd, toMjd] = [mjdOfDate(query.from), mjdOfDate(query.to)]
  return fromMjd !== null && toMjd !== null && fromMjd >= toMjd ? { fromMjd: null, toMjd: null } : { fromMjd, toMjd }
}

/** The span as part of an address; ends that are open are left out. */
export function queryOfSpan({ fromMjd, toMjd }: TimeSpan): { from?: string, to?: string } {
  return { from: dateOfMjd(fromMjd) || undefined, to: dateOfMjd(toMjd) || undefined }
}

/** A span with both ends; null where one is open. */
export function closedSpan({ fromMjd, toMjd }: TimeSpan): { fromMjd: number, toMjd: number } | null {
  return fromMjd === null || toMjd === null ? null : { fromMjd, toMjd }
}
