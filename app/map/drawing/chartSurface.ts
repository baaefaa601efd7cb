import type { Map as Chart, MapMouseEvent, MapTouchEvent } from 'maplibre-gl'
import { toPlace, toScreen } from '../view'
import type { PointerAt, Surface } from './surface'

/** The map, globe or flat, as something to draw on. */
export function chartSurface(chart: Chart): Surface {
  return {
    element: chart.getCanvasContainer(),
    size: () => {
      const { clientWidth, clientHeight } = chart.getContainer()
      return { width: clientWidth, height: clientHeight }
    },
    toScreen: place => toScreen(chart, place),
    toPlace: point => toPlace(chart, point),
    panBy: (dx, dy) => { chart.panBy([dx, dy], { duration: 0 }) },
    closer: () => { chart.zoomIn() },
    farther: () => { chart.zoomOut() },
    setPointer: (shape) => { chart.getCanvas().style.cursor = shape },
    engage: (on) => {
      for (const handler of [chart.keyboard, chart.doubleClickZoom]) {
        if (on) handler.disable()
        else handler.enable()
      }
    },
    listen: (gestures) => {
      const on = {
        mousedown: (event: MapMouseEvent) => gestures.press(pointerOf(event)),
        touchstart: (event: MapTouchEvent) => gestures.press(pointerOf(event)),
        mousemove: (event: MapMouseEvent) => gestures.move(pointerOf(event)),
        touchmove: (event: MapTouchEvent) => gestures.move(pointerOf(event)),
        click: (event: MapMouseEvent) => gestures.click(pointerOf(event)),
        dblclick: (event: MapMouseEvent) => gestures.twice(pointerOf(event)),
        mouseout: () => gestures.leave(),
      } satisfies Partial<Record<keyof HTMLElementEventMap, unknown>>
      const names = Object.keys(on) as (keyof typeof on)[]
      for (const name of names) chart.on(name, on[name] as (event: unknown) => void)
      return () => { for (const name of names) chart.off(name, on[name] as (event: unknown) => void) }
    },
    onView: (follow) => {
      chart.on('move', follow)
      return () => chart.off('move', follow)
    },
  }
}

function pointerOf(event: MapMouseEvent | MapTouchEvent): PointerAt {
  const touch = 'touches' in event.originalEvent
  return {
    point: event.point, touch, free: event.originalEvent.altKey,
    fingers: touch ? (event as MapTouchEvent).points.length : 1,
    keep: () => event.preventDefault(),
  }
}
