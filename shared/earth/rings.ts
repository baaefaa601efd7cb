import { InputError, type Issue } from '../types/issue.ts'

/** A ring as a path in the unwrapped plane of longitude and geodetic latitude, closed by its last point. */
export interface RingPath {
  /** Degrees, continuous along the ring; the last is the first plus 360 × winding. */
  lonDeg: Float64Array
  /** Degrees, WGS 84 geodetic; the last equals the first. */
  latDeg: Float64Array
  /** Turns of longitude, eastward positive: 0, or ±1 for a ring round a pole. */
  winding: -1 | 0 | 1
}

export interface RingOptions {
  /** Take an edge of exactly 360° as a full turn (RFC 7946 rectangles). False: as no turn at all, as in stitched coast files. */
  fullTurns?: boolean
}

const CLOSE = 1e-9

/**
 * Path of one ring of a GeoJSON outline.
 *
 * Every edge is straight in longitude and geodetic latitude. One of 180° < |Δλ| < 360° is taken the short way, one of
 * exactly 360° is a full turn, unless the ring would cross itself there. Repeated vertices are dropped and an open ring is closed. Where a ring runs along ±90°, that
 * edge has no length on the sphere, so its turn is chosen such that the ring encloses what it was drawn round.
 * Throws InputError for coordinates that are no numbers or no latitudes, for fewer than three vertices and for a ring that
 * winds round the pole more than once.
 */
export function ringPath(ring: readonly (readonly number[])[], options: RingOptions = {}, path = ''): RingPath {
  const fullTurns = options.fullTurns ?? true
  const n = ring.length
  const lonDeg = new Float64Array(n + 1)
  const latDeg = new Float64Array(n + 1)
  let count = 0
  let poleEdge = -1
  let previousLon = 0
  for (let i = 0; i <= n; i++) {
    const position = ring[i === n ? 0 : i]
    const lon = position?.[0] as number
    const lat = clampLatitude(position?.[1] as number)
    if (!Number.isFinite(lon) || !(Math.abs(lat) <= 90)) throw badRing(`${path}/${i}`, lon, lat)
    if (count === 0) {
      lonDeg[0] = lon
      latDeg[0] = lat
      count = 1
    }
    else {
      const last = count - 1
      // The edge that closes an open ring ends where the ring began, whichever way its longitudes were unwrapped.
      const step = edgeStep(lon - previousLon, fullTurns && !(i === n && lat === latDeg[last]))
      if (step === 0 && lat === latDeg[last]) {
        previousLon = lon
        continue
      }
      if (Math.abs(lat) === 90 && lat === latDeg[last]) poleEdge = count
      lonDeg[count] = lonDeg[last]! + step
      latDeg[count] = lat
      count++
    }
    previousLon = lon
  }
  if (count < 4) throw new InputError('A ring needs three different vertices.', [{ path, code: 'ring-too-short', message: `A ring needs at least three different vertices; this one has ${Math.max(0, count - 1)}.` }])
  if (fullTurns && turnCrossesRing(lonDeg, latDeg, count)) return ringPath(ring, { fullTurns: false }, path)
  const lons = lonDeg.subarray(0, count)
  let winding = Math.round((lons[count - 1]! - lons[0]!) / 360)
  if (winding !== 0 && poleEdge > 0) {
    for (let i = poleEdge; i < count; i++) lons[i] = lons[i]! - 360 * winding
    winding = 0
  }
  if (Math.abs(winding) > 1) throw new InputError('A ring winds round the pole more than once.', [{ path, code: 'ring-winds-twice', message: `The ring goes round the pole ${Math.abs(winding)} times; once is the most that encloses an area.` }])
  lons[count - 1] = lons[0]! + 360 * winding
  return { lonDeg: lons, latDeg: latDeg.subarray(0, count), winding: winding as -1 | 0 | 1 }
}

/**
 * A full turn at one latitude covers every longitude, so a ring that has others of its vertices on both sides of it would cross
 * itself: there the step of 360° only leads back to where a ring round the pole began.
 */
function turnCrossesRing(lonDeg: Float64Array, latDeg: Float64Array, count: number): boolean {
  let turn = -1
  for (let i = 1; i < count; i++) {
    if (latDeg[i] === latDeg[i - 1] && Math.abs(Math.abs(lonDeg[i]! - lonDeg[i - 1]!) - 360) < CLOSE) turn = turn < 0 ? i : count
  }
  if (turn < 0 || turn === count) return false
  let above = false
  let below = false
  for (let i = 0; i < count; i++) {
    above ||= latDeg[i]! > latDeg[turn]!
    below ||= latDeg[i]! < latDeg[turn]!
  }
  return above && below
}

function edgeStep(difference: number, fullTurns: boolean): number {
  const size = Math.abs(difference)
  if (size <= 180) return difference
  if (Math.abs(size - 360) < CLOSE) return fullTurns ? difference : 0
  return difference - 360 * Math.round(difference / 360)
}

function clampLatitude(lat: number): number {
  if (lat > 90 && lat < 90 + CLOSE) return 90
  if (lat < -90 && lat > -90 - CLOSE) return -90
  return lat
}

function badRing(path: string, lon: number, lat: number): InputError {
  const issue: Issue = Number.isFinite(lon) && Number.isFinite(lat)
    ? { path, code: 'latitude-out-of-range', value: String(lat), message: `Latitude must lie between −90 and 90 degrees; found ${lat}.` }
    : { path, code: 'not-a-number', value: `${lon}, ${lat}`, message: 'A position must be two finite numbers, longitude and latitude in degrees.' }
  return new InputError(issue.message, [issue])
}
