import type { ZonalTideSet } from '../earth/time/zonalTides.ts'
import type { Measured } from '../types/domain.ts'
import type { BackgroundRow, RunWarning } from '../types/run.ts'
import type { AngularMomentumFields, AngularMomentumSeries } from './angularMomentumTypes.ts'
import type { Smoothing } from './reduceOptions.ts'

/** One step of a reduction; a step that is off stays in the chain and does nothing. */
export type ChainStep = { on: boolean } & (
  | { kind: 'zonal-tides', set: ZonalTideSet }
  | { kind: 'excitation', periodDays: number, q: number }
  | {
    kind: 'angular-momentum'
    /** Key of the series among those handed to the chain. */
    correction: string
    mass: boolean
    motion: boolean
    /** Whether its linear trend is subtracted too; false keeps it in the observed series. */
    trend: boolean
  }
  | { kind: 'background', rows: BackgroundRow[] }
  | { kind: 'seasons' }
  | { kind: 'smoothing', smoothing: Smoothing }
  | { kind: 'monthly' }
  | { kind: 'detrend' }
)
export type ChainStepKind = ChainStep['kind']

/** A reduction as plain JSON: stored, printed and run again, it gives the same. */
export interface Chain {
  schemaVersion: 1
  /** First and last day, ISO dates, both included; null: all there is. */
  from: string | null
  to: string | null
  includePredictions: boolean
  steps: ChainStep[]
}

/** A series of angular momentum that a chain may subtract. */
export interface FluidCorrection { name: string, source: string, fields: AngularMomentumFields, series: AngularMomentumSeries }

export const chainQuantities = ['lod', 'ut1', 'x', 'y', 'chi1', 'chi2'] as const
export type ChainQuantity = typeof chainQuantities[number]

/** A quantity over time; NaN where it is missing. ms for the day and UT1 − TAI, mas for pole and excitation. */
export interface Track { mjd: Float64Array, value: Float64Array }

/** One small multiple of a step: the quantity before it, what was taken away (null: nothing), and after it. */
export interface StepPanel { quantity: ChainQuantity, unit: 'ms' | 'mas', before: Track, removed: Track | null, after: Track }

export interface StepResult {
  kind: ChainStepKind
  /** The settings of the step, as they are in the chain. */
  settings: ChainStep
  on: boolean
  title: string
  /** What was done and how much it was. */
  sentence: string
  source: string
  panels: StepPanel[]
}

export interface ChainResult {
  chain: Chain
  steps: StepResult[]
  /** Quantities after the last step. */
  after: Partial<Record<ChainQuantity, Track>>
  /** With monthly means: epochs in each month, and how many independent ones they are worth. */
  months: Partial<Record<ChainQuantity, { samples: number[], effectiveSamples: number[] }>> | null
  /** Per Julian year, ms or mas; null where it must not be quoted, with the reason in `noTrend`. */
  trends: Partial<Record<ChainQuantity, Measured | null>>
  noTrend: { quantity: ChainQuantity, reason: string }[]
  /** Rates kept in the budget, nothing of them subtracted. */
  background: BackgroundRow[]
  /** Shortest period, days, at which the excitation is right to 1 %; null where it was not made here. */
  excitationValidFromDays: number | null
  /** What every chart of the result must say about its zero and its trend. */
  chartNote: string
  /** What is still in the observed series. */
  notRemoved: string[]
  warnings: RunWarning[]
}
