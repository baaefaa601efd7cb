import type { Issue } from '../types/issue.ts'
import type { FieldQuestion } from './angularMomentumTypes.ts'

/**
 * Changes of the fully normalised Stokes coefficients of degree two, dimensionless, NaN where missing. Epochs MJD (UTC); one-sigma
 * NaN where none was given.
 */
export interface GravitySeries {
  mjd: Float64Array
  c20: Float64Array
  c21: Float64Array
  s21: Float64Array
  sigmaC20: Float64Array
  sigmaC21: Float64Array
  sigmaS21: Float64Array
  rowsRead: number
  emptyRows: number
  issues: Issue[]
  understood: string[]
}

export const poleTideStates = ['removed', 'in', 'unknown'] as const
export type PoleTideState = typeof poleTideStates[number]
export const permanentTides = ['zero-tide', 'tide-free', 'mean-tide', 'unknown'] as const
export const meanPoles = ['secular-2018', 'cubic-2010', 'linear-2003', 'none', 'unknown'] as const
export const dealiasingStates = ['restored', 'not-restored', 'unknown'] as const

/** What the numbers of a file do not say and its user must; stored with the series. */
export interface GravityFields {
  solidPoleTide: PoleTideState
  oceanPoleTide: PoleTideState
  permanentTide: typeof permanentTides[number]
  meanPole: typeof meanPoles[number]
  /** Reference radius of the coefficients, m; 6 378 136.3 or 6 378 137 in most files. */
  radiusM: number
  /** Whether the atmosphere and ocean that were taken off in processing have been put back. */
  dealiasing: typeof dealiasingStates[number]
  /** 1 + k′₂ that is taken out of ΔC₂₀: 0.695 of an elastic Earth or 0.684 with anelasticity. */
  axialLoadFactor: 0.695 | 0.684
}

const tideChoices = [{ value: 'removed', text: 'removed' }, { value: 'in', text: 'still in' }, { value: 'unknown', text: 'not known' }]

/** The questions that a series of gravity coefficients is stored with. */
export const gravityQuestions: readonly FieldQuestion[] = [
  { field: 'solidPoleTide', question: 'Was the pole tide of the solid Earth removed?', why: 'Left in, C₂₁ and S₂₁ hold the pole itself and not only the load that moves it.', choices: tideChoices },
  { field: 'oceanPoleTide', question: 'Was the pole tide of the ocean removed?', why: 'The factor 1.608 holds it already; left in, it counts twice.', choices: tideChoices },
  {
    field: 'permanentTide', question: 'Which permanent tide is in C₂₀?', why: 'Changes do not depend on it, unless two conventions are mixed in one series: then there is a step of 4 × 10⁻⁹.',
    choices: [{ value: 'zero-tide', text: 'zero tide' }, { value: 'tide-free', text: 'tide free' }, { value: 'mean-tide', text: 'mean tide' }, { value: 'unknown', text: 'not known' }]
  },
  {
    field: 'meanPole', question: 'Which mean pole did the pole-tide model use?', why: 'Mean poles drift apart by about a mas a year, which stands as a trend in C₂₁ and S₂₁.',
    choices: [
      { value: 'secular-2018', text: 'secular pole, IERS Conventions, 2018 update' }, { value: 'cubic-2010', text: 'cubic, IERS Conventions (2010)' },
      { value: 'linear-2003', text: 'linear, IERS Conventions (2003)' }, { value: 'none', text: 'none' }, { value: 'unknown', text: 'not known' }
    ]
  },
  { field: 'radiusM', question: 'What is the reference radius of the coefficients, in metres?', why: 'The inertia goes with its square: 6 378 km in place of 6 371 km makes 0.22 %.', choices: null },
  {
    field: 'dealiasing', question: 'Were the atmosphere and ocean of the dealiasing product put back?', why: 'Without them the series holds water and ice alone: do not take an atmosphere or ocean off again.',
    choices: [{ value: 'restored', text: 'put back' }, { value: 'not-restored', text: 'left out' }, { value: 'unknown', text: 'not known' }]
  },
  {
    field: 'axialLoadFactor', question: 'Which yielding is taken out of C₂₀?', why: 'The two differ by 1.6 % in the length of day; both are stated with the result.',
    choices: [{ value: '0.695', text: '0.695, elastic Earth' }, { value: '0.684', text: '0.684, with anelasticity' }]
  }
]
