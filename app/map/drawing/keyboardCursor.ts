import { onScopeDispose, ref, shallowRef, watch, type Ref, type ShallowRef } from 'vue'
import type { Position } from '#shared/types/domain'
import { insertVertex, moveAll, moveVertex } from './draft'
import { handleAt } from './handles'
import type { Hands } from './hands'
import type { Surface } from './surface'

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
 * Drawing by keys on the focused map or another surface: arrows move a crosshair, Enter sets a vertex (on the first one it finishes, a second time
 * in one place too), Backspace takes the last back. While editing, Enter picks a vertex or the middle of an edge up and sets it down.
 */
export function keyboardCursor(surface: Readonly<Ref<Surface | null>>, hands: Hands): KeyboardCursor {
  const place = shallowRef<Position | null>(null)
  const onScreen = shallowRef<{ x: number, y: number } | null>(null)
  const shown = ref(false)
  const holding = ref(false)

  const hide = (): void => {
    shown.value = holding.value = false
    place.value = onScreen.value = null
  }
  const follow = (): void => {
    if (place.value && surface.value) onScreen.value = surface.value.toScreen(place.value)
  }

  const go = (sheet: Surface, [dx, dy]: [number, number], pixels: number): void => {
    const { width, height } = sheet.size()
    const from = (place.value && sheet.toScreen(place.value)) ?? { x: width / 2, y: height / 2 }
    const to = shown.value ? { x: from.x + dx * pixels, y: from.y + dy * pixels } : from
    const next = sheet.toPlace(to)
    shown.value = true
    if (next) place.value = next
    follow()
    const snap = onScreen.value ? hands.snapAt(sheet, onScreen.value, false) : null
    if (holding.value && hands.chosen.value && place.value) {
      hands.underway.value = snap ? moveVertex(hands.draft.value, hands.chosen.value, snap.place, true) : moveVertex(hands.draft.value, hands.chosen.value, place.value)
    }
    const beside = to.x < margin || to.y < margin || to.x > width - margin || to.y > height - margin
    if (place.value && (beside || !next)) sheet.panBy(dx * 120, dy * 120)
    follow()
  }

  /** The whole outline by a step of the screen, taken by its first vertex in sight. */
  const haul = (sheet: Surface, [dx, dy]: [number, number], pixels: number): void => {
    const grip = hands.draft.value.rings.flat().find(vertex => sheet.toScreen(vertex))
    const at = grip && sheet.toScreen(grip)
    const to = at && sheet.toPlace({ x: at.x + dx * pixels, y: at.y + dy * pixels })
    if (to) hands.set(moveAll(hands.draft.value, grip, to))
  }

  const setHere = (sheet: Surface): void => {
    if (!place.value || !onScreen.value) return hands.finish()
    const ring = hands.draft.value.rings.at(-1) ?? []
    const near = (vertex: Position | undefined): boolean => {
      const screen = vertex && sheet.toScreen(vertex)
      return !!screen && Math.hypot(screen.x - onScreen.value!.x, screen.y - onScreen.value!.y) < reach
    }
    const snap = hands.snapAt(sheet, onScreen.value, false)
    if (ring.length >= 3 && (near(ring[0]) || near(ring.at(-1)))) hands.finish()
    else if (!near(ring.at(-1))) hands.add(snap?.place ?? place.value, snap)
  }

  const pickOrDrop = (sheet: Surface): void => {
    if (holding.value) {
      if (hands.underway.value) hands.set(hands.underway.value)
      holding.value = false
      return
    }
    const handle = onScreen.value && handleAt(sheet, hands.draft.value, onScreen.value, reach)
    if (!handle) return
    hands.chosen.value = handle.at
    if (handle.kind === 'middle') {
      hands.set(insertVertex(hands.draft.value, handle.at, handle.place))
      hands.chosen.value = { ring: handle.at.ring, vertex: handle.at.vertex + 1 }
    }
    holding.value = true
  }

  const enter = (sheet: Surface): void => {
    if (hands.state.value === 'drawing') setHere(sheet)
    else pickOrDrop(sheet)
  }

  const onKey = (event: KeyboardEvent): void => {
    const sheet = surface.value
    if (!sheet || !hands.active.value) return
    const command = event.ctrlKey || event.metaKey
    const key = event.key.toLowerCase()
    if (steps[event.key] && !command && hands.moving.value) haul(sheet, steps[event.key]!, event.shiftKey ? stepPixels.shift : event.altKey ? stepPixels.alt : stepPixels.plain)
    else if (steps[event.key] && !command) go(sheet, steps[event.key]!, event.shiftKey ? stepPixels.shift : event.altKey ? stepPixels.alt : stepPixels.plain)
    else if (event.key === 'Enter') enter(sheet)
    else if (event.key === 'Escape') {
      holding.value = false
      hands.escape()
    }
    else if (event.key === 'Backspace' || event.key === 'Delete') hands.remove()
    else if ((event.key === '+' || event.key === '=') && !command) sheet.closer()
    else if (event.key === '-' && !command) sheet.farther()
    else if (command && key === 'z') (event.shiftKey ? hands.forth : hands.back)()
    else if (command && key === 'y') hands.forth()
    else return
    event.preventDefault()
    event.stopPropagation()
  }

  let unfollow: (() => void) | null = null
  watch(surface, (sheet, before) => {
    before?.element.removeEventListener('keydown', onKey as EventListener, true)
    unfollow?.()
    unfollow = null
    hide()
    if (!sheet) return
    sheet.element.addEventListener('keydown', onKey as EventListener, true)
    unfollow = sheet.onView(follow)
    sheet.engage(hands.active.value)
  }, { immediate: true })
  watch(hands.active, (on) => {
    if (!on) hide()
    surface.value?.engage(on)
  })
  onScopeDispose(() => {
    surface.value?.element.removeEventListener('keydown', onKey as EventListener, true)
    unfollow?.()
  })
  return { place, onScreen, shown, holding, hide }
}
