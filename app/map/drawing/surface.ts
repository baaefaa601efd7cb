import type { Position } from '#shared/types/domain'

export interface Point { x: number, y: number }

/** A pointer on a surface: where, by which hand, and `keep` so that the surface does not take the gesture for its own. */
export interface PointerAt {
  point: Point
  touch: boolean
  /** Set freely, without snapping. */
  free: boolean
  fingers: number
  keep: () => void
}

/** What is done to a surface with mouse or touch. */
export interface Gestures {
  press: (at: PointerAt) => void
  move: (at: PointerAt) => void
  click: (at: PointerAt) => void
  twice: (at: PointerAt) => void
  leave: () => void
}

/** What one draws on: the map, or the view of a pole. Points are pixels from its upper left corner. */
export interface Surface {
  /** Takes the focus and the keys. */
  element: HTMLElement | SVGElement
  size: () => { width: number, height: number }
  /** Null where the place is out of sight, behind the globe or beyond the view. */
  toScreen: (place: Position) => Point | null
  /** Null beside the Earth. Longitude within ±180°. */
  toPlace: (point: Point) => Position | null
  panBy: (dx: number, dy: number) => void
  closer: () => void
  farther: () => void
  setPointer: (shape: string) => void
  /** Whether keys and double clicks belong to drawing. */
  engage: (on: boolean) => void
  /** Both give what ends them. */
  listen: (gestures: Gestures) => () => void
  onView: (follow: () => void) => () => void
}
