import { formatNumber, formatSigned } from '../../format/digits.ts'
import { formatSpan, formatYear } from '../../format/dates.ts'
import { decimalYear, yearStart } from '../calendar.ts'
import { isFree } from '../layout.ts'
import { figureWidth, paletteOf } from '../options.ts'
import { runsOf } from '../series/data.ts'
import { lineStyle } from '../series/style.ts'
import { Canvas, pathThrough, textBox } from '../svg.ts'
import { tickDecimals } from '../ticks.ts'
import { niceStep } from './view.ts'
import { placeDriftLabels } from './labels.ts'
import type { FigureOptions } from '../options.ts'
import type { SeriesRole } from '../series/data.ts'
import type { Box, Figure, Point } from '../svg.ts'

export interface PolePath {
  label: string
  role: SeriesRole
  mjd: ArrayLike<number>
  /** mas; null or NaN is a gap. */
  chi1: ArrayLike<number | null>
  chi2: ArrayLike<number | null>
}

interface Stretch { mjd: number[], points: Point[] }

/** The pole's way over the pole plane, seen from above the north pole: χ₁ (0°) to the right, χ₂ (90° E) up, in mas. */
export function polePathFigure(paths: readonly PolePath[], options: FigureOptions): Figure {
  const width = figureWidth(options.width)
  const height = Math.round(Math.min(480, Math.max(280, width * 0.85)))
  const palette = paletteOf(options.theme)
  const canvas = new Canvas(palette)
  const stretches = paths.map(stretchesOf)
  const at = drawPlane(canvas, stretches.flat().flatMap(({ points }) => points), width, height)

  const segments: [Point, Point][] = []
  const marks: { text: string, at: Point }[] = []
  paths.forEach((path, i) => {
    const style = lineStyle(path.role, palette)
    for (const { mjd, points } of stretches[i]!) {
      const drawn = points.map(at)
      canvas.path(pathThrough(thinned(drawn)), { 'stroke': style.stroke, 'stroke-width': style.width, 'stroke-dasharray': style.dashes, 'stroke-linejoin': 'round' })
      for (let k = 1; k < drawn.length; k += Math.max(1, Math.floor(drawn.length / 300))) segments.push([drawn[k - 1]!, drawn[k]!])
      // A straight line needs no years: those of the pole beside it say when.
      if (path.role !== 'secular') marks.push(...yearMarks(mjd, drawn))
    }
    const last = stretches[i]!.at(-1)?.points.at(-1)
    if (last) canvas.add('circle', { cx: at(last)[0], cy: at(last)[1], r: 4, fill: style.stroke })
  })
  const frame: Box = { x: 2, y: 2, width: width - 4, height: height - 4 }
  const ends = paths.map((path, i) => {
    const last = stretches[i]!.at(-1)?.points.at(-1)
    const to = last ? at(last) : null
    return to && { text: path.label, weight: path.role === 'model' ? 600 as const : undefined, from: to, to, atTip: true, fill: lineStyle(path.role, palette).stroke }
  }).filter(end => end !== null)
  const boxes: Box[] = [...canvas.labels]
  const placed = placeDriftLabels(ends, { frame, boxes, segments })
  placed.forEach((place, i) => {
    if (!place) return
    if (place.leader) canvas.line(...place.leader[0], ...place.leader[1], palette.soft, { 'stroke-width': 0.75 })
    boxes.push(canvas.text(ends[i]!.text, place.x, place.y, { fill: ends[i]!.fill, weight: ends[i]!.weight, halo: palette.paper }))
  })
  for (const mark of marks) {
    canvas.add('circle', { cx: mark.at[0], cy: mark.at[1], r: 1.8, fill: palette.paper, stroke: palette.ink })
    const choices = ([[6, 4, 'start'], [-6, 4, 'end'], [0, -7, 'middle'], [0, 15, 'middle']] as const)
      .map(([dx, dy, anchor]) => ({ x: mark.at[0] + dx, y: mark.at[1] + dy, size: 11, anchor }))
    const spot = choices.find(choice => isFree(textBox(mark.text, choice.x, choice.y, choice), { frame, boxes, segments }, 3))
    if (spot) boxes.push(canvas.text(mark.text, spot.x, spot.y, { ...spot, fill: palette.soft, halo: palette.paper }))
  }
  return canvas.figure(width, height, 'Path of the pole', describe(paths, stretches))
}

function stretchesOf(path: PolePath): Stretch[] {
  const both = Array.from(path.mjd, (_, i) => path.chi1[i] !== null && path.chi2[i] !== null ? path.chi2[i]! : null)
  const indexOf = new Map(Array.from(path.mjd, (mjd, i) => [mjd, i] as const))
  return runsOf({ label: '', role: path.role, mjd: path.mjd, value: both }).map(run => ({
    mjd: run.mjd,
    points: run.mjd.map((mjd, i): Point => [path.chi1[indexOf.get(mjd)!]!, run.value[i]!]),
  })).map(({ mjd, points }) => {
    const kept = points.flatMap(([x], i) => Number.isFinite(x) ? [i] : [])
    return { mjd: kept.map(i => mjd[i]!), points: kept.map(i => points[i]!) }
  }).filter(({ points }) => points.length > 0)
}

