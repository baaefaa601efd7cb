import type { RingPath } from '../earth/rings.ts'
import { boxTreeOf, forMeetingPairs } from './boxTree.ts'
import { changesSides, edgeWalk, type Pass, type Ray } from './sharedStretch.ts'

/** Edge k of a ring runs from vertex k to k + 1 of its path. */
export interface EdgePlace { ring: number, edge: number }

/** Two edges that cross, and where. */
export interface Crossing { lonDeg: number, latDeg: number, first: EdgePlace, second: EdgePlace }

/** A millionth of an arc second, about 30 µm: nearer than this two lines touch and do not cross. */
const toleranceDeg = 3e-10
/** Pairs of edges looked at before giving up: an outline whose boxes all overlap would keep the server busy for seconds. */
const mostPairs = 8_000_000

/**
 * Edges of the rings that cross one another, at most `most` of them, wherever on the cylinder of longitude they lie. Lines that only
 * touch do not cross, and such as run along one another only where they part to another side than they met from. `complete` is false
 * where the search was given up; `busiest` is then the edge that had the most others about it.
 */
export function findCrossings(rings: readonly RingPath[], most = 5): { crossings: Crossing[], complete: boolean, busiest: EdgePlace | null } {
  const edges = listEdges(rings)
  const { lines, ringOf, edgeOf } = edges
  const tree = boxTreeOf(lines)
  const crossings: Crossing[] = []
  const meetings = new Uint32Array(tree.count)
  let pairs = 0
  let complete = true
  const reach = tree.count === 0 ? 0 : Math.floor((tree.boxes[6]! - tree.boxes[4]!) / 360)
  for (let turn = 0; turn <= reach && complete && crossings.length < most; turn++) {
    forMeetingPairs(tree, 360 * turn, (i, j) => {
      if (++pairs > mostPairs) complete = false
      if (!complete) return false
      meetings[i]!++
      meetings[j]!++
      const place = crossingOf(edges, rings, i, j, 360 * turn)
      if (place && !crossings.some(known => Math.abs(known.latDeg - place[1]) < 1e-9 && Math.abs(known.lonDeg - place[0]) < 1e-9)) {
        crossings.push({
          lonDeg: place[0],
          latDeg: place[1],
          first: { ring: ringOf[i]!, edge: edgeOf[i]! },
          second: { ring: ringOf[j]!, edge: edgeOf[j]! }
        })
      }
      return crossings.length < most
    })
  }
  const top = meetings.reduce((top, count, k) => count > meetings[top]! ? k : top, 0)
  return { crossings, complete, busiest: complete ? null : { ring: ringOf[top]!, edge: edgeOf[top]! } }
}

interface Edges { lines: Float64Array, ringOf: Uint32Array, edgeOf: Uint32Array }

function listEdges(rings: readonly RingPath[]): Edges {
  const count = rings.reduce((sum, ring) => sum + Math.max(0, ring.lonDeg.length - 1), 0)
  const lines = new Float64Array(4 * count)
  const ringOf = new Uint32Array(count)
  const edgeOf = new Uint32Array(count)
  let at = 0
  rings.forEach(({ lonDeg: lon, latDeg: lat }, ring) => {
    const home = lon.length > 0 ? -360 * Math.floor((lon[0]! + 180) / 360) : 0
    for (let k = 0; k + 1 < lon.length; k++, at++) {
      lines.set([lon[k]! + home, lat[k]!, lon[k + 1]! + home, lat[k + 1]!], 4 * at)
      ringOf[at] = ring
      edgeOf[at] = k
    }
  })
  return { lines, ringOf, edgeOf }
}

/** Distance of (x, y) from the line through two points, signed: positive on the left. */
function side(x0: number, y0: number, x1: number, y1: number, x: number, y: number): number {
  const length = Math.hypot(x1 - x0, y1 - y0)
  const distance = ((x1 - x0) * (y - y0) - (y1 - y0) * (x - x0)) / length
  return Math.abs(distance) < toleranceDeg ? 0 : distance
}

