import { cholesky, dot, orthonormal, withoutSpan, zeros } from './linearAlgebra.ts'
import type { Matrix } from './linearAlgebra.ts'
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
 * what the columns take. φ between −0.5 and 0.995 to 1e-3. Values without any noise get a σ of rounding size.
 *
 * @param lost degrees of freedom that were taken from the values before, beyond the columns
 */
export function estimateAr1(value: Float64Array, columns: readonly Float64Array[], steps: ArrayLike<number>, lost = 0): Ar1Noise {
  const n = value.length
  const p = columns.length
  if (n < p + 3) throw new RangeError(`noise of ${p} columns needs at least ${p + 3} values, got ${n}`)
  // What the columns explain goes first, so that small noise on a large offset keeps its digits.
  const rest = withoutSpan(value, orthonormal(columns))
  const floor = 1e-12 * Math.sqrt(dot(value, value) / n)
  if (!(dot(rest, rest) > n * floor * floor)) return { sigma: Math.max(floor, Number.MIN_VALUE ** 0.25), phi: 0 }
  const products = laggedProducts([...columns, rest], steps)
  const at = (phi: number): { deviance: number, variance: number } => {
    const factor = cholesky(products.whitened(phi))
    // The last pivot of columns and values together is what the columns leave of the values.
    const variance = factor[p]![p]! ** 2 / (n - p)
    let determinant = 0
    for (let j = 0; j < p; j++) determinant += 2 * Math.log(factor[j]![j]!)
    return { deviance: (n - p) * Math.log(variance) + determinant + products.logCovariance(phi), variance }
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
  const variance = at(phi).variance * (n - p) / Math.max(1, n - p - lost)
  return { sigma: Math.sqrt(variance), phi }
}

/**
 * Products of columns at lag nought and one, from which those of the whitened columns follow for any φ without going through the
 * epochs again: Σ (aₖ − φˢ aₖ₋₁)(bₖ − φˢ bₖ₋₁)/(1 − φ²ˢ), summed for each length of step s.
 */
function laggedProducts(columns: readonly Float64Array[], steps: ArrayLike<number>): { whitened: (phi: number) => Matrix, logCovariance: (phi: number) => number } {
  const size = columns.length
  const first = zeros(size)
  const byStep = new Map<number, { count: number, here: Matrix, crossed: Matrix, before: Matrix }>()
  for (let k = 1; k < steps.length; k++) {
    const step = steps[k]!
    if (!byStep.has(step)) byStep.set(step, { count: 0, here: zeros(size), crossed: zeros(size), before: zeros(size) })
    byStep.get(step)!.count++
  }
  for (let i = 0; i < size; i++) {
    for (let j = 0; j <= i; j++) {
      const [a, b] = [columns[i]!, columns[j]!]
      first[i]![j] = a[0]! * b[0]!
      for (let k = 1; k < a.length; k++) {
        const { here, crossed, before } = byStep.get(steps[k]!)!
        here[i]![j] = here[i]![j]! + a[k]! * b[k]!
        crossed[i]![j] = crossed[i]![j]! + a[k]! * b[k - 1]! + a[k - 1]! * b[k]!
        before[i]![j] = before[i]![j]! + a[k - 1]! * b[k - 1]!
      }
    }
  }
  return {
    whitened: phi => first.map((row, i) => row.map((value, j) => {
      if (j > i) return 0
      let sum = value
      for (const [step, { here, crossed, before }] of byStep) {
        const c = phi ** step
        sum += (here[i]![j]! - c * crossed[i]![j]! + c * c * before[i]![j]!) / (1 - c * c)
      }
      return sum
    })),
    logCovariance: (phi) => {
      let sum = 0
      for (const [step, { count }] of byStep) sum += count * Math.log(1 - phi ** (2 * step))
      return sum
    }
  }
}
