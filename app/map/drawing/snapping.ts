import { arcDeg } from '#shared/geo/greatCircle'
import { polygonsOf } from '#shared/geo/parts'
import type { Outline, Position } from '#shared/types/domain'
import { isSeam } from '../displayShape'
import type { Point, Surface } from './surface'

/** A line that vertices snap to: a neighbour's border or the coast. Closed rings begin and end in the same place. */
export interface SnapLine { kind: 'border' | 'coast', of: string, places: readonly Position[], closed: boolean }

/** A place on such a line, to the digits that are stored. `at` is the edge and the part of it, e.g. 3.25; whole at a vertex. */
export interface Snap { place: Position, line: SnapLine, at: number }

/** How near counts, pixels: vertices first, a little farther than edges. */
const vertexReach = 12
const edgeReach = 9
/** Edges are looked at in pieces of at most this many degrees: on the globe a long one is not straight on the screen. */
const pieceDeg = 1
const piecesInGroup = 24

/** Lines of an outline, without the seams that a cut at ±180° leaves. */
export function snapLinesOf(outline: Outline, kind: SnapLine['kind'], of: string): SnapLine[] {
  return polygonsOf(outline).flat().flatMap((ring): SnapLine[] => {
    const seams = ring.flatMap((place, k) => k > 0 && isSeam(ring[k - 1]!, place) ? [k] : [])
    if (seams.length === 0) return [{ kind, of, places: ring, closed: true }]
    return [0, ...seams].flatMap((from, s) => {
      const places = ring.slice(from, seams[s] ?? ring.length)
      return places.length > 1 ? [{ kind, of, places, closed: false }] : []
    })
  })
}

interface Group { west: number, south: number, east: number, north: number, from: number, to: number }

/** All lines in pieces, with a box about every few, so that a look costs little. */
export interface SnapIndex { lines: readonly SnapLine[], lineOf: Int32Array, edgeOf: Int32Array, ends: Float64Array, parts: Float64Array, groups: Group[] }

export function snapIndexOf(lines: readonly SnapLine[]): SnapIndex {
  const [lineOf, edgeOf, ends, parts]: [number[], number[], number[], number[]] = [[], [], [], []]
  lines.forEach(({ places }, line) => {
    for (let k = 1; k < places.length; k++) {
      const [x0, y0] = places[k - 1]!
      const dx = shortWay(places[k]![0] - x0)
      const dy = places[k]![1] - y0
      const pieces = Math.max(1, Math.ceil(Math.max(Math.abs(dx), Math.abs(dy)) / pieceDeg))
      for (let p = 0; p < pieces; p++) {
        lineOf.push(line)
        edgeOf.push(k - 1)
        parts.push(p / pieces, (p + 1) / pieces)
        ends.push(x0 + dx * p / pieces, y0 + dy * p / pieces, x0 + dx * (p + 1) / pieces, y0 + dy * (p + 1) / pieces)
      }
    }
  })
  const groups: Group[] = []
  for (let from = 0; from < lineOf.length; from += piecesInGroup) {
    const to = Math.min(lineOf.length, from + piecesInGroup)
    const group = { west: Infinity, south: Infinity, east: -Infinity, north: -Infinity, from, to }
    for (let e = 4 * from; e < 4 * to; e += 2) {
      group.west = Math.min(group.west, ends[e]!)
      group.east = Math.max(group.east, ends[e]!)
      group.south = Math.min(group.south, ends[e + 1]!)
      group.north = Math.max(group.north, ends[e + 1]!)
    }
    groups.push(group)
  }
  return { lines, lineOf: Int32Array.from(lineOf), edgeOf: Int32Array.from(edgeOf), ends: Float64Array.from(ends), parts: Float64Array.from(parts), groups }
}

function shortWay(step: number): number {
  return Math.abs(step) > 180 && Math.abs(step) < 360 ? step - 360 * Math.round(step / 360) : step
}

/** The nearest place of any line to a point of the surface: a vertex if one is near, else a place on an edge; null where nothing is near. */
export function snapAt(indexes: readonly SnapIndex[], surface: Surface, point: Point): Snap | null {
  const centre = surface.toPlace(point)
  if (!centre) return null
  const box = boxAbout(surface, point, centre)
  let [vertex, edge]: [Found | null, Found | null] = [null, null]
  for (const index of indexes) {
    for (const group of index.groups) {
      if (group.south > box.north || group.north < box.south || !meets(group, box)) continue
      for (let piece = group.from; piece < group.to; piece++) {
        const found = nearestOn(index, piece, surface, point)
        if (!found) continue
        if (found.vertex && found.distance <= vertexReach && found.distance < (vertex?.distance ?? Infinity)) vertex = found
        if (found.distance <= edgeReach && found.distance < (edge?.distance ?? Infinity)) edge = found
      }
    }
  }
  return (vertex ?? edge)?.snap ?? null
}

interface Found { distance: number, vertex: boolean, snap: Snap }
interface Box { west: number, south: number, east: number, north: number }

