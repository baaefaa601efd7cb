import { geoDistance, geoGraticule } from 'd3-geo'
import { latitudeReach } from './outline.ts'
import { partsOf, pathOf } from './path.ts'
import type { GeoPermissibleObjects } from 'd3-geo'
import type { MultiPolygon as GeoMultiPolygon } from 'geojson'
import type { Outline } from '../../types/domain.ts'
import type { Box, Canvas } from '../svg.ts'
import type { MapView } from './view.ts'

/** Beyond this latitude an outline is shown on a polar inset, where it has its true shape. */
export const insetLatitude = 60

/** The insets that outlines call for. */
export function insetsFor(outlines: readonly Outline[]): { north: boolean, south: boolean } {
  const reaches = outlines.map(latitudeReach)
  return { north: reaches.some(reach => reach.north > insetLatitude), south: reaches.some(reach => reach.south < -insetLatitude) }
}

/** The view on which an outline has its true shape. */
export function viewOf(views: readonly MapView[], outline: Outline): MapView {
  const reach = latitudeReach(outline)
  const kind = reach.north > insetLatitude && reach.south > 0 ? 'north' : reach.south < -insetLatitude && reach.north < 0 ? 'south' : 'world'
  return views.find(view => view.kind === kind) ?? views[0]!
}

/** The sea of a view: the whole sphere, or the disc of an inset. */
export function drawSea(canvas: Canvas, view: MapView): void {
  const { palette } = canvas
  if (view.kind === 'world') canvas.path(pathOf(view.projection, { type: 'Sphere' }), { 'fill': palette.sea, 'stroke': palette.soft, 'stroke-width': 0.75 })
  else canvas.add('circle', { ...circleOf(view), fill: palette.sea })
}

/** Land with its coast, the graticule over it and the rim of an inset. */
export function drawLand(canvas: Canvas, view: MapView, land: GeoPermissibleObjects): void {
  const { palette } = canvas
  const isWorld = view.kind === 'world'
  canvas.path(pathOf(view.projection, land, 0.7), { 'fill': palette.land, 'stroke': palette.soft, 'stroke-width': 0.4, 'stroke-opacity': 0.7 })
  const graticule = geoGraticule().step([30, isWorld ? 30 : 20])()
  canvas.path(pathOf(view.projection, graticule, 2), { 'stroke': palette.soft, 'stroke-width': 0.5, 'stroke-opacity': 0.35 })
  if (!isWorld) canvas.add('circle', { ...circleOf(view), 'fill': 'none', 'stroke': palette.soft, 'stroke-width': 0.75 })
}

/** The rim of an inset. */
export function circleOf({ box }: MapView) {
  return { cx: box.x + box.width / 2, cy: box.y + box.height / 2, r: Math.min(box.width, box.height) / 2 - 1 }
}

/** Box of the largest part of a shape on a view; null where it lies outside. */
export function groundOf(view: MapView, geometry: GeoMultiPolygon): Box | null {
  if (view.kind !== 'world' && !touchesInset(view, geometry)) return null
  return partsOf(view.projection, geometry).reduce<Box | null>(
    (largest, box) => !largest || box.width * box.height > largest.width * largest.height ? box : largest, null)
}

function touchesInset(view: MapView, geometry: GeoMultiPolygon): boolean {
  const pole: [number, number] = [0, view.kind === 'north' ? 90 : -90]
  return geometry.coordinates.some(rings => rings[0]!.some(point => geoDistance([point[0]!, point[1]!], pole) < 41 * Math.PI / 180))
}

/** Where names of a view may stand: round a polar inset also on the free ground beside it. */
export function frameOf({ kind, box }: MapView, width: number): Box {
  if (kind === 'world') return { ...box, x: 0 }
  const [left, right] = [Math.max(0, box.x - 60), Math.min(width, box.x + box.width + 60)]
  return { x: left, y: box.y, width: right - left, height: box.height }
}
