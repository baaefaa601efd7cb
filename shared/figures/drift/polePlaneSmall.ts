import { formatMeasured } from '../../format/measured.ts'
import { formatDirection } from '../../format/places.ts'
import { paletteOf } from '../options.ts'
import { Canvas, pathThrough } from '../svg.ts'
import { textWidth } from '../textWidth.ts'
import { niceStep } from './view.ts'
import { driftOf } from './vector.ts'
import type { Measured } from '../../types/domain.ts'
import type { FigureOptions } from '../options.ts'
import type { Figure } from '../svg.ts'

export interface SmallPoleData {
  chi1: Measured
  chi2: Measured
  covariance?: { c11: number, c12: number, c22: number } | null
  /** Unit of the components, e.g. `mas/yr` or `mas`. */
  unit: string
  /** Unit of the same on the ground, e.g. `cm/yr` or `cm`. */
  groundUnit: string
}

/** One shift of the pole on a small pole plane, with its size and direction in words below. */
export function polePlaneSmall(data: SmallPoleData, options: FigureOptions): Figure {
  const width = Math.min(400, Math.max(150, Math.round(options.width)))
  const palette = paletteOf(options.theme)
  const canvas = new Canvas(palette)
  const drift = driftOf(data.chi1, data.chi2, data.covariance)
  const radius = Math.min(70, width / 2 - 44)
  const [cx, cy] = [width / 2, radius + 22]
  const length = Number.isFinite(drift.mas.value) ? drift.mas.value : 0
  const step = length > 0 ? niceStep(length / 2) : 1
  for (const ring of [1, 2]) canvas.add('circle', { cx, cy, r: ring * radius / 2, fill: 'none', stroke: palette.hairline })
  canvas.path(`${pathThrough([[cx - radius - 4, cy], [cx + radius + 4, cy]])}${pathThrough([[cx, cy - radius - 4], [cx, cy + radius + 4]])}`, { stroke: palette.hairline })
  const soft = { size: 11, fill: palette.soft }
  canvas.text('90°\u00a0E', cx, cy - radius - 8, { ...soft, anchor: 'middle' })
  canvas.text('0°', cx + radius + 8, cy + 4, soft)
  const scale = radius / (2 * step)
  const [x, y] = [cx + (length ? data.chi1.value : 0) * scale, cy - (length ? data.chi2.value : 0) * scale]
  canvas.line(cx, cy, x, y, palette.model, { 'stroke-width': 2.5 })
  canvas.add('circle', { cx: x, cy: y, r: 4, fill: palette.model })
  const [first, second] = [
    formatMeasured(drift.mas.value, drift.mas.sigma, { signed: false, unit: data.unit }).text,
    `${formatMeasured(drift.cm.value, drift.cm.sigma, { signed: false, unit: data.groundUnit }).text}${drift.direction ? ` towards ${formatDirection(drift.direction)}` : ''}`,
  ]
  const base = cy + radius + 24
  canvas.text(first, width / 2, base, { weight: 600, fill: palette.model, anchor: 'middle' })
  const size = Math.min(12, 12 * (width - 4) / textWidth(second, 12))
  canvas.text(second, width / 2, base + 17, { size, fill: palette.soft, anchor: 'middle' })
  return canvas.figure(width, base + 24, 'Shift of the pole', `${first}, ${second}. Seen from above the north pole, 0° to the right and 90° E up; the outer ring is ${formatMeasured(2 * step, null, { signed: false }).value} ${data.unit}.`)
}