/** Longitudes and latitudes within reach of a point; all longitudes close to a pole, a wide box at the Earth's edge. */
function boxAbout(surface: Surface, { x, y }: Point, [lon, lat]: Position): Box {
  let [dx, dy] = [0, 0]
  for (const [sx, sy] of [[-1, -1], [1, -1], [-1, 1], [1, 1], [0, 1], [0, -1], [1, 0], [-1, 0]] as const) {
    const beside = surface.toPlace({ x: x + sx * vertexReach, y: y + sy * vertexReach })
    dx = Math.max(dx, beside ? Math.abs(shortWay(beside[0] - lon)) : 10)
    dy = Math.max(dy, beside ? Math.abs(beside[1] - lat) : 10)
  }
  if (Math.abs(lat) + 2 * dy >= 89) dx = 180
  return { west: lon - 1.5 * dx, east: lon + 1.5 * dx, south: lat - 1.5 * dy, north: lat + 1.5 * dy }
}

function meets(group: Group, box: Box): boolean {
  return [-360, 0, 360].some(turn => group.west + turn <= box.east && group.east + turn >= box.west)
}

function nearestOn(index: SnapIndex, piece: number, surface: Surface, point: Point): Found | null {
  const [x0, y0, x1, y1] = index.ends.subarray(4 * piece, 4 * piece + 4) as unknown as [number, number, number, number]
  const [a, b] = [surface.toScreen(within([x0, y0])), surface.toScreen(within([x1, y1]))]
  if (!a || !b) return null
  const line = index.lines[index.lineOf[piece]!]!
  const edge = index.edgeOf[piece]!
  const [from, to] = [index.parts[2 * piece]!, index.parts[2 * piece + 1]!]
  for (const [end, part, k] of [[a, from, edge], [b, to, edge + 1]] as const) {
    const distance = Math.hypot(end.x - point.x, end.y - point.y)
    if ((part === 0 || part === 1) && distance <= vertexReach) return { distance, vertex: true, snap: { place: within(line.places[k]!), line, at: k } }
  }
  const length = (b.x - a.x) ** 2 + (b.y - a.y) ** 2
  const t = length === 0 ? 0 : Math.min(1, Math.max(0, ((point.x - a.x) * (b.x - a.x) + (point.y - a.y) * (b.y - a.y)) / length))
  const distance = Math.hypot(a.x + t * (b.x - a.x) - point.x, a.y + t * (b.y - a.y) - point.y)
  if (distance > edgeReach) return null
  return { distance, vertex: false, snap: { place: within([x0 + t * (x1 - x0), y0 + t * (y1 - y0)]), line, at: edge + from + t * (to - from) } }
}

/** To the centimetre, as it is stored, with its longitude within ±180°. */
function within([lon, lat]: readonly [number, number] | Position): Position {
  const turned = Math.abs(lon) > 180 ? lon - 360 * Math.round(lon / 360) : lon
  return [Math.round(turned * 1e7) / 1e7, Math.round(lat * 1e7) / 1e7]
}

/** A straight edge is stored as drawn edges of at most this length, degrees, so that both sides share every place on it. */
const followDeg = 0.25
const mostFollowed = 20_000
/** A line is not followed where it is this many times as long as the straight way: that was not meant. */
const mostDetour = 3

/**
 * The places between two on the same line, along it and by the shorter way where it is closed, so that a border set by its two ends is
 * shared to the last place. Empty where they lie on different lines, or where the line goes a long way round.
 */
export function alongLine(from: Snap, to: Snap): Position[] {
  if (from.line !== to.line || from.at === to.at) return []
  const { closed } = from.line
  const ways = closed ? [walk(from, to, 1), walk(from, to, -1)] : [walk(from, to, to.at > from.at ? 1 : -1)]
  const shortest = ways.sort((a, b) => lengthDeg(a) - lengthDeg(b))[0]!
  if (shortest.length > mostFollowed || lengthDeg(shortest) > mostDetour * arcDeg(from.place, to.place)) return []
  return shortest.slice(1, -1)
}

function walk(from: Snap, to: Snap, step: 1 | -1): Position[] {
  const { places, closed } = from.line
  const edges = places.length - 1
  const onRing = (k: number): number => closed ? (k % edges + edges) % edges : k
  const length = closed ? onRing(step * (to.at - from.at)) : Math.abs(to.at - from.at)
  const way: Position[] = [from.place]
  if (step === 1) for (let k = Math.floor(from.at) + 1; k < from.at + length; k++) addStraight(way, within(places[onRing(k)]!))
  else for (let k = Math.ceil(from.at) - 1; k > from.at - length; k--) addStraight(way, within(places[onRing(k)]!))
  addStraight(way, to.place)
  return way
}

function addStraight(way: Position[], place: Position): void {
  const [x, y] = way.at(-1)!
  const [dx, dy] = [shortWay(place[0] - x), place[1] - y]
  const pieces = Math.max(1, Math.ceil(arcDeg([x, y], place) / followDeg - 1e-9))
  for (let p = 1; p < pieces; p++) way.push(within([x + dx * p / pieces, y + dy * p / pieces]))
  if (dx !== 0 || dy !== 0) way.push(place)
}

function lengthDeg(way: readonly Position[]): number {
  return way.reduce((sum, place, k) => k === 0 ? 0 : sum + arcDeg(way[k - 1]!, place), 0)
}

/** What a vertex snaps to, in words. */
export function snapWords({ line, at }: Snap): string {
  if (line.kind === 'coast') return 'on the coast'
  return Number.isInteger(at) ? `on a corner of ${line.of}` : `on the border of ${line.of}`
}
