import { formatNumber, formatSigned } from '../../format/digits.ts'
import { spread } from '../layout.ts'
import { coordinate, pathThrough } from '../svg.ts'
import { shortened, textWidth } from '../textWidth.ts'
import { tickDecimals } from '../ticks.ts'
import { decimated, lowerBound, runsOf } from './data.ts'
import { linear } from './scales.ts'
import { lineStyle } from './style.ts'
import type { TimeTick } from '../ticks.ts'
import type { Box, Canvas, Point } from '../svg.ts'
import type { FigureSeries, Run } from './data.ts'
import type { FigureScale } from './scales.ts'

/** One set of axes with its lines. */
export interface Panel {
  /** The plotting ground. */
  box: Box
  x: FigureScale
  y: FigureScale
  unit: string
  series: FigureSeries[]
  ticks: TimeTick[]
  clipPath: string
  /** Labels to the right of the lines, or a row above them. */
  labels: 'beside' | 'above'
}

export function drawPanel(canvas: Canvas, panel: Panel): void {
  drawGrid(canvas, panel)
  for (const series of panel.series) drawBand(canvas, panel, series)
  // The model is drawn last, on top of what it is compared with.
  const order = [...panel.series].sort((a, b) => Number(a.role === 'model') - Number(b.role === 'model'))
  for (const series of order) drawLine(canvas, panel, series)
  if (panel.labels === 'beside') labelBeside(canvas, panel)
  else labelAbove(canvas, panel)
}

/** Width that the tick labels of a value axis need, px. */
export function axisWidth(y: FigureScale, height: number): number {
  const ticks = valueTicks(y, height)
  return Math.max(...ticks.map(({ text }) => textWidth(text, 11)), 16) + 8
}

export function valueTicks(y: FigureScale, height: number): { value: number, text: string }[] {
  const scale = linear(y)
  let count = Math.max(2, Math.floor(height / 44))
  // A round step may leave a single tick in view, which is no scale.
  while (scale.ticks(count).length < 3 && count < 8) count++
  const ticks = scale.ticks(count)
  const digits = tickDecimals(ticks)
  const signed = ticks.some(tick => tick < 0)
  return ticks.map(value => ({ value, text: signed ? formatSigned(value, digits) : formatNumber(value, digits) }))
}

function drawGrid(canvas: Canvas, { box, y, unit }: Panel): void {
  const { palette } = canvas
  const scale = linear(y)
  const ticks = valueTicks(y, box.height)
  for (const { value, text } of ticks) {
    canvas.line(box.x, scale(value), box.x + box.width, scale(value), value === 0 ? palette.soft : palette.hairline, { 'stroke-width': value === 0 ? 0.75 : 1 })
    canvas.text(text, box.x - 6, scale(value) + 4, { size: 11, anchor: 'end', fill: palette.soft })
  }
  canvas.text(unit, 0, box.y - 10, { size: 11, fill: palette.soft })
}

/** Time axis below a panel. */
export function drawTimeAxis(canvas: Canvas, panel: Panel, width: number): void {
  const { palette } = canvas
  const { box, ticks } = panel
  const scale = linear(panel.x)
  const bottom = box.y + box.height
  canvas.line(box.x, bottom, box.x + box.width, bottom, palette.soft)
  let freeFrom = -Infinity
  for (const { mjd, text } of ticks) {
    const at = scale(mjd)
    canvas.line(at, bottom, at, bottom + 4, palette.soft)
    const half = textWidth(text, 11) / 2
    if (at - half < 0 || at + half > width || at - half < freeFrom) continue
    canvas.text(text, at, bottom + 17, { size: 11, anchor: 'middle', fill: palette.soft })
    freeFrom = at + half + 6
  }
}

function drawnRuns(panel: Panel, series: FigureSeries): Run[] {
  const column = linear(panel.x)
  return runsOf(series, panel.x.domain[0], panel.x.domain[1]).map(run => decimated(run, column))
}

/** Keeps a height within reach of the drawing, so that a far outlier does not become an endless number. */
function held(y: number, { box }: Panel): number {
  return Math.min(box.y + box.height + 1e4, Math.max(box.y - 1e4, y))
}

