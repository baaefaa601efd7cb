import type { Gestures, PointerAt, Surface } from '../drawing/surface'
import { fromPlane, toPlane, type PolarPlane } from './polarPlane'

interface Setting { element: SVGSVGElement, plane: () => PolarPlane, closer: () => void, farther: () => void }

/** The view of a pole as something to draw on. `follow` is to be called when the view changes. */
export function polarSurface({ element, plane, closer, farther }: Setting): Surface & { follow: () => void } {
  const followers = new Set<() => void>()
  return {
    element,
    size: () => ({ width: plane().width, height: plane().height }),
    toScreen: (place) => {
      const { width, height } = plane()
      const at = toPlane(plane(), place)
      return at.x < -width || at.y < -height || at.x > 2 * width || at.y > 2 * height ? null : at
    },
    toPlace: point => fromPlane(plane(), point),
    // The pole stays in the middle.
    panBy: () => {},
    closer,
    farther,
    setPointer: (shape) => { element.style.cursor = shape },
    engage: () => {},
    listen: gestures => listen(element, gestures),
    onView: (follow) => {
      followers.add(follow)
      return () => followers.delete(follow)
    },
    follow: () => { for (const follow of followers) follow() },
  }
}

function listen(element: SVGSVGElement, gestures: Gestures): () => void {
  const fingers = new Set<number>()
  const pointerOf = (event: MouseEvent | PointerEvent): PointerAt => {
    const { left, top } = element.getBoundingClientRect()
    return {
      point: { x: event.clientX - left, y: event.clientY - top },
      touch: 'pointerType' in event && event.pointerType === 'touch', free: event.altKey, fingers: Math.max(1, fingers.size), keep: () => {},
    }
  }
  const lift = (event: PointerEvent): void => { fingers.delete(event.pointerId) }
  const on: [string, (event: never) => void][] = [
    ['pointerdown', (event: PointerEvent) => {
      fingers.add(event.pointerId)
      gestures.press(pointerOf(event))
    }],
    ['pointermove', (event: PointerEvent) => gestures.move(pointerOf(event))],
    ['click', (event: MouseEvent) => gestures.click(pointerOf(event))],
    ['dblclick', (event: MouseEvent) => gestures.twice(pointerOf(event))],
    ['pointerleave', () => gestures.leave()],
  ]
  for (const [name, hear] of on) element.addEventListener(name, hear as EventListener)
  for (const name of ['pointerup', 'pointercancel'] as const) window.addEventListener(name, lift)
  return () => {
    for (const [name, hear] of on) element.removeEventListener(name, hear as EventListener)
    for (const name of ['pointerup', 'pointercancel'] as const) window.removeEventListener(name, lift)
  }
}
