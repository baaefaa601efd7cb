/**
 * Covariance of n quantities as a diagonal plus low-rank factors, C = diag(d) + T diag(w) Tᵀ + Σ_s L_s L_sᵀ: errors of each quantity
 * by itself, and named sources that move all of them together (one isostatic model, one reference frame, …). Sources are
 * independent of one another; one source is fully correlated with itself wherever it appears. The n × n matrix is never formed.
 */
export interface Covariance {
  /** n variances, unit². */
  diagonal: Float64Array
  /**
   * n variances w, unit², of errors that enter at a quantity and stay in all that follow (T is lower triangular, of ones), as when
   * rates are summed; absent: none.
   */
  walk?: Float64Array
  /** One-sigma loadings of each source on the n quantities, unit; each source at most once. */
  factors: Factor[]
}
export interface Factor { source: string, loading: Float64Array }

/** Covariance of n independent quantities from one-sigmas, with loadings of named sources. */
export function covarianceOf(sigma: ArrayLike<number>, factors: { source: string, loading: ArrayLike<number> }[] = []): Covariance {
  const diagonal = Float64Array.from({ length: sigma.length }, (_, i) => sigma[i]! ** 2)
  const merged: Factor[] = []
  for (const { source, loading } of factors) {
    if (loading.length !== sigma.length) throw new RangeError(`loading of "${source}" must have ${sigma.length} numbers, got ${loading.length}`)
    addLoading(merged, source, loading)
  }
  return { diagonal, factors: merged }
}

/** Covariance of x + y: diagonals are independent and add as variances, loadings of the same source add linearly. */
export function addCovariance(x: Covariance, y: Covariance): Covariance {
  if (x.diagonal.length !== y.diagonal.length) throw new RangeError(`covariances must have equal sizes, got ${x.diagonal.length} and ${y.diagonal.length}`)
  const factors: Factor[] = []
  for (const { source, loading } of [...x.factors, ...y.factors]) addLoading(factors, source, loading)
  const walk = x.walk || y.walk ? x.diagonal.map((_, i) => (x.walk?.[i] ?? 0) + (y.walk?.[i] ?? 0)) : undefined
  return { diagonal: x.diagonal.map((d, i) => d + y.diagonal[i]!), ...(walk ? { walk } : {}), factors }
}

/** Covariance of k·x; the sign of k stays in the loadings. */
export function scaleCovariance(x: Covariance, k: number): Covariance {
  return {
    diagonal: x.diagonal.map(d => k * k * d),
    ...(x.walk ? { walk: x.walk.map(w => k * k * w) } : {}),
    factors: x.factors.map(({ source, loading }) => ({ source, loading: loading.map(l => k * l) }))
  }
}

/** Variance of the linear functional Σ wᵢ xᵢ. */
export function varianceOfFunctional(x: Covariance, weights: ArrayLike<number>): number {
  return covarianceOfFunctionals(x, weights, weights)
}

/** Covariance of two linear functionals Σ aᵢ xᵢ and Σ bᵢ xᵢ. */
export function covarianceOfFunctionals(x: Covariance, a: ArrayLike<number>, b: ArrayLike<number>): number {
  const n = x.diagonal.length
  if (a.length !== n || b.length !== n) throw new RangeError(`functionals must have ${n} weights, got ${a.length} and ${b.length}`)
  let sum = 0
  for (let i = 0; i < n; i++) sum += a[i]! * b[i]! * x.diagonal[i]!
  if (x.walk) {
    let laterA = 0
    let laterB = 0
    for (let i = n - 1; i >= 0; i--) {
      laterA += a[i]!
      laterB += b[i]!
      sum += x.walk[i]! * laterA * laterB
    }
  }
  for (const { loading } of x.factors) sum += dot(loading, a) * dot(loading, b)
  return sum
}

/** One-sigma of each of the n quantities. */
export function sigmasOf(x: Covariance): Float64Array {
  const variance = Float64Array.from(x.diagonal)
  let walked = 0
  if (x.walk) x.walk.forEach((w, i) => { variance[i] = variance[i]! + (walked += w) })
  for (const { loading } of x.factors) loading.forEach((l, i) => { variance[i] = variance[i]! + l * l })
  return variance.map(Math.sqrt)
}

function addLoading(factors: Factor[], source: string, loading: ArrayLike<number>): void {
  const known = factors.find(factor => factor.source === source)
  if (known) known.loading.forEach((l, i) => { known.loading[i] = l + loading[i]! })
  else factors.push({ source, loading: Float64Array.from(loading) })
}

function dot(x: ArrayLike<number>, y: ArrayLike<number>): number {
  let sum = 0
  for (let i = 0; i < x.length; i++) sum += x[i]! * y[i]!
  return sum
}
