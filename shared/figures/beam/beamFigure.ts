import { scaleLinear } from 'd3-scale'
import { formatMeasured } from '../../format/measured.ts'
import { formatNumber, formatSigned } from '../../format/digits.ts'
import { hatch } from '../hatch.ts'
import { figureWidth, paletteOf } from '../options.ts'
import { Canvas, pathThrough } from '../svg.ts'
import { shortened, textWidth } from '../textWidth.ts'
import { beamSegments } from './data.ts'
import { beamLabels, rowBase } from './labels.ts'
import { tickDecimals } from '../ticks.ts'
import type { FigureOptions } from '../options.ts'
import type { Figure } from '../svg.ts'
import type { BeamData, BeamSegment } from './data.ts'

const barHeight = 26

/**
 * Every region's effect on the length of day laid along one axis from a pivot at zero: the side is the sign of ΔLOD, the
 * colour (and the hatch, for loss) the sign of the mass, the sum a marker with its one-sigma.
 */
export function beamFigure(data: BeamData, options: FigureOptions): Figure {
  const width = figureWidth(options.width)
  const palette = paletteOf(options.theme)
  const canvas = new Canvas(palette)
  const segments = beamSegments(data)
  const total = Number.isFinite(data.total.value) ? data.total.value : 0
  const sigma = data.total.sigma !== null && Number.isFinite(data.total.sigma) ? Math.max(0, data.total.sigma) : 0
  const x = scaleOf(segments, total, sigma, width)
  const frame = { width, x, sumX: x(total), pivotX: x(0) }
  const labels = beamLabels(segments, frame)

  const head = 34
  const top = head + labels.rows * 17 + 18
  const bottom = top + barHeight
  drawBar(canvas, segments, { x, top, id: options.id })
  canvas.line(0, bottom, width, bottom, palette.ink)
  for (const { segment, nameX, figureX } of labels.inPlace) {
    canvas.text(segment.name, nameX, top + rowBase(0))
    canvas.text(segment.figure, figureX, bottom + 16, { fill: palette.soft })
  }
  for (const led of labels.led) {
    canvas.line(led.anchorX, top + rowBase(led.row) + 4, led.anchorX, top, palette.soft, { 'stroke-width': 0.75 })
    canvas.text(led.text, led.x, top + rowBase(led.row))
  }
  drawSum(canvas, { x, total, sigma, bottom, head, width, given: data.total.sigma })
  const pivot = frame.pivotX
  canvas.path(pathThrough([[pivot, bottom + 1], [pivot - 6, bottom + 11], [pivot + 6, bottom + 11]], true), { fill: palette.ink })
  let y = drawAxis(canvas, x, bottom + 24, width)
  y = drawSides(canvas, y, width, data.unit, options.id, segments)
  if (labels.listed.length > 0) y = drawList(canvas, labels.listed, y + 8, width, options.id)
  return canvas.figure(width, Math.ceil(y + 4), 'What each region adds to the length of day', describe(data, segments), definitions(options.id, palette.paper))
}

function definitions(id: string, paper: string): string {
  return hatch(`${id}-loss`, paper, { pitch: 5, stroke: 0.9, opacity: 0.4 })
}

function scaleOf(segments: readonly BeamSegment[], total: number, sigma: number, width: number) {
  const ends = [0, total - sigma, total + sigma, ...segments.map(segment => segment.to)]
  let [low, high] = [Math.min(...ends), Math.max(...ends)]
  if (!(high - low > 0)) [low, high] = [-1, 1]
  const margin = (high - low) * 0.04
  return scaleLinear([low - margin, high + margin], [8, width - 8])
}

type Scale = ReturnType<typeof scaleOf>

function drawBar(canvas: Canvas, segments: readonly BeamSegment[], { x, top, id }: { x: Scale, top: number, id: string }): void {
  const { palette } = canvas
  for (const segment of segments) {
    const [a, b] = [x(segment.from), x(segment.to)].sort((p, q) => p - q) as [number, number]
    const gap = b - a > 4 ? 1 : 0
    const box = { x: a, y: top, width: Math.max(b - a - gap, 0.5), height: barHeight }
    if (segment.value === 0) continue
    canvas.rect(box, { fill: segment.mass > 0 ? palette.gain : palette.loss })
    if (segment.mass <= 0) canvas.rect(box, { fill: `url(#${id}-loss)` })
  }
}

interface SumPlace { x: Scale, total: number, sigma: number, given: number | null, bottom: number, head: number, width: number }

