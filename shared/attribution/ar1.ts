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
  const carried = new Float64Array(n)
  const scale = new Float64Array(n)
  for (let k = 0; k < n; k++) {
    carried[k] = phi ** steps[k]!
    scale[k] = 1 / (sigma * Math.sqrt(1 - carried[k]! ** 2))
  }
  return (x) => {
    const out = new Float64Array(n)
    out[0] = x[0]! / sigma
    for (let k = 1; k < n; k++) out[k] = (x[k]! - carried[k]! * x[k - 1]!) * scale[k]!
    return out
  }
}

/** Whole steps between epochs that lie on a regular grid, 1 for the first; at least 1. */
export function stepsOf(mjd: ArrayLike<number>, stepDays: number): Float64Array {
  const steps = new Float64Array(mjd.length).fill(1)
  for (let k = 1; k < steps.length; k++) steps[k] = Math.max(1, Math.round((mjd[k]! - mjd[k - 1]!) / stepDays))
  return steps
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
  const epochs = new Map<number, number[]>()
  for (let k = 1; k < steps.length; k++) {
    const known = epochs.get(steps[k]!)
    if (known) known.push(k)
    else epochs.set(steps[k]!, [k])
  }
  const byStep = [...epochs].map(([step, list]) => ({ step, list: Int32Array.from(list), here: zeros(size), crossed: zeros(size), before: zeros(size) }))
  for (let i = 0; i < size; i++) {
    for (let j = 0; j <= i; j++) {
      const [a, b] = [columns[i]!, columns[j]!]
      first[i]![j] = a[0]! * b[0]!
      for (const { list, here, crossed, before } of byStep) {
        let [p, q, r] = [0, 0, 0]
        for (let m = 0; m < list.length; m++) {
          const k = list[m]!
          const [x0, x1, y0, y1] = [a[k - 1]!, a[k]!, b[k - 1]!, b[k]!]
          p += x1 * y1
          q += x1 * y0 + x0 * y1
          r += x0 * y0
        }
        here[i]![j] = p
        crossed[i]![j] = q
        before[i]![j] = r
      }
    }
  }
  return {
    whitened: phi => first.map((row, i) => row.map((value, j) => {
      if (j > i) return 0
      let sum = value
      for (const { step, here, crossed, before } of byStep) {
        const c = phi ** step
        sum += (here[i]![j]! - c * crossed[i]![j]! + c * c * before[i]![j]!) / (1 - c * c)
      }
      return sum
    })),
    logCovariance: (phi) => {
      let sum = 0
      for (const { step, list } of byStep) sum += list.length * Math.log(1 - phi ** (2 * step))
      return sum
    }
  }
}