function drawBand(canvas: Canvas, panel: Panel, series: FigureSeries): void {
  if (!series.sigma) return
  const [x, y] = [linear(panel.x), linear(panel.y)]
  const { stroke } = lineStyle(series.role, canvas.palette)
  const d = drawnRuns(panel, series).filter(run => run.mjd.length > 1).map((run) => {
    const upper = run.mjd.map((mjd, i): Point => [x(mjd), held(y(run.high[i]!), panel)])
    const lower = run.mjd.map((mjd, i): Point => [x(mjd), held(y(run.low[i]!), panel)])
    return pathThrough([...upper, ...lower.reverse()], true)
  }).join('')
  canvas.path(d, { 'fill': stroke, 'fill-opacity': 0.16, 'clip-path': panel.clipPath })
}

function drawLine(canvas: Canvas, panel: Panel, series: FigureSeries): void {
  const [x, y] = [linear(panel.x), linear(panel.y)]
  const style = lineStyle(series.role, canvas.palette)
  const runs = drawnRuns(panel, series)
  const d = runs.filter(run => run.mjd.length > 1)
    .map(run => pathThrough(run.mjd.map((mjd, i): Point => [x(mjd), held(y(run.value[i]!), panel)]))).join('')
  canvas.path(d, {
    'stroke': style.stroke, 'stroke-width': style.width, 'stroke-dasharray': style.dashes, 'stroke-linejoin': 'round', 'clip-path': panel.clipPath,
  })
  // A value between two gaps has no line: it is a dot.
  const [from, to] = panel.x.domain
  const dots = runs.filter(run => run.mjd.length === 1 && run.mjd[0]! >= from && run.mjd[0]! <= to)
    .map(run => `M${coordinate(x(run.mjd[0]!) - 1.5)},${coordinate(held(y(run.value[0]!), panel))}h3`).join('')
  canvas.path(dots, { 'stroke': style.stroke, 'stroke-width': 3 })
}

/** Last drawn value of a series, px; null where nothing is in view. */
function endOf(panel: Panel, series: FigureSeries): Point | null {
  const [from, to] = panel.x.domain
  const [x, y] = [linear(panel.x), linear(panel.y)]
  for (let i = Math.min(series.mjd.length - 1, lowerBound(series.mjd, to)); i >= 0 && series.mjd[i]! >= from; i--) {
    const value = series.value[i]
    if (series.mjd[i]! <= to && value !== null && value !== undefined && Number.isFinite(value)) return [x(series.mjd[i]!), held(y(value), panel)]
  }
  return null
}

function labelBeside(canvas: Canvas, panel: Panel): void {
  const { palette } = canvas
  const { box } = panel
  const ends = panel.series.flatMap((series) => {
    const end = endOf(panel, series)
    return end ? [{ series, end }] : []
  })
  const heights = spread(ends.map(({ end }) => end[1]), 16, box.y + 6, box.y + box.height - 4)
  const left = box.x + box.width
  ends.forEach(({ series, end }, i) => {
    const { stroke, dashes } = lineStyle(series.role, palette)
    const y = heights[i]!
    canvas.line(Math.min(left, end[0]) + 3, Math.min(box.y + box.height, Math.max(box.y, end[1])), left + 14, y, stroke, { 'stroke-width': 0.75, 'stroke-dasharray': dashes })
    canvas.text(series.label, left + 18, y + 4, { fill: stroke, weight: series.role === 'model' ? 600 : 400 })
  })
}

/** Rows of short line samples with names, above the panel. */
export function keyRows(series: readonly FigureSeries[], width: number): { series: FigureSeries, x: number, row: number, text: string }[] {
  let [x, row] = [0, 0]
  return series.map((entry) => {
    const weight = entry.role === 'model' ? 600 : 400
    const text = shortened(entry.label, width - 26, 12, weight)
    const needed = 26 + textWidth(text, 12, weight)
    if (x > 0 && x + needed > width) [x, row] = [0, row + 1]
    const place = { series: entry, x, row, text }
    x += needed + 16
    return place
  })
}

function labelAbove(canvas: Canvas, panel: Panel): void {
  const rows = keyRows(panel.series, panel.box.x + panel.box.width)
  const last = rows.at(-1)?.row ?? 0
  for (const { series, x, row, text } of rows) {
    const style = lineStyle(series.role, canvas.palette)
    const base = panel.box.y - 30 - (last - row) * 18
    canvas.line(x, base - 4, x + 20, base - 4, style.stroke, { 'stroke-width': style.width, 'stroke-dasharray': style.dashes })
    canvas.text(text, x + 26, base, { fill: style.stroke, weight: series.role === 'model' ? 600 : 400 })
  }
}