function crossingOf(edges: Edges, rings: readonly RingPath[], i: number, j: number, shift: number): [number, number] | null {
  const { lines } = edges
  const [ax, ay, bx, by] = [lines[4 * i]!, lines[4 * i + 1]!, lines[4 * i + 2]!, lines[4 * i + 3]!]
  const [cx, cy, dx, dy] = [lines[4 * j]! + shift, lines[4 * j + 1]!, lines[4 * j + 2]! + shift, lines[4 * j + 3]!]
  const c = side(ax, ay, bx, by, cx, cy)
  const d = side(ax, ay, bx, by, dx, dy)
  if (c * d > 0) return null
  const a = side(cx, cy, dx, dy, ax, ay)
  const b = side(cx, cy, dx, dy, bx, by)
  if (a * b > 0) return null
  if (a !== 0 && b !== 0 && c !== 0 && d !== 0) {
    const t = a / (a - b)
    return [wrap(ax + t * (bx - ax)), ay + t * (by - ay)]
  }
  if ((a === 0 && b === 0 && c === 0 && d === 0) || areNeighbours(edges, rings, i, j)) return null
  return touchCrosses(edges, rings, i, j, shift, { a, b, c, d })
}

function areNeighbours({ ringOf, edgeOf }: Edges, rings: readonly RingPath[], i: number, j: number): boolean {
  if (ringOf[i] !== ringOf[j]) return false
  const apart = Math.abs(edgeOf[i]! - edgeOf[j]!)
  return apart <= 1 || apart === rings[ringOf[i]!]!.lonDeg.length - 2
}

const wrap = (lon: number): number => lon - 360 * Math.floor((lon + 180) / 360)

/** Where an end of one edge lies on the other: whether the paths change sides there. */
function touchCrosses(
  edges: Edges, rings: readonly RingPath[], i: number, j: number, shift: number, zero: Record<'a' | 'b' | 'c' | 'd', number>
): [number, number] | null {
  const { lines } = edges
  const ends = (e: number, moved: number): [Ray, Ray] =>
    [[lines[4 * e]! + moved, lines[4 * e + 1]!], [lines[4 * e + 2]! + moved, lines[4 * e + 3]!]]
  const first = ends(i, 0)
  const second = ends(j, shift)
  const points = [zero.a === 0 && first[0], zero.b === 0 && first[1], zero.c === 0 && second[0], zero.d === 0 && second[1]]
  for (const point of points) {
    if (!point || !isWithin(point, first) || !isWithin(point, second)) continue
    const one = passThrough(point, first, edges, rings, i)
    const other = passThrough(point, second, edges, rings, j)
    if (changesSides(one, other)) return [wrap(point[0]), point[1]]
  }
  return null
}

function isWithin([x, y]: Ray, [p, q]: [Ray, Ray]): boolean {
  const slack = 2 * toleranceDeg
  return x >= Math.min(p[0], q[0]) - slack && x <= Math.max(p[0], q[0]) + slack
    && y >= Math.min(p[1], q[1]) - slack && y <= Math.max(p[1], q[1]) + slack
}

function passThrough(point: Ray, [p, q]: [Ray, Ray], { ringOf, edgeOf }: Edges, rings: readonly RingPath[], e: number): Pass {
  const ring = rings[ringOf[e]!]!
  const k = edgeOf[e]!
  const near = (end: Ray): boolean => Math.hypot(point[0] - end[0], point[1] - end[1]) < 2 * toleranceDeg
  if (near(p)) return { back: edgeWalk(ring, k - 1, -1), forth: edgeWalk(ring, k, 1) }
  if (near(q)) return { back: edgeWalk(ring, k, -1), forth: edgeWalk(ring, k + 1, 1) }
  return {
    back: { ring, edge: k, way: -1, left: [p[0] - point[0], p[1] - point[1]] },
    forth: { ring, edge: k, way: 1, left: [q[0] - point[0], q[1] - point[1]] }
  }
}
