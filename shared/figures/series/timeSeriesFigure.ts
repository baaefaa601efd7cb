import { formatSignificant } from '../../format/digits.ts'
import { formatSpan } from '../../format/dates.ts'
import { figureWidth, paletteOf } from '../options.ts'
import { Canvas, element } from '../svg.ts'
import { textWidth } from '../textWidth.ts'
import { timeTicks } from '../ticks.ts'
import { runsOf } from './data.ts'
import { axisWidth, drawPanel, drawTimeAxis, keyRows } from './panel.ts'
import { linear, timeDomain, valueDomain } from './scales.ts'
import type { FigureOptions } from '../options.ts'
import type { Figure } from '../svg.ts'
import type { FigureSeries, SeriesData } from './data.ts'
import type { Panel } from './panel.ts'
import type { FigureScale } from './scales.ts'

export interface SeriesOptions extends FigureOptions {
  /** px of each panel's plotting ground. */
  plotHeight?: number
}

export interface SeriesPanelScales { x: FigureScale, y: FigureScale, box: Panel['box'] }

export interface SeriesFigure extends Figure {
  /** Scales of each panel from the top, for a pointer over the drawing. */
  panels: SeriesPanelScales[]
}

/** A chart of one or more series over time with error bands, gaps as gaps, names beside the lines and the unit at the axis. */
export function timeSeriesFigure(data: SeriesData, options: SeriesOptions): SeriesFigure {
  return stackedFigure([data], options)
}

/** Several charts over one another on a common time axis, e.g. observed and model above, residual below. */
export function stackedFigure(panels: readonly SeriesData[], options: SeriesOptions): SeriesFigure {
  const width = figureWidth(options.width)
  const palette = paletteOf(options.theme)
  const canvas = new Canvas(palette)
  const first = panels[0]!
  const domain = timeDomain({ ...first, series: panels.flatMap(panel => panel.series) })
  const plotHeight = options.plotHeight ?? Math.round(Math.min(260, Math.max(140, width * 0.3)))
  const labelWidth = Math.max(0, ...panels.flatMap(panel => panel.series.map(series => textWidth(series.label, 12, series.role === 'model' ? 600 : 400))))
  const beside = labelWidth + 22 < width * 0.28
  const ranges = panels.map(panel => valueDomain(panel, domain))
  const left = Math.max(...ranges.map(range => axisWidth({ domain: range, range: [plotHeight, 0] }, plotHeight)))
  const right = width - (beside ? labelWidth + 22 : 4)
  const ticks = timeTicks(domain[0], domain[1], Math.max(2, Math.floor((right - left) / 72)))
  const x: FigureScale = { domain, range: [left, right] }

  const drawn: Panel[] = []
  const clips: string[] = []
  let top = 0
  panels.forEach((panel, i) => {
    top += 24 + (beside ? 0 : (keyRows(panel.series, right).at(-1)?.row ?? 0) * 18 + 20)
    const box = { x: left, y: top, width: right - left, height: plotHeight }
    const id = `${options.id}-plot${i}`
    clips.push(element('clipPath', { id }, element('rect', { ...box })))
    drawn.push({
      box, x, ticks, unit: panel.unit, series: panel.series, clipPath: `url(#${id})`, labels: beside ? 'beside' : 'above',
      y: { domain: ranges[i]!, range: [top + plotHeight, top] },
    })
    top += plotHeight + 12
  })
  const last = drawn.at(-1)!
  for (const panel of drawn) {
    drawHighlight(canvas, panel, first.highlight)
    drawPanel(canvas, panel)
  }
  drawTimeAxis(canvas, last, width)
  let bottom = last.box.y + last.box.height + 24
  if (first.coverage?.length) bottom = drawCoverage(canvas, first.coverage, last, bottom, width)
  const figure = canvas.figure(width, Math.ceil(bottom), first.title, panels.map(panel => describe(panel, domain)).join(' '), clips.join(''))
  return { ...figure, panels: drawn.map(panel => ({ x: panel.x, y: panel.y, box: panel.box })) }
}

function drawHighlight(canvas: Canvas, panel: Panel, span: SeriesData['highlight']): void {
  if (!span) return
  const x = linear(panel.x).clamp(true)
  const [from, to] = [x(span.fromMjd), x(span.toMjd)]
  if (to - from < 0.5) return
  canvas.rect({ x: from, y: panel.box.y, width: to - from, height: panel.box.height }, { 'fill': canvas.palette.model, 'fill-opacity': 0.08 })
  for (const edge of [from, to]) canvas.line(edge, panel.box.y, edge, panel.box.y + panel.box.height, canvas.palette.model, { 'stroke-width': 0.75 })
}

/** Bars of the time each source covers. */
function drawCoverage(canvas: Canvas, coverage: NonNullable<SeriesData['coverage']>, panel: Panel, top: number, width: number): number {
  const x = linear(panel.x).clamp(true)
  const { palette } = canvas
  coverage.forEach(({ label, spans }, i) => {
    const y = top + 8 + i * 26
    canvas.text(label, Math.min(panel.box.x, Math.max(0, width - textWidth(label, 11))), y + 4, { size: 11, fill: palette.soft })
    canvas.line(panel.box.x, y + 11, panel.box.x + panel.box.width, y + 11, palette.hairline)
    for (const [from, to] of spans) {
      if (!(to >= panel.x.domain[0] && from <= panel.x.domain[1])) continue
      canvas.rect({ x: x(from), y: y + 9, width: Math.max(1, x(to) - x(from)), height: 4 }, { fill: palette.ink })
    }
  })
  return top + coverage.length * 26 + 4
}

function describe(data: SeriesData, domain: [number, number]): string {
  const lines = data.series.map((series: FigureSeries) => {
    const runs = runsOf(series, domain[0], domain[1])
    const [head, tail] = [runs[0], runs.at(-1)]
    if (!head || !tail) return `${series.label}: no values`
    return `${series.label}: from ${formatSignificant(head.value[0])} to ${formatSignificant(tail.value.at(-1))}`
  })
  return `${data.unit}, ${formatSpan(domain[0], domain[1])}. ${lines.join('; ')}.`
}