function drawSum(canvas: Canvas, { x, total, sigma, given, bottom, head, width }: SumPlace): void {
  const { palette } = canvas
  const at = x(total)
  const text = `model ${formatMeasured(total, given).text}`
  const textual = textWidth(text, 12, 600)
  const startX = Math.min(Math.max(2, at - 4), width - 2 - textual)
  canvas.text(text, startX, 13, { weight: 600, fill: palette.model })
  const y = head - 10
  canvas.line(at, 18, at, bottom, palette.paper, { 'stroke-width': 5 })
  canvas.line(at, 18, at, bottom, palette.model, { 'stroke-width': 2 })
  const [low, high] = [x(total - sigma), x(total + sigma)]
  if (high - low > 1) {
    canvas.path(`${pathThrough([[low, y], [high, y]])}${pathThrough([[low, y - 3], [low, y + 3]])}${pathThrough([[high, y - 3], [high, y + 3]])}`, { 'stroke': palette.model, 'stroke-width': 1.25 })
  }
  canvas.rect({ x: at - 3.5, y: y - 3.5, width: 7, height: 7 }, { fill: palette.model })
}

function drawAxis(canvas: Canvas, x: Scale, y: number, width: number): number {
  const { palette } = canvas
  const ticks = x.ticks(Math.max(2, Math.round(width / 110)))
  const digits = tickDecimals(ticks)
  for (const tick of ticks) {
    canvas.line(x(tick), y, x(tick), y + 4, palette.soft)
    const text = tick === 0 ? '0' : formatSigned(tick, digits)
    const half = textWidth(text, 11) / 2
    if (x(tick) - half >= 0 && x(tick) + half <= width) canvas.text(text, x(tick), y + 16, { size: 11, anchor: 'middle', fill: palette.soft })
  }
  canvas.line(8, y, width - 8, y, palette.hairline)
  return y + 22
}

function drawSides(canvas: Canvas, y: number, width: number, unit: string, id: string, segments: readonly BeamSegment[]): number {
  const { palette } = canvas
  const base = y + 12
  const arrow = (tip: number, back: number) => canvas.path(pathThrough([[tip, base - 4], [back, base - 8], [back, base]], true), { fill: palette.soft })
  arrow(2, 9)
  canvas.text('shorter day', 14, base, { fill: palette.soft })
  arrow(width - 2, width - 9)
  canvas.text(`longer day, ${unit}`, width - 14, base, { fill: palette.soft, anchor: 'end' })
  const key = [
    segments.some(segment => segment.mass <= 0) ? { text: 'mass lost', fill: palette.loss, hatched: true } : null,
    segments.some(segment => segment.mass > 0) ? { text: 'mass gained', fill: palette.gain, hatched: false } : null,
  ].filter(entry => entry !== null)
  const keyWidth = key.reduce((sum, entry) => sum + 18 + textWidth(entry.text, 12) + 18, -18)
  const room = width - textWidth(`longer day, ${unit}`, 12) - textWidth('shorter day', 12) - 60
  const inline = keyWidth <= room
  let at = inline ? 14 + textWidth('shorter day', 12) + 24 : 2
  const keyBase = inline ? base : base + 20
  for (const entry of key) {
    const box = { x: at, y: keyBase - 9, width: 12, height: 10 }
    canvas.rect(box, { fill: entry.fill })
    if (entry.hatched) canvas.rect(box, { fill: `url(#${id}-loss)` })
    canvas.text(entry.text, at + 18, keyBase, { fill: palette.soft })
    at += 18 + textWidth(entry.text, 12) + 18
  }
  return keyBase + 6
}

/** What is too narrow for a label of its own, in columns below. */
function drawList(canvas: Canvas, segments: readonly BeamSegment[], y: number, width: number, id: string): number {
  const { palette } = canvas
  const columns = Math.max(1, Math.min(3, Math.floor(width / 300), segments.length))
  const columnWidth = Math.min(380, (width - (columns - 1) * 32) / columns)
  const rows = Math.ceil(segments.length / columns)
  segments.forEach((segment, i) => {
    const left = Math.floor(i / rows) * (columnWidth + 32)
    const base = y + 14 + (i % rows) * 20
    const box = { x: left, y: base - 9, width: 12, height: 10 }
    canvas.rect(box, { fill: segment.mass > 0 ? palette.gain : palette.loss })
    if (segment.mass <= 0) canvas.rect(box, { fill: `url(#${id}-loss)` })
    const room = columnWidth - 18 - textWidth(segment.figure, 12) - 12
    canvas.text(shortened(segment.name, room, 12), left + 18, base)
    canvas.text(segment.figure, left + columnWidth, base, { anchor: 'end', fill: palette.soft })
    canvas.line(left, base + 6, left + columnWidth, base + 6, palette.hairline)
  })
  return y + rows * 20 + 2
}

function describe(data: BeamData, segments: readonly BeamSegment[]): string {
  const parts = segments.map(segment => `${segment.name} ${segment.figure} (mass ${segment.mass > 0 ? 'gained' : 'lost'})`)
  return `In ${data.unit}, positive for a longer day. ${parts.join('; ') || 'No region has a trend'}. Sum: ${formatMeasured(data.total.value, data.total.sigma).text}; ${formatNumber(segments.length)} regions.`
}
