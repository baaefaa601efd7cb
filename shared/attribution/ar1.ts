import { weightedLeastSquares } from '../earth/time/leastSquares.ts'
import type { Whitening } from './metric.ts'

/** AR(1) noise of one observable: one-sigma in its unit, and correlation over one step. */
export interface Ar1Noise { sigma: number, phi: number }

const PHI_RANGE = [-0.5, 0.995] as const

/**
 * Whitening of stationary AR(1) noise on epochs that are `steps[k]` whole steps after the one before: x₀/σ, then
 * (xₖ − φˢ xₖ₋₁)/(σ √(1 − φ²ˢ)), exact across gaps.
 */
export function ar1Whitening({ sigma, phi }: Ar1Noise, steps: ArrayLike<number>): Whitening {
  if (!(sigma > 0) || !(Math.abs(phi) < 1)) throw new RangeError(`sigma must be positive and phi between −1 and 1, got ${sigma} and ${phi}`)
  const n = steps.length
  const carried = Float64Array.from(steps, s => phi ** s)
  const scale = carried.map(c => 1 / (sigma * Math.sqrt(1 - c * c)))
  return (x) => {
    const out = new Float64Array(n)
    for (let k = 0; k < n; k++) out[k] = k === 0 ? x[0]! / sigma : (x[k]! - carried[k]! * x[k - 1]!) * scale[k]!
    return out
  }
}

/** Whole steps between epochs that lie on a regular grid, 1 for the first; at least 1. */
export function stepsOf(mjd: ArrayLike<number>, stepDays: number): Float64Array {
  return Float64Array.from({ length: mjd.length }, (_, k) => k === 0 ? 1 : Math.max(1, Math.round((mjd[k]! - mjd[k - 1]!) / stepDays)))
}

/**
 * σ and φ of the AR(1) noise about a fit of some columns, by restricted likelihood (Patterson & Thompson 1971), which does not forget
 * what the columns take. φ between −0.5 and 0.995 to 1e-3.
 *
 * @param lost degrees of freedom that were taken from the values before, beyond the columns
 */
export function estimateAr1(value: Float64Array, columns: readonly Float64Array[], steps: ArrayLike<number>, lost = 0): Ar1Noise {
  const n = value.length
  if (n < columns.length + 3) throw new RangeError(`noise of ${columns.length} columns needs at least ${columns.length + 3} values, got ${n}`)
  const at = (phi: number): { deviance: number, variance: number } => {
    const whiten = ar1Whitening({ sigma: 1, phi }, steps)
    const fit = weightedLeastSquares(columns.map(whiten), whiten(value))
    let logCovariance = 0
    for (let k = 1; k < n; k++) logCovariance += Math.log(1 - phi ** (2 * steps[k]!))
    return { deviance: fit.degreesOfFreedom * Math.log(Math.max(fit.variance, 1e-300)) + fit.logDeterminant + logCovariance, variance: fit.variance }
  }
  // Coarse grid, then golden section about its best point.
  const grid = [-0.5, -0.3, -0.1, 0.1, 0.3, 0.5, 0.65, 0.8, 0.9, 0.96, 0.99]
  const deviances = grid.map(phi => at(phi).deviance)
  const best = deviances.indexOf(Math.min(...deviances))
  let [low, high] = [grid[best - 1] ?? PHI_RANGE[0], grid[best + 1] ?? PHI_RANGE[1]]
  const golden = (Math.sqrt(5) - 1) / 2
  let [a, b] = [high - golden * (high - low), low + golden * (high - low)]
  let [fa, fb] = [at(a).deviance, at(b).deviance]
  while (high - low > 1e-3) {
    if (fa < fb) {
      [high, b, fb] = [b, a, fa]
      a = high - golden * (high - low)
      fa = at(a).deviance
    } else {
      [low, a, fa] = [a, b, fb]
      b = low + golden * (high - low)
      fb = at(b).deviance
    }
  }
  const phi = (low + high) / 2
  const degrees = n - columns.length
  const variance = at(phi).variance * degrees / Math.max(1, degrees - lost)
  return { sigma: Math.sqrt(variance), phi }
}
