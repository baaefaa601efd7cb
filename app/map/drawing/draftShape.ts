import { contourOf } from '#shared/earth/contour'
import { ringPath } from '#shared/earth/rings'
import { findCrossings } from '#shared/geo/crossings'
import { cutRings } from '#shared/geo/cut'
import { alongArc, drawnLine } from '#shared/geo/greatCircle'
import { checkOutline } from '#shared/geo/outline'
import type { BoundedRing } from '#shared/geo/pointInRing'
import type { Outline, Position } from '#shared/types/domain'
import { InputError } from '#shared/types/issue'
import type { Draft, VertexPlace } from './draft'

/** Seven decimals of a degree, one centimetre: what is stored. */
const rounded = ([lon, lat]: Position): Position => [Math.round(lon * 1e7) / 1e7, Math.round(lat * 1e7) / 1e7]

/** A ring's line from vertex to vertex and back: `edgeOf[k]` is the edge that step k lies on. */
export function ringLine(draft: Draft, ring: readonly Position[]): { positions: Position[], edgeOf: number[] } {
  if (draft.edges === 'great-circle') return drawnLine(ring)
  return { positions: [...ring, ring[0]!], edgeOf: ring.map((_, k) => k) }
}

/** What the draft would be stored as; null while it encloses nothing. Check it with `faultOf`. */
export function draftOutline(draft: Draft): Outline | null {
  const rings = draft.rings.filter(ring => ring.length >= 3)
  if (rings.length === 0) return null
  try {
    const outline = cutRings(rings.map(ring => bounded(ringLine(draft, ring).positions.map(rounded))))
    const stored = outline.type === 'Polygon'
      ? { type: outline.type, coordinates: outline.coordinates.map(ring => ring.map(rounded)) }
      : { type: outline.type, coordinates: outline.coordinates.map(polygon => polygon.map(ring => ring.map(rounded))) }
    return stored.coordinates.length === 0 ? null : stored
  }
  catch (error) {
    if (error instanceof InputError) return null
    throw error
  }
}

/** The whole contour is asked only for the pole that a ring goes round. */
function bounded(positions: Position[]): BoundedRing {
  const path = ringPath(positions)
  return path.winding === 0 ? { ...path, pole: null } : contourOf({ type: 'Polygon', coordinates: [positions] }).rings[0]!
}

/** Why the draft cannot be stored, and the lines on the map that are wrong. */
export interface DraftFault { message: string, lines: Position[][] }

/** Null where the draft can be stored. `outline` is what `draftOutline` gave. `crossingsOnly` is quicker, for while a vertex moves. */
export function faultOf(draft: Draft, outline: Outline | null, crossingsOnly = false): DraftFault | null {
  const rings = draft.rings.filter(ring => ring.length >= 3)
  if (rings.length === 0) return null
  const lines = rings.map(ring => ringLine(draft, ring))
  const refused = lines.flatMap(({ positions }) => refusalOf(positions))
  if (refused[0]) return { message: refused[0].message, lines: refused.map(({ line }) => line) }
  const { crossings } = findCrossings(lines.map(line => ringPath(line.positions)), 3)
  if (crossings.length > 0) {
    const wrong = crossings.flatMap(({ first, second }) => [first, second].map(({ ring, edge }) => edgeLine(lines[ring]!, edge)))
    return { message: crossings.length === 1 ? 'Two edges cross.' : 'Edges cross.', lines: wrong }
  }
  if (outline === null) return { message: 'The outline encloses no area.', lines: lines.map(({ positions }) => positions) }
  if (crossingsOnly) return null
  const [issue] = checkOutline(outline)
  if (issue) return { message: issue.message, lines: issue.lines ?? [] }
  const closed = draft.open ? draft.rings.slice(0, -1) : draft.rings
  const empty = rings.length > 1 ? closed.filter(ring => draftOutline({ ...draft, rings: [ring] }) === null) : []
  if (empty.length === 0) return null
  return { message: `${empty.length === 1 ? 'One ring encloses' : `${empty.length} rings enclose`} no area.`, lines: empty.map(ring => ringLine(draft, ring).positions) }
}

/** Why a line cannot be a ring at all, with the line; nothing where it can. */
function refusalOf(positions: Position[]): { message: string, line: Position[] }[] {
  try {
    ringPath(positions)
    return []
  }
  catch (error) {
    if (!(error instanceof InputError)) throw error
    return [{ message: error.issues[0]!.message, line: positions }]
  }
}

function edgeLine({ positions, edgeOf }: { positions: Position[], edgeOf: number[] }, at: number): Position[] {
  const edge = edgeOf[Math.min(at, edgeOf.length - 1)]!
  const steps = edgeOf.flatMap((owner, k) => owner === edge ? [k] : [])
  return positions.slice(steps[0]!, steps.at(-1)! + 2)
}

/** The middle of every edge, where a new vertex can be pulled out. */
export function edgeMiddles(draft: Draft): { after: VertexPlace, place: Position }[] {
  return draft.rings.flatMap((vertices, ring) => {
    const isOpen = draft.open && ring === draft.rings.length - 1
    const edges = isOpen ? vertices.length - 1 : vertices.length
    return Array.from({ length: Math.max(0, edges) }, (_, vertex) => {
      const [a, b] = [vertices[vertex]!, vertices[(vertex + 1) % vertices.length]!]
      return { after: { ring, vertex }, place: middle(draft, a, b) }
    })
  })
}

function middle(draft: Draft, a: Position, b: Position): Position {
  if (draft.edges === 'great-circle') return alongArc(a, b, 0.5)
  const step = b[0] - a[0]
  const short = Math.abs(step) <= 180 || Math.abs(step) === 360 ? step : step - 360 * Math.round(step / 360)
  return [a[0] + short / 2, (a[1] + b[1]) / 2]
}
