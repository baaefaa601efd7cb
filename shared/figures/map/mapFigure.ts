import { geoDistance, geoGraticule } from 'd3-geo'
import { formatSigned } from '../../format/digits.ts'
import { formatLongitude } from '../../format/places.ts'
import { hatch } from '../hatch.ts'
import { figureWidth, paletteOf } from '../options.ts'
import { Canvas, pathThrough } from '../svg.ts'
import { shortened, textWidth } from '../textWidth.ts'
import { placeNames } from './labels.ts'
import { latitudeReach, outlineForDrawing } from './outline.ts'
import { partsOf, pathOf } from './path.ts'
import { mapViews } from './view.ts'
import type { GeoPermissibleObjects } from 'd3-geo'
import type { MultiPolygon as GeoMultiPolygon } from 'geojson'
import type { Outline } from '../../types/domain.ts'
import type { FigureOptions } from '../options.ts'
import type { Box, Figure, Point } from '../svg.ts'
import type { MapView } from './view.ts'

export interface MapRegion {
  name: string
  geometry: Outline
  /** Gt per year; its sign chooses loss or gain, null draws neither. */
  massGtPerYear: number | null
}

export interface MapData {
  regions: MapRegion[]
  /** Land as d3-geo reads it, e.g. from landOf(). */
  land: GeoPermissibleObjects
  /** East longitude that the pole drifts towards; drawn as an arrow from the north pole. */
  driftDegEast?: number | null
}

interface Shape { region: MapRegion, geometry: GeoMultiPolygon, view: MapView, box: Box }

/** Beyond this latitude an outline is shown on a polar inset, where it has its true shape. */
const insetLatitude = 60

/** Regions on an equal-area map of the world, with polar insets where outlines reach beyond 60°. */
export function mapFigure(data: MapData, options: FigureOptions): Figure {
  const width = figureWidth(options.width)
  const palette = paletteOf(options.theme)
  const canvas = new Canvas(palette)
  const reaches = data.regions.map(region => latitudeReach(region.geometry))
  const drift = data.driftDegEast ?? null
  const { views, height } = mapViews(width, {
    north: drift !== null || reaches.some(reach => reach.north > insetLatitude),
    south: reaches.some(reach => reach.south < -insetLatitude),
  })
  const geometries = data.regions.map(region => outlineForDrawing(region.geometry))
  for (const view of views) drawGround(canvas, view, data.land)
  for (const view of views) {
    data.regions.forEach((region, i) => drawRegion(canvas, view, region, geometries[i]!, options.id))
  }
  const arrow = drift === null ? null : drawDrift(canvas, views.find(view => view.kind === 'north')!, drift)
  const shapes = data.regions.flatMap((region, i): Shape[] => {
    const view = viewOf(views, reaches[i]!)
    const box = groundOf(view, geometries[i]!)
    return box ? [{ region, geometry: geometries[i]!, view, box }] : []
  })
  const bottom = drawNames(canvas, shapes, arrow, height, width)
  const key = drawKey(canvas, data.regions, drift, bottom, { width, id: options.id })
  return canvas.figure(width, Math.ceil(key), 'Map of the regions', describe(data.regions), hatch(`${options.id}-loss`, palette.loss, { pitch: 4, stroke: 1 }))
}

function viewOf(views: readonly MapView[], reach: { north: number, south: number }): MapView {
  const kind = reach.north > insetLatitude && reach.south > 0 ? 'north' : reach.south < -insetLatitude && reach.north < 0 ? 'south' : 'world'
  return views.find(view => view.kind === kind) ?? views[0]!
}

