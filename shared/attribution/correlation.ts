import { studentTail } from './distributions.ts'

export interface Correlation {
  value: number
  /** Pairs, and how many independent ones they are worth. */
  pairs: number
  effectivePairs: number
  /** Probability of a larger |r| between unrelated series with the same autocorrelation. */
  pValue: number
}

/** Lag-one correlation of a series without trend, corrected for the bias of short records, (1 + 4r)/n (Marriott & Pope 1954, Biometrika 41, 390). */
export function lagOne(x: ArrayLike<number>): number {
  const n = x.length
  let mean = 0
  for (let i = 0; i < n; i++) mean += x[i]! / n
  let [lagged, square] = [0, 0]
  for (let i = 0; i < n; i++) {
    square += (x[i]! - mean) ** 2
    if (i > 0) lagged += (x[i]! - mean) * (x[i - 1]! - mean)
  }
  const r = square > 0 ? lagged / square : 0
  return Math.max(-0.99, Math.min(0.99, r + (1 + 4 * r) / n))
}

/**
 * Correlation of two series with its significance where both are autocorrelated: n(1 − r₁ₓr₁ᵧ)/(1 + r₁ₓr₁ᵧ) independent pairs
 * (Bretherton et al. 1999, J. Climate 12, 1990, eq. 31) and Student's t. Null for fewer than eight pairs or a constant series.
 */
export function correlationOf(x: ArrayLike<number>, y: ArrayLike<number>): Correlation | null {
  const value = pearson(x, y)
  const pairs = x.length
  if (pairs < 8 || value === null) return null
  const product = lagOne(x) * lagOne(y)
  const effectivePairs = Math.max(3, Math.min(pairs, pairs * (1 - product) / (1 + product)))
  const degrees = effectivePairs - 2
  const t = value * Math.sqrt(degrees / Math.max(1e-300, 1 - value * value))
  return { value, pairs, effectivePairs, pValue: studentTail(t, degrees) }
}

export interface Lag {
  /** Steps by which y comes after x where they agree best, with a fraction from a parabola; positive: y is late. */
  steps: number
  /** Correlation there. */
  value: number
  /** Whether the best lag is the longest that was tried, so that the true one may be longer. */
  atEdge: boolean
}

/** The lag at which two series agree best, among −most … most steps; NaN where a value is missing. Null where none has eight pairs. */
export function bestLag(x: ArrayLike<number>, y: ArrayLike<number>, most: number): Lag | null {
  const at = (lag: number): number | null => {
    const a: number[] = []
    const b: number[] = []
    for (let i = 0; i < x.length; i++) {
      const j = i + lag
      if (j < 0 || j >= y.length || Number.isNaN(x[i]!) || Number.isNaN(y[j]!)) continue
      a.push(x[i]!)
      b.push(y[j]!)
    }
    return a.length < 8 ? null : pearson(a, b)
  }
  const values = Array.from({ length: 2 * most + 1 }, (_, i) => at(i - most))
  let best = -1
  values.forEach((v, i) => {
    if (v !== null && (best < 0 || v > values[best]!)) best = i
  })
  if (best < 0) return null
  const [before, here, after] = [values[best - 1] ?? null, values[best]!, values[best + 1] ?? null]
  const curve = before !== null && after !== null ? before - 2 * here + after : 0
  const shift = curve < 0 ? (before! - after!) / (2 * curve) : 0
  return { steps: best - most + shift, value: here, atEdge: best === 0 || best === 2 * most }
}

function pearson(x: ArrayLike<number>, y: ArrayLike<number>): number | null {
  const n = x.length
  if (y.length !== n) throw new RangeError(`series must be equally long, got ${n} and ${y.length}`)
  let [mx, my] = [0, 0]
  for (let i = 0; i < n; i++) {
    mx += x[i]! / n
    my += y[i]! / n
  }
  let [xx, yy, xy] = [0, 0, 0]
  for (let i = 0; i < n; i++) {
    const [a, b] = [x[i]! - mx, y[i]! - my]
    xx += a * a
    yy += b * b
    xy += a * b
  }
  return xx > 0 && yy > 0 ? xy / Math.sqrt(xx * yy) : null
}
