import { geoAzimuthalEqualArea, geoEqualEarth } from 'd3-geo'
import { formatNumber } from '../../format/numbers.ts'
import { figureWidth, paletteOf } from '../options.ts'
import { hatch } from '../hatch.ts'
import { Canvas, pathThrough } from '../svg.ts'
import { textWidth } from '../textWidth.ts'
import { classesOf } from './gridClasses.ts'
import { outlineForDrawing } from './outline.ts'
import { pathOf } from './path.ts'
import type { GeoPermissibleObjects, GeoProjection } from 'd3-geo'
import type { Outline } from '../../types/domain.ts'
import type { FigureOptions } from '../options.ts'
import type { Figure, Point } from '../svg.ts'
import type { GridClasses } from './gridClasses.ts'

/** Heights on a grid: rows from the south, columns from the west; null where there is no value. */
export interface GridCells { latEdgesDeg: readonly number[], westDeg: number, stepDeg: number, columns: number, values: readonly (number | null)[] }

export interface GridMapData {
  cells: GridCells
  unit: string
  regions: { name: string, geometry: Outline }[]
  land: GeoPermissibleObjects
  /** What the map shows, e.g. the month. */
  title: string
  /** Value that the strongest colour begins at, so that months can be compared; by the cells themselves unless told. */
  most?: number
}

/** A part of the Earth narrower than this is drawn about its middle. */
const REGIONAL_DEG = 110

/** Heights of one month as cells in classes of colour, with coasts and outlines; equal-area. Loss is hatched. */
export function gridFigure(data: GridMapData, options: FigureOptions): Figure {
  const width = figureWidth(options.width)
  const canvas = new Canvas(paletteOf(options.theme))
  const { palette } = canvas
  const { projection, height } = viewOf(data.cells, width)
  canvas.rect({ x: 0, y: 0, width, height }, { fill: palette.sea })
  canvas.path(pathOf(projection, data.land, 0.7), { fill: palette.land })
  const classes = classesOf(data.cells.values, data.most)
  const paths = cellPaths(data.cells, classes, projection)
  // Paper under the cells: neither sea nor land may tint their colours.
  canvas.path(paths.join(''), { 'fill': palette.paper, 'stroke': palette.paper, 'stroke-width': 0.4 })
  paths.forEach((d, k) => canvas.path(d, styleOf(canvas, classes, k)))
  const losses = paths.filter((_, k) => k < classes.each).join('')
  canvas.path(losses, { fill: `url(#${options.id}-loss)` })
  canvas.path(pathOf(projection, data.land, 0.7), { 'stroke': palette.ink, 'stroke-width': 0.6, 'stroke-opacity': 0.6 })
  for (const { geometry } of data.regions) canvas.path(pathOf(projection, outlineForDrawing(geometry), 0.3), { 'stroke': palette.ink, 'stroke-width': 1.5, 'stroke-linejoin': 'round' })
  const bottom = drawKey(canvas, classes, data.unit, { width, top: height + 8, id: options.id })
  const definitions = hatch(`${options.id}-loss`, palette.paper, { pitch: 5, stroke: 0.7, opacity: 0.55 })
    + `<clipPath id="${options.id}-frame"><rect width="${width}" height="${height}"/></clipPath>`
  const figure = canvas.figure(width, bottom, data.title, describe(data, classes), definitions)
  // Land beyond the part that is shown is cut at the frame.
  return { ...figure, svg: clipped(figure.svg, options.id) }
}

/** Land and cells are clipped, the key is not: it begins after the last path that lies in the frame. */
function clipped(svg: string, id: string): string {
  const start = svg.indexOf('</defs>') + '</defs>'.length
  const key = svg.indexOf('<g data-key', start)
  return `${svg.slice(0, start)}<g clip-path="url(#${id}-frame)">${svg.slice(start, key)}</g>${svg.slice(key)}`
}

function viewOf({ latEdgesDeg, westDeg, stepDeg, columns }: GridCells, width: number): { projection: GeoProjection, height: number } {
  const [south, north] = [latEdgesDeg[0]!, latEdgesDeg.at(-1)!]
  const [lonSpan, latSpan] = [columns * stepDeg, north - south]
  if (latSpan > REGIONAL_DEG || (lonSpan > REGIONAL_DEG && Math.max(Math.abs(south), Math.abs(north)) < 60)) {
    const height = Math.round(width * 0.487)
    return { projection: geoEqualEarth().precision(0.3).fitExtent([[1, 1], [width - 1, height - 1]], { type: 'Sphere' }), height }
  }
  const round = lonSpan > REGIONAL_DEG
  const middle = round ? (north + south > 0 ? 90 : -90) : (south + north) / 2
  const points: Point[] = []
  for (let i = 0; i <= 24; i++) for (const lat of [south, north]) points.push([westDeg + lonSpan * i / 24, lat])
  const height = Math.round(Math.min(width * 0.7, 460))
  const projection = geoAzimuthalEqualArea().rotate([-(westDeg + lonSpan / 2), -middle]).clipAngle(89).precision(0.3)
    .fitExtent([[0, 0], [width, height]], { type: 'MultiPoint', coordinates: points as unknown as number[][] })
  return { projection, height }
}

