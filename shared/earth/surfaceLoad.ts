import { cellCoverage } from './cellCoverage.ts'
import { DEGREE, EARTH_RADIUS_M, KG_PER_GT, WATER_DENSITY } from './constants.ts'
import type { Contour } from './contour.ts'
import { geodeticFromGeocentricDeg } from './latitude.ts'
import { solveSeaLevel, type SeaLevelEquation, type SeaLevelSolution } from './seaLevelEquation.ts'
import { functionalHarmonics, type Functional } from './sensitivity.ts'
import { analyse, emptyHarmonics, synthesise, transformScratch, type HarmonicGrid, type Harmonics } from './sphericalHarmonics.ts'

/** A region and the mass it gained. */
export interface RegionLoad { contour: Contour, massGt: number }

/** Load per area (kg/m²) of regions as harmonics, from the exact part of every grid cell that a region covers. */
export function loadHarmonics(grid: HarmonicGrid, loads: readonly RegionLoad[]): Harmonics {
  const edges = Float64Array.from(grid.sineEdges, s => geodeticFromGeocentricDeg(Math.asin(Math.max(-1, Math.min(1, s))) / DEGREE))
  const field = new Float64Array(grid.rows * grid.columns)
  for (const { contour, massGt } of loads) {
    const coverage = cellCoverage(contour.rings, { latEdgesDeg: edges, columns: grid.columns })
    const density = massGt * KG_PER_GT / contour.areaSphereM2
    for (let i = 0; i < field.length; i++) field[i] = field[i]! + density * coverage[i]!
  }
  const harmonics = emptyHarmonics(grid.degree)
  analyse(grid, field, harmonics, transformScratch(grid))
  return harmonics
}

/** The sea's answer to a load: the surface above ground is `surface` (m, degree 0 included), and the sea's own load (kg/m²) on the grid. */
export interface SeaLevelChange {
  load: Harmonics
  surface: Harmonics
  /** ρ_w O u on the grid, kg/m². */
  seaLoad: Float64Array
  solution: SeaLevelSolution
}

/** Solves the sea-level equation for a load (kg/m², harmonics of the grid's degree); land load and sea load sum to no mass. */
export function seaLevelChange(equation: SeaLevelEquation, load: Harmonics): SeaLevelChange {
  const { grid, ocean, response } = equation
  const forcing = emptyHarmonics(grid.degree)
  for (let k = 0; k < forcing.cosine.length; k++) {
    forcing.cosine[k] = response.cosine[k]! * load.cosine[k]!
    forcing.sine[k] = response.sine[k]! * load.sine[k]!
  }
  const solution = solveSeaLevel(equation, forcing, -load.cosine[0]!)
  const surface = emptyHarmonics(grid.degree)
  for (let k = 0; k < forcing.cosine.length; k++) {
    surface.cosine[k] = forcing.cosine[k]! + solution.smooth.cosine[k]!
    surface.sine[k] = forcing.sine[k]! + solution.smooth.sine[k]!
  }
  surface.cosine[0] = surface.cosine[0]! + solution.constant
  const seaLoad = new Float64Array(grid.rows * grid.columns)
  synthesise(grid, surface, seaLoad, transformScratch(grid))
  for (let i = 0; i < seaLoad.length; i++) seaLoad[i] = WATER_DENSITY * ocean[i]! * seaLoad[i]!
  return { load, surface, seaLoad, solution }
}

/** Harmonics of the whole load, land and sea, kg/m². */
export function totalLoad(equation: SeaLevelEquation, change: SeaLevelChange): Harmonics {
  const { grid } = equation
  const total = emptyHarmonics(grid.degree)
  analyse(grid, change.seaLoad, total, transformScratch(grid))
  for (let k = 0; k < total.cosine.length; k++) {
    total.cosine[k] = total.cosine[k]! + change.load.cosine[k]!
    total.sine[k] = total.sine[k]! + change.load.sine[k]!
  }
  return total
}

/** ∫ g dm of a load given as harmonics (kg/m²) on the sphere of radius 6 371 000 m, kg. */
export function integralOf(functional: Functional, load: Harmonics): number {
  return 4 * Math.PI * EARTH_RADIUS_M ** 2 * innerProduct(functionalHarmonics(functional, load.degree), load)
}

/** Mean over the sphere of the product of two fields. */
export function innerProduct(a: Harmonics, b: Harmonics): number {
  let sum = 0
  for (let k = 0; k < a.cosine.length; k++) sum += a.cosine[k]! * b.cosine[k]! + a.sine[k]! * b.sine[k]!
  return sum
}
