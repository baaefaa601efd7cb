import type { Position } from '#shared/types/domain'
import { vertexCount, type Draft, type VertexPlace } from './draft'
import { mostHandles } from './draftFeatures'
import { edgeMiddles } from './draftShape'
import type { Point, Surface } from './surface'

/** A handle of the draft under a point of the screen. */
export type Handle = { kind: 'vertex', at: VertexPlace, place: Position } | { kind: 'middle', at: VertexPlace, place: Position }

/** The nearest vertex within `reach` pixels, or else the nearest middle of an edge; null where there is neither. */
export function handleAt(surface: Surface, draft: Draft, point: Point, reach: number): Handle | null {
  if (vertexCount(draft) > mostHandles) return null
  let best: Handle | null = null
  let least = reach
  const look = (handle: Handle): void => {
    const screen = surface.toScreen(handle.place)
    const distance = screen ? Math.hypot(screen.x - point.x, screen.y - point.y) : Infinity
    if (distance <= least) {
      least = distance
      best = handle
    }
  }
  draft.rings.forEach((ring, r) => ring.forEach((place, v) => look({ kind: 'vertex', at: { ring: r, vertex: v }, place })))
  if (best || draft.open) return best
  for (const { after, place } of edgeMiddles(draft)) look({ kind: 'middle', at: after, place })
  return best
}
