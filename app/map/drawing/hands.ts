import type { ComputedRef, Ref, ShallowRef } from 'vue'
import type { Position } from '#shared/types/domain'
import type { Draft, VertexPlace } from './draft'

/** What mouse, touch and keys can do to a draft. */
export interface Hands {
  active: Ref<boolean>
  draft: ComputedRef<Draft>
  state: ComputedRef<'idle' | 'drawing' | 'editing'>
  underway: ShallowRef<Draft | null>
  chosen: ShallowRef<VertexPlace | null>
  /** Where the pointer is, for the line that runs ahead while drawing. */
  pointer: ShallowRef<Position | null>
  set: (next: Draft) => void
  add: (place: Position) => void
  finish: () => void
  escape: () => void
  remove: () => void
  back: () => void
  forth: () => void
}
