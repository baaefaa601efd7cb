/** Coefficients of one parity (cosine or sine) up to a degree: (L + 1)(L + 2)/2, order by order, degrees rising in each. */
export function coefficientCount(degree: number): number {
  return (degree + 1) * (degree + 2) / 2
}

/** Place of degree l, order m in an array laid out order by order. */
export function coefficientIndex(degree: number, l: number, m: number): number {
  return m * (degree + 1) - m * (m - 1) / 2 + (l - m)
}

/** Factors of the recursion in degree, computed once for a greatest degree. */
export interface LegendreRecursion { degree: number, a: Float64Array, b: Float64Array, diagonal: Float64Array }

/** Recursion factors: P̄_lm = a t P̄_{l−1,m} − b P̄_{l−2,m}. Holmes & Featherstone (2002), J. Geodesy 76, eq. 11–13. */
export function legendreRecursion(degree: number): LegendreRecursion {
  const n = coefficientCount(degree)
  const a = new Float64Array(n)
  const b = new Float64Array(n)
  const diagonal = new Float64Array(degree + 1)
  diagonal[0] = 1
  for (let m = 1; m <= degree; m++) diagonal[m] = Math.sqrt((m === 1 ? 2 : 1) * (2 * m + 1) / (2 * m))
  for (let m = 0; m <= degree; m++) {
    for (let l = m + 1; l <= degree; l++) {
      const k = coefficientIndex(degree, l, m)
      a[k] = Math.sqrt((2 * l - 1) * (2 * l + 1) / ((l - m) * (l + m)))
      b[k] = l > m + 1 ? Math.sqrt((2 * l + 1) * (l + m - 1) * (l - m - 1) / ((2 * l - 3) * (l - m) * (l + m))) : 0
    }
  }
  return { degree, a, b, diagonal }
}

/**
 * Associated Legendre functions P̄_lm(t), t = sin ψ, fully normalised (geodesy: the mean of the square of P̄_lm cos mλ over the
 * sphere is 1) and without the Condon–Shortley phase, written to `out` from `offset` on. P̄₀₀ = 1, P̄₁₀ = √3 t.
 * Seeds that underflow near the poles stand for values below 1e-300.
 */
export function legendreInto(recursion: LegendreRecursion, sine: number, out: Float64Array, offset = 0): void {
  const { degree, a, b, diagonal } = recursion
  const cosine = Math.sqrt(Math.max(0, 1 - sine * sine))
  let seed = 1
  let k = offset
  let at = 0
  for (let m = 0; m <= degree; m++) {
    if (m > 0) seed *= diagonal[m]! * cosine
    out[k++] = seed
    at++
    let before = 0
    let current = seed
    for (let l = m + 1; l <= degree; l++) {
      const next = a[at]! * sine * current - b[at]! * before
      out[k++] = next
      at++
      before = current
      current = next
    }
  }
}
