import type { Outline } from '../types/domain.ts'
import { areaUnderEdgeM2 } from './authalic.ts'
import { commonSpan, spreadOf, type Spread } from './spread.ts'

/** Ground that two outlines share: on the WGS 84 ellipsoid, km², and as a part of each (1 = all of it). */
export interface OutlineOverlap { a: string, b: string, areaKm2: number, shareOfA: number, shareOfB: number }

/** Below this part of the smaller outline a shared strip is rounding along a common border, not an overlap. */
const leastShare = 1e-6

/**
 * Every pair of outlines that shares ground, in the order of the list. Outlines must have passed `checkOutline`; holes, several
 * parts, poles and the antimeridian are as everywhere else. Exact for edges straight in longitude and latitude.
 */
export function overlapsOf(items: readonly { id: string, geometry: Outline }[]): OutlineOverlap[] {
  return [...overlapsInTurn(items)].flat()
}

/** As `overlapsOf`, one of the `first` outlines after the other with all that follow it: the caller may rest in between. */
export function* overlapsInTurn(items: readonly { id: string, geometry: Outline }[], first = items.length): Generator<OutlineOverlap[]> {
  const spreads = items.map(item => spreadOf(item.geometry))
  for (let i = 0; i < first; i++) {
    const found: OutlineOverlap[] = []
    for (let j = i + 1; j < items.length; j++) {
      const overlap = pairOverlap(items[i]!.id, spreads[i]!, items[j]!.id, spreads[j]!)
      if (overlap) found.push(overlap)
    }
    yield found
  }
}

/** Ground that one outline shares with each of some others; `b` names the other. As `overlapsOf`, without the pairs among the others. */
export function overlapsWith(item: { id: string, geometry: Outline }, others: readonly { id: string, geometry: Outline }[]): OutlineOverlap[] {
  const a = spreadOf(item.geometry)
  return others.flatMap((other) => {
    const overlap = pairOverlap(item.id, a, other.id, spreadOf(other.geometry))
    return overlap ? [overlap] : []
  })
}

function pairOverlap(idA: string, a: Spread, idB: string, b: Spread): OutlineOverlap | null {
  const areaM2 = sharedAreaM2(a, b)
  if (areaM2 <= leastShare * Math.min(a.areaM2, b.areaM2)) return null
  return {
    a: idA,
    b: idB,
    areaKm2: areaM2 / 1e6,
    shareOfA: Math.min(1, areaM2 / a.areaM2),
    shareOfB: Math.min(1, areaM2 / b.areaM2)
  }
}

/** Area that two outlines share, m² on the WGS 84 ellipsoid, by slabs of longitude in which no edge begins, ends or crosses another. */
export function sharedAreaM2(a: Spread, b: Spread): number {
  const span = commonSpan(a, b)
  if (!span) return 0
  const edges = edgesWithin(a, b, span)
  const borders = Float64Array.from(new Set([...span, ...edges.flatMap(edge => [edge.x0, edge.x1])]))
    .filter(x => x >= span[0] && x <= span[1]).sort()
  let active: Edge[] = []
  let next = 0
  let area = 0
  for (let k = 1; k < borders.length; k++) {
    const west = borders[k - 1]!
    const east = borders[k]!
    active = active.filter(edge => edge.x1 > west)
    while (next < edges.length && edges[next]!.x0 <= west) {
      if (edges[next]!.x1 > west) active.push(edges[next]!)
      next++
    }
    area += slabAreaM2(active, west, east)
  }
  return area
}

interface Edge { x0: number, y0: number, x1: number, y1: number, ofA: boolean }

function edgesWithin(a: Spread, b: Spread, [west, east]: [number, number]): Edge[] {
  const list: Edge[] = []
  for (const [spread, ofA] of [[a, true], [b, false]] as const) {
    const { edges } = spread
    for (let e = 0; e < edges.length; e += 4) {
      if (edges[e + 2]! <= west || edges[e]! >= east) continue
      list.push({ x0: edges[e]!, y0: edges[e + 1]!, x1: edges[e + 2]!, y1: edges[e + 3]!, ofA })
    }
  }
  return list.sort((p, q) => p.x0 - q.x0)
}

function latitudeAt(edge: Edge, x: number): number {
  if (x === edge.x0) return edge.y0
  if (x === edge.x1) return edge.y1
  return edge.y0 + (edge.y1 - edge.y0) * (x - edge.x0) / (edge.x1 - edge.x0)
}

function slabAreaM2(active: Edge[], west: number, east: number): number {
  const lines = active.map(edge => ({ ofA: edge.ofA, left: latitudeAt(edge, west), right: latitudeAt(edge, east) }))
  lines.sort((p, q) => p.left - q.left || p.right - q.right)
  const cuts = crossings(lines).sort((p, q) => p - q)
  let area = 0
  let from = 0
  for (const to of [...cuts, 1]) {
    if (to > from) area += stripAreaM2(lines, west, east, from, to)
    from = Math.max(from, to)
  }
  return area
}

type Line = { ofA: boolean, left: number, right: number }

/** Where lines that are in order at the left change places before the right edge, as parts of the slab's width. */
function crossings(lines: readonly Line[]): number[] {
  const sorted: Line[] = []
  const cuts: number[] = []
  for (const line of lines) {
    let k = sorted.length
    while (k > 0 && sorted[k - 1]!.right > line.right) {
      const other = sorted[k - 1]!
      const gapLeft = line.left - other.left
      if (gapLeft > 0) cuts.push(gapLeft / (gapLeft + other.right - line.right))
      k--
    }
    sorted.splice(k, 0, line)
  }
  return cuts
}

function stripAreaM2(lines: readonly Line[], west: number, east: number, from: number, to: number): number {
  const at = (line: Line, t: number): number => line.left + (line.right - line.left) * t
  const middle = (from + to) / 2
  const ordered = [...lines].sort((p, q) => at(p, middle) - at(q, middle))
  const x0 = west + (east - west) * from
  const x1 = west + (east - west) * to
  let inA = false
  let inB = false
  let area = 0
  for (const line of ordered) {
    const was = inA && inB
    if (line.ofA) inA = !inA
    else inB = !inB
    const is = inA && inB
    if (was === is) continue
    area += (is ? -1 : 1) * areaUnderEdgeM2(x0, at(line, from), x1, at(line, to))
  }
  return area
}