function drawGround(canvas: Canvas, view: MapView, land: GeoPermissibleObjects): void {
  const { palette } = canvas
  const isWorld = view.kind === 'world'
  if (isWorld) canvas.path(pathOf(view.projection, { type: 'Sphere' }), { fill: palette.sea, stroke: palette.soft, 'stroke-width': 0.75 })
  else canvas.add('circle', { ...circleOf(view), fill: palette.sea })
  canvas.path(pathOf(view.projection, land, 0.7), { 'fill': palette.land, 'stroke': palette.soft, 'stroke-width': 0.4, 'stroke-opacity': 0.7 })
  const graticule = geoGraticule().step([30, isWorld ? 30 : 20])()
  canvas.path(pathOf(view.projection, graticule, 2), { 'stroke': palette.soft, 'stroke-width': 0.5, 'stroke-opacity': 0.35 })
  if (!isWorld) canvas.add('circle', { ...circleOf(view), fill: 'none', stroke: palette.soft, 'stroke-width': 0.75 })
}

function circleOf({ box }: MapView) {
  return { cx: box.x + box.width / 2, cy: box.y + box.height / 2, r: Math.min(box.width, box.height) / 2 - 1 }
}

function colourOf(canvas: Canvas, region: MapRegion): string {
  const { palette } = canvas
  if (!region.massGtPerYear) return palette.ink
  return region.massGtPerYear > 0 ? palette.gain : palette.loss
}

function drawRegion(canvas: Canvas, view: MapView, region: MapRegion, geometry: GeoMultiPolygon, id: string): void {
  const box = groundOf(view, geometry)
  if (!box) return
  const colour = colourOf(canvas, region)
  const mass = region.massGtPerYear ?? 0
  const d = pathOf(view.projection, geometry, 0.3)
  canvas.path(d, { 'fill': colour, 'fill-opacity': mass > 0 ? 0.4 : 0.25 })
  if (mass < 0) canvas.path(d, { fill: `url(#${id}-loss)` })
  canvas.path(d, { 'stroke': colour, 'stroke-width': 1.25, 'stroke-linejoin': 'round' })
  if (Math.max(box.width, box.height) < 7) drawMark(canvas, box.x + box.width / 2, box.y + box.height / 2, mass, colour)
}

/** A region too small to be seen: a triangle that points down for loss, up for gain. */
function drawMark(canvas: Canvas, x: number, y: number, mass: number, colour: string): void {
  const up = mass > 0 ? -1 : 1
  canvas.path(pathThrough([[x - 5, y - 4 * up], [x + 5, y - 4 * up], [x, y + 5 * up]], true), { fill: colour, stroke: canvas.palette.paper, 'stroke-width': 1 })
}

/** Box of the largest part of a shape on a view; null where it lies outside. */
function groundOf(view: MapView, geometry: GeoMultiPolygon): Box | null {
  if (view.kind !== 'world' && !touchesInset(view, geometry)) return null
  return partsOf(view.projection, geometry).reduce<Box | null>(
    (largest, box) => !largest || box.width * box.height > largest.width * largest.height ? box : largest, null)
}

function touchesInset(view: MapView, geometry: GeoMultiPolygon): boolean {
  const pole: [number, number] = [0, view.kind === 'north' ? 90 : -90]
  return geometry.coordinates.some(rings => rings[0]!.some(point => geoDistance([point[0]!, point[1]!], pole) < 41 * Math.PI / 180))
}

function drawArrow(canvas: Canvas, [x0, y0]: Point, [x, y]: Point): void {
  const { palette } = canvas
  const length = Math.hypot(x - x0, y - y0)
  const [dx, dy] = [(x - x0) / length, (y - y0) / length]
  canvas.line(x0, y0, x - dx * 6, y - dy * 6, palette.model, { 'stroke-width': 2.5 })
  canvas.path(pathThrough([[x, y], [x - dx * 10 - dy * 4.5, y - dy * 10 + dx * 4.5], [x - dx * 10 + dy * 4.5, y - dy * 10 - dx * 4.5]], true), { fill: palette.model })
}

