import { JULIAN_YEAR_DAYS } from '../earth/time/epochs.ts'

/** ΔLOD of a prediction, ms, null in gaps, with what is known of its error. */
export interface Ut1Input {
  mjd: ArrayLike<number>
  lodMs: ArrayLike<number | null>
  /** One-sigma per epoch, ms. */
  sigmaMs?: ArrayLike<number | null> | null
  /** Correlation of the errors of neighbouring epochs, AR(1); default 0. */
  phi?: number
  /** One-sigma of the trend, ms per Julian year, that all epochs share. */
  rateSigmaMsPerYear?: number
  /** One-sigma of the level, ms: the zero of ΔLOD is arbitrary. */
  levelSigmaMs?: number
}

/** UT1 difference since the first epoch of a stretch without a gap, ms, with its growing one-sigma. */
export interface Ut1Stretch { mjd: Float64Array, ut1Ms: Float64Array, sigmaMs: Float64Array }
export interface Ut1Difference { stretches: Ut1Stretch[], caution: string }

/** For those who keep time. */
export const ut1Caution = 'This is what the load alone would do to UT1. For keeping time use the official bulletins of the IERS: the core, the tides and the air move UT1 far more.'

/**
 * UT1 difference made by a change of the length of day, the integral of d(UT1 − TAI)/dt = −ΔLOD/86 400 s: 1 ms/century of ΔLOD is
 * 18.26 s/century² of UT1. Trapezoidal rule, exact for ΔLOD straight between epochs. Gaps end a stretch; the next begins at zero.
 *
 * Its variance grows: independent errors as a random walk (√t), AR(1) ones faster, a wrong level with t, a wrong rate with t²/2.
 */
export function ut1Difference(input: Ut1Input): Ut1Difference {
  const { mjd, lodMs } = input
  const phi = input.phi ?? 0
  if (!(phi > -1 && phi < 1)) throw new RangeError(`phi must be between −1 and 1, got ${phi}`)
  const stretches: Ut1Stretch[] = []
  let rows: { t: number, ut1: number, sigma: number }[] = []
  const finish = (): void => {
    if (rows.length > 1) {
      stretches.push({ mjd: Float64Array.from(rows, r => r.t), ut1Ms: Float64Array.from(rows, r => r.ut1), sigmaMs: Float64Array.from(rows, r => r.sigma) })
    }
    rows = []
  }
  // Of the random errors e: variance of their integral S so far, covariance of S with the latest e, and its one-sigma.
  let [variance, covariance, sigma] = [0, 0, 0]
  let last = 0
  for (let k = 0; k < mjd.length; k++) {
    const lod = lodMs[k]
    if (lod === null || lod === undefined || Number.isNaN(lod)) {
      finish()
      continue
    }
    const now = input.sigmaMs?.[k] ?? 0
    if (rows.length === 0) {
      [variance, covariance, sigma, last] = [0, 0, now, lod]
      rows.push({ t: mjd[k]!, ut1: 0, sigma: 0 })
      continue
    }
    const before = rows.at(-1)!
    const half = (mjd[k]! - before.t) / 2
    if (!(half > 0)) throw new RangeError(`mjd must increase, got ${mjd[k]} after ${before.t}`)
    // e_k = φ (σ_k/σ_{k−1}) e_{k−1} + new part: cov(S, e_k) = φ (σ_k/σ_{k−1}) cov(S, e_{k−1}).
    const carried = sigma > 0 ? phi * now / sigma * covariance : 0
    const pair = phi * sigma * now
    variance += 2 * half * (covariance + carried) + half * half * (sigma * sigma + now * now + 2 * pair)
    covariance = carried + half * (now * now + pair)
    const years = (mjd[k]! - rows[0]!.t) / JULIAN_YEAR_DAYS
    const days = mjd[k]! - rows[0]!.t
    const rate = (input.rateSigmaMsPerYear ?? 0) * years * days / 2
    const level = (input.levelSigmaMs ?? 0) * days
    rows.push({ t: mjd[k]!, ut1: before.ut1 - half * (last + lod), sigma: Math.sqrt(Math.max(0, variance) + rate * rate + level * level) })
    ;[sigma, last] = [now, lod]
  }
  finish()
  return { stretches, caution: ut1Caution }
}
