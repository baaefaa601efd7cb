import { lowerBound } from './data.ts'
import { formatDate, formatMonth } from '../../format/dates.ts'
import { decimalsFor, formatSigned, hardSpace } from '../../format/digits.ts'
import { formatMeasured } from '../../format/measured.ts'
import type { FigureSeries, SeriesData } from './data.ts'

export interface ReadoutLine {
  label: string
  role: FigureSeries['role']
  panel: number
  mjd: number
  value: number
  text: string
}

export interface Readout {
  mjd: number
  /** `March 2004` for monthly epochs, else the date. */
  date: string
  lines: ReadoutLine[]
}

/** Index of the epoch nearest to a time that has a value; −1 where there is none. */
export function nearestIndex({ mjd, value }: FigureSeries, time: number): number {
  const start = lowerBound(mjd, time)
  const has = (i: number) => {
    const point = value[i]
    return point !== null && point !== undefined && Number.isFinite(point)
  }
  let [left, right] = [start - 1, start]
  while (left >= 0 && !has(left)) left--
  while (right < mjd.length && !has(right)) right++
  if (left < 0) return right < mjd.length ? right : -1
  if (right >= mjd.length) return left
  return time - mjd[left]! <= mjd[right]! - time ? left : right
}

/** Middle distance between epochs, days. */
export function spacing({ mjd }: FigureSeries): number {
  return mjd.length > 1 ? (mjd[mjd.length - 1]! - mjd[0]!) / (mjd.length - 1) : 1
}

/**
 * Values of all series at the epoch nearest to a time; a series joins in where it has a value within its own spacing. A value
 * without an error is given to a five-hundredth of its panel's range, which is what can be seen.
 */
export function readoutAt(panels: readonly SeriesData[], time: number, ranges: readonly [number, number][] = []): Readout | null {
  const found = panels.flatMap((panel, p) => panel.series.map((series) => {
    const i = nearestIndex(series, time)
    return i < 0 ? null : { series, panel: p, unit: panel.unit, i, mjd: series.mjd[i]! }
  })).filter(entry => entry !== null)
  const nearest = found.reduce<typeof found[number] | null>(
    (best, entry) => !best || Math.abs(entry.mjd - time) < Math.abs(best.mjd - time) ? entry : best, null)
  if (!nearest) return null
  const lines = found.filter(({ mjd, series }) => Math.abs(mjd - nearest.mjd) <= Math.max(0.51, spacing(series) * 0.75)).map(({ series, panel, unit, i, mjd }) => {
    const value = series.value[i]!
    const sigma = series.sigma?.[i] ?? null
    const range = ranges[panel]
    const text = sigma === null && range
      ? `${formatSigned(value, decimalsFor((range[1] - range[0]) / 500, 1))}${hardSpace}${unit}`
      : formatMeasured(value, sigma, { unit }).text
    return { label: series.label, role: series.role, panel, mjd, value, text }
  })
  const monthly = spacing(nearest.series) > 27 && spacing(nearest.series) < 32
  return { mjd: nearest.mjd, date: monthly ? formatMonth(nearest.mjd) : formatDate(nearest.mjd), lines }
}

/** Epoch that is `steps` values further on in the densest series. */
export function stepped(panels: readonly SeriesData[], from: number, steps: number): number {
  const densest = panels.flatMap(panel => panel.series).reduce<FigureSeries | null>((most, series) => !most || series.mjd.length > most.mjd.length ? series : most, null)
  if (!densest || densest.mjd.length === 0) return from
  const at = nearestIndex(densest, from)
  const target = Math.min(densest.mjd.length - 1, Math.max(0, (at < 0 ? 0 : at) + steps))
  return densest.mjd[target]!
}

export interface TimeSpan { fromMjd: number, toMjd: number }

/** A span narrowed (factor below 1) or widened about a time, held inside the whole span; null is the whole span. */
export function zoomed(span: TimeSpan, whole: TimeSpan, about: number, factor: number): TimeSpan | null {
  const length = Math.max((span.toMjd - span.fromMjd) * factor, Math.min(3, whole.toMjd - whole.fromMjd))
  if (length >= whole.toMjd - whole.fromMjd) return null
  const part = (about - span.fromMjd) / (span.toMjd - span.fromMjd)
  const from = Math.min(whole.toMjd - length, Math.max(whole.fromMjd, about - length * part))
  return { fromMjd: from, toMjd: from + length }
}
