import { onScopeDispose, watch, type Ref } from 'vue'
import { insertVertex, moveAll, moveVertex, type Draft, type VertexPlace } from './draft'
import { handleAt } from './handles'
import type { Hands } from './hands'
import type { KeyboardCursor } from './keyboardCursor'
import type { Position } from '#shared/types/domain'
import type { Point, PointerAt, Surface } from './surface'

/** How near to a handle counts as on it, pixels. */
const mouseReach = 9
const touchReach = 24

const ends = ['mouseup', 'touchend', 'touchcancel'] as const

interface Drag { at: VertexPlace, base: Draft, inserted: boolean, moved: boolean, from: Point }

/** Mouse and touch on the map or another surface: set, drag, pull out and choose vertices. Gestures that start beside a handle stay the surface's own. */
export function pointerDrawing(surface: Readonly<Ref<Surface | null>>, hands: Hands, cursor: KeyboardCursor): void {
  let drag: Drag | null = null
  /** The whole outline under way, and the place it was taken by. */
  let haul: { base: Draft, from: Position } | null = null
  /** A click that ends a drag, or the second of a double click, sets nothing. */
  let swallow = false
  let lastClick = { time: 0, x: 0, y: 0 }

  const press = (sheet: Surface, { point, touch, fingers, keep }: PointerAt): void => {
    if (!hands.active.value || fingers > 1) return
    cursor.hide()
    swallow = false
    if (hands.state.value !== 'editing') return
    const from = hands.moving.value ? sheet.toPlace(point) : null
    if (from) {
      keep()
      haul = { base: hands.draft.value, from }
      return
    }
    const handle = handleAt(sheet, hands.draft.value, point, touch ? touchReach : mouseReach)
    if (!handle) return
    keep()
    const { draft } = hands
    if (handle.kind === 'vertex') drag = { at: handle.at, base: draft.value, inserted: false, moved: false, from: point }
    else {
      const at = { ring: handle.at.ring, vertex: handle.at.vertex + 1 }
      drag = { at, base: insertVertex(draft.value, handle.at, handle.place), inserted: true, moved: false, from: point }
    }
    hands.chosen.value = drag.at
  }

  const move = (sheet: Surface, { point, free }: PointerAt): void => {
    if (!hands.active.value) return
    const place = sheet.toPlace(point)
    if (haul) {
      if (place) hands.underway.value = moveAll(haul.base, haul.from, place)
      return
    }
    if (drag) {
      if (!drag.moved && Math.hypot(point.x - drag.from.x, point.y - drag.from.y) < 3) return
      drag.moved = true
      const snap = hands.snapAt(sheet, point, free)
      if (snap) hands.underway.value = moveVertex(drag.base, drag.at, snap.place, true)
      else if (place) hands.underway.value = moveVertex(drag.base, drag.at, place)
      return
    }
    if (hands.state.value === 'drawing' && !cursor.shown.value) hands.pointer.value = hands.snapAt(sheet, point, free)?.place ?? place
    sheet.setPointer(pointerShape(sheet, point))
  }

  const pointerShape = (sheet: Surface, point: Point): string => {
    if (hands.state.value === 'drawing') return 'crosshair'
    if (hands.moving.value) return 'grab'
    const handle = handleAt(sheet, hands.draft.value, point, mouseReach)
    return handle ? (handle.kind === 'vertex' ? 'move' : 'copy') : ''
  }

  const release = (): void => {
    if (haul) {
      swallow = true
      if (hands.underway.value) hands.set(hands.underway.value)
      haul = null
    }
    if (!drag) return
    swallow = true
    if (drag.moved && hands.underway.value) hands.set(hands.underway.value)
    else if (drag.inserted) hands.set(drag.base)
    drag = null
  }

  const click = (sheet: Surface, { point, free }: PointerAt): void => {
    if (!hands.active.value) return
    if (swallow) {
      swallow = false
      return
    }
    const time = performance.now()
    const again = time - lastClick.time < 400 && Math.hypot(point.x - lastClick.x, point.y - lastClick.y) < 5
    lastClick = { time, ...point }
    if (hands.state.value === 'editing') {
      hands.chosen.value = null
      return
    }
    if (again) return
    const ring = hands.draft.value.rings.at(-1) ?? []
    const first = ring.length >= 3 ? sheet.toScreen(ring[0]!) : null
    if (first && Math.hypot(first.x - point.x, first.y - point.y) <= mouseReach + 3) {
      hands.finish()
      return
    }
    const snap = hands.snapAt(sheet, point, free)
    const place = snap?.place ?? sheet.toPlace(point)
    if (place) hands.add(place, snap)
  }

  const twice = ({ keep }: PointerAt): void => {
    if (hands.state.value !== 'drawing') return
    keep()
    hands.finish()
  }

  let deafen: (() => void) | null = null
  watch(surface, (sheet, before) => {
    deafen?.()
    deafen = null
    drag = haul = null
    before?.setPointer('')
    if (!sheet) return
    deafen = sheet.listen({
      press: at => press(sheet, at),
      move: at => move(sheet, at),
      click: at => click(sheet, at),
      twice,
      leave: () => { hands.pointer.value = null },
    })
    // A drag may end beside the map.
    for (const name of ends) window.addEventListener(name, release)
  }, { immediate: true })
  watch(hands.active, (on) => {
    if (!on) surface.value?.setPointer('')
  })
  onScopeDispose(() => {
    deafen?.()
    if (surface.value) for (const name of ends) window.removeEventListener(name, release)
  })
}
