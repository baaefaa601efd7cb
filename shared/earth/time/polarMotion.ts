import { CHANDLER_PERIOD_DAYS, CHANDLER_Q } from '../constants.ts'

export interface ChandlerSettings {
  /** Period of the Chandler wobble, days. */
  periodDays: number
  /** Quality factor. */
  q: number
}
export const defaultChandler: ChandlerSettings = { periodDays: CHANDLER_PERIOD_DAYS, q: CHANDLER_Q }

/**
 * Periods that 1.608, the rotational factor of χ₁ and χ₂, belongs to (it comes from the observed Chandler period), and quality
 * factors found in the literature; IERS constants: 433.1 d and 170, Gross (2007): 433.0 d and 179.
 */
export const chandlerBand = { periodDays: [428, 438], q: [30, 1000] } as const

/** Periods from which on the two-point filter is right to 1 %, in steps of the data: 13 days for daily poles. */
export const FILTER_VALID_STEPS = 13

type Complex = readonly [re: number, im: number]

/** Complex frequency of the Chandler wobble, σ_cw = (2π/T)(1 + i/2Q), rad/day. */
export function chandlerFrequency({ periodDays, q }: ChandlerSettings): Complex {
  if (!(periodDays > 0) || !(q > 0)) throw new RangeError(`period and Q must be positive, got ${periodDays} d and ${q}`)
  const sigma = 2 * Math.PI / periodDays
  return [sigma, sigma / (2 * q)]
}

/** e-folding time of a free wobble, 2QT/2π in days: 67.5 years for 433 d and 179. */
export function decayTimeDays({ periodDays, q }: ChandlerSettings): number {
  return q * periodDays / Math.PI
}

/**
 * Pole from excitation: p + (i/σ) dp/dt = χ with p = x_p − i y_p and χ = χ₁ + i χ₂, by the exact step for χ linear between epochs.
 * With c = (i/σ) Δχ/Δt: p₁ = e^{iσΔt} (p₀ − χ₀ + c) + χ₁ − c.
 *
 * @param mjd n epochs in increasing order, MJD
 * @param chi1 and chi2: excitation on them, mas
 * @param start pole at the first epoch, mas; y_p towards 90° W
 * @returns x_p and y_p on the same epochs, mas
 */
export function poleFromExcitation(
  mjd: ArrayLike<number>, chi1: ArrayLike<number>, chi2: ArrayLike<number>, start: { xMas: number, yMas: number },
  chandler: ChandlerSettings = defaultChandler
): { xMas: Float64Array, yMas: Float64Array } {
  const n = mjd.length
  const sigma = chandlerFrequency(chandler)
  const xMas = new Float64Array(n)
  const yMas = new Float64Array(n)
  let p: Complex = [start.xMas, -start.yMas]
  for (let k = 0; k < n; k++) {
    if (k > 0) {
      const step = mjd[k]! - mjd[k - 1]!
      if (!(step > 0)) throw new RangeError(`mjd must increase, got ${mjd[k]} after ${mjd[k - 1]}`)
      const before: Complex = [chi1[k - 1]!, chi2[k - 1]!]
      const now: Complex = [chi1[k]!, chi2[k]!]
      const slope: Complex = [(now[0] - before[0]) / step, (now[1] - before[1]) / step]
      const c = divide([-slope[1], slope[0]], sigma)
      const free = multiply(turn(sigma, step), [p[0] - before[0] + c[0], p[1] - before[1] + c[1]])
      p = [free[0] + now[0] - c[0], free[1] + now[1] - c[1]]
    }
    xMas[k] = p[0]
    yMas[k] = -p[1]
  }
  return { xMas, yMas }
}

/**
 * Excitation from the pole by a two-point filter, at the MIDPOINTS between epochs: χ = (p₁ − e^{iσΔt} p₀)/(1 − e^{iσΔt}), exact for
 * χ that is constant over the step; it differs from the filter of Wilson (1985, Geophys. J. R. astr. Soc. 80, 551) by (σΔt)²/24, 9e-6
 * for daily poles. Not the exact inverse of `poleFromExcitation`: variations are damped by `filterGain`, 1 % at 13 steps.
 *
 * Pairs with a missing pole, or further apart than `maxStepDays`, give no value: gaps stay gaps.
 */
export function excitationFromPole(
  mjd: ArrayLike<number>, xMas: ArrayLike<number>, yMas: ArrayLike<number>, chandler: ChandlerSettings = defaultChandler, maxStepDays = Infinity
): { mjd: Float64Array, chi1Mas: Float64Array, chi2Mas: Float64Array } {
  const sigma = chandlerFrequency(chandler)
  const epochs: number[] = []
  const chi1: number[] = []
  const chi2: number[] = []
  let lastStep = Number.NaN
  let e: Complex = [1, 0]
  for (let k = 1; k < mjd.length; k++) {
    const step = mjd[k]! - mjd[k - 1]!
    if (!(step > 0)) throw new RangeError(`mjd must increase, got ${mjd[k]} after ${mjd[k - 1]}`)
    if (step > maxStepDays || Number.isNaN(xMas[k]! + yMas[k]! + xMas[k - 1]! + yMas[k - 1]!)) continue
    if (step !== lastStep) {
      e = turn(sigma, step)
      lastStep = step
    }
    const free = multiply(e, [xMas[k - 1]!, -yMas[k - 1]!])
    const chi = divide([xMas[k]! - free[0], -yMas[k]! - free[1]], [1 - e[0], -e[1]])
    epochs.push(mjd[k - 1]! + step / 2)
    chi1.push(chi[0])
    chi2.push(chi[1])
  }
  return { mjd: Float64Array.from(epochs), chi1Mas: Float64Array.from(chi1), chi2Mas: Float64Array.from(chi2) }
}

/**
 * Gain of the two-point filter for excitation of a given period (negative: retrograde), 1 for constant excitation:
 * [sin((σ − ω)Δt/2)/(σ − ω)] / [sin(σΔt/2)/σ], damping left out.
 */
export function filterGain(periodDays: number, stepDays: number, chandler: ChandlerSettings = defaultChandler): number {
  const [sigma] = chandlerFrequency(chandler)
  const difference = sigma - 2 * Math.PI / periodDays
  const half = stepDays / 2
  const response = (s: number): number => s === 0 ? half : Math.sin(s * half) / s
  return response(difference) / response(sigma)
}

/** e^{iσt} for a complex σ. */
function turn([re, im]: Complex, t: number): Complex {
  const size = Math.exp(-im * t)
  return [size * Math.cos(re * t), size * Math.sin(re * t)]
}

function multiply([a, b]: Complex, [c, d]: Complex): Complex {
  return [a * c - b * d, a * d + b * c]
}

function divide([a, b]: Complex, [c, d]: Complex): Complex {
  const square = c * c + d * d
  return [(a * c + b * d) / square, (b * c - a * d) / square]
}
