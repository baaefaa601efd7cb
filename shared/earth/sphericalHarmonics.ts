import { fourierPlan, fourierTransform, type FourierPlan } from './fourier.ts'
import { gaussLegendre } from './gaussLegendre.ts'
import { coefficientCount, legendreInto, legendreRecursion } from './legendre.ts'

/**
 * Real harmonic coefficients up to a degree: f = Σ P̄_lm(sin ψ) (C_lm cos mλ + S_lm sin mλ), fully normalised (geodesy), no
 * Condon–Shortley phase. Both arrays run order by order (`coefficientIndex`); S_l0 is 0.
 */
export interface Harmonics { degree: number, cosine: Float64Array, sine: Float64Array }

/** Coefficients up to a degree, all 0. */
export function emptyHarmonics(degree: number): Harmonics {
  return { degree, cosine: new Float64Array(coefficientCount(degree)), sine: new Float64Array(coefficientCount(degree)) }
}

/**
 * A Gauss–Legendre grid with the tables of its transforms. Rows run from south to north at sines of geocentric latitude `sines`,
 * columns at the middles of equal cells from 180° W: λ_j = −180° + (j + ½) 360°/columns. A field is row by row.
 */
export interface HarmonicGrid {
  degree: number
  rows: number
  columns: number
  sines: Float64Array
  /** Gauss weights, sum 2. */
  weights: Float64Array
  /** Bounds of the rows as sines: −1 plus the weights cumulated, so that a row's cell has the row's weight. */
  sineEdges: Float64Array
  /** P̄_lm at the rows of the northern half, row after row. */
  legendre: Float64Array
  fourier: FourierPlan
  /** cos mλ₀ and sin mλ₀ of the first column. */
  phaseCosine: Float64Array
  phaseSine: Float64Array
}

/** Grid for a degree; `rows` (even, at least degree + 1) default to three halves of the degree, so that products alias little. */
export function harmonicGrid(degree: number, rows = 2 * Math.ceil((1.5 * degree + 1) / 2)): HarmonicGrid {
  if (!(Number.isInteger(degree) && degree >= 2)) throw new RangeError(`degree must be an integer of at least 2, got ${degree}`)
  if (rows % 2 !== 0 || rows < degree + 1) throw new RangeError(`rows must be even and at least ${degree + 1}, got ${rows}`)
  const columns = 2 ** Math.ceil(Math.log2(Math.max(2 * degree + 1, 1.5 * rows)))
  const { nodes: sines, weights } = gaussLegendre(rows)
  const sineEdges = new Float64Array(rows + 1)
  sineEdges[0] = -1
  for (let i = 0; i < rows; i++) sineEdges[i + 1] = i === rows - 1 ? 1 : sineEdges[i]! + weights[i]!
  const count = coefficientCount(degree)
  const legendre = new Float64Array(rows / 2 * count)
  const recursion = legendreRecursion(degree)
  for (let i = 0; i < rows / 2; i++) legendreInto(recursion, sines[rows / 2 + i]!, legendre, i * count)
  const first = -Math.PI + Math.PI / columns
  return {
    degree, rows, columns, sines, weights, sineEdges, legendre,
    fourier: fourierPlan(columns),
    phaseCosine: Float64Array.from({ length: degree + 1 }, (_, m) => Math.cos(m * first)),
    phaseSine: Float64Array.from({ length: degree + 1 }, (_, m) => Math.sin(m * first))
  }
}

/** Longitudes of the columns, radians. */
export function gridLongitudes({ columns }: HarmonicGrid): Float64Array {
  return Float64Array.from({ length: columns }, (_, j) => -Math.PI + (j + 0.5) * 2 * Math.PI / columns)
}

/** Scratch of the transforms of one grid: made once, used by one caller. */
export interface TransformScratch { re: Float64Array, im: Float64Array }

/** Scratch for the transforms of a grid. */
export function transformScratch({ columns }: HarmonicGrid): TransformScratch {
  return { re: new Float64Array(columns), im: new Float64Array(columns) }
}

