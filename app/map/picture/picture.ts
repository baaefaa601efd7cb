import type { FeatureCollection } from 'geojson'
import type { Palette } from '#shared/design/tokens'
import type { Point } from '../drawing/surface'

/** What the page fills. */
export const sourceIds = ['overlay-lines', 'region-fills', 'overlap-fills', 'region-lines', 'region-labels', 'draft-fill', 'draft-lines', 'draft-handles'] as const
export type SourceId = typeof sourceIds[number]

/** Whose work a picture is. */
export type Painter = 'webgl' | 'canvas'

/** What is seen on the map: layers of WebGL, or the same on a plain canvas where a graphics processor is missing. */
export interface MapPicture {
  painter: Painter
  /** Takes the place of what the source held. */
  set: (source: SourceId, data: FeatureCollection) => void
  /** The region whose line is drawn heavier. */
  hover: (id: string | null) => void
  /** Colours of another theme. */
  repaint: (palette: Palette) => void
  /** The topmost region, or its label, under a point of the screen. */
  regionAt: (point: Point) => string | null
}
