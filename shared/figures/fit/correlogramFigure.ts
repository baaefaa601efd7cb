import { formatNumber, formatSigned } from '../../format/digits.ts'
import { figureWidth, paletteOf } from '../options.ts'
import { linear } from '../series/scales.ts'
import { valueTicks } from '../series/panel.ts'
import { Canvas } from '../svg.ts'
import { textWidth } from '../textWidth.ts'
import type { Correlogram } from '../../series/fit/autocorrelation.ts'
import type { FigureOptions } from '../options.ts'
import type { Figure } from '../svg.ts'

const height = 170

/** Autocorrelation of residuals: a stem for each lag, and the band that holds 95 % of the values of white noise. */
export function correlogramFigure({ lags, band, stepDays }: Correlogram, options: FigureOptions): Figure {
  const width = figureWidth(options.width)
  const canvas = new Canvas(paletteOf(options.theme))
  const { palette } = canvas
  const shown = lags.filter(({ lag, value }) => lag > 0 && value !== null)
  const low = Math.min(-0.25, -1.2 * band, ...shown.map(({ value }) => value! - 0.05))
  const box = { x: 44, y: 12, width: width - 48, height }
  const y = { domain: [Math.max(-1, low), 1] as [number, number], range: [box.y + height, box.y] as [number, number] }
  const x = linear({ domain: [0, Math.max(1, (lags.at(-1)?.lag ?? 1)) + 0.5], range: [box.x, box.x + box.width] })
  const at = linear(y)
  canvas.rect({ x: box.x, y: at(band), width: box.width, height: at(-band) - at(band) }, { 'fill': palette.residual, 'fill-opacity': 0.16 })
  for (const { value, text } of valueTicks(y, height)) {
    canvas.line(box.x, at(value), box.x + box.width, at(value), value === 0 ? palette.soft : palette.hairline, { 'stroke-width': value === 0 ? 0.75 : 1 })
    canvas.text(text, box.x - 6, at(value) + 4, { size: 11, anchor: 'end', fill: palette.soft })
  }
  for (const { lag, value } of shown) canvas.line(x(lag), at(0), x(lag), at(value!), Math.abs(value!) > band ? palette.ink : palette.residual, { 'stroke-width': 3 })
  const last = lags.at(-1)?.lag ?? 0
  const every = [1, 2, 3, 6, 12, 24, 60, 120].find(step => last / step * 34 <= box.width) ?? 240
  for (let lag = 0; lag <= last; lag += every) {
    canvas.line(x(lag), box.y + height, x(lag), box.y + height + 4, palette.soft)
    canvas.text(String(lag), x(lag), box.y + height + 17, { size: 11, anchor: 'middle', fill: palette.soft })
  }
  canvas.line(box.x, box.y + height, box.x + box.width, box.y + height, palette.soft)
  const axis = `lag, steps of ${formatNumber(stepDays, Number.isInteger(stepDays) ? 0 : 1)} days`
  canvas.text(axis, Math.max(box.x, box.x + box.width - textWidth(axis, 11)), box.y + height + 34, { size: 11, fill: palette.soft })
  const one = lags.find(({ lag }) => lag === 1)?.value
  const beyond = shown.filter(({ value }) => Math.abs(value!) > band).length
  return canvas.figure(width, box.y + height + 42, 'Autocorrelation of the residuals',
    `${one === null || one === undefined ? '' : `At one step ${formatSigned(one, 2)}. `}${beyond} of ${shown.length} lags lie outside the band of white noise, ± ${formatNumber(band, 2)}.`)
}
