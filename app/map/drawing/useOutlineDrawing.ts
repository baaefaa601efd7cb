import { computed, onScopeDispose, ref, shallowRef, watch, type Ref } from 'vue'
import type { GeoJSONSource, Map as Chart } from 'maplibre-gl'
import type { Outline, Position } from '#shared/types/domain'
import { addVertex, beginRing, dropLast, emptyDraft, finishRing, removeVertex, vertexCount, type Draft, type VertexPlace } from './draft'
import { draftOutline, faultOf } from './draftShape'
import { draftFeatures } from './draftFeatures'
import { historyOf, redo, step, undo } from './history'
import { keyboardCursor } from './keyboardCursor'
import { pointerDrawing } from './pointerDrawing'
import { draftOf } from './recover'

export type DrawingState = 'idle' | 'drawing' | 'editing'

/**
 * Drawing and editing an outline on a map, by mouse, touch or keyboard, on the globe and flat. `onUpdate` is called with the draft and
 * the outline it makes whenever either changes, while a vertex is dragged too. `onCancel` when Escape gives up an outline that holds no work.
 */
export function useOutlineDrawing(
  map: Readonly<Ref<Chart | null>>,
  options: { onUpdate?: (draft: Draft, outline: Outline | null) => void, onCancel?: () => void } = {}
) {
  const active = ref(false)
  const history = shallowRef(historyOf<Draft>(emptyDraft))
  /** The draft while a vertex is under way; null between drags. */
  const underway = shallowRef<Draft | null>(null)
  const chosen = shallowRef<VertexPlace | null>(null)
  const pointer = shallowRef<Position | null>(null)

  const draft = computed(() => underway.value ?? history.value.present)
  const state = computed<DrawingState>(() => !active.value ? 'idle' : draft.value.open ? 'drawing' : 'editing')
  const outline = computed(() => draftOutline(draft.value))
  const fault = computed(() => faultOf(draft.value, outline.value, underway.value !== null))

  const set = (next: Draft): void => {
    underway.value = null
    history.value = step(history.value, next)
  }
  const open = (initial: Draft): void => {
    history.value = historyOf(initial)
    underway.value = chosen.value = pointer.value = null
    active.value = true
    map.value?.getCanvas().focus({ preventScroll: true })
  }
  const close = (): void => {
    active.value = false
    history.value = historyOf(emptyDraft)
    underway.value = chosen.value = pointer.value = null
  }
  const finish = (): void => {
    if (!draft.value.open) return
    set(finishRing(draft.value))
    pointer.value = chosen.value = null
  }
  /** One thing at a time, each of which can be undone: a drag, a choice, the ring under way. Gives the whole up only while nothing is done. */
  const escape = (): void => {
    if (underway.value) underway.value = null
    else if (chosen.value) chosen.value = null
    else if (draft.value.open && (draft.value.rings.at(-1)?.length ?? 0) > 0) set(beginRing({ ...draft.value, rings: draft.value.rings.slice(0, -1) }))
    else if (draft.value.open && draft.value.rings.length > 1) set(finishRing(draft.value))
    else if (history.value.past.length === 0 || vertexCount(draft.value) === 0) options.onCancel?.()
  }
  const remove = (): void => {
    if (draft.value.open) set(dropLast(draft.value))
    else if (chosen.value) {
      set(removeVertex(draft.value, chosen.value))
      chosen.value = null
    }
  }
  const back = (): void => {
    underway.value = chosen.value = null
    history.value = undo(history.value)
  }
  const forth = (): void => {
    underway.value = chosen.value = null
    history.value = redo(history.value)
  }

  const hands = { active, draft, state, underway, chosen, pointer, set, finish, escape, remove, back, forth, add: (place: Position) => set(addVertex(draft.value, place)) }
  const cursor = keyboardCursor(map, hands)
  pointerDrawing(map, hands, cursor)

  watch([map, active, draft, chosen, pointer, fault], () => {
    const chart = map.value
    if (!chart?.getSource('draft-fill')) return
    const features = draftFeatures({ active: active.value, draft: draft.value, chosen: chosen.value, pointer: cursor.place.value ?? pointer.value, outline: outline.value, fault: fault.value })
    for (const [id, data] of Object.entries(features)) (chart.getSource(id) as GeoJSONSource).setData(data)
  })
  watch([active, draft], () => {
    if (active.value) options.onUpdate?.(draft.value, outline.value)
  })
  onScopeDispose(() => { active.value = false })

  return {
    state, draft, outline, fault, chosen, cursor: cursor.onScreen, cursorPlace: cursor.place, holding: cursor.holding,
    vertexCount: computed(() => vertexCount(draft.value)),
    canUndo: computed(() => history.value.past.length > 0),
    canRedo: computed(() => history.value.future.length > 0),
    canFinish: computed(() => state.value === 'drawing' && (draft.value.rings.at(-1)?.length ?? 0) >= 3),
    /** Begins a new outline. */
    start: () => open(beginRing(emptyDraft)),
    /** Takes up an outline that is stored. */
    edit: (stored: Outline) => open(draftOf(stored)),
    /** Takes up a draft where it was left. */
    resume: (left: Draft) => open(left),
    /** Begins another part, or a hole in what is there. */
    addRing: () => set(beginRing(finishRing(draft.value))),
    finish, remove, undo: back, redo: forth, close
  }
}

export type OutlineDrawing = ReturnType<typeof useOutlineDrawing>
