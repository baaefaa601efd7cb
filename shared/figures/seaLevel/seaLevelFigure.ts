import { circleOf, drawLand, drawSea, insetsFor } from '../map/ground.ts'
import { drawNames, drawRegions, regionDefinitions } from '../map/regionMarks.ts'
import { mapViews } from '../map/view.ts'
import { figureWidth, paletteOf } from '../options.ts'
import { Canvas, element, pathThrough } from '../svg.ts'
import { levelText, lineKind, lineStyle } from './lineStyle.ts'
import { insideBox, insideCircle, labelLines } from './lineLabels.ts'
import { drawPlaces } from './places.ts'
import { drawKey } from './seaLevelKey.ts'
import type { GeoPermissibleObjects } from 'd3-geo'
import type { FigureOptions } from '../options.ts'
import type { MapRegion } from '../map/regionMarks.ts'
import type { MapView } from '../map/view.ts'
import type { Box, Figure, Point } from '../svg.ts'
import type { Position } from '../../types/domain.ts'
import type { Zone } from './contourLines.ts'
import type { MapPlace } from './places.ts'
import type { SeaLevelContours } from './seaLevelContours.ts'

export interface SeaLevelMapData {
  contours: SeaLevelContours
  /** Unit of the lines, e.g. `mm per year`. */
  unit: string
  regions: MapRegion[]
  /** Places that values were asked for, by the number they have in their table. */
  places?: MapPlace[]
  /** Land as d3-geo reads it, e.g. from landOf(). */
  land: GeoPermissibleObjects
  /** What the map shows, in words. */
  description: string
}

/**
 * Where the sea rises and falls: lines of equal change on an equal-area map, solid where it rises, dashed where it falls, heavier
 * at zero, in the model's colour at the mean; polar insets where outlines reach beyond 60°.
 */
export function seaLevelFigure(data: SeaLevelMapData, options: FigureOptions): Figure {
  const width = figureWidth(options.width)
  const canvas = new Canvas(paletteOf(options.theme))
  const { views, height } = mapViews(width, insetsFor(data.regions.map(region => region.geometry)))
  for (const view of views) {
    drawSea(canvas, view)
    drawZones(canvas, view, data.contours, options.id)
    drawLines(canvas, view, data.contours, options.id)
    drawLand(canvas, view, data.land)
  }
  const shapes = drawRegions(canvas, views, data.regions, options.id)
  const places = drawPlaces(canvas, views, data.places ?? [])
  const bottom = drawNames(canvas, shapes, places, height, width)
  for (const view of views) drawLabels(canvas, view, data.contours, places)
  const end = drawKey(canvas, data, bottom, width)
  const clips = views.filter(({ kind }) => kind !== 'world').map(view => element('clipPath', { id: `${options.id}-${view.kind}` }, element('circle', circleOf(view))))
  return canvas.figure(width, Math.ceil(end), 'Map of the change of sea level', data.description, regionDefinitions(canvas, options.id) + clips.join(''))
}

const clipOf = (view: MapView, id: string) => view.kind === 'world' ? undefined : `url(#${id}-${view.kind})`

/** Lines are drawn point by point, as their points lie close: those that end at the antimeridian end at the edge of the map. */
function drawLines(canvas: Canvas, view: MapView, { lines, mean }: SeaLevelContours, id: string): void {
  const { cx, cy, r } = circleOf(view)
  const near = ([x, y]: Point) => view.kind === 'world' || Math.hypot(x - cx, y - cy) < 1.15 * r
  for (const { level, points } of lines) {
    const runs: Point[][] = [[]]
    for (const position of points) {
      const point = project(view, position, 1.5)
      if (!near(point)) runs.push([])
      else runs.at(-1)!.push(point)
    }
    const d = runs.filter(run => run.length > 1).map(run => pathThrough(run)).join('')
    canvas.path(d, { ...lineStyle(canvas.palette, lineKind(level, mean)), 'clip-path': clipOf(view, id) })
  }
}

/** Tints of what falls and of what rises beyond the mean; lines and key say the same without colour. */
function drawZones(canvas: Canvas, view: MapView, { low, high }: SeaLevelContours, id: string): void {
  const fill = (zone: Zone, colour: string) => canvas.path(zonePath(view, zone), {
    'fill': colour, 'fill-opacity': 0.16, 'fill-rule': 'evenodd', 'clip-path': clipOf(view, id),
  })
  fill(low, canvas.palette.loss)
  fill(high, canvas.palette.gain)
}

/** Rings drawn point by point: their corners lie on the edge of the map and not on the sphere. On an inset, far ground is held just outside it. */
function zonePath(view: MapView, { rings }: Zone): string {
  return rings.map((ring) => {
    const points: Point[] = []
    for (const position of ring) {
      const point = project(view, position, 1.5)
      const last = points.at(-1)
      if (!last || Math.hypot(point[0] - last[0], point[1] - last[1]) > 0.5) points.push(point)
    }
    return points.length > 2 ? pathThrough(points, true) : ''
  }).join('')
}

/** A position on a view; on an inset no farther from its middle than `reach` radii. */
function project(view: MapView, [lon, lat]: Position, reach: number): Point {
  // The pole opposite an inset has no place on it.
  const [x, y] = view.projection([lon, Math.min(89.9, Math.max(-89.9, lat))])!
  if (view.kind === 'world') return [x, y]
  const { cx, cy, r } = circleOf(view)
  const distance = Math.hypot(x - cx, y - cy)
  const factor = distance > reach * r ? reach * r / distance : 1
  return [cx + (x - cx) * factor, cy + (y - cy) * factor]
}

function drawLabels(canvas: Canvas, view: MapView, { lines, mean }: SeaLevelContours, places: readonly Box[]): void {
  const isWorld = view.kind === 'world'
  const circle = circleOf(view)
  const size = 11
  const drawn = lines.map(line => ({
    text: levelText(line.level, mean),
    level: line.level,
    open: line.open,
    points: line.points.map((position): Point | null => {
      const point = project(view, position, 1.5)
      return isWorld || Math.hypot(point[0] - circle.cx, point[1] - circle.cy) < circle.r ? point : null
    }),
  }))
  const labels = labelLines(drawn, [...canvas.labels, ...places], {
    size,
    inside: isWorld ? insideBox({ ...view.box, x: view.box.x + 4, width: view.box.width - 8 }) : insideCircle({ ...circle, r: circle.r - 2 }),
    first: mean === null ? [0] : [mean, 0],
    apart: view.box.width * 0.3,
  })
  for (const { text, level, x, y } of labels) {
    const isMean = level === mean
    canvas.text(text, x, y, { size, anchor: 'middle', halo: canvas.palette.paper, fill: isMean ? canvas.palette.model : canvas.palette.ink })
  }
}
