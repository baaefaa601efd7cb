import type { Covariance } from '../earth/time/covariance.ts'
import { dot, singularValues } from './linearAlgebra.ts'

/** Turns vectors into ones whose plain dot products are xᵀC⁻¹y; null factors leave the base alone. */
export type Whitening = (x: ArrayLike<number>) => Float64Array

/**
 * The square root of Woodbury's identity: for base noise that is white already, and factors L of a covariance I + L Lᵀ, the map
 * x ↦ x − V diag(1 − 1/√(1 + s²)) Vᵀx, where V and s are the left singular vectors and values of L. The n × n matrix is never formed.
 *
 * @param loadings the factors, whitened like x: k vectors of n numbers
 */
export function lowRankWhitening(loadings: readonly Float64Array[]): Whitening {
  const active = loadings.filter(loading => loading.some(v => v !== 0))
  if (active.length === 0) return x => new Float64Array(x)
  const { values, vectors } = singularValues(active)
  const left: { unit: Float64Array, damping: number }[] = []
  values.forEach((s, k) => {
    if (!(s > 1e-12 * values[0]!)) return
    const unit = new Float64Array(active[0]!.length)
    active.forEach((loading, j) => {
      const share = vectors[k]![j]! / s
      for (let i = 0; i < unit.length; i++) unit[i] = unit[i]! + share * loading[i]!
    })
    left.push({ unit, damping: 1 - 1 / Math.sqrt(1 + s * s) })
  })
  return (x) => {
    const out = new Float64Array(x)
    for (const { unit, damping } of left) {
      const share = damping * dot(x, unit)
      for (let i = 0; i < out.length; i++) out[i] = out[i]! - share * unit[i]!
    }
    return out
  }
}

/** Whitening by a covariance of a diagonal and low-rank factors. RangeError for a variance that is not positive. */
export function whiteningOf({ diagonal, factors }: Covariance): Whitening {
  const sigma = diagonal.map((d, i) => {
    if (!(d > 0) || !Number.isFinite(d)) throw new RangeError(`variances must be positive and finite, got ${d} at index ${i}`)
    return Math.sqrt(d)
  })
  const scale = (x: ArrayLike<number>): Float64Array => {
    if (x.length !== sigma.length) throw new RangeError(`x must have ${sigma.length} numbers, got ${x.length}`)
    return sigma.map((s, i) => x[i]! / s)
  }
  const root = lowRankWhitening(factors.map(({ loading }) => scale(loading)))
  return x => root(scale(x))
}

/** xᵀC⁻¹x of a covariance of a diagonal and low-rank factors. */
export function quadraticForm(covariance: Covariance, x: ArrayLike<number>): number {
  const white = whiteningOf(covariance)(x)
  return dot(white, white)
}
