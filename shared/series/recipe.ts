import { KG_PER_GT, WATER_DENSITY } from '../earth/constants.ts'
import type { Factor } from '../earth/time/covariance.ts'
import type { UnderstoodUnit } from './quantityKinds.ts'

/** A number of a conversion with its one-sigma. The error is the same at every epoch; its source may be shared with other series. */
export interface Parameter {
  value: number
  sigma: number
  /** Name of the source of error; the same name in another series is the same error. Null: this series' own. */
  source: string | null
}

export const materials = ['water', 'ice', 'firn', 'snow', 'glacier', 'own'] as const
export type Material = typeof materials[number]

/** What a series is corrected for. */
export const correctionKinds = ['isostatic', 'surface-water', 'soil-water', 'snow', 'leakage', 'other'] as const
export type CorrectionKind = typeof correctionKinds[number]

/** Another series, on its own epochs, in Gt. */
export interface SubtractedSeries {
  mjd: number[]
  massGt: number[]
  sigmaGt: number[] | null
  /** Its systematic errors, Gt per year: the same sources as in other series, with the sign turned by subtraction. */
  sharedRates?: { source: string, sigmaGtPerYear: number }[]
}

/** The stored version that a subtracted series is. */
export interface SubtractedVersion { versionId: string, dataSha256: string }

/**
 * One step from the values of a file to gigatonnes. Plain data: it is stored with the version as JSON and can be replayed. A step with
 * `on: false` stays in the recipe and does nothing.
 */
export type RecipeStep =
  | { kind: 'unit', unit: UnderstoodUnit }
  | { kind: 'sign' }
  | { kind: 'storage', coefficient: 'specific-yield' | 'storativity', parameter: Parameter }
  | { kind: 'density', material: Material, parameter: Parameter }
  | { kind: 'area', parameter: Parameter }
  | { kind: 'integrate', perPeriod: boolean }
  | { kind: 'subtract-rate', on: boolean, what: CorrectionKind, name: string, gtPerYear: Parameter }
  | { kind: 'subtract-series', on: boolean, what: CorrectionKind, name: string, series: SubtractedSeries, maxGapDays: number, of?: SubtractedVersion }

export interface Recipe { version: 1, steps: RecipeStep[] }

/** Values of a file in order of time, in its unit and sign; periods where the rows have a beginning and an end. */
export interface SeriesTable {
  mjd: number[]
  startMjd: number[] | null
  endMjd: number[] | null
  value: number[]
  sigma: number[] | null
}

/** A step as it was carried out: a sentence with its numbers. */
export interface StepDone { kind: RecipeStep['kind'], on: boolean, sentence: string, numbers: { name: string, value: number, unit: string }[] }

/** A factor of the covariance; `own` where its source belongs to this series alone and is never to be merged with another's. */
export interface SeriesFactor extends Factor { own: boolean }

/** A mass series with all that is known of its errors: independent ones, sums of independent ones, and named sources. */
export interface Replayed {
  mjd: number[]
  massGt: number[]
  /** One-sigma of each epoch by itself; null where the file gives none. */
  sigmaGt: number[] | null
  /**
   * Variances (Gt²) that enter at an epoch and stay in all that follow, as the errors of rates do that were integrated;
   * null where there are none.
   */
  walkGt2: number[] | null
  /** Errors that all epochs share, as loadings in Gt. Their zero is that of the series: a baseline shifts both alike. */
  factors: SeriesFactor[]
  steps: StepDone[]
  /** Epochs that a step had to leave out, with the reason. */
  leftOut: { mjd: number, code: string, message: string }[]
}

/** Densities in kg/m³ that are offered, with one-sigma and source. */
export const densities: Record<Exclude<Material, 'own'>, Parameter & { reference: string }> = {
  water: { value: WATER_DENSITY, sigma: 0, source: null, reference: 'density of fresh water here and in the sea-level equation' },
  ice: { value: 917, sigma: 0, source: 'density of ice', reference: 'pure ice at 0 °C; Cuffey & Paterson (2010), The Physics of Glaciers, 4th ed., §2.2' },
  glacier: { value: 850, sigma: 60, source: 'density of glacier volume change', reference: 'Huss (2013), The Cryosphere 7, 877' },
  firn: { value: 615, sigma: 124, source: 'density of firn', reference: '400 to 830 kg/m³ (Cuffey & Paterson 2010, table 2.1): its middle, half its width over √3' },
  snow: { value: 300, sigma: 58, source: 'density of snow', reference: '200 to 400 kg/m³, settled to wind-packed (Cuffey & Paterson 2010, table 2.1): its middle, half its width over √3' }
}

/** Gigatonnes of a metre of water over an area in m². */
export function gtPerMetre(areaM2: number): number {
  return areaM2 * WATER_DENSITY / KG_PER_GT
}
