/** Small dense matrices by rows, for problems of as many unknowns as there are groups and sources. */
export type Matrix = Float64Array[]

/** Thrown where a matrix is not positive definite to working precision. */
export class NotPositiveError extends Error {
  constructor(readonly row: number) {
    super(`the matrix is not positive definite: pivot ${row} vanishes`)
    this.name = 'NotPositiveError'
  }
}

/** n × n matrix of zeros. */
export function zeros(n: number): Matrix {
  return Array.from({ length: n }, () => new Float64Array(n))
}

/** Lower Cholesky factor L of a symmetric positive-definite matrix, A = L Lᵀ. */
export function cholesky(a: Matrix): Matrix {
  const n = a.length
  const l = zeros(n)
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = a[i]![j]!
      for (let k = 0; k < j; k++) sum -= l[i]![k]! * l[j]![k]!
      if (i === j) {
        if (!(sum > a[i]![i]! * 1e-14) || !Number.isFinite(sum)) throw new NotPositiveError(i)
        l[i]![i] = Math.sqrt(sum)
      } else l[i]![j] = sum / l[j]![j]!
    }
  }
  return l
}

/** x with L Lᵀ x = b. */
export function solveCholesky(l: Matrix, b: ArrayLike<number>): Float64Array {
  const n = l.length
  const x = Float64Array.from(b)
  for (let i = 0; i < n; i++) {
    for (let k = 0; k < i; k++) x[i] = x[i]! - l[i]![k]! * x[k]!
    x[i] = x[i]! / l[i]![i]!
  }
  for (let i = n - 1; i >= 0; i--) {
    for (let k = i + 1; k < n; k++) x[i] = x[i]! - l[k]![i]! * x[k]!
    x[i] = x[i]! / l[i]![i]!
  }
  return x
}

/** (L Lᵀ)⁻¹. */
export function invertCholesky(l: Matrix): Matrix {
  const n = l.length
  // M = L⁻¹ is lower triangular too; the inverse is Mᵀ M.
  const m = zeros(n)
  for (let j = 0; j < n; j++) {
    m[j]![j] = 1 / l[j]![j]!
    for (let i = j + 1; i < n; i++) {
      let sum = 0
      for (let k = j; k < i; k++) sum -= l[i]![k]! * m[k]![j]!
      m[i]![j] = sum / l[i]![i]!
    }
  }
  const inverse = zeros(n)
  for (let i = 0; i < n; i++) {
    for (let j = 0; j <= i; j++) {
      let sum = 0
      for (let k = i; k < n; k++) sum += m[k]![i]! * m[k]![j]!
      inverse[i]![j] = sum
      inverse[j]![i] = sum
    }
  }
  return inverse
}

/** ln det of L Lᵀ. */
export function logDeterminant(l: Matrix): number {
  return l.reduce((sum, row, i) => sum + 2 * Math.log(row[i]!), 0)
}

export interface SingularValues {
  /** In falling order. */
  values: Float64Array
  /** vectors[k] is the right singular vector of values[k]: a combination of the columns, of unit length. */
  vectors: Float64Array[]
}

/**
 * Singular values and right singular vectors of a matrix given by its columns, by one-sided Jacobi rotations (Hestenes 1958; Demmel &
 * Veselić 1992), which keep the small values' digits.
 */
export function singularValues(columns: readonly ArrayLike<number>[]): SingularValues {
  const n = columns.length
  const a = n > 0 && columns[0]!.length > 2 * n ? triangular(columns) : columns.map(column => new Float64Array(column))
  const v = zeros(n)
  for (let i = 0; i < n; i++) v[i]![i] = 1
  for (let sweep = 0; sweep < 60; sweep++) {
    let rotated = false
    for (let p = 0; p < n - 1; p++) {
      for (let q = p + 1; q < n; q++) {
        const [pp, qq, pq] = [dot(a[p]!, a[p]!), dot(a[q]!, a[q]!), dot(a[p]!, a[q]!)]
        if (Math.abs(pq) <= 1e-15 * Math.sqrt(pp * qq) || pq === 0) continue
        rotated = true
        const zeta = (qq - pp) / (2 * pq)
        const t = (zeta >= 0 ? 1 : -1) / (Math.abs(zeta) + Math.hypot(1, zeta))
        const c = 1 / Math.hypot(1, t)
        rotate(a[p]!, a[q]!, c, c * t)
        rotate(v[p]!, v[q]!, c, c * t)
      }
    }
    if (!rotated) break
  }
  const order = a.map((column, k) => ({ k, value: Math.sqrt(dot(column, column)) })).sort((x, y) => y.value - x.value)
  return { values: Float64Array.from(order, o => o.value), vectors: order.map(o => v[o.k]!) }
}

/** Columns of the upper factor R of A = Q R, by Gram–Schmidt done twice: the same singular values and vectors, in fewer numbers. */
function triangular(columns: readonly ArrayLike<number>[]): Float64Array[] {
  const units: Float64Array[] = []
  return columns.map((column, j) => {
    const r = new Float64Array(columns.length)
    const rest = new Float64Array(column)
    for (let round = 0; round < 2; round++) {
      units.forEach((unit, i) => {
        const share = dot(rest, unit)
        r[i] = r[i]! + share
        for (let k = 0; k < rest.length; k++) rest[k] = rest[k]! - share * unit[k]!
      })
    }
    const size = Math.sqrt(dot(rest, rest))
    r[j] = size
    units.push(size > 0 ? rest.map(x => x / size) : rest)
    return r
  })
}

function rotate(x: Float64Array, y: Float64Array, c: number, s: number): void {
  for (let i = 0; i < x.length; i++) {
    const [a, b] = [x[i]!, y[i]!]
    x[i] = c * a - s * b
    y[i] = s * a + c * b
  }
}

/** Σ xᵢ yᵢ. */
export function dot(x: ArrayLike<number>, y: ArrayLike<number>): number {
  let sum = 0
  for (let i = 0; i < x.length; i++) sum += x[i]! * y[i]!
  return sum
}

/** An orthonormal basis of the span of some columns (Gram–Schmidt, twice); columns that are combinations of others are left out. */
export function orthonormal(columns: readonly Float64Array[]): Float64Array[] {
  const basis: Float64Array[] = []
  for (const column of columns) {
    const size = Math.sqrt(dot(column, column))
    const rest = withoutSpan(column, basis)
    const left = Math.sqrt(dot(rest, rest))
    if (left > 1e-10 * size && left > 0) basis.push(rest.map(v => v / left))
  }
  return basis
}

/** What is left of a column outside the span of an orthonormal basis. */
export function withoutSpan(column: Float64Array, basis: readonly Float64Array[]): Float64Array {
  const rest = new Float64Array(column)
  for (let round = 0; round < 2; round++) {
    for (const unit of basis) {
      const share = dot(rest, unit)
      for (let i = 0; i < rest.length; i++) rest[i] = rest[i]! - share * unit[i]!
    }
  }
  return rest
}
