import { contourOf } from '../earth/contour.ts'
import { ringPath, type RingPath } from '../earth/rings.ts'
import type { Outline, Position } from '../types/domain.ts'
import { ringAreaM2 } from './authalic.ts'
import { isInsideRing, type BoundedRing } from './pointInRing.ts'

/** A part of a ring's line between two places on the antimeridian, in longitudes from −180° to 180°; a whole ring where `closed`. */
interface Chain { points: Position[], closed: boolean }

/** Slivers below this, m², are rounding along the cut. */
const leastAreaM2 = 1
/** A vertex this near to ±180°, a tenth of a millimetre, is on it. */
const snapDeg = 1e-9

/**
 * The same region cut at ±180° and closed along ±90° where a ring winds round a pole, as RFC 7946 §3.1.9 advises: longitudes within
 * ±180°, shells anticlockwise, holes clockwise, rings from their westernmost vertex on. Every reader understands this form.
 * The outline must have passed `checkOutline`.
 */
export function cutAtAntimeridian(outline: Outline): Outline {
  return cutRings(contourOf(outline).rings)
}

/** As `cutAtAntimeridian`, for rings of which an odd number goes round every place inside. */
export function cutRings(rings: readonly BoundedRing[]): Outline {
  const chains: Chain[] = []
  const poleClosings = new Map<number, boolean>()
  for (const ring of rings) {
    chains.push(...chainsOf(ring))
    if (!ring.pole) continue
    const latitude = ring.pole === 'north' ? 90 : -90
    poleClosings.set(latitude, !poleClosings.get(latitude))
  }
  // Two rings round the same pole bound a zone: the pole itself is outside, and their closings cancel.
  for (const [pole, odd] of poleClosings) if (odd) chains.push({ points: [[-180, pole], [180, pole]], closed: false })
  return assemble(joinChains(chains).filter(ring => encloses(ring) && ringAreaM2(ringPath(ring)) > leastAreaM2))
}

function chainsOf(ring: RingPath): Chain[] {
  const lat = ring.latDeg
  const lon = ring.lonDeg.map((x) => {
    const border = 360 * Math.round((x - 180) / 360) + 180
    return Math.abs(x - border) < snapDeg ? border : x
  })
  const chains: Chain[] = []
  const strip = (x: number): number => Math.floor((x + 180) / 360)
  let here = strip(lon[0]!)
  let points: Position[] = [[lon[0]! - 360 * here, lat[0]!]]
  let first: Position[] | null = null
  const finish = (): void => {
    if (first === null) first = points
    else chains.push({ points, closed: false })
  }
  for (let k = 1; k < lon.length; k++) {
    const goal = strip(lon[k]!)
    while (here !== goal) {
      const step = goal > here ? 1 : -1
      const border = 360 * here + 180 * step
      const y = lat[k - 1]! + (lat[k]! - lat[k - 1]!) * (border - lon[k - 1]!) / (lon[k]! - lon[k - 1]!)
      addPoint(points, [180 * step, y])
      finish()
      points = [[-180 * step, y]]
      here += step
    }
    addPoint(points, [lon[k]! - 360 * here, lat[k]!])
  }
  if (first === null) return [{ points, closed: true }]
  // The last piece runs on into the first.
  for (const point of first as Position[]) addPoint(points, point)
  chains.push({ points, closed: false })
  return chains.filter(chain => !chain.points.every(([x]) => Math.abs(x) === 180 && x === chain.points[0]![0]))
}

/** Whether a ring has three different places. */
function encloses(ring: readonly Position[]): boolean {
  const first = ring[0]!
  const differs = (p: Position, q: Position): boolean => p[0] !== q[0] || p[1] !== q[1]
  const second = ring.find(place => differs(place, first))
  return second !== undefined && ring.some(place => differs(place, first) && differs(place, second))
}

function addPoint(points: Position[], point: Position): void {
  const last = points.at(-1)
  if (last && last[0] === point[0] && last[1] === point[1]) return
  const step = last ? point[0] - last[0] : 0
  // A piece of a full turn may be longer than half a turn, and would be read the other way round.
  if (last && Math.abs(step) > 180 && Math.abs(step) < 360) points.push([last[0] + step / 2, (last[1] + point[1]) / 2])
  points.push(point)
}

