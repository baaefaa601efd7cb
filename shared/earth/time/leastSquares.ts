/** Result of a linear least-squares fit of p coefficients to n values. */
export interface LeastSquaresFit {
  /** p coefficients, in the order of the columns. */
  coefficients: Float64Array
  /** (AᵀWA)⁻¹, p × p: the covariance of the coefficients if the sigmas are right as given (unit variance without). */
  cofactor: Float64Array[]
  /** One-sigma of the coefficients, scaled by the residuals: √(s² · cofactor). NaN without degrees of freedom. */
  sigma: Float64Array
  /** n fitted values and n residuals (value − model), in the unit of y. */
  model: Float64Array
  residuals: Float64Array
  /** Residuals over their sigma; the plain residuals when none was given. */
  standardised: Float64Array
  /** s² = Σ standardised² / (n − p). NaN without degrees of freedom. */
  variance: number
  degreesOfFreedom: number
  /** ln det AᵀWA, as restricted likelihoods need it. */
  logDeterminant: number
}

/** Thrown when the columns do not determine the coefficients. */
export class RankError extends Error {
  constructor(readonly column: number) {
    super(`column ${column} is, to working precision, a combination of the columns before it`)
    this.name = 'RankError'
  }
}

/**
 * Weighted linear least squares, min Σ ((y − A c)/σ)², by Householder QR of the column-scaled design (Golub & Van Loan,
 * Matrix Computations, §5.3). Normal equations are never formed, so that ill-conditioned designs keep their digits.
 *
 * @param columns p columns of n numbers (the design matrix, by columns)
 * @param y n values
 * @param sigma n one-sigma errors, all > 0, in the unit of y; absent: equal weights
 * @throws RangeError for unequal lengths, n < p, or a sigma that is not positive; RankError for dependent columns
 */
export function weightedLeastSquares(columns: ArrayLike<number>[], y: ArrayLike<number>, sigma?: ArrayLike<number> | null): LeastSquaresFit {
  const n = y.length
  const p = columns.length
  checkSizes(columns, n, sigma)
  const norms = new Float64Array(p)
  const a = columns.map((column, j) => {
    const scaled = new Float64Array(n)
    for (let i = 0; i < n; i++) scaled[i] = column[i]! / (sigma ? sigma[i]! : 1)
    norms[j] = norm(scaled, 0)
    if (norms[j] === 0) throw new RankError(j)
    for (let i = 0; i < n; i++) scaled[i] = scaled[i]! / norms[j]!
    return scaled
  })
  const b = new Float64Array(n)
  for (let i = 0; i < n; i++) b[i] = y[i]! / (sigma ? sigma[i]! : 1)

  const r = householder(a, b)
  const coefficients = backSubstitute(r, b)
  const inverse = invertUpper(r)
  const cofactor = Array.from({ length: p }, (_, i) => {
    const row = new Float64Array(p)
    for (let j = 0; j < p; j++) {
      let sum = 0
      for (let k = Math.max(i, j); k < p; k++) sum += inverse[i]![k]! * inverse[j]![k]!
      row[j] = sum / (norms[i]! * norms[j]!)
    }
    return row
  })
  let logDeterminant = 0
  for (let j = 0; j < p; j++) {
    coefficients[j] = coefficients[j]! / norms[j]!
    logDeterminant += 2 * Math.log(Math.abs(r[j]![j]!) * norms[j]!)
  }

  const model = new Float64Array(n)
  const residuals = new Float64Array(n)
  const standardised = new Float64Array(n)
  let chi2 = 0
  for (let i = 0; i < n; i++) {
    let fitted = 0
    for (let j = 0; j < p; j++) fitted += coefficients[j]! * columns[j]![i]!
    model[i] = fitted
    residuals[i] = y[i]! - fitted
    standardised[i] = residuals[i]! / (sigma ? sigma[i]! : 1)
    chi2 += standardised[i]! ** 2
  }
  const degreesOfFreedom = n - p
  const variance = degreesOfFreedom > 0 ? chi2 / degreesOfFreedom : Number.NaN
  const sigmas = new Float64Array(p)
  for (let j = 0; j < p; j++) sigmas[j] = Math.sqrt(variance * cofactor[j]![j]!)
  return { coefficients, cofactor, sigma: sigmas, model, residuals, standardised, variance, degreesOfFreedom, logDeterminant }
}