/** Field on the grid from its coefficients, written to `out`. */
export function synthesise(grid: HarmonicGrid, { cosine, sine }: Harmonics, out: Float64Array, { re, im }: TransformScratch): void {
  const { degree, rows, columns, legendre, phaseCosine, phaseSine } = grid
  const count = coefficientCount(degree)
  const half = rows / 2
  for (let i = 0; i < half; i++) {
    re.fill(0)
    im.fill(0)
    let p = i * count
    let k = 0
    for (let m = 0; m <= degree; m++) {
      let evenC = 0
      let evenS = 0
      let oddC = 0
      let oddS = 0
      const end = k + degree - m
      while (k < end) {
        evenC += legendre[p]! * cosine[k]!
        evenS += legendre[p]! * sine[k]!
        oddC += legendre[p + 1]! * cosine[k + 1]!
        oddS += legendre[p + 1]! * sine[k + 1]!
        k += 2
        p += 2
      }
      if (k === end) {
        evenC += legendre[p]! * cosine[k]!
        evenS += legendre[p]! * sine[k]!
        k++
        p++
      }
      // Turned to the first column; then north + i south go through one complex transform: z_m = F_m with f = Re Σ F_m e^{imλ}.
      const c = phaseCosine[m]!
      const s = phaseSine[m]!
      const northC = c * (evenC + oddC) + s * (evenS + oddS)
      const northS = c * (evenS + oddS) - s * (evenC + oddC)
      const southC = c * (evenC - oddC) + s * (evenS - oddS)
      const southS = c * (evenS - oddS) - s * (evenC - oddC)
      if (m === 0) {
        re[0] = northC
        im[0] = southC
        continue
      }
      re[m] = (northC + southS) / 2
      im[m] = (southC - northS) / 2
      re[columns - m] = (northC - southS) / 2
      im[columns - m] = (southC + northS) / 2
    }
    fourierTransform(grid.fourier, re, im, false)
    out.set(re, (half + i) * columns)
    out.set(im, (half - 1 - i) * columns)
  }
}

/** Coefficients of a field on the grid, up to the grid's degree, written to `out`: the adjoint of `synthesise` over 4π. */
export function analyse(grid: HarmonicGrid, field: Float64Array, out: Harmonics, { re, im }: TransformScratch): void {
  const { degree, rows, columns, legendre, weights, phaseCosine, phaseSine } = grid
  const { cosine, sine } = out
  const count = coefficientCount(degree)
  const half = rows / 2
  cosine.fill(0)
  sine.fill(0)
  for (let i = 0; i < half; i++) {
    const north = (half + i) * columns
    const south = (half - 1 - i) * columns
    for (let j = 0; j < columns; j++) {
      re[j] = field[north + j]!
      im[j] = field[south + j]!
    }
    fourierTransform(grid.fourier, re, im, true)
    const weight = weights[half + i]! / (2 * columns)
    let p = i * count
    let k = 0
    for (let m = 0; m <= degree; m++) {
      const mirror = m === 0 ? 0 : columns - m
      // Sums of f cos and f sin from the first column on, north and south.
      const northC = (re[m]! + re[mirror]!) / 2
      const northS = -(im[m]! - im[mirror]!) / 2
      const southC = (im[m]! + im[mirror]!) / 2
      const southS = (re[m]! - re[mirror]!) / 2
      const c = phaseCosine[m]! * weight
      const s = phaseSine[m]! * weight
      const evenC = c * (northC + southC) - s * (northS + southS)
      const evenS = c * (northS + southS) + s * (northC + southC)
      const oddC = c * (northC - southC) - s * (northS - southS)
      const oddS = c * (northS - southS) + s * (northC - southC)
      const end = k + degree - m
      while (k < end) {
        cosine[k] = cosine[k]! + legendre[p]! * evenC
        sine[k] = sine[k]! + legendre[p]! * evenS
        cosine[k + 1] = cosine[k + 1]! + legendre[p + 1]! * oddC
        sine[k + 1] = sine[k + 1]! + legendre[p + 1]! * oddS
        k += 2
        p += 2
      }
      if (k === end) {
        cosine[k] = cosine[k]! + legendre[p]! * evenC
        sine[k] = sine[k]! + legendre[p]! * evenS
        k++
        p++
      }
    }
  }
}

/** Mean of a field over the sphere by the grid's weights. */
export function sphereMean({ rows, columns, weights }: HarmonicGrid, field: Float64Array): number {
  let sum = 0
  for (let i = 0; i < rows; i++) {
    let row = 0
    for (let j = i * columns; j < (i + 1) * columns; j++) row += field[j]!
    sum += weights[i]! * row
  }
  return sum / (2 * columns)
}