function drawDrift(canvas: Canvas, view: MapView, degrees: number): Box[] {
  const { cx, cy, r } = circleOf(view)
  const angle = degrees * Math.PI / 180
  const [dx, dy] = [Math.cos(angle), -Math.sin(angle)]
  const [x, y] = [cx + dx * r * 0.5, cy + dy * r * 0.5]
  drawArrow(canvas, [cx, cy], [x, y])
  // Names keep off the arrow, which is told by the key.
  return [0.2, 0.5, 0.8].map(part => ({ x: cx + (x - cx) * part - 5, y: cy + (y - cy) * part - 5, width: 10, height: 10 }))
}

/** Where names of a view may stand: round a polar inset also on the free ground beside it. */
function frameOf({ kind, box }: MapView, width: number): Box {
  if (kind === 'world') return { ...box, x: 0 }
  const [left, right] = [Math.max(0, box.x - 60), Math.min(width, box.x + box.width + 60)]
  return { x: left, y: box.y, width: right - left, height: box.height }
}

function drawNames(canvas: Canvas, shapes: readonly Shape[], arrow: Box[] | null, height: number, width: number): number {
  const { palette } = canvas
  const names = shapes.map(({ region, view, box }) => ({
    text: shortened(region.name, Math.min(220, view.box.width * (view.kind === 'world' ? 0.75 : 0.95)), 12),
    box,
    frame: frameOf(view, width),
  }))
  const placed = placeNames(names, arrow ?? [])
  placed.forEach((place, i) => {
    if (place?.leader) canvas.line(...place.leader[0], ...place.leader[1], palette.ink, { 'stroke-width': 0.75 })
    if (place) canvas.text(names[i]!.text, place.x, place.y, { halo: palette.paper })
  })
  const missing = shapes.filter((_, i) => !placed[i]).map(({ region }) => region)
  missing.forEach((region, i) => {
    const base = height + 18 + i * 20
    drawMark(canvas, 8, base - 4, region.massGtPerYear ?? 0, colourOf(canvas, region))
    canvas.text(shortened(region.name, width - 22, 12), 20, base)
  })
  return height + missing.length * 20 + (missing.length ? 4 : 0)
}

function drawKey(canvas: Canvas, regions: readonly MapRegion[], drift: number | null, top: number, { width, id }: { width: number, id: string }): number {
  const { palette } = canvas
  const entries = [
    regions.some(region => (region.massGtPerYear ?? 0) < 0) ? { text: 'mass lost', mark: 'loss' as const } : null,
    regions.some(region => (region.massGtPerYear ?? 0) > 0) ? { text: 'mass gained', mark: 'gain' as const } : null,
    drift === null ? null : { text: `drift of the pole, to ${formatLongitude(drift)}`, mark: 'drift' as const },
  ].filter(entry => entry !== null)
  let [x, base] = [2, top + 20]
  for (const { text, mark } of entries) {
    const needed = 22 + textWidth(text, 12)
    if (x > 2 && x + needed > width) [x, base] = [2, base + 20]
    const box = { x, y: base - 10, width: 16, height: 11 }
    if (mark === 'drift') drawArrow(canvas, [x, base - 4], [x + 17, base - 4])
    else {
      const colour = palette[mark]
      canvas.rect(box, { 'fill': colour, 'fill-opacity': mark === 'loss' ? 0.25 : 0.4 })
      canvas.rect(box, { fill: mark === 'loss' ? `url(#${id}-loss)` : 'none', stroke: colour })
    }
    canvas.text(text, x + 22, base, { fill: palette.soft })
    x += needed + 18
  }
  const source = 'Equal-area. Coast: Natural Earth'
  if (x + textWidth(source, 11) < width) canvas.text(source, width, base, { size: 11, anchor: 'end', fill: palette.soft })
  return base + 6
}

function describe(regions: readonly MapRegion[]): string {
  return regions.map(({ name, massGtPerYear }) => massGtPerYear === null ? name : `${name} ${formatSigned(massGtPerYear, 1)} Gt per year`).join('; ') || 'No regions'
}
