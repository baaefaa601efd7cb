/** Sets of observables that are asked apart: the pole, the day, and all there is. */
export type ObservableSet = 'pole' | 'day' | 'all'

export interface PairAngle {
  /** Between the two signatures, degrees, 0…180. Beyond 90° the two work against each other. */
  angleDeg: number
  /** To the line of the other signature, 0…90: 0 where one is a multiple of the other, of either sign. */
  foldedDeg: number
  /** What of the weaker signature no multiple of the other can imitate, in sigmas of the noise. */
  separation: number
  /** Whether the two can be told apart: a folded angle of 10° and a separation of two sigma at least. */
  told: boolean
}

export interface GroupPair { a: string, b: string, pole: PairAngle | null, day: PairAngle | null, all: PairAngle }

export interface SetSpectrum {
  set: ObservableSet
  /** Singular values of the signatures scaled to one length, and the combinations of groups that they belong to. */
  values: number[]
  vectors: number[][]
  /** Number of combinations that are independent at all, to rounding. */
  rank: number
  /** Combinations whose effect, with every group as reported, is above one sigma of the noise. */
  seen: number
}

export interface Identifiability {
  groups: { key: string, name: string, /** Strength of the signature in sigmas of the noise. */ strength: number, /** Part of a factor that these observations decide against a prior of ± 1. */ resolution: number }[]
  pairs: GroupPair[]
  spectra: SetSpectrum[]
  sentences: string[]
}

/** Angle below which, and separation in sigmas below which, two groups count as not told apart. */
export const LEAST_ANGLE_DEG = 10
export const LEAST_SEPARATION = 2
