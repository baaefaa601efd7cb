import type { RingPath } from '../earth/rings.ts'

/** A ring with the pole that it encloses, where it winds round one. */
export interface BoundedRing extends RingPath { pole: 'north' | 'south' | null }

/** Whether a point lies inside one ring, taken alone; on the line itself the answer may be either. */
export function isInsideRing(lonDeg: number, latDeg: number, ring: BoundedRing): boolean {
  const { lonDeg: lon, latDeg: lat } = ring
  let inside = ring.pole === 'north'
  for (let k = 1; k < lon.length; k++) {
    const x0 = lon[k - 1]!
    const x1 = lon[k]!
    const west = Math.min(x0, x1)
    const east = Math.max(x0, x1)
    let x = lonDeg + 360 * Math.ceil((west - lonDeg) / 360)
    for (; x < east; x += 360) {
      if (lat[k - 1]! + (lat[k]! - lat[k - 1]!) * (x - x0) / (x1 - x0) > latDeg) inside = !inside
    }
  }
  return inside
}

/** Distance in the plane of longitude and latitude from a point to a ring's line, degrees. */
export function distanceToRing(lonDeg: number, latDeg: number, { lonDeg: lon, latDeg: lat }: RingPath): number {
  let least = Infinity
  for (let k = 1; k < lon.length; k++) {
    const dx = lon[k]! - lon[k - 1]!
    const dy = lat[k]! - lat[k - 1]!
    const middle = (lon[k]! + lon[k - 1]!) / 2
    const px = lonDeg + 360 * Math.round((middle - lonDeg) / 360) - lon[k - 1]!
    const py = latDeg - lat[k - 1]!
    const length = dx * dx + dy * dy
    const t = length === 0 ? 0 : Math.min(1, Math.max(0, (px * dx + py * dy) / length))
    least = Math.min(least, Math.hypot(px - t * dx, py - t * dy))
  }
  return least
}
