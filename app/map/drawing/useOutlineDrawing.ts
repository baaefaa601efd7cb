import { computed, onScopeDispose, ref, shallowRef, watch, type Ref } from 'vue'
import type { Outline, Position } from '#shared/types/domain'
import type { MapPicture, SourceId } from '../picture/picture'
import { addPlaces, addVertex, beginRing, dropLast, emptyDraft, finishRing, removeVertex, vertexCount, type Draft, type VertexPlace } from './draft'
import { draftOutline, faultOf } from './draftShape'
import { draftFeatures } from './draftFeatures'
import { historyOf, redo, step, undo } from './history'
import type { Hands } from './hands'
import { keyboardCursor } from './keyboardCursor'
import { pointerDrawing } from './pointerDrawing'
import { draftOf } from './recover'
import { alongLine, snapAt, snapWords, type Snap, type SnapIndex } from './snapping'
import type { Point, Surface } from './surface'

export type DrawingState = 'idle' | 'drawing' | 'editing'

interface Options {
  /** What the hands are on: the map itself, or a view over it. */
  surface: Readonly<Ref<Surface | null>>
  /** Borders and coasts that vertices snap to. */
  snapTo?: () => readonly SnapIndex[]
  /** Whether the map is in sight: what is not seen is not drawn. */
  inSight?: () => boolean
  /** When Escape gives up an outline that holds no work. */
  onCancel?: () => void
}

/** Drawing and editing an outline by mouse, touch or keyboard; the map shows it on the globe and flat. */
export function useOutlineDrawing(picture: Readonly<Ref<MapPicture | null>>, options: Options) {
  const active = ref(false)
  const history = shallowRef(historyOf<Draft>(emptyDraft))
  /** The draft while a vertex is under way; null between drags. */
  const underway = shallowRef<Draft | null>(null)
  const chosen = shallowRef<VertexPlace | null>(null)
  const pointer = shallowRef<Position | null>(null)
  /** What an operation would make of the draft: shown, and taken by going on. */
  const preview = shallowRef<Draft | null>(null)
  const snapping = ref(true)
  const moving = ref(false)
  /** What the pointer or the cursor has snapped to, and what the last vertex did. */
  const snapped = shallowRef<Snap | null>(null)
  let lastSnap: Snap | null = null
  let firstSnap: Snap | null = null

  const draft = computed(() => underway.value ?? preview.value ?? history.value.present)
  const state = computed<DrawingState>(() => !active.value ? 'idle' : draft.value.open ? 'drawing' : 'editing')
  const outline = computed(() => draftOutline(draft.value))
  const fault = computed(() => faultOf(draft.value, outline.value, underway.value !== null))

  const set = (next: Draft): void => {
    underway.value = preview.value = snapped.value = lastSnap = null
    history.value = step(history.value, next)
  }
  const add = (place: Position, snap: Snap | null): void => {
    // The last vertex may have been taken back, or moved, since.
    const before = lastSnap && sameAsLast(draft.value, lastSnap.place) ? lastSnap : null
    set(snap ? addPlaces(draft.value, [...before ? alongLine(before, snap) : [], snap.place]) : addVertex(draft.value, place))
    lastSnap = snap
    if (draft.value.rings.at(-1)?.length === 1) firstSnap = snap
  }
  const lookForSnap = (surface: Surface, point: Point, free: boolean): Snap | null => {
    const found = snapping.value && !free ? snapAt(options.snapTo?.() ?? [], surface, point) : null
    snapped.value = found
    return found
  }
  const clear = (): void => {
    moving.value = false
    underway.value = preview.value = chosen.value = pointer.value = snapped.value = lastSnap = null
  }
  const open = (initial: Draft): void => {
    history.value = historyOf(initial)
    clear()
    active.value = true
    options.surface.value?.element.querySelector<HTMLElement>('canvas')?.focus({ preventScroll: true })
  }
  const close = (): void => {
    active.value = false
    history.value = historyOf(emptyDraft)
    clear()
  }
  const finish = (): void => {
    if (!draft.value.open) return
    const first = draft.value.rings.at(-1)?.[0]
    const closing = lastSnap && firstSnap && first && sameAsLast(draft.value, lastSnap.place) && samePlace(first, firstSnap.place) ? alongLine(lastSnap, firstSnap) : []
    set(finishRing(addPlaces(draft.value, closing)))
    pointer.value = chosen.value = null
  }
  /** One thing at a time, each of which can be undone: a drag, a choice, the ring under way. Gives the whole up only while nothing is done. */
  const escape = (): void => {
    if (underway.value) underway.value = null
    else if (moving.value) moving.value = false
    else if (preview.value) preview.value = null
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
    clear()
    history.value = undo(history.value)
  }
  const forth = (): void => {
    clear()
    history.value = redo(history.value)
  }

  const hands: Hands = { active, draft, state, underway, chosen, pointer, moving, set, add, snapAt: lookForSnap, finish, escape, remove, back, forth }
  const cursor = keyboardCursor(options.surface, hands)
  pointerDrawing(options.surface, hands, cursor)

  const features = computed(() => draftFeatures({
    active: active.value, draft: draft.value, chosen: chosen.value, pointer: cursor.place.value ?? pointer.value, outline: outline.value, fault: fault.value,
  }))
  watch([picture, features, () => options.inSight?.() ?? true], ([shown, , seen]) => {
    if (!seen || !shown) return
    for (const [id, data] of Object.entries(features.value)) shown.set(id as SourceId, data)
  })
  onScopeDispose(() => { active.value = false })

  return {
    state, draft, outline, fault, chosen, features, cursor: cursor.onScreen, cursorPlace: cursor.place, holding: cursor.holding,
    snapping, moving,
    /** What the pointer or the cursor is on, where it is and in words; null where nothing is near. */
    snap: computed(() => active.value && snapped.value ? { place: snapped.value.place, words: snapWords(snapped.value) } : null),
    /** Shows what an operation would make; `accept` takes it as one step that can be undone, null puts it away. */
    show: (next: Draft | null) => { preview.value = next },
    previewing: computed(() => preview.value !== null),
    /** The draft without what is only shown. */
    present: computed(() => history.value.present),
    accept: () => { if (preview.value) set(preview.value) },
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
    addRing: () => {
      moving.value = false
      set(beginRing(finishRing(draft.value)))
    },
    finish, remove, undo: back, redo: forth, close
  }
}

export type OutlineDrawing = ReturnType<typeof useOutlineDrawing>

function sameAsLast(draft: Draft, place: Position): boolean {
  const last = draft.rings.at(-1)?.at(-1)
  return draft.open && last !== undefined && samePlace(last, place)
}

function samePlace(a: Position, b: Position): boolean {
  return a[0] === b[0] && a[1] === b[1]
}
