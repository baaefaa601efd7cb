import type { CoefficientSetId, CoreChoice, Measured, OceanMode, Outline, PhysicsSettings, Position } from '../types/domain.ts'

/** A systematic error with a name: the same source is fully correlated wherever it appears. */
export interface SharedError {
  source: string
  /** One-sigma: Gt with a single mass, Gt per year with a series. */
  sigmaGt: number
}

export interface EvaluateSeries {
  /** ISO dates (0 h UTC) or decimal years (calendar-year fractions), rising; the same for all regions of a request. */
  epochs: (string | number)[]
  massGt: number[]
  sigmaGt?: number[] | null
}

export interface EvaluateRegion {
  id: string
  geometry: Outline
  /** Mass gained; either this or `series`. */
  massGt?: number
  sigmaGt?: number
  shared?: SharedError[]
  series?: EvaluateSeries
}

export interface EvaluateRequest {
  regions: EvaluateRegion[]
  settings?: { ocean?: OceanMode, coefficients?: CoefficientSetId, core?: CoreChoice }
}

/** One number with a single mass, one number per epoch with a series. */
export type Figure = number | number[]

/** One-sigma, linear propagation; per epoch with a series (and then without the shared rates). */
export interface EvaluateSigma {
  massGt: Figure
  chi1Mas: Figure
  chi2Mas: Figure
  lodMicroseconds: Figure
  poleShiftMm: Figure
  barystaticMm: Figure
}

/** Trends per Julian year. The direction, in degrees east with its error in degrees, is null where there is no drift. */
export interface EvaluateTrend {
  massGt: Measured
  chi1Mas: Measured
  chi2Mas: Measured
  lodMicroseconds: Measured
  barystaticMm: Measured
  poleShiftMm: Measured
  poleDirectionDegEast: Measured | null
}

export interface EvaluateQuantities {
  massGt: Figure
  chi1Mas: Figure
  chi2Mas: Figure
  chi3: Figure
  lodMicroseconds: Figure
  poleShiftMm: Figure
  poleDirectionDegEast: number | null | (number | null)[]
  barystaticMm: Figure
  deltaJ2: Figure
  sigma: EvaluateSigma
  /** With a series only. */
  trend?: EvaluateTrend
}

export interface EvaluateRegionAnswer extends EvaluateQuantities {
  id: string
  /** On the WGS 84 ellipsoid. */
  areaKm2: number
  centroid: Position
}

export interface EvaluateWarning { code: string, message: string, regions: string[] }

export interface EvaluateAnswer {
  settings: PhysicsSettings & { engineVersion: string, oceanAreaM2: number }
  /** The epochs as they were sent, with a series only. */
  epochs?: (string | number)[]
  warnings: EvaluateWarning[]
  regions: EvaluateRegionAnswer[]
  total: EvaluateQuantities
}
