import type { Map as Chart } from 'maplibre-gl'
import { cameraHeights, globeRadius, limbRadius, mercatorEdgeDeg, sizeOf, tilePixels } from '../view'

/** The globe seen from near: rows of the turn to east, north and up of its middle, lengths in pixels. */
export interface GlobeCamera {
  kind: 'globe'
  width: number
  height: number
  /** Vertices nearer to one another than this many pixels are left out. */
  grain: number
  /** Nine numbers, a row for each axis. */
  turn: readonly number[]
  radius: number
  /** From the eye to the nearest point of the globe. */
  eye: number
  /** Places lie in sight where their part along up is above this. */
  horizon: number
  limb: number
}

/** The flat map: a place at (x, y) of the unit square of the Mercator projection stands at left + x·world, top + y·world, and again every `world`. */
export interface FlatCamera { kind: 'flat', width: number, height: number, grain: number, world: number, left: number, top: number }

export type Camera = GlobeCamera | FlatCamera

const finestGrain = 0.7

/** Where the map's camera stands now, for a canvas of `ratio` dots a pixel. Pitch and bearing are always zero here. */
export function cameraOf(map: Chart, ratio = 1): Camera {
  const grain = finestGrain / ratio
  const { width, height } = sizeOf(map)
  const { lng, lat } = map.getCenter()
  if (map.getProjection()?.type !== 'globe') {
    const world = tilePixels * 2 ** map.getZoom()
    return { kind: 'flat', width, height, grain, world, left: width / 2 - world * mercatorX(lng), top: height / 2 - world * mercatorY(lat) }
  }
  const [l, p] = [lng * Math.PI / 180, lat * Math.PI / 180]
  const radius = globeRadius(map.getZoom(), lat)
  const eye = cameraHeights * height
  return {
    kind: 'globe', width, height, grain, radius, eye,
    turn: [-Math.sin(l), Math.cos(l), 0, -Math.sin(p) * Math.cos(l), -Math.sin(p) * Math.sin(l), Math.cos(p), Math.cos(p) * Math.cos(l), Math.cos(p) * Math.sin(l), Math.sin(p)],
    horizon: radius / (radius + eye),
    limb: limbRadius(map)!,
  }
}

/** Pixels of a radian of arc on the globe, or of the unit of the Mercator square, at most. */
export function scaleOf(camera: Camera): number {
  return camera.kind === 'globe' ? camera.radius : camera.world
}

export function mercatorX(lonDeg: number): number {
  return (lonDeg + 180) / 360
}

/** Latitudes beyond the square's edge stand on it. */
export function mercatorY(latDeg: number): number {
  const sin = Math.sin(Math.max(-mercatorEdgeDeg, Math.min(mercatorEdgeDeg, latDeg)) * Math.PI / 180)
  return 0.5 - Math.log((1 + sin) / (1 - sin)) / (4 * Math.PI)
}
