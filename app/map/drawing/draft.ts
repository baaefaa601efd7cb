import { turnOf } from '#shared/geo/greatCircle'
import type { Position } from '#shared/types/domain'

/**
 * An outline being drawn: rings of vertices as they were set, not closed. Rings inside one another alternate between ground and hole.
 * Drawn edges are great circles; outlines that came from a file keep theirs straight in longitude and latitude.
 */
export interface Draft {
  rings: readonly (readonly Position[])[]
  edges: 'great-circle' | 'straight'
  /** The last ring is still being drawn: it has no edge back to its first vertex. */
  open: boolean
}

export interface VertexPlace { ring: number, vertex: number }

export const emptyDraft: Draft = { rings: [], edges: 'great-circle', open: false }

/** Five decimals of a degree, one metre: what a hand can set. */
export function roundPlace([lon, lat]: Position): Position {
  return [Math.round(lon * 1e5) / 1e5, Math.round(lat * 1e5) / 1e5]
}

export function vertexCount(draft: Draft): number {
  return draft.rings.reduce((sum, ring) => sum + ring.length, 0)
}

/** Begins a ring: the outline's first, another part, or a hole. */
export function beginRing(draft: Draft): Draft {
  return { ...draft, rings: [...draft.rings.filter(ring => ring.length > 0), []], open: true }
}

export function addVertex(draft: Draft, place: Position): Draft {
  return addPlaces(draft, [roundPlace(place)])
}

/** Adds places as they are, to the last digit: those of a line that is shared. */
export function addPlaces(draft: Draft, places: readonly Position[]): Draft {
  if (!draft.open) return draft
  const ring = [...draft.rings.at(-1) ?? []]
  for (const place of places) {
    const previous = ring.at(-1)
    if (!previous || previous[0] !== place[0] || previous[1] !== place[1]) ring.push(place)
  }
  return ring.length === (draft.rings.at(-1)?.length ?? 0) ? draft : withRing(draft, draft.rings.length - 1, ring)
}

/** Takes the last vertex of the ring being drawn back. */
export function dropLast(draft: Draft): Draft {
  if (!draft.open) return draft
  return withRing(draft, draft.rings.length - 1, (draft.rings.at(-1) ?? []).slice(0, -1))
}

/** Closes the ring being drawn; one of fewer than three vertices goes. */
export function finishRing(draft: Draft): Draft {
  if (!draft.open) return draft
  const last = draft.rings.at(-1) ?? []
  return { ...draft, rings: last.length < 3 ? draft.rings.slice(0, -1) : draft.rings, open: false }
}

/** `exact` keeps every digit of a place on a shared line. */
export function moveVertex(draft: Draft, { ring, vertex }: VertexPlace, place: Position, exact = false): Draft {
  return withRing(draft, ring, draft.rings[ring]!.map((old, k) => k === vertex ? (exact ? place : roundPlace(place)) : old))
}

/** Turns the whole outline about the Earth so that one place comes to lie on another: shape and size stay as they are. */
export function moveAll(draft: Draft, from: Position, to: Position): Draft {
  const turn = turnOf(from, to)
  return turn === null ? draft : { ...draft, rings: draft.rings.map(ring => ring.map(place => roundPlace(turn(place)))) }
}

/** Sets a new vertex on the edge that begins at `after`. */
export function insertVertex(draft: Draft, after: VertexPlace, place: Position): Draft {
  const ring = draft.rings[after.ring]!
  return withRing(draft, after.ring, [...ring.slice(0, after.vertex + 1), roundPlace(place), ...ring.slice(after.vertex + 1)])
}

/** Takes a vertex out; a closed ring that has only three left goes whole. */
export function removeVertex(draft: Draft, { ring, vertex }: VertexPlace): Draft {
  const rest = draft.rings[ring]!.filter((_, k) => k !== vertex)
  const isOpen = draft.open && ring === draft.rings.length - 1
  if (isOpen || rest.length >= 3) return withRing(draft, ring, rest)
  return { ...draft, rings: draft.rings.filter((_, k) => k !== ring) }
}

function withRing(draft: Draft, index: number, ring: readonly Position[]): Draft {
  return { ...draft, rings: draft.rings.map((old, k) => k === index ? ring : old) }
}
