import { hatch } from '../hatch.ts'
import { pathThrough } from '../svg.ts'
import { shortened } from '../textWidth.ts'
import { frameOf, groundOf, viewOf } from './ground.ts'
import { placeNames } from './labels.ts'
import { outlineForDrawing } from './outline.ts'
import { pathOf } from './path.ts'
import type { MultiPolygon as GeoMultiPolygon } from 'geojson'
import type { Outline } from '../../types/domain.ts'
import type { Box, Canvas } from '../svg.ts'
import type { MapView } from './view.ts'

export interface MapRegion {
  name: string
  geometry: Outline
  /** Gt per year; its sign chooses loss or gain, null draws neither. */
  massGtPerYear: number | null
}

/** A region where its name belongs: on the view that shows its true shape. */
interface RegionShape { region: MapRegion, view: MapView, box: Box }

/** Definitions that `drawRegions` needs: the hatch of what is lost. */
export function regionDefinitions(canvas: Canvas, id: string): string {
  return hatch(`${id}-loss`, canvas.palette.loss, { pitch: 4, stroke: 1 })
}

/** Draws regions on every view and answers with where their names belong. */
export function drawRegions(canvas: Canvas, views: readonly MapView[], regions: readonly MapRegion[], id: string): RegionShape[] {
  const geometries = regions.map(region => outlineForDrawing(region.geometry))
  for (const view of views) regions.forEach((region, i) => drawRegion(canvas, view, region, geometries[i]!, id))
  return regions.flatMap((region, i): RegionShape[] => {
    const view = viewOf(views, region.geometry)
    const box = groundOf(view, geometries[i]!)
    return box ? [{ region, view, box }] : []
  })
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
  canvas.path(pathThrough([[x - 5, y - 4 * up], [x + 5, y - 4 * up], [x, y + 5 * up]], true), { 'fill': colour, 'stroke': canvas.palette.paper, 'stroke-width': 1 })
}

/** Names of regions off `obstacles` and off one another; those without room stand in a list below `height`. Answers with the lowest point. */
export function drawNames(canvas: Canvas, shapes: readonly RegionShape[], obstacles: readonly Box[], height: number, width: number): number {
  const { palette } = canvas
  const names = shapes.map(({ region, view, box }) => ({
    text: shortened(region.name, Math.min(220, view.box.width * (view.kind === 'world' ? 0.75 : 0.95)), 12),
    box,
    frame: frameOf(view, width),
  }))
  const placed = placeNames(names, obstacles)
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