/** Grid and axes; gives the place of a point in mas. */
function drawPlane(canvas: Canvas, points: readonly Point[], width: number, height: number): (point: Point) => Point {
  const { palette } = canvas
  const extent = (axis: 0 | 1): [number, number] => points.reduce<[number, number]>(
    ([low, high], point) => [Math.min(low, point[axis]), Math.max(high, point[axis])], [0, 0])
  const [x, y] = [extent(0), extent(1)]
  const [spanX, spanY] = [x[1] - x[0] || 1, y[1] - y[0] || 1]
  const [left, top, right, bottom] = [52, 22, width - 70, height - 26]
  const scale = Math.min((right - left) / spanX, (bottom - top) / spanY) * 0.94
  const [midX, midY] = [(x[0] + x[1]) / 2, (y[0] + y[1]) / 2]
  const at = ([px, py]: Point): Point => [(left + right) / 2 + (px - midX) * scale, (top + bottom) / 2 - (py - midY) * scale]
  const step = niceStep(70 / scale)
  const digits = tickDecimals([0, step])
  const grid = (low: number, high: number) => Array.from({ length: Math.max(0, Math.floor(high / step) - Math.ceil(low / step) + 1) }, (_, i) => (Math.ceil(low / step) + i) * step)
  const back = (px: number, py: number): Point => [(px - (left + right) / 2) / scale + midX, midY - (py - (top + bottom) / 2) / scale]
  const [[lowX, highY], [highX, lowY]] = [back(left, top), back(width - 8, bottom)]
  for (const value of grid(lowX, highX)) {
    const [px] = at([value, 0])
    canvas.line(px, top, px, bottom, value === 0 ? palette.soft : palette.hairline, { 'stroke-width': 0.75 })
    canvas.text(value === 0 ? '0' : formatSigned(value, digits), px, bottom + 16, { size: 11, anchor: 'middle', fill: palette.soft })
  }
  for (const value of grid(lowY, highY)) {
    const [, py] = at([0, value])
    canvas.line(left, py, width - 8, py, value === 0 ? palette.soft : palette.hairline, { 'stroke-width': 0.75 })
    canvas.text(value === 0 ? '0' : formatSigned(value, digits), left - 6, py + 4, { size: 11, anchor: 'end', fill: palette.soft })
  }
  canvas.text('χ₂ to 90°\u00a0E, mas', 0, 11, { size: 11, fill: palette.soft })
  canvas.text('χ₁ to 0°, mas', width - 8, 11, { size: 11, anchor: 'end', fill: palette.soft })
  return at
}

/** Drops points that lie within half a pixel of the one before. */
function thinned(points: readonly Point[]): Point[] {
  const kept: Point[] = []
  for (const point of points) {
    const last = kept.at(-1)
    if (!last || Math.hypot(point[0] - last[0], point[1] - last[1]) > 0.5) kept.push(point)
  }
  if (kept.length === 1 && points.length > 1) kept.push(points.at(-1)!)
  return kept
}

/** Where a stretch passes the start of a year: every one, or every fifth, tenth… of a long stretch. */
function yearMarks(mjd: readonly number[], points: readonly Point[]): { text: string, at: Point }[] {
  if (mjd.length < 2) return []
  const [from, to] = [decimalYear(mjd[0]!), decimalYear(mjd.at(-1)!)]
  const step = [1, 2, 5, 10, 20].find(candidate => (to - from) / candidate <= 8) ?? 50
  const marks: { text: string, at: Point }[] = []
  for (let year = Math.ceil(from / step) * step; year <= to; year += step) {
    const start = yearStart(year)
    const i = mjd.findIndex(epoch => epoch >= start)
    if (i < 0) continue
    const at = points[i]!
    marks.push({ text: formatYear(start), at })
  }
  return marks
}

function describe(paths: readonly PolePath[], stretches: readonly Stretch[][]): string {
  const lines = paths.map((path, i) => {
    const [head, tail] = [stretches[i]![0], stretches[i]!.at(-1)]
    if (!head || !tail) return `${path.label}: no values`
    const [from, to] = [head.points[0]!, tail.points.at(-1)!]
    const shift = Math.hypot(to[0] - from[0], to[1] - from[1])
    return `${path.label}, ${formatSpan(head.mjd[0], tail.mjd.at(-1))}: ${formatNumber(shift, 1)} mas from first to last`
  })
  return `Seen from above the north pole, 0° to the right and 90° E up. ${lines.join('; ')}.`
}
