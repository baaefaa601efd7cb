import { JULIAN_YEAR_DAYS } from '../../earth/time/epochs.ts'

export interface Spectrum {
  /** Cycles per Julian year, ascending. */
  frequencyPerYear: number[]
  /** Amplitude of the sinusoid of that frequency that the values suggest, in their unit: 2 √(P/n). */
  amplitude: number[]
}

/** Frequencies are this many times closer than the record resolves. */
const OVERSAMPLING = 4
/** Frequencies × epochs that are worked through; longer records are looked at in fewer places. */
const MOST_WORK = 4e6

/**
 * Least-squares spectrum of values at uneven epochs (Lomb 1976, Astrophys. Space Sci. 39, 447; Scargle 1982, ApJ 263, 835): the power
 * P(f) that fitting a sinusoid takes out, from one cycle over the record to one in two usual steps. Gaps need no filling.
 *
 * @param mjd epochs, MJD
 * @param value values about zero, any unit
 * @param stepDays usual distance of epochs, days
 */
export function lombScargle(mjd: ArrayLike<number>, value: ArrayLike<number>, stepDays: number): Spectrum {
  const n = mjd.length
  const years = Float64Array.from(mjd, t => (t - mjd[0]!) / JULIAN_YEAR_DAYS)
  const span = years[n - 1]!
  const highest = JULIAN_YEAR_DAYS / (2 * stepDays)
  const wanted = Math.max(1, Math.ceil(OVERSAMPLING * (highest * span - 1)))
  const count = Math.min(wanted, Math.max(50, Math.floor(MOST_WORK / n)))
  const frequencyPerYear = Array.from({ length: count }, (_, k) => count === 1 ? 1 / span : 1 / span + (highest - 1 / span) * k / (count - 1))
  return { frequencyPerYear, amplitude: frequencyPerYear.map(f => 2 * Math.sqrt(powerAt(2 * Math.PI * f, years, value) / n)) }
}

/** P(ω) = ½ [(Σ y cos ω(t−τ))²/Σ cos² + (Σ y sin ω(t−τ))²/Σ sin²], tan 2ωτ = Σ sin 2ωt / Σ cos 2ωt. */
export function powerAt(omega: number, t: ArrayLike<number>, y: ArrayLike<number>): number {
  let yc = 0
  let ys = 0
  let cc = 0
  let cs = 0
  const n = t.length
  for (let i = 0; i < n; i++) {
    const c = Math.cos(omega * t[i]!)
    const s = Math.sin(omega * t[i]!)
    yc += y[i]! * c
    ys += y[i]! * s
    cc += c * c
    cs += c * s
  }
  const ss = n - cc
  const turn = 0.5 * Math.atan2(2 * cs, cc - ss)
  const [c, s] = [Math.cos(turn), Math.sin(turn)]
  const cosine = c * c * cc + 2 * c * s * cs + s * s * ss
  const sine = c * c * ss - 2 * c * s * cs + s * s * cc
  const part = (amplitude: number, square: number): number => square > 1e-12 * n ? amplitude * amplitude / square : 0
  return 0.5 * (part(c * yc + s * ys, cosine) + part(c * ys - s * yc, sine))
}

/**
 * Mean amplitude that noise of a standard deviation gives at each frequency: white is flat, AR(1) of lag-one correlation φ has
 * S ∝ (1 − φ²)/(1 − 2φ cos 2πfΔ + φ²) (Box & Jenkins 1976, §3.2.3). The mean of a Rayleigh amplitude, √(πS/n).
 */
export function expectedAmplitude(frequencyPerYear: readonly number[], { sigma, phi, stepDays, count }: { sigma: number, phi: number, stepDays: number, count: number }): number[] {
  return frequencyPerYear.map((f) => {
    const shape = (1 - phi * phi) / (1 - 2 * phi * Math.cos(2 * Math.PI * f * stepDays / JULIAN_YEAR_DAYS) + phi * phi)
    return sigma * Math.sqrt(Math.PI * shape / count)
  })
}
