import { onScopeDispose, watch, type Ref } from 'vue'
import type { Map as Chart, MapMouseEvent, MapTouchEvent } from 'maplibre-gl'
import { toPlace, toScreen } from '../view'
import { insertVertex, moveVertex, type Draft, type VertexPlace } from './draft'
import { handleAt } from './handles'
import type { Hands } from './hands'
import type { KeyboardCursor } from './keyboardCursor'

/** How near to a handle counts as on it, pixels. */
const mouseReach = 9
const touchReach = 24

const ends = ['mouseup', 'touchend', 'touchcancel'] as const

interface Drag { at: VertexPlace, base: Draft, inserted: boolean, moved: boolean, from: { x: number, y: number } }

/** Mouse and touch on the map: set, drag, pull out and choose vertices. The map keeps every gesture that starts beside a handle. */
export function pointerDrawing(map: Readonly<Ref<Chart | null>>, hands: Hands, cursor: KeyboardCursor): void {
  let drag: Drag | null = null
  /** A click that ends a drag, or the second of a double click, sets nothing. */
  let swallow = false
  let lastClick = { time: 0, x: 0, y: 0 }

  const press = (event: MapMouseEvent | MapTouchEvent): void => {
    const chart = map.value
    const touch = 'touches' in event.originalEvent
    if (!chart || !hands.active.value || (touch && (event as MapTouchEvent).points.length > 1)) return
    cursor.hide()
    swallow = false
    if (hands.state.value !== 'editing') return
    const handle = handleAt(chart, hands.draft.value, event.point, touch ? touchReach : mouseReach)
    if (!handle) return
    event.preventDefault()
    const { draft } = hands
    if (handle.kind === 'vertex') drag = { at: handle.at, base: draft.value, inserted: false, moved: false, from: event.point }
    else {
      const at = { ring: handle.at.ring, vertex: handle.at.vertex + 1 }
      drag = { at, base: insertVertex(draft.value, handle.at, handle.place), inserted: true, moved: false, from: event.point }
    }
    hands.chosen.value = drag.at
  }

  const move = (event: MapMouseEvent | MapTouchEvent): void => {
    const chart = map.value
    if (!chart || !hands.active.value) return
    const place = toPlace(chart, event.point)
    if (drag) {
      if (!drag.moved && Math.hypot(event.point.x - drag.from.x, event.point.y - drag.from.y) < 3) return
      drag.moved = true
      if (place) hands.underway.value = moveVertex(drag.base, drag.at, place)
      return
    }
    if (hands.state.value === 'drawing' && !cursor.shown.value) hands.pointer.value = place
    chart.getCanvas().style.cursor = pointerShape(chart, event.point)
  }

  const pointerShape = (chart: Chart, point: { x: number, y: number }): string => {
    if (hands.state.value === 'drawing') return 'crosshair'
    const handle = handleAt(chart, hands.draft.value, point, mouseReach)
    return handle ? (handle.kind === 'vertex' ? 'move' : 'copy') : ''
  }

  const release = (): void => {
    if (!drag) return
    swallow = true
    if (drag.moved && hands.underway.value) hands.set(hands.underway.value)
    else if (drag.inserted) hands.set(drag.base)
    drag = null
  }

  const click = (event: MapMouseEvent): void => {
    const chart = map.value
    if (!chart || !hands.active.value) return
    if (swallow) {
      swallow = false
      return
    }
    const { x, y } = event.point
    const time = performance.now()
    const again = time - lastClick.time < 400 && Math.hypot(x - lastClick.x, y - lastClick.y) < 5
    lastClick = { time, x, y }
    if (hands.state.value === 'editing') {
      hands.chosen.value = null
      return
    }
    if (again) return
    const ring = hands.draft.value.rings.at(-1) ?? []
    const first = ring.length >= 3 ? toScreen(chart, ring[0]!) : null
    if (first && Math.hypot(first.x - x, first.y - y) <= mouseReach + 3) {
      hands.finish()
      return
    }
    const place = toPlace(chart, event.point)
    if (place) hands.add(place)
  }

  const doubleClick = (event: MapMouseEvent): void => {
    if (hands.state.value !== 'drawing') return
    event.preventDefault()
    hands.finish()
  }

  const leave = (): void => { hands.pointer.value = null }

  watch(map, (chart) => {
    if (!chart) return
    chart.on('mousedown', press)
    chart.on('touchstart', press)
    chart.on('mousemove', move)
    chart.on('touchmove', move)
    chart.on('click', click)
    chart.on('dblclick', doubleClick)
    chart.on('mouseout', leave)
    // A drag may end beside the map.
    for (const name of ends) window.addEventListener(name, release)
  }, { immediate: true })
  watch(hands.active, (on) => {
    if (!on && map.value) map.value.getCanvas().style.cursor = ''
  })
  onScopeDispose(() => {
    if (map.value) for (const name of ends) window.removeEventListener(name, release)
  })
}
