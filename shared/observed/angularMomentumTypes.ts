import type { CoefficientSetId } from '../types/domain.ts'
import type { Issue } from '../types/issue.ts'

/** χ₁, χ₂, χ₃ of one term, dimensionless, on the epochs of their series. */
export interface ChiTerms { chi1: Float64Array, chi2: Float64Array, chi3: Float64Array }

/**
 * Angular momentum of a fluid as excitation: mass (matter, pressure) and motion (wind, current) apart. χ₁ towards Greenwich, χ₂
 * towards 90° E in radians, χ₃ > 0 a longer day, ΔLOD = 86 400 s · χ₃. Epochs MJD (UTC), NaN where a value is missing.
 */
export interface AngularMomentumSeries {
  mjd: Float64Array
  mass: ChiTerms
  motion: ChiTerms
  stepDays: number
  rowsRead: number
  emptyRows: number
  issues: Issue[]
  understood: string[]
  /** What the header lines say about the component; null where they say nothing. */
  suggestedComponent: FluidComponent | null
}

export const fluidComponents = ['atmosphere', 'ocean', 'land-water', 'sea-level'] as const
export type FluidComponent = typeof fluidComponents[number]
export const answers = ['yes', 'no', 'unknown'] as const
export type Answer = typeof answers[number]
export const appliedCoefficients = ['gross-2007', 'eubanks-1993', 'barnes-1983', 'rigid', 'unknown'] as const

/** What the numbers of a file do not say and its user must; stored with the series. */
export interface AngularMomentumFields {
  component: FluidComponent
  /** Model that made it. */
  model: string
  /** The atmosphere that an ocean was driven with; null for an atmosphere. */
  pairedWith: string | null
  /**
   * Atmosphere: the sea answers pressure as an inverted barometer, so that pressure over the sea is its mean there.
   * Ocean: that answer is taken as given and is not in the series.
   */
  invertedBarometer: Answer
  /** Coefficients that are in the values; `rigid`: none, values over C − A′ and C_m as they are. */
  coefficients: CoefficientSetId | 'rigid' | 'unknown'
  /** What was taken off before, e.g. “mean 2003–2014, tides S1 and S2”. */
  subtracted: string
  /** Whether the changing mass of the ocean, water that comes from land, is inside. */
  barystatic: Answer
}

export interface FieldQuestion { field: string, question: string, why: string, choices: { value: string, text: string }[] | null }

/** The questions that a series of angular momentum is stored with. */
export const angularMomentumQuestions: readonly FieldQuestion[] = [
  {
    field: 'component', question: 'Which fluid is it?', why: 'Water on land and sea level made by it are what this account computes itself.',
    choices: [
      { value: 'atmosphere', text: 'atmosphere' }, { value: 'ocean', text: 'ocean, driven by wind and pressure' },
      { value: 'land-water', text: 'water on land' }, { value: 'sea-level', text: 'sea level of exchanged mass' }
    ]
  },
  { field: 'model', question: 'Which model made it?', why: 'Ocean and atmosphere belong together only if one drove the other.', choices: null },
  { field: 'pairedWith', question: 'Which atmosphere drove the ocean?', why: 'With another atmosphere, pressure over the sea is partly counted twice or not at all.', choices: null },
  {
    field: 'invertedBarometer', question: 'Is the sea an inverted barometer in it?', why: 'Atmosphere and ocean must say the same, or the sea’s answer to pressure counts twice or not at all.',
    choices: [{ value: 'yes', text: 'yes' }, { value: 'no', text: 'no' }, { value: 'unknown', text: 'not known' }]
  },
  {
    field: 'coefficients', question: 'Which excitation coefficients are in the values?', why: 'Published sets differ by 2 % for the pole and 5 % for the day; values without any are multiplied here.',
    choices: [
      { value: 'gross-2007', text: 'Gross (2007)' }, { value: 'eubanks-1993', text: 'Eubanks (1993)' }, { value: 'barnes-1983', text: 'Barnes et al. (1983)' },
      { value: 'rigid', text: 'none: a rigid Earth' }, { value: 'unknown', text: 'not known' }
    ]
  },
  { field: 'subtracted', question: 'What was taken off before?', why: 'Tides, means or trends that are gone cannot be taken off again.', choices: null },
  {
    field: 'barystatic', question: 'Does it hold water that comes from land?', why: 'The account lets its own water reach the sea: the same water must not be subtracted.',
    choices: [{ value: 'yes', text: 'yes' }, { value: 'no', text: 'no' }, { value: 'unknown', text: 'not known' }]
  }
]
