import type { Map as Chart } from 'maplibre-gl'
import { arcDeg } from '#shared/geo/greatCircle'
import { polygonsOf } from '#shared/geo/parts'
import type { Outline, Position } from '#shared/types/domain'

export const tilePixels = 512
/** Latitude at which the Mercator projection's square ends. */
export const mercatorEdgeDeg = 85.0511287798066
/** Half the field of view of the camera, as a part of the height: 0.5 / tan(36.87° / 2) = 1.5. */
export const cameraHeights = 1.5
/** Part of the smaller side of the map that what is shown may fill. */
const fill = 0.43

/** The map's size in pixels; one pixel while the page has no room for it, so that nothing divides by zero. */
export function sizeOf(map: Chart): { width: number, height: number } {
  const { clientWidth, clientHeight } = map.getContainer()
  return { width: Math.max(1, clientWidth), height: Math.max(1, clientHeight) }
}

/** Part of the equator's scale that a zoom means at a centre latitude; beyond the Mercator square's edge the globe keeps its size. */
function zoomScale(latitudeDeg: number): number {
  return Math.cos(Math.min(mercatorEdgeDeg, Math.abs(latitudeDeg)) * Math.PI / 180)
}

/** Radius of the globe itself in pixels, seen from far away, at a zoom and centre latitude. */
export function globeRadius(zoom: number, latitudeDeg: number): number {
  return tilePixels * 2 ** zoom / (2 * Math.PI * zoomScale(latitudeDeg))
}

/** Radius of the globe's edge on the screen in pixels, the camera being near; null for the flat map. */
export function limbRadius(map: Chart): number | null {
  if (map.getProjection()?.type !== 'globe') return null
  const radius = globeRadius(map.getZoom(), map.getCenter().lat)
  const camera = cameraHeights * sizeOf(map).height
  const distance = camera + radius
  return camera * radius / Math.sqrt(distance * distance - radius * radius)
}

function wholeGlobeZoom(map: Chart): number {
  const { width, height } = sizeOf(map)
  const wanted = Math.min(width, height) * 0.465
  const camera = cameraHeights * height
  // limb = c r / √((c + r)² − r²) solved for r.
  const radius = wanted * (wanted + Math.hypot(wanted, camera)) / camera
  return Math.log2(radius * 2 * Math.PI * zoomScale(map.getCenter().lat) / tilePixels)
}

/** Zoom at which the whole Earth is in view: the globe with a margin, the flat map from edge to edge. */
export function wholeZoom(map: Chart): number {
  return map.getProjection()?.type === 'globe' ? wholeGlobeZoom(map) : Math.log2(sizeOf(map).width / tilePixels)
}

/** The longitude's copy that is nearest to the middle of the map. */
export function nearCentre(map: Chart, [lon, lat]: Position): Position {
  return [lon + 360 * Math.round((map.getCenter().lng - lon) / 360), lat]
}

/** Whether a place lies behind the globe's edge. */
function isHidden(map: Chart, place: Position): boolean {
  if (map.getProjection()?.type !== 'globe') return false
  const { lng, lat } = map.getCenter()
  const radius = globeRadius(map.getZoom(), lat)
  const edgeDeg = Math.acos(radius / (radius + cameraHeights * sizeOf(map).height)) * 180 / Math.PI
  return arcDeg([lng, lat], place) > edgeDeg
}

/** Where a place is on the screen; null behind the globe's edge. */
export function toScreen(map: Chart, place: Position): { x: number, y: number } | null {
  const [lng, lat] = nearCentre(map, place)
  if (isHidden(map, place)) return null
  const { x, y } = map.project([lng, lat])
  return { x, y }
}

/** The place under a point of the screen, longitude within ±180°; null beside the globe. */
export function toPlace(map: Chart, point: { x: number, y: number }): Position | null {
  const radius = limbRadius(map)
  if (radius !== null) {
    const { width, height } = sizeOf(map)
    if (Math.hypot(point.x - width / 2, point.y - height / 2) > radius - 1) return null
  }
  const { lng, lat } = map.unproject([point.x, point.y])
  return [lng - 360 * Math.floor((lng + 180) / 360), Math.max(-90, Math.min(90, lat))]
}

/** Centre and zoom that show all of some outlines about a centre; the whole globe where they are too far apart. */
export function viewOf(map: Chart, outlines: readonly Outline[]): { center: Position, zoom: number } | null {
  const places = outlines.flatMap(outline => polygonsOf(outline).flat(2))
  if (places.length === 0) return null
  const sum = [0, 0, 0]
  for (const [lon, lat] of places) {
    const [l, p] = [lon * Math.PI / 180, lat * Math.PI / 180]
    sum[0]! += Math.cos(p) * Math.cos(l)
    sum[1]! += Math.cos(p) * Math.sin(l)
    sum[2]! += Math.sin(p)
  }
  const latitude = Math.atan2(sum[2]!, Math.hypot(sum[0]!, sum[1]!)) * 180 / Math.PI
  const center: Position = [Math.atan2(sum[1]!, sum[0]!) * 180 / Math.PI, Math.max(-80, Math.min(80, latitude))]
  const reach = Math.max(1, ...places.map(place => arcDeg(center, place)))
  const { width, height } = sizeOf(map)
  const globe = map.getProjection()?.type === 'globe'
  const whole = wholeZoom(map) + (globe ? Math.log2(zoomScale(center[1]) / zoomScale(map.getCenter().lat)) : 0)
  if (reach > 60) return { center, zoom: whole }
  const radius = fill * Math.min(width, height) / Math.sin(reach * Math.PI / 180)
  const zoom = Math.log2(radius * 2 * Math.PI * zoomScale(center[1]) / tilePixels)
  return { center, zoom: Math.min(6.5, Math.max(whole, zoom - 0.6)) }
}
