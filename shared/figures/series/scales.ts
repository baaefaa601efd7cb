import { scaleLinear } from 'd3-scale'
import { lowerBound } from './data.ts'
import type { SeriesData } from './data.ts'

/** Where values stand on the drawing, for a pointer over it: px = range[0] + (value − domain[0]) / (domain[1] − domain[0]) · (range[1] − range[0]). */
export interface FigureScale { domain: [number, number], range: [number, number] }

export function timeDomain(data: SeriesData): [number, number] {
  let [from, to] = [Infinity, -Infinity]
  for (const { mjd } of data.series) {
    for (const end of [mjd[0], mjd[mjd.length - 1]]) {
      if (end === undefined || !Number.isFinite(end)) continue
      from = Math.min(from, end)
      to = Math.max(to, end)
    }
  }
  from = data.fromMjd ?? from
  to = data.toMjd ?? to
  if (!Number.isFinite(from) || !Number.isFinite(to)) return [51544, 51910]
  return to > from ? [from, to] : [from - 15, to + 15]
}

/** Least and greatest value inside a span, bands included; zero is drawn in where it is near. */
export function valueDomain(data: SeriesData, [fromMjd, toMjd]: [number, number]): [number, number] {
  let [low, high] = [Infinity, -Infinity]
  for (const { mjd, value, sigma } of data.series) {
    const end = Math.min(mjd.length, lowerBound(mjd, toMjd) + 1)
    for (let i = Math.max(0, lowerBound(mjd, fromMjd) - 1); i < end; i++) {
      const point = value[i]
      if (point === null || point === undefined || !Number.isFinite(point)) continue
      const given = sigma?.[i]
      const error = given !== null && given !== undefined && Number.isFinite(given) ? Math.abs(given) : 0
      if (point - error < low) low = point - error
      if (point + error > high) high = point + error
    }
  }
  if (!Number.isFinite(low)) [low, high] = [-1, 1]
  if (low > 0 && low < (high - low) * 0.5) low = 0
  if (high < 0 && -high < (high - low) * 0.5) high = 0
  if (!(high - low > Math.abs(high) * 1e-9)) {
    const room = Math.abs(high) || 1
    ;[low, high] = [low - room, high + room]
  }
  const margin = (high - low) * 0.04
  return [data.low ?? (low === 0 ? 0 : low - margin), data.high ?? (high === 0 ? 0 : high + margin)]
}

export function linear(scale: FigureScale) {
  return scaleLinear(scale.domain, scale.range)
}