/** Path data of each class; neighbours of one class in a row are one piece. */
function cellPaths(cells: GridCells, classes: GridClasses, projection: GeoProjection): string[] {
  const parts: string[][] = Array.from({ length: 2 * classes.each }, () => [])
  const rows = cells.latEdgesDeg.length - 1
  for (let i = 0; i < rows; i++) {
    for (let j = 0; j < cells.columns;) {
      const k = classes.of(cells.values[i * cells.columns + j]!)
      let end = j + 1
      while (end < cells.columns && classes.of(cells.values[i * cells.columns + end]!) === k && !crosses(cells, end)) end++
      if (k !== null) parts[k]!.push(piece(cells, i, j, end, projection))
      j = end
    }
  }
  return parts.map(list => list.join(''))
}

/** Whether a column begins at the date line, where a map of the world is cut. */
function crosses({ westDeg, stepDeg }: GridCells, column: number): boolean {
  const west = (((westDeg + column * stepDeg + 180) % 360) + 360) % 360
  return west < 1e-6 || west > 360 - 1e-6
}

function piece({ latEdgesDeg, westDeg, stepDeg }: GridCells, row: number, from: number, to: number, projection: GeoProjection): string {
  const [south, north] = [latEdgesDeg[row]!, latEdgesDeg[row + 1]!]
  const [west, east] = [westDeg + from * stepDeg, westDeg + to * stepDeg]
  const steps = Math.max(1, Math.ceil((east - west) / 4))
  // The east end of a piece at the date line is kept on its own side of the cut.
  const lons = Array.from({ length: steps + 1 }, (_, i) => west + (east - west) * i / steps - (i === steps ? 1e-6 : 0) + (i === 0 ? 1e-6 : 0))
  const along = [...lons.map(lon => [lon, south] as const), ...[...lons].reverse().map(lon => [lon, north] as const)]
  const points = along.map(place => projection([...place]))
  return points.some(p => p === null || !p.every(Number.isFinite)) ? '' : pathThrough(points as unknown as Point[], true)
}

function styleOf(canvas: Canvas, classes: GridClasses, k: number) {
  const loss = k < classes.each
  const rank = loss ? classes.each - k : k - classes.each + 1
  return { 'fill': loss ? canvas.palette.loss : canvas.palette.gain, 'fill-opacity': 0.12 + 0.8 * (rank - 0.5) / classes.each }
}

function drawKey(canvas: Canvas, classes: GridClasses, unit: string, { width, top, id }: { width: number, top: number, id: string }): number {
  const { palette } = canvas
  const n = 2 * classes.each
  const box = Math.min(44, Math.floor((width - 20) / n))
  const left = 1
  canvas.add('g', { 'data-key': 'colours' }, '')
  for (let k = 0; k < n; k++) {
    const place = { x: left + k * box, y: top, width: box, height: 12 }
    canvas.rect(place, styleOf(canvas, classes, k))
    if (k < classes.each) canvas.rect(place, { fill: `url(#${id}-loss)` })
  }
  canvas.rect({ x: left, y: top, width: n * box, height: 12 }, { fill: 'none', stroke: palette.soft })
  const bounds = classes.bounds
  bounds.forEach((bound, i) => {
    // Every second number where boxes are narrow.
    if (box < 34 && i % 2 !== bounds.length % 2 - 1 && i !== (bounds.length - 1) / 2) return
    canvas.text(formatNumber(bound, classes.decimals), left + (i + 1) * box, top + 26, { size: 11, anchor: 'middle', fill: palette.soft })
  })
  const words = `${unit}; hatched is loss, blank has no value`
  const beside = left + n * box + 12
  if (beside + textWidth(words, 11) < width) {
    canvas.text(words, beside, top + 10, { size: 11, fill: palette.soft })
    return top + 32
  }
  canvas.text(words, left, top + 44, { size: 11, fill: palette.soft })
  return top + 52
}

function describe({ cells, unit, regions }: GridMapData, classes: GridClasses): string {
  const known = cells.values.filter(v => v !== null)
  if (known.length === 0) return 'No cell has a value.'
  const [low, high] = known.reduce(([a, b], v) => [Math.min(a, v), Math.max(b, v)], [Infinity, -Infinity])
  const of = regions.length ? ` Outlines: ${regions.map(r => r.name).join(', ')}.` : ''
  return `Heights from ${formatNumber(low, classes.decimals)} to ${formatNumber(high, classes.decimals)} ${unit} over ${formatNumber(known.length)} cells.${of}`
}
