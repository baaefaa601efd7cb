import type { ComputedRef, Ref, ShallowRef } from 'vue'
import type { Position } from '#shared/types/domain'
import type { Draft, VertexPlace } from './draft'
import type { Snap } from './snapping'
import type { Point, Surface } from './surface'

/** What mouse, touch and keys can do to a draft. */
export interface Hands {
  active: Ref<boolean>
  draft: ComputedRef<Draft>
  state: ComputedRef<'idle' | 'drawing' | 'editing'>
  underway: ShallowRef<Draft | null>
  chosen: ShallowRef<VertexPlace | null>
  /** Where the pointer is, for the line that runs ahead while drawing. */
  pointer: ShallowRef<Position | null>
  /** A drag, or an arrow, moves the whole outline. */
  moving: Ref<boolean>
  set: (next: Draft) => void
  /** Sets a vertex; one that snapped to the line that the last one snapped to follows that line. */
  add: (place: Position, snap: Snap | null) => void
  /** What is near enough to a point to snap to, and marks it; null, and no mark, where nothing is or `free` is asked. */
  snapAt: (surface: Surface, point: Point, free: boolean) => Snap | null
  finish: () => void
  escape: () => void
  remove: () => void
  back: () => void
  forth: () => void
}
