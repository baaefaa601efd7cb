import type { Map as Chart } from 'maplibre-gl'
import type { Position } from '#shared/types/domain'
import { toScreen } from '../view'
import { vertexCount, type Draft, type VertexPlace } from './draft'
import { mostHandles } from './draftFeatures'
import { edgeMiddles } from './draftShape'

/** A handle of the draft under a point of the screen. */
export type Handle = { kind: 'vertex', at: VertexPlace, place: Position } | { kind: 'middle', at: VertexPlace, place: Position }

/** The nearest vertex within `reach` pixels, or else the nearest middle of an edge; null where there is neither. */
export function handleAt(map: Chart, draft: Draft, point: { x: number, y: number }, reach: number): Handle | null {
  if (vertexCount(draft) > mostHandles) return null
  let best: Handle | null = null
  let least = reach
  const look = (handle: Handle): void => {
    const screen = toScreen(map, handle.place)
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
