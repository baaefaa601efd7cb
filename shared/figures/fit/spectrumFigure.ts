import { scaleLog } from 'd3-scale'
import { formatSignificant } from '../../format/digits.ts'
import { figureWidth, paletteOf } from '../options.ts'
import { spread } from '../layout.ts'
import { Canvas, pathThrough } from '../svg.ts'
import { textWidth } from '../textWidth.ts'
import { JULIAN_YEAR_DAYS } from '../../earth/time/epochs.ts'
import type { FigureOptions } from '../options.ts'
import type { Figure, Point } from '../svg.ts'

export interface SpectrumData {
  /** Cycles per Julian year, ascending. */
  frequencyPerYear: number[]
  /** Gt. */
  amplitudeGt: number[]
  expected: { model: 'white' | 'ar1', amplitudeGt: number[] }[]
}

const height = 190
const names = { white: 'white noise', ar1: 'AR(1) noise' } as const
/** Periods with a tick, days, and how they are written. */
const periods: [number, string][] = [
  [50 * JULIAN_YEAR_DAYS, '50 a'], [20 * JULIAN_YEAR_DAYS, '20 a'], [10 * JULIAN_YEAR_DAYS, '10 a'], [5 * JULIAN_YEAR_DAYS, '5 a'], [2 * JULIAN_YEAR_DAYS, '2 a'],
  [JULIAN_YEAR_DAYS, '1 a'], [JULIAN_YEAR_DAYS / 2, '½ a'], [161, '161 d'], [60, '60 d'], [30, '30 d'], [14, '14 d'], [7, '7 d'], [2, '2 d'],
]

/** Amplitude of the residuals by period, both on logarithmic axes, beside what white and AR(1) noise of their size would give. */
export function spectrumFigure({ frequencyPerYear, amplitudeGt, expected }: SpectrumData, options: FigureOptions): Figure {
  const width = figureWidth(options.width)
  const canvas = new Canvas(paletteOf(options.theme))
  const { palette } = canvas
  const labelWidth = Math.max(...expected.map(({ model }) => textWidth(names[model], 12)), textWidth('residuals', 12)) + 20
  const beside = labelWidth < width * 0.28
  const values = [...amplitudeGt, ...expected.flatMap(line => line.amplitudeGt)].filter(v => v > 0)
  const top = values.length > 0 ? Math.max(...values) : 1
  // Far below the noise an amplitude says nothing: the axis ends there.
  const bottom = Math.max(top / 1000, Math.min(top / 10, ...expected.flatMap(line => line.amplitudeGt).filter(v => v > 0).map(v => v / 4)))
  const ticks = scaleLog([bottom, top * 1.15], [height, 0]).ticks().filter(t => /^[125]/.test(t.toExponential()))
  const left = Math.max(40, ...ticks.map(tick => textWidth(formatSignificant(tick, 1), 11) + 8))
  const box = { x: left, y: 26, width: width - left - (beside ? labelWidth : 4), height }
  const [first, last] = [frequencyPerYear[0] ?? 0.1, frequencyPerYear.at(-1) ?? 6]
  const x = scaleLog([first, Math.max(last, first * 1.01)], [box.x, box.x + box.width])
  const y = scaleLog([bottom, top * 1.15], [box.y + height, box.y])
  const held = (v: number) => Math.min(box.y + height, Math.max(box.y, y(Math.max(v, bottom * 1e-3))))
  canvas.text('Gt', 0, box.y - 10, { size: 11, fill: palette.soft })
  let freeAbove = Infinity
  for (const tick of ticks) {
    canvas.line(box.x, y(tick), box.x + box.width, y(tick), palette.hairline)
    if (y(tick) > freeAbove - 16) continue
    canvas.text(formatSignificant(tick, 1), box.x - 6, y(tick) + 4, { size: 11, anchor: 'end', fill: palette.soft })
    freeAbove = y(tick)
  }
  let free = -Infinity
  for (const [days, text] of periods) {
    const at = x(JULIAN_YEAR_DAYS / days)
    if (!(at >= box.x && at <= box.x + box.width)) continue
    canvas.line(at, box.y + height, at, box.y + height + 4, palette.soft)
    const half = textWidth(text, 11) / 2
    if (at - half < free || at + half > width) continue
    canvas.text(text, at, box.y + height + 17, { size: 11, anchor: 'middle', fill: palette.soft })
    free = at + half + 6
  }
  canvas.line(box.x, box.y + height, box.x + box.width, box.y + height, palette.soft)
  const line = (amplitude: readonly number[]): string => pathThrough(frequencyPerYear.map((f, k): Point => [x(f), held(amplitude[k]!)]))
  canvas.path(line(amplitudeGt), { 'stroke': palette.residual, 'stroke-width': 1, 'stroke-linejoin': 'round' })
  const dashes = { white: '2 3', ar1: undefined }
  for (const { model, amplitudeGt: amplitude } of expected) {
    canvas.path(line(amplitude), { 'stroke': model === 'ar1' ? palette.model : palette.ink, 'stroke-width': 1.5, 'stroke-dasharray': dashes[model] })
  }
  const ends = [...expected.map(({ model, amplitudeGt: amplitude }) => ({ text: names[model], end: amplitude.at(-1) ?? top, fill: model === 'ar1' ? palette.model : palette.ink })), { text: 'residuals', end: amplitudeGt.at(-1) ?? top, fill: palette.residual }]
  if (beside) {
    const heights = spread(ends.map(({ end }) => held(end)), 16, box.y + 6, box.y + height - 4)
    ends.forEach(({ text, fill }, i) => canvas.text(text, box.x + box.width + 8, heights[i]! + 4, { fill }))
  } else {
    let at = 24
    for (const { text, fill } of ends) {
      if (at + textWidth(text, 11) > width) break
      canvas.text(text, at, box.y - 10, { size: 11, fill })
      at += textWidth(text, 11) + 14
    }
  }
  const best = amplitudeGt.indexOf(Math.max(...amplitudeGt))
  return canvas.figure(width, box.y + height + 26, 'Spectrum of the residuals',
    best < 0 ? 'No values.' : `Amplitude in Gt by period; the largest is ${formatSignificant(amplitudeGt[best]!, 2)} Gt at ${formatSignificant(JULIAN_YEAR_DAYS / frequencyPerYear[best]!, 3)} days.`)
}
