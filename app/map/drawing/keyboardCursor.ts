import { onScopeDispose, ref, shallowRef, watch, type Ref, type ShallowRef } from 'vue'
import type { Map as Chart } from 'maplibre-gl'
import type { Position } from '#shared/types/domain'
import { toPlace, toScreen } from '../view'
import { insertVertex, moveVertex } from './draft'
import { handleAt } from './handles'
import type { Hands } from './hands'

export interface KeyboardCursor {
  /** Where the crosshair is; null while it is hidden. */
  place: ShallowRef<Position | null>
  onScreen: ShallowRef<{ x: number, y: number } | null>
  shown: Ref<boolean>
  /** The chosen vertex moves with the crosshair. */
  holding: Ref<boolean>
  hide: () => void
}

const steps: Record<string, [number, number]> = { ArrowLeft: [-1, 0], ArrowRight: [1, 0], ArrowUp: [0, -1], ArrowDown: [0, 1] }
/** Pixels of a step; with Shift, and with Alt for the last bit. */
const stepPixels = { plain: 12, shift: 60, alt: 1 }
const reach = 14
const margin = 40

/**
 * Drawing by keys on the focused map: arrows move a crosshair, Enter sets a vertex (on the first one it finishes, a second time
 * in one place too), Backspace takes the last back. While editing, Enter picks a vertex or the middle of an edge up and sets it down.
 */
export function keyboardCursor(map: Readonly<Ref<Chart | null>>, hands: Hands): KeyboardCursor {
  const place = shallowRef<Position | null>(null)
  const onScreen = shallowRef<{ x: number, y: number } | null>(null)
  const shown = ref(false)
  const holding = ref(false)

  const hide = (): void => {
    shown.value = holding.value = false
    place.value = onScreen.value = null
  }
  const follow = (): void => {
    if (place.value && map.value) onScreen.value = toScreen(map.value, place.value)
  }

  const go = (chart: Chart, [dx, dy]: [number, number], pixels: number): void => {
    const { clientWidth, clientHeight } = chart.getContainer()
    const from = (place.value && toScreen(chart, place.value)) ?? { x: clientWidth / 2, y: clientHeight / 2 }
    const to = shown.value ? { x: from.x + dx * pixels, y: from.y + dy * pixels } : from
    const next = toPlace(chart, to)
    shown.value = true
    if (next) place.value = next
    if (holding.value && hands.chosen.value && place.value) hands.underway.value = moveVertex(hands.draft.value, hands.chosen.value, place.value)
    const beside = to.x < margin || to.y < margin || to.x > clientWidth - margin || to.y > clientHeight - margin
    if (place.value && (beside || !next)) chart.panBy([dx * 120, dy * 120], { duration: 0 })
    follow()
  }

  const setHere = (chart: Chart): void => {
    if (!place.value || !onScreen.value) return hands.finish()
    const ring = hands.draft.value.rings.at(-1) ?? []
    const near = (vertex: Position | undefined): boolean => {
      const screen = vertex && toScreen(chart, vertex)
      return !!screen && Math.hypot(screen.x - onScreen.value!.x, screen.y - onScreen.value!.y) < reach
    }
    if (ring.length >= 3 && (near(ring[0]) || near(ring.at(-1)))) hands.finish()
    else if (!near(ring.at(-1))) hands.add(place.value)
  }

  const pickOrDrop = (chart: Chart): void => {
    if (holding.value) {
      if (hands.underway.value) hands.set(hands.underway.value)
      holding.value = false
      return
    }
    const handle = onScreen.value && handleAt(chart, hands.draft.value, onScreen.value, reach)
    if (!handle) return
    hands.chosen.value = handle.at
    if (handle.kind === 'middle') {
      hands.set(insertVertex(hands.draft.value, handle.at, handle.place))
      hands.chosen.value = { ring: handle.at.ring, vertex: handle.at.vertex + 1 }
    }
    holding.value = true
  }

  const enter = (chart: Chart): void => {
    if (hands.state.value === 'drawing') setHere(chart)
    else pickOrDrop(chart)
  }

  const onKey = (event: KeyboardEvent): void => {
    const chart = map.value
    if (!chart || !hands.active.value) return
    const command = event.ctrlKey || event.metaKey
    const key = event.key.toLowerCase()
    if (steps[event.key] && !command) go(chart, steps[event.key]!, event.shiftKey ? stepPixels.shift : event.altKey ? stepPixels.alt : stepPixels.plain)
    else if (event.key === 'Enter') enter(chart)
    else if (event.key === 'Escape') {
      holding.value = false
      hands.escape()
    }
    else if (event.key === 'Backspace' || event.key === 'Delete') hands.remove()
    else if ((event.key === '+' || event.key === '=') && !command) chart.zoomIn()
    else if (event.key === '-' && !command) chart.zoomOut()
    else if (command && key === 'z') (event.shiftKey ? hands.forth : hands.back)()
    else if (command && key === 'y') hands.forth()
    else return
    event.preventDefault()
    event.stopPropagation()
  }

  watch(map, (chart, before) => {
    before?.getCanvasContainer().removeEventListener('keydown', onKey, true)
    if (!chart) return
    chart.getCanvasContainer().addEventListener('keydown', onKey, true)
    chart.on('move', follow)
  }, { immediate: true })
  watch(hands.active, (on) => {
    if (!on) hide()
    if (on) map.value?.keyboard.disable()
    else map.value?.keyboard.enable()
    if (on) map.value?.doubleClickZoom.disable()
    else map.value?.doubleClickZoom.enable()
  })
  onScopeDispose(() => map.value?.getCanvasContainer().removeEventListener('keydown', onKey, true))
  return { place, onScreen, shown, holding, hide }
}
