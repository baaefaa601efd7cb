import { distanceToRing, isInsideRing, type BoundedRing } from './pointInRing.ts'

/** A ring that lies where it may not: `polygon` and `ring` count from 0, ring 0 is a shell. */
export interface NestingFault {
  code: 'hole-outside' | 'hole-in-hole' | 'parts-overlap'
  polygon: number
  ring: number
  other: { polygon: number, ring: number }
}

interface Placed { polygon: number, ring: number, path: BoundedRing, south: number, north: number, west: number, width: number }

/** Holes outside their shell or inside one another, and parts that lie inside one another. Rings must not cross. */
export function findNestingFaults(polygons: readonly BoundedRing[][]): NestingFault[] {
  const faults: NestingFault[] = []
  const shells = polygons.map((rings, polygon) => place(rings[0]!, polygon, 0))
  const holes = polygons.map((rings, polygon) => rings.slice(1).map((ring, k) => place(ring, polygon, k + 1)))
  holes.forEach((list, polygon) => {
    for (const hole of list) {
      if (!lies(hole, shells[polygon]!)) faults.push(fault('hole-outside', hole, shells[polygon]!))
    }
    for (const [inner, outer] of meetingPairs(list)) {
      if (lies(inner, outer)) faults.push(fault('hole-in-hole', inner, outer))
    }
  })
  for (const [inner, outer] of meetingPairs(shells)) {
    if (lies(inner, outer) && !holes[outer.polygon]!.some(hole => lies(inner, hole))) {
      faults.push(fault('parts-overlap', inner, outer))
    }
  }
  return faults
}

function fault(code: NestingFault['code'], at: Placed, other: Placed): NestingFault {
  return { code, polygon: at.polygon, ring: at.ring, other: { polygon: other.polygon, ring: other.ring } }
}

function place(path: BoundedRing, polygon: number, ring: number): Placed {
  let [south, north, west, east] = [Infinity, -Infinity, Infinity, -Infinity]
  for (let k = 0; k < path.lonDeg.length; k++) {
    south = Math.min(south, path.latDeg[k]!)
    north = Math.max(north, path.latDeg[k]!)
    west = Math.min(west, path.lonDeg[k]!)
    east = Math.max(east, path.lonDeg[k]!)
  }
  if (path.pole === 'north') north = 90
  if (path.pole === 'south') south = -90
  return { polygon, ring, path, south, north, west, width: path.winding === 0 ? east - west : 360 }
}

/** Ordered pairs (either way round) whose boxes meet. */
function* meetingPairs(list: readonly Placed[]): Generator<[Placed, Placed]> {
  const byTheSouth = [...list].sort((p, q) => p.south - q.south)
  for (let i = 0; i < byTheSouth.length; i++) {
    const p = byTheSouth[i]!
    for (let j = i + 1; j < byTheSouth.length && byTheSouth[j]!.south <= p.north; j++) {
      const q = byTheSouth[j]!
      const ahead = (q.west - p.west) - 360 * Math.floor((q.west - p.west) / 360)
      if (ahead > p.width && 360 - ahead > q.width) continue
      yield [p, q]
      yield [q, p]
    }
  }
}

/** Whether `inner` lies inside `outer`, told by a point of it that is not on the other's line. */
function lies(inner: Placed, outer: Placed): boolean {
  const { lonDeg: lon, latDeg: lat } = inner.path
  for (let k = 0; k + 1 < lon.length && k < 200; k++) {
    for (const t of [0, 0.5]) {
      const x = lon[k]! + t * (lon[k + 1]! - lon[k]!)
      const y = lat[k]! + t * (lat[k + 1]! - lat[k]!)
      if (Math.abs(y) < 90 && distanceToRing(x, y, outer.path) > 1e-9) return isInsideRing(x, y, outer.path)
    }
  }
  return true
}
