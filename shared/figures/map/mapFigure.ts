import { formatSigned } from '../../format/digits.ts'
import { formatLongitude } from '../../format/places.ts'
import { figureWidth, paletteOf } from '../options.ts'
import { Canvas, pathThrough } from '../svg.ts'
import { textWidth } from '../textWidth.ts'
import { circleOf, drawLand, drawSea, insetsFor } from './ground.ts'
import { drawNames, drawRegions, regionDefinitions } from './regionMarks.ts'
import { mapViews } from './view.ts'
import type { GeoPermissibleObjects } from 'd3-geo'
import type { FigureOptions } from '../options.ts'
import type { Box, Figure, Point } from '../svg.ts'
import type { MapRegion } from './regionMarks.ts'
import type { MapView } from './view.ts'

export type { MapRegion } from './regionMarks.ts'

export interface MapData {
  regions: MapRegion[]
  /** Land as d3-geo reads it, e.g. from landOf(). */
  land: GeoPermissibleObjects
  /** East longitude that the pole drifts towards; drawn as an arrow from the north pole. */
  driftDegEast?: number | null
}

/** Regions on an equal-area map of the world, with polar insets where outlines reach beyond 60°. */
export function mapFigure(data: MapData, options: FigureOptions): Figure {
  const width = figureWidth(options.width)
  const canvas = new Canvas(paletteOf(options.theme))
  const drift = data.driftDegEast ?? null
  const insets = insetsFor(data.regions.map(region => region.geometry))
  const { views, height } = mapViews(width, { north: drift !== null || insets.north, south: insets.south })
  for (const view of views) {
    drawSea(canvas, view)
    drawLand(canvas, view, data.land)
  }
  const shapes = drawRegions(canvas, views, data.regions, options.id)
  const arrow = drift === null ? [] : drawDrift(canvas, views.find(view => view.kind === 'north')!, drift)
  const bottom = drawNames(canvas, shapes, arrow, height, width)
  const key = drawKey(canvas, data.regions, drift, bottom, { width, id: options.id })
  return canvas.figure(width, Math.ceil(key), 'Map of the regions', describe(data.regions), regionDefinitions(canvas, options.id))
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
