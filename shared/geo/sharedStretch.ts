import type { RingPath } from '../earth/rings.ts'

export type Ray = readonly [number, number]

/** A walk along a ring's line: what is left of the edge it is on, as longitude and latitude, and whether it follows the ring (1) or goes back (−1). */
export interface Walk { ring: RingPath, edge: number, way: 1 | -1, left: Ray }

/** A path through a point of a ring: the ways back and forth from it. */
export interface Pass { back: Walk, forth: Walk }

/** Directions that differ by less than this part of a turn are one. */
const sameTurn = 1e-9
/** As in the search for crossings, degrees: what is left of an edge that is shorter is no way to go. */
const nothingLeft = 6e-10

/** Angle from one direction to another against the clock, in turns from 0 to 1. */
function turnOf(from: Ray, to: Ray): number {
  const turns = (Math.atan2(to[1], to[0]) - Math.atan2(from[1], from[0])) / (2 * Math.PI)
  return turns - Math.floor(turns)
}

function isAlong(a: Ray, b: Ray): boolean {
  const turn = turnOf(a, b)
  return turn < sameTurn || turn > 1 - sameTurn
}

/** The side of a path that a direction from a point of it lies on: left 1, right −1, 0 along it. */
export function sideOf(ray: Ray, back: Ray, forth: Ray): -1 | 0 | 1 {
  if (isAlong(forth, ray) || isAlong(back, ray)) return 0
  return turnOf(forth, ray) < turnOf(forth, back) ? 1 : -1
}

/**
 * Whether the second of two paths through a point comes to lie on both sides of the first: at the point itself, or where it first leaves the line
 * that the two share from here on. Paths that share their lines both ways are told at the ends of what they share.
 */
export function changesSides(one: Pass, other: Pass): boolean {
  const sides = [other.back, other.forth].map(walk => sideOf(walk.left, one.back.left, one.forth.left))
  if (sides[0] !== 0 && sides[1] !== 0) return sides[0] !== sides[1]
  if (sides[0] === 0 && sides[1] === 0) return false
  const [joining, sharing] = sides[0] === 0 ? [sides[1]!, other.back] : [sides[0]!, other.forth]
  const shared = isAlong(one.forth.left, sharing.left) ? one.forth : one.back
  const leaving = sideWhereTheyPart({ ...shared }, { ...sharing })
  return leaving !== 0 && leaving !== joining
}

/** Walks along a shared line to its end; the side of the first on which the second leaves it, 0 where they do not part. */
function sideWhereTheyPart(first: Walk, second: Walk): -1 | 0 | 1 {
  for (let steps = first.ring.lonDeg.length + second.ring.lonDeg.length; steps > 0; steps--) {
    const arrival = first.left
    const length = Math.min(Math.hypot(...first.left), Math.hypot(...second.left))
    go(first, length)
    go(second, length)
    if (isAlong(first.left, second.left)) continue
    const behind: Ray = [-arrival[0], -arrival[1]]
    return first.way === 1 ? sideOf(second.left, behind, first.left) : sideOf(second.left, first.left, behind)
  }
  return 0
}

/** Goes on by a length, to the next edge where this one ends. */
function go(walk: Walk, length: number): void {
  const whole = Math.hypot(...walk.left)
  if (whole - length > nothingLeft) {
    const rest = 1 - length / whole
    walk.left = [walk.left[0] * rest, walk.left[1] * rest]
    return
  }
  Object.assign(walk, edgeWalk(walk.ring, walk.edge + walk.way, walk.way))
}

/** A whole edge of a ring, numbered round and round. */
export function edgeWalk(ring: RingPath, edge: number, way: 1 | -1): Walk {
  const count = ring.lonDeg.length - 1
  const k = (edge + count) % count
  return { ring, edge: k, way, left: [way * (ring.lonDeg[k + 1]! - ring.lonDeg[k]!), way * (ring.latDeg[k + 1]! - ring.latDeg[k]!)] }
}
