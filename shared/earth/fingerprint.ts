import { EARTH_RADIUS_M, KG_PER_GT, WATER_DENSITY } from './constants.ts'
import { oceanNodeValues } from './oceanFunction.ts'
import { valueAtPlace, valuesOnNodes } from './harmonicValues.ts'
import type { OceanCells } from './oceanCells.ts'
import { seaLevelEquation } from './seaLevelEquation.ts'
import type { Harmonics } from './sphericalHarmonics.ts'
import { loadHarmonics, seaLevelChange, type RegionLoad } from './surfaceLoad.ts'

export interface FingerprintOptions {
  /** Truncation, 2 to 256; default 128 (some 0.3 s). */
  degree?: number
  /** Rotational feedback; default on, for maps of the sea. */
  feedback?: boolean
}

/** Where the sea rises and falls for given loads. */
export interface Fingerprint {
  degree: number
  feedback: boolean
  /** Mean over the sea, mm: what the mass alone would do. */
  barystaticMm: number
  /** Height of the sea's surface above the ground, m, continued over land, where it is no sea level. */
  surface: Harmonics
}

/** A fingerprint on nodes, row by row from 90° S, each row from 180° W; both poles, and 180° E besides 180° W. */
export interface FingerprintGrid {
  stepDeg: number
  latitudesDeg: Float64Array
  longitudesDeg: Float64Array
  /** Relative sea level, mm. On land the continuation of the field: `sea` tells. */
  seaLevelMm: Float64Array
  /** Over the barystatic mean; null where the loads sum to no mass. */
  relative: Float64Array | null
  /** Part of the sea round the node, 0 to 1. */
  sea: Float64Array
}

/** Solves the sea-level equation for regions and their masses (Gt, gained is positive). Fixed shorelines, elastic Earth. */
export function fingerprintOf(loads: readonly RegionLoad[], cells: OceanCells, options: FingerprintOptions = {}): Fingerprint {
  const degree = options.degree ?? 128
  const feedback = options.feedback ?? true
  const equation = seaLevelEquation(cells, { degree, feedback })
  const { surface } = seaLevelChange(equation, loadHarmonics(equation.grid, loads))
  const massKg = loads.reduce((sum, load) => sum + load.massGt, 0) * KG_PER_GT
  const seaM2 = equation.oceanFraction * 4 * Math.PI * EARTH_RADIUS_M ** 2
  return { degree, feedback, barystaticMm: 0 - massKg / (WATER_DENSITY * seaM2) * 1000, surface }
}

/** The fingerprint on nodes `stepDeg` apart (divides 180), default 1°. */
export function fingerprintGrid(fingerprint: Fingerprint, cells: OceanCells, stepDeg = 1): FingerprintGrid {
  if (!(stepDeg > 0 && Number.isInteger(180 / stepDeg))) throw new RangeError(`stepDeg must divide 180, got ${stepDeg}`)
  const latitudesDeg = Float64Array.from({ length: 180 / stepDeg + 1 }, (_, i) => -90 + i * stepDeg)
  const longitudesDeg = Float64Array.from({ length: 360 / stepDeg + 1 }, (_, j) => -180 + j * stepDeg)
  const seaLevelMm = valuesOnNodes(fingerprint.surface, latitudesDeg, longitudesDeg).map(value => value * 1000)
  const mean = relativeTo(fingerprint)
  return { stepDeg, latitudesDeg, longitudesDeg, seaLevelMm, relative: mean === null ? null : seaLevelMm.map(value => value / mean), sea: oceanNodeValues(cells, stepDeg) }
}

/** Sea level at a place (geodetic latitude, east longitude, degrees): mm, and over the barystatic mean (null for no net mass). */
export function fingerprintAt(fingerprint: Fingerprint, latitudeDeg: number, longitudeDeg: number): { seaLevelMm: number, relative: number | null } {
  const seaLevelMm = valueAtPlace(fingerprint.surface, latitudeDeg, longitudeDeg) * 1000
  const mean = relativeTo(fingerprint)
  return { seaLevelMm, relative: mean === null ? null : seaLevelMm / mean }
}

function relativeTo({ barystaticMm, surface }: Fingerprint): number | null {
  let size = 0
  for (const value of surface.cosine) size = Math.max(size, Math.abs(value))
  return Math.abs(barystaticMm) > 1e-9 * size * 1000 ? barystaticMm : null
}
