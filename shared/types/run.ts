import type { CellPattern } from '../earth/cellPattern.ts'
import type { Chain } from '../observed/chainTypes.ts'
import type { SeriesFacts } from '../series/facts.ts'
import type { CoreChoice, Measured, Outline, PhysicsSettings, RegionKind } from './domain.ts'

/** A mass change series in canonical units: gigatonnes relative to an arbitrary zero, epochs in MJD (UTC). */
export interface MassSeries {
  mjd: number[]
  massGt: number[]
  /** One-sigma per epoch, independent between epochs. Null: none was given. */
  sigmaGt: number[] | null
  /** Systematic errors of the trend, Gt per year one-sigma; the same source in two series is fully correlated. */
  sharedRates: { source: string, sigmaGtPerYear: number }[]
}

/** Everything a run depends on, frozen. No ids, no clock times: the same input gives the same SHA-256. */
export interface RunInput {
  schemaVersion: 1
  settings: PhysicsSettings & {
    /** Span in MJD; null takes the common span of the series. */
    fromMjd: number | null
    toMjd: number | null
    /** Longest distance between epochs that monthly values are interpolated across, days. */
    maxGapDays: number
  }
  regions: RunRegionInput[]
  background: BackgroundRow[]
  /** What the account does not hold, entered by the lead; null leaves the row empty. */
  restOfWorld: BackgroundRow | null
  /** How each pair of regions that share ground is counted; absent where none do, and in runs from before this was asked. */
  overlapChoices?: OverlapChoice[]
}

/** What was decided of two regions that share ground, by their keys. */
export interface OverlapChoice {
  a: string
  b: string
  /** `keep`: both count in full. `subtract`: what the other's series holds on the common ground is taken off `from`. */
  choice: 'keep' | 'subtract'
  /** The region that is counted less: a or b; null for `keep`. */
  from: string | null
  reason: string
}

export interface RunRegionInput {
  /** Stable short key inside the run: r1, r2, … */
  key: string
  name: string
  kind: RegionKind
  agency: string
  geometry: Outline
  outlineSha256: string
  seriesVersion: number
  seriesSha256: string
  source: string
  /** Fields of the version; absent where none were given. */
  facts?: SeriesFacts
  series: MassSeries
  /** How the mass lies in the region, of a series that comes from a grid; absent: evenly. */
  pattern?: CellPattern
  /** Set where a pattern was left out since it belongs to an earlier outline. */
  patternLeftOut?: true
  /** Factor on the mass; 0 switches the region off and keeps its row. */
  scale: number
  /** Part of the mass change that reaches the sea, 0 to 1; the rest is kept on land as `restTo` says. Absent: 1. */
  fractionToOcean?: number
  /** Key of the region that the rest goes to; null or absent: evenly to land elsewhere. */
  restTo?: string | null
  /** Part of an ice region's mass change that is grounded above flotation and so changes a load, 0 to 1. Absent: 1. */
  groundedFraction?: number
}

/** A rate that is not from a region: tidal braking, isostatic adjustment, … */
export interface BackgroundRow {
  key: string
  name: string
  source: string
  /** The core convention that the rate assumes; null where it says nothing about the day. */
  core: CoreChoice | null
  lodMsPerCentury: { value: number, sigma: number } | null
  chi1MasPerYear: { value: number, sigma: number } | null
  chi2MasPerYear: { value: number, sigma: number } | null
}

/** One row of the budget table. Rates per Julian year; the pole's drift as a vector and as length and direction. */
export interface BudgetRow {
  key: string
  name: string
  massGtPerYear: Measured | null
  lodMicrosecondsPerYear: Measured | null
  lodMsPerCentury: Measured | null
  chi1MasPerYear: Measured | null
  chi2MasPerYear: Measured | null
  /** Variances and covariance of the drift vector, mas²/yr², under the quoted noise model. */
  driftCovariance: { c11: number, c12: number, c22: number } | null
  driftMasPerYear: Measured | null
  driftCmPerYear: Measured | null
  /** East longitude that the pole drifts towards, (−180, 180]; null for no drift. sigma in degrees, null where it has none. */
  directionDegEast: { value: number, sigma: number | null } | null
  barystaticMmPerYear: Measured | null
  deltaJ2PerYear: Measured | null
  /** Part of the regions' total, 1 = all of it. LOD: ratio; pole: projection on the total's direction. Null for non-region rows. */
  shareOfModelLod: number | null
  shareOfModelPole: number | null
}

/** Rates of the gravity field and of the centre of mass; radius 6 371 000 m, fully normalised, with the yielding of the Earth. */
export interface DerivedRates {
  deltaC21PerYear: Measured
  deltaS21PerYear: Measured
  /** CM − CF towards Greenwich, 90° E and the north pole; null in the mode `none`. */
  geocentreMmPerYear: { x: Measured, y: Measured, z: Measured } | null
}

/** One choice of the model and how much another choice would change the sum's rates; never added to the data's errors. */
export interface ModelUncertaintyRate { id: string, name: string, text: string, chi1MasPerYear: number, chi2MasPerYear: number, lodMicrosecondsPerYear: number }

/** What a grid's pattern changes: effect of one gigatonne gained if it lay evenly, and how much lies elsewhere than that. */
export interface EvenSpread {
  basis: CellPattern['basis']
  cells: number
  /** Part of a gigatonne that the pattern puts elsewhere than an even spread would. */
  movedPart: number
  perGt: RunRegionResult['perGt']
}

