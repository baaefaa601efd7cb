import { cellAveragesBySine } from './cellAverages.ts'
import { WATER_DENSITY } from './constants.ts'
import { loadResponse, type LoadResponseOptions } from './loadResponse.ts'
import type { OceanCells } from './oceanCells.ts'
import { analyse, emptyHarmonics, harmonicGrid, sphereMean, synthesise, transformScratch, type HarmonicGrid, type Harmonics } from './sphericalHarmonics.ts'

export interface SeaLevelOptions extends LoadResponseOptions {
  /** Rows of the Gauss–Legendre grid; default three halves of the degree. */
  rows?: number
  /** Relative residual at which the iteration ends; default 1e-13. */
  tolerance?: number
}

/** The sea-level equation on one ocean, ready to be solved for any forcing. */
export interface SeaLevelEquation {
  grid: HarmonicGrid
  /** Ocean function on the grid, 0 to 1. */
  ocean: Float64Array
  /** Its mean over the sphere. */
  oceanFraction: number
  response: { cosine: Float64Array, sine: Float64Array }
  tolerance: number
}

/**
 * Field u = forcing + constant + G q that meets the sea-level equation, and what it took. `smooth` holds G q (degree 0 empty): the
 * whole field is forcing + constant + smooth. The sea takes ρ_w O u.
 */
export interface SeaLevelSolution { smooth: Harmonics, constant: number, iterations: number, residual: number }

/** Sets the equation up: O averaged over the cells of a Gauss–Legendre grid, and the load's response by degree. */
export function seaLevelEquation(cells: OceanCells, options: SeaLevelOptions): SeaLevelEquation {
  const grid = harmonicGrid(options.degree, options.rows)
  const ocean = cellAveragesBySine(cells, grid.sineEdges, grid.columns, -180)
  return { grid, ocean, oceanFraction: sphereMean(grid, ocean), response: loadResponse(options), tolerance: options.tolerance ?? 1e-13 }
}

/**
 * Solves u = f + κ + G(ρ_w O u) with a constant κ such that the sea takes the mass `oceanMeanLoad` (mean over the sphere of ρ_w O u,
 * kg/m²): f is the forcing at degrees of the grid.
 *
 * With G = √G√G the equation becomes (1 − √G ρ_w O′ √G) y = √G ρ_w (O′ f + …), O′ the projection of O that holds its mass;
 * symmetric and positive definite, so conjugate gradients converge in about ten steps (Hestenes & Stiefel 1952).
 * Physics: Farrell & Clark (1976), Geophys. J. R. astr. Soc. 46, 647; fixed shorelines, elastic Earth.
 */
export function solveSeaLevel(equation: SeaLevelEquation, forcing: Harmonics, oceanMeanLoad = 0): SeaLevelSolution {
  const { grid, ocean, oceanFraction, tolerance } = equation
  const { degree } = grid
  if (forcing.degree !== degree) throw new RangeError(`forcing must have degree ${degree}, got ${forcing.degree}`)
  const rootC = equation.response.cosine.map(Math.sqrt)
  const rootS = equation.response.sine.map(Math.sqrt)
  const n = rootC.length
  const scratch = transformScratch(grid)
  const field = new Float64Array(grid.rows * grid.columns)
  const work = emptyHarmonics(degree)
  const loadAdded = oceanMeanLoad / (WATER_DENSITY * oceanFraction)

  /** out = √G ρ_w O (u − the sea's mean of u + added), u the field of `coefficients`. Returns the sea's mean of u. */
  const project = (coefficients: Harmonics, added: number, out: Harmonics): number => {
    synthesise(grid, coefficients, field, scratch)
    for (let i = 0; i < field.length; i++) field[i] = field[i]! * ocean[i]!
    const seaMean = sphereMean(grid, field) / oceanFraction
    const shift = added - seaMean
    for (let i = 0; i < field.length; i++) field[i] = WATER_DENSITY * (field[i]! + ocean[i]! * shift)
    analyse(grid, field, out, scratch)
    for (let k = 0; k < n; k++) {
      out.cosine[k] = out.cosine[k]! * rootC[k]!
      out.sine[k] = out.sine[k]! * rootS[k]!
    }
    return seaMean
  }
  const rooted = (source: Harmonics): void => {
    for (let k = 0; k < n; k++) {
      work.cosine[k] = source.cosine[k]! * rootC[k]!
      work.sine[k] = source.sine[k]! * rootS[k]!
    }
  }

  const y = emptyHarmonics(degree)
  const r = emptyHarmonics(degree)
  const p = emptyHarmonics(degree)
  const ap = emptyHarmonics(degree)
  project(forcing, loadAdded, r)
  p.cosine.set(r.cosine)
  p.sine.set(r.sine)
  const start = dot(r, r)
  let rr = start
  let iterations = 0
  while (rr > tolerance * tolerance * start && iterations < 200) {
    rooted(p)
    project(work, 0, ap)
    for (let k = 0; k < n; k++) {
      ap.cosine[k] = p.cosine[k]! - ap.cosine[k]!
      ap.sine[k] = p.sine[k]! - ap.sine[k]!
    }
    const alpha = rr / dot(p, ap)
    axpy(y, alpha, p)
    axpy(r, -alpha, ap)
    const next = dot(r, r)
    const beta = next / rr
    for (let k = 0; k < n; k++) {
      p.cosine[k] = r.cosine[k]! + beta * p.cosine[k]!
      p.sine[k] = r.sine[k]! + beta * p.sine[k]!
    }
    rr = next
    iterations++
  }
  rooted(y)
  const smooth: Harmonics = { degree, cosine: work.cosine.slice(), sine: work.sine.slice() }
  for (let k = 0; k < n; k++) {
    work.cosine[k] = work.cosine[k]! + forcing.cosine[k]!
    work.sine[k] = work.sine[k]! + forcing.sine[k]!
  }
  const seaMean = project(work, 0, ap)
  return { smooth, constant: loadAdded - seaMean, iterations, residual: start > 0 ? Math.sqrt(rr / start) : 0 }
}

function dot(a: Harmonics, b: Harmonics): number {
  let sum = 0
  for (let k = 0; k < a.cosine.length; k++) sum += a.cosine[k]! * b.cosine[k]! + a.sine[k]! * b.sine[k]!
  return sum
}

function axpy(a: Harmonics, factor: number, b: Harmonics): void {
  for (let k = 0; k < a.cosine.length; k++) {
    a.cosine[k] = a.cosine[k]! + factor * b.cosine[k]!
    a.sine[k] = a.sine[k]! + factor * b.sine[k]!
  }
}