/** Joins chains along the antimeridian: on either side of it the region lies between the first and second end from the south, and so on. */
function joinChains(chains: readonly Chain[]): Position[][] {
  const rings = chains.filter(chain => chain.closed).map(chain => chain.points)
  const open = chains.filter(chain => !chain.closed)
  const ends = open.flatMap((chain, k) => [
    { chain: k, start: true, at: chain.points[0]! },
    { chain: k, start: false, at: chain.points.at(-1)! }
  ])
  const partner = new Map<string, { chain: number, start: boolean }>()
  for (const border of [-180, 180]) {
    const here = ends.filter(end => end.at[0] === border).sort((p, q) => p.at[1] - q.at[1])
    for (let k = 0; k + 1 < here.length; k += 2) {
      partner.set(`${here[k]!.chain}${here[k]!.start}`, here[k + 1]!)
      partner.set(`${here[k + 1]!.chain}${here[k + 1]!.start}`, here[k]!)
    }
  }
  const used = new Set<number>()
  for (let k = 0; k < open.length; k++) {
    if (used.has(k)) continue
    const ring: Position[] = []
    let chain = k
    let forward = true
    while (!used.has(chain)) {
      used.add(chain)
      const { points } = open[chain]!
      for (const point of forward ? points : [...points].reverse()) addPoint(ring, point)
      const next = partner.get(`${chain}${!forward}`)
      if (!next) break
      chain = next.chain
      forward = next.start
    }
    addPoint(ring, ring[0]!)
    rings.push(ring)
  }
  return rings
}

/** Rings into polygons by how deep each lies inside the others. */
function assemble(rings: readonly Position[][]): Outline {
  if (rings.length === 1) return { type: 'Polygon', coordinates: [turned(rings[0]!, true)] }
  const lines = rings.map((ring): BoundedRing => ({ ...ringPath(ring), pole: null }))
  const inside = lines.map((line, k) => {
    const [x, y] = interiorPoint(line)
    return lines.map((other, j) => j !== k && isInsideRing(x, y, other))
  })
  const depth = inside.map(list => list.filter(Boolean).length)
  const polygons: Position[][][] = []
  rings.forEach((shell, k) => {
    if (depth[k]! % 2 === 1) return
    const holes = rings.filter((_, j) => inside[j]![k] && depth[j] === depth[k]! + 1)
    polygons.push([turned(shell, true), ...holes.map(hole => turned(hole, false))])
  })
  polygons.sort(([p], [q]) => p![0]![0] - q![0]![0] || p![0]![1] - q![0]![1])
  return polygons.length === 1 ? { type: 'Polygon', coordinates: polygons[0]! } : { type: 'MultiPolygon', coordinates: polygons }
}

/** A point just inside a ring: beside the middle of its longest edge by longitude. */
function interiorPoint(line: BoundedRing): [number, number] {
  let best = 1
  for (let k = 1; k < line.lonDeg.length; k++) {
    if (Math.abs(line.lonDeg[k]! - line.lonDeg[k - 1]!) > Math.abs(line.lonDeg[best]! - line.lonDeg[best - 1]!)) best = k
  }
  const x = (line.lonDeg[best]! + line.lonDeg[best - 1]!) / 2
  const y = (line.latDeg[best]! + line.latDeg[best - 1]!) / 2
  for (let step = 1e-6; step > 1e-13; step /= 10) {
    for (const sign of [1, -1]) if (isInsideRing(x, y + sign * step, line)) return [x, y + sign * step]
  }
  return [x, y]
}

/** The ring in the wanted direction, from its westernmost (then southernmost) vertex on. */
function turned(ring: readonly Position[], anticlockwise: boolean): Position[] {
  let doubled = 0
  let start = 0
  for (let k = 1; k < ring.length; k++) {
    const [x, y] = ring[k]!
    doubled += (x - ring[k - 1]![0]) * (y + ring[k - 1]![1])
    if (x < ring[start]![0] || (x === ring[start]![0] && y < ring[start]![1])) start = k
  }
  const open = ring.slice(0, -1)
  const from = start % open.length
  const walk = [...open.slice(from), ...open.slice(0, from)]
  const [first, ...rest] = walk
  return (doubled < 0) === anticlockwise ? [...walk, first!] : [first!, ...rest.reverse(), first!]
}