export interface RunRegionResult extends BudgetRow {
  /** Of a region whose series comes from a grid: `perGt` is with the pattern, this is without. Absent elsewhere. */
  evenSpread?: EvenSpread
  /** Absent in runs of earlier engines. */
  derived?: DerivedRates
  /** Key of the region whose series this row counts elsewhere, on land or on ground it shares; the row is no region of its own. */
  keptFrom?: string
  /** Key of the region that this row takes mass off, since `keptFrom` counts it already. */
  takenFrom?: string
  kind: RegionKind
  agency: string
  areaKm2: number
  centroid: [number, number]
  scale: number
  /** Effect of one gigatonne gained. */
  perGt: { chi1Mas: number, chi2Mas: number, chi3: number, lodMicroseconds: number, barystaticMm: number, deltaJ2: number }
  /** On the run's monthly epochs, relative to the mean over the span; null in a gap. */
  massGt: (number | null)[]
  sigmaMassGt: (number | null)[]
  epochsUsed: number
  coverage: number
  trendNoise: { r1: number, seasonal: boolean }
}

export interface RunTotalSeries {
  massGt: (number | null)[]
  lodMicroseconds: (number | null)[]
  chi1Mas: (number | null)[]
  chi2Mas: (number | null)[]
  sigmaLodMicroseconds: (number | null)[]
  sigmaChi1Mas: (number | null)[]
  sigmaChi2Mas: (number | null)[]
}

export interface RunWarning { code: string, message: string, regions: string[] }

/** Two regions of a run whose outlines cover common ground. */
export interface RegionOverlap {
  a: string
  b: string
  areaKm2: number
  shareOfA: number
  shareOfB: number
  /** Mass trend of each on the common ground, spread evenly over its outline, with its factor; absent in runs of earlier engines. */
  onGroundGtPerYear?: { a: Measured, b: Measured }
  /** Absent where it was not settled, in runs from before this was asked. */
  settled?: Pick<OverlapChoice, 'choice' | 'from' | 'reason'>
}

export interface RunResult {
  schemaVersion: 1
  engineVersion: string
  earthModelChecksum: string
  settings: RunInput['settings'] & { oceanAreaM2: number }
  span: { fromMjd: number, toMjd: number }
  /** Middles of the calendar months inside the span, MJD. */
  epochsMjd: number[]
  regions: RunRegionResult[]
  /** Sum over regions, background left out. */
  total: BudgetRow & { series: RunTotalSeries, derived?: DerivedRates }
  /** Absent in runs of earlier engines. */
  modelUncertainty?: ModelUncertaintyRate[]
  background: BudgetRow[]
  restOfWorld: BudgetRow
  overlaps: RegionOverlap[]
  warnings: RunWarning[]
}

/** Observed rotation in canonical units, daily or coarser. NaN where a quantity is missing. */
export interface ObservedSeries {
  format: 'eop14c04' | 'eop20c04' | 'finals2000a' | 'csv'
  /** Set where the excitation comes from gravity coefficients: no tide or motion of rotation is in it. Absent: observed rotation. */
  from?: 'gravity'
  mjd: Float64Array
  /** Reported pole, mas; x towards Greenwich, y towards 90° W. */
  xMas: Float64Array
  yMas: Float64Array
  sigmaXMas: Float64Array
  sigmaYMas: Float64Array
  /** Excess length of day, ms. */
  lodMs: Float64Array
  sigmaLodMs: Float64Array
  /** 1 where the row is a prediction, not an observation; left out of every comparison. */
  predicted: Uint8Array
  /** Rows that hold a date and nothing else. */
  emptyRows: number
  rowsRead: number
  /** UT1 − TAI, ms; absent where the file has no UT1. */
  ut1MinusTaiMs?: Float64Array
  /** Excitation that the file holds itself, mas, in place of the pole; absent otherwise. */
  chi1Mas?: Float64Array
  chi2Mas?: Float64Array
}

export interface ComparisonQuantity {
  unit: 'ms' | 'mas'
  /** On the comparison's epochs; anomalies from their mean over the common span. */
  observed: (number | null)[]
  model: (number | null)[]
  residual: (number | null)[]
  trends: { observed: Measured, model: Measured, residual: Measured }
  r1: { observed: number, model: number, residual: number }
  rmsObserved: number
  rmsResidual: number
}

/** A run beside an observed series: monthly means over the common span. Null quantity: the series does not hold it. */
export interface Comparison {
  /** Set where the observed side is what gravity coefficients stand for; absent: rotation itself. */
  from?: 'gravity'
  span: { fromMjd: number, toMjd: number }
  epochsMjd: number[]
  lod: ComparisonQuantity | null
  chi1: ComparisonQuantity | null
  chi2: ComparisonQuantity | null
  noise: 'ar1'
  /** What is still in the observed series. */
  notRemoved: string[]
  warnings: RunWarning[]
  /** How the observed series was reduced before, step by step; absent where nothing but tides was asked for. */
  reduction?: ReductionStated
}

/** A reduction as a comparison states it: the chain as it ran, what each of its steps did, and the name that it is kept under. */
export interface ReductionStated { name: string | null, chain: Chain, chartNote: string, steps: { title: string, sentence: string, source: string }[] }
