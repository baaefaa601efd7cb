import { formatNumber } from '../../format/digits.ts'
import { tickDecimals } from '../ticks.ts'
import type { Point } from '../svg.ts'

/** A stretch of the pole plane on the drawing: same scale both ways, the origin always inside. */
export interface DriftView {
  width: number
  height: number
  /** px per mas per year. */
  scale: number
  /** Place of a drift (χ̇₁, χ̇₂); χ̇₂ points up. */
  at: (point: Point) => Point
  /** Radii of the rings, mas per year. */
  rings: number[]
  ringText: (radius: number) => string
}

const margin = 30

/** A step of 1, 2 or 5 times a power of ten, not below `rough`. */
export function niceStep(rough: number): number {
  const power = 10 ** Math.floor(Math.log10(rough))
  return [1, 2, 5, 10].map(factor => factor * power).find(step => step >= rough * (1 - 1e-9)) ?? 10 * power
}

export function driftView(points: readonly Point[], width: number, height: number): DriftView {
  const far = Math.max(...points.map(([x, y]) => Math.hypot(x, y)), 0)
  const reach = far > 0 && Number.isFinite(far) ? far : 1
  // Some ground behind the origin, so that the drawing reads as a plane and not as a corner.
  const xs = [...points.map(([x]) => x), -0.3 * reach, 0.3 * reach]
  const ys = [...points.map(([, y]) => y), -0.3 * reach, 0.3 * reach]
  const [left, right, low, high] = [Math.min(...xs), Math.max(...xs), Math.min(...ys), Math.max(...ys)]
  const scale = Math.min((width - 2 * margin) / (right - left), (height - 2 * margin) / (high - low))
  const [midX, midY] = [(left + right) / 2, (low + high) / 2]
  const at = ([x, y]: Point): Point => [width / 2 + (x - midX) * scale, height / 2 - (y - midY) * scale]
  const [cx, cy] = at([0, 0])
  const corner = Math.hypot(Math.max(cx, width - cx), Math.max(cy, height - cy)) / scale
  const step = niceStep(Math.max(reach / 3, 56 / scale))
  const rings: number[] = []
  for (let i = 1; i * step < corner && i <= 12; i++) rings.push(i * step)
  const digits = tickDecimals([0, step])
  return { width, height, scale, at, rings, ringText: radius => formatNumber(radius, digits) }
}