function checkSizes(columns: ArrayLike<number>[], n: number, sigma?: ArrayLike<number> | null): void {
  if (columns.length === 0) throw new RangeError('columns must hold at least one column, got none')
  columns.forEach((column, j) => {
    if (column.length !== n) throw new RangeError(`column ${j} must have ${n} numbers, got ${column.length}`)
  })
  if (n < columns.length) throw new RangeError(`y must have at least ${columns.length} values for ${columns.length} coefficients, got ${n}`)
  if (!sigma) return
  if (sigma.length !== n) throw new RangeError(`sigma must have ${n} numbers, got ${sigma.length}`)
  for (let i = 0; i < n; i++) {
    if (!(sigma[i]! > 0) || !Number.isFinite(sigma[i]!)) throw new RangeError(`sigma must be positive and finite, got ${sigma[i]} at index ${i}`)
  }
}

/** Triangularises the columns in place, applies the reflections to b, and returns the p × p upper factor by rows. */
function householder(a: Float64Array[], b: Float64Array): Float64Array[] {
  const n = b.length
  const p = a.length
  const r = Array.from({ length: p }, () => new Float64Array(p))
  for (let k = 0; k < p; k++) {
    const column = a[k]!
    const length = norm(column, k)
    // Columns have unit norm: what is left of one after the others are taken out is its sine to their span.
    if (length < 1e-12) throw new RankError(k)
    const alpha = column[k]! > 0 ? -length : length
    const v = column.slice(k)
    v[0] = v[0]! - alpha
    let vv = 0
    for (const x of v) vv += x * x
    const reflect = (target: Float64Array): void => {
      let dot = 0
      for (let i = k; i < n; i++) dot += v[i - k]! * target[i]!
      const factor = 2 * dot / vv
      for (let i = k; i < n; i++) target[i] = target[i]! - factor * v[i - k]!
    }
    for (let j = k + 1; j < p; j++) reflect(a[j]!)
    reflect(b)
    r[k]![k] = alpha
    for (let j = k + 1; j < p; j++) r[k]![j] = a[j]![k]!
  }
  return r
}

function backSubstitute(r: Float64Array[], b: Float64Array): Float64Array {
  const p = r.length
  const x = new Float64Array(p)
  for (let i = p - 1; i >= 0; i--) {
    let sum = b[i]!
    for (let j = i + 1; j < p; j++) sum -= r[i]![j]! * x[j]!
    x[i] = sum / r[i]![i]!
  }
  return x
}

function invertUpper(r: Float64Array[]): Float64Array[] {
  const p = r.length
  const inverse = Array.from({ length: p }, () => new Float64Array(p))
  for (let j = 0; j < p; j++) {
    inverse[j]![j] = 1 / r[j]![j]!
    for (let i = j - 1; i >= 0; i--) {
      let sum = 0
      for (let k = i + 1; k <= j; k++) sum += r[i]![k]! * inverse[k]![j]!
      inverse[i]![j] = -sum / r[i]![i]!
    }
  }
  return inverse
}

function norm(x: Float64Array, from: number): number {
  let largest = 0
  for (let i = from; i < x.length; i++) largest = Math.max(largest, Math.abs(x[i]!))
  if (largest === 0 || !Number.isFinite(largest)) return largest
  let sum = 0
  for (let i = from; i < x.length; i++) sum += (x[i]! / largest) ** 2
  return largest * Math.sqrt(sum)
}
