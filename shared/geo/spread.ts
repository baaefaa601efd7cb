import { contourOf } from '../earth/contour.ts'
import type { Outline } from '../types/domain.ts'

const binWidthDeg = 5
const binCount = 360 / binWidthDeg

/**
 * An outline laid out flat between −180° and 180°: edges that run west to east, cut at the antimeridian, closed along a pole
 * where a ring winds round it. Inside is where a line from the south crosses an odd number of edges.
 */
export interface Spread {
  /** Four numbers an edge: west longitude, its latitude, east longitude, its latitude. Edges along a meridian are left out. */
  edges: Float64Array
  /** Lowest and highest latitude in each strip of 5° of longitude; an empty strip has low > high. */
  low: Float64Array
  high: Float64Array
  /** On the WGS 84 ellipsoid, m². */
  areaM2: number
}

/** Lays an outline out flat. The outline must have passed `checkOutline`. */
export function spreadOf(outline: Outline): Spread {
  const { rings, areaM2 } = contourOf(outline)
  const edges: number[] = []
  for (const { lonDeg, latDeg, pole } of rings) {
    for (let k = 1; k < lonDeg.length; k++) cutAtAntimeridian(lonDeg[k - 1]!, latDeg[k - 1]!, lonDeg[k]!, latDeg[k]!, edges)
    if (pole) edges.push(-180, pole === 'north' ? 90 : -90, 180, pole === 'north' ? 90 : -90)
  }
  return { edges: Float64Array.from(edges), ...latitudeRanges(edges), areaM2 }
}

function cutAtAntimeridian(lon0: number, lat0: number, lon1: number, lat1: number, out: number[]): void {
  if (lon0 === lon1) return
  const [west, latWest, east, latEast] = lon0 < lon1 ? [lon0, lat0, lon1, lat1] : [lon1, lat1, lon0, lat0]
  const slope = (latEast - latWest) / (east - west)
  let x = west
  let y = latWest
  while (x < east) {
    const turn = Math.floor((x + 180) / 360)
    const border = turn * 360 + 180
    const nextX = Math.min(east, border)
    const nextY = nextX === east ? latEast : latWest + slope * (nextX - west)
    out.push(x - 360 * turn, y, nextX - 360 * turn, nextY)
    x = nextX
    y = nextY
  }
}

function latitudeRanges(edges: number[]): { low: Float64Array, high: Float64Array } {
  const low = new Float64Array(binCount).fill(Infinity)
  const high = new Float64Array(binCount).fill(-Infinity)
  for (let e = 0; e < edges.length; e += 4) {
    const first = binOf(edges[e]!)
    const last = binOf(edges[e + 2]!)
    for (let bin = first; bin <= last; bin++) {
      low[bin] = Math.min(low[bin]!, edges[e + 1]!, edges[e + 3]!)
      high[bin] = Math.max(high[bin]!, edges[e + 1]!, edges[e + 3]!)
    }
  }
  return { low, high }
}

function binOf(lon: number): number {
  return Math.min(binCount - 1, Math.max(0, Math.floor((lon + 180) / binWidthDeg)))
}

/** Longitudes between which two outlines may share ground, or null where they cannot. */
export function commonSpan(a: Spread, b: Spread): [number, number] | null {
  let first = -1
  let last = -1
  for (let bin = 0; bin < binCount; bin++) {
    if (Math.max(a.low[bin]!, b.low[bin]!) > Math.min(a.high[bin]!, b.high[bin]!)) continue
    if (first < 0) first = bin
    last = bin
  }
  return first < 0 ? null : [first * binWidthDeg - 180, (last + 1) * binWidthDeg - 180]
}
