import { weightedLeastSquares } from '../earth/time/leastSquares.ts'
import { chandlerFrequency, decayTimeDays, defaultChandler, poleFromExcitation } from '../earth/time/polarMotion.ts'
import type { ChandlerSettings } from '../earth/time/polarMotion.ts'
import { JULIAN_YEAR_DAYS } from '../earth/time/epochs.ts'
import { formatNumber } from '../format/numbers.ts'

/** Predicted excitation, mas, null where a month has no value; its zero is arbitrary. */
export interface PredictedExcitation { mjd: ArrayLike<number>, chi1Mas: ArrayLike<number | null>, chi2Mas: ArrayLike<number | null> }
/** Observed pole, mas; NaN where missing. x towards Greenwich, y towards 90° W. */
export interface ObservedPole { mjd: ArrayLike<number>, xMas: ArrayLike<number>, yMas: ArrayLike<number> }

export interface ForwardOptions {
  chandler?: ChandlerSettings
  /** Steps between the epochs of the prediction are cut so that none is longer, days; default 10. */
  stepDays?: number
}

/** A stretch of the prediction without a gap, as a path in the pole plane beside the observed one. */
export interface PoleStretch {
  mjd: Float64Array
  /** Predicted pole with initial state and constant offset fitted, mas. */
  xMas: Float64Array
  yMas: Float64Array
  /** Observed pole on the same epochs, NaN where missing. */
  observedXMas: Float64Array
  observedYMas: Float64Array
  /** Fitted pole at the first epoch, mas. */
  start: { xMas: number, yMas: number }
  /** Fitted free wobble at the first epoch, mas: its amplitude, which then decays. */
  freeWobbleMas: number
  /** RMS of observed less predicted, over both components, mas. */
  rmsMas: number
}

export interface ForwardPole { stretches: PoleStretch[], chandler: ChandlerSettings, sentence: string }

/** Fewest epochs with an observed pole that a state is fitted to. */
const LEAST_OBSERVED = 12

/**
 * Predicted χ integrated to x_p and y_p, with the initial state fitted to the observed pole. For χ linear between its epochs the
 * integration is exact. p = p_forced + c + a·e^{iσ(t − t₀)} by complex least squares: c the arbitrary zero of the prediction, a
 * the free wobble at the start. Gaps are not bridged: each stretch has a state of its own.
 */
export function forwardPole(predicted: PredictedExcitation, observed: ObservedPole, options: ForwardOptions = {}): ForwardPole {
  const chandler = options.chandler ?? defaultChandler
  const stretches = stretchesOf(predicted, options.stepDays ?? 10).flatMap((grid): PoleStretch[] => {
    const stretch = fitState(grid, observed, chandler)
    return stretch ? [stretch] : []
  })
  const years = decayTimeDays(chandler) / JULIAN_YEAR_DAYS
  return {
    stretches,
    chandler,
    sentence: stretches.length === 0
      ? 'Prediction and observed pole have too little time in common for a state to be fitted.'
      : `The wobble at the start is fitted and not predicted; it fades to a third (1/e) within ${formatNumber(years, 1)} years. What keeps the Chandler wobble going is mostly air and sea, which the regions do not hold: compare the slow path, not the circles.`
  }
}

interface Grid { mjd: number[], chi1: number[], chi2: number[] }

/** Stretches without a gap, their steps cut to at most `stepDays`, χ straight in between. */
function stretchesOf({ mjd, chi1Mas, chi2Mas }: PredictedExcitation, stepDays: number): Grid[] {
  if (!(stepDays > 0)) throw new RangeError(`stepDays must be positive, got ${stepDays}`)
  const grids: Grid[] = []
  let grid: Grid | null = null
  for (let k = 0; k < mjd.length; k++) {
    const chi1 = chi1Mas[k]
    const chi2 = chi2Mas[k]
    if (chi1 === null || chi1 === undefined || chi2 === null || chi2 === undefined || Number.isNaN(chi1 + chi2)) {
      grid = null
      continue
    }
    if (!grid) {
      grid = { mjd: [], chi1: [], chi2: [] }
      grids.push(grid)
    } else {
      const [t0, a0, b0] = [grid.mjd.at(-1)!, grid.chi1.at(-1)!, grid.chi2.at(-1)!]
      const parts = Math.ceil((mjd[k]! - t0) / stepDays)
      for (let i = 1; i < parts; i++) {
        const share = i / parts
        grid.mjd.push(t0 + share * (mjd[k]! - t0))
        grid.chi1.push(a0 + share * (chi1 - a0))
        grid.chi2.push(b0 + share * (chi2 - b0))
      }
    }
    grid.mjd.push(mjd[k]!)
    grid.chi1.push(chi1)
    grid.chi2.push(chi2)
  }
  return grids
}

function fitState(grid: Grid, observed: ObservedPole, chandler: ChandlerSettings): PoleStretch | null {
  const n = grid.mjd.length
  const seenX = interpolated(observed.mjd, observed.xMas, grid.mjd)
  const seenY = interpolated(observed.mjd, observed.yMas, grid.mjd)
  const seen = grid.mjd.map((_, k) => k).filter(k => !Number.isNaN(seenX[k]! + seenY[k]!))
  if (seen.length < LEAST_OBSERVED) return null
  const forced = poleFromExcitation(grid.mjd, grid.chi1, grid.chi2, { xMas: 0, yMas: 0 }, chandler)
  const free = freeMode(grid.mjd, chandler)
  // Unknowns: real and imaginary parts of the offset c and of the free wobble a; rows: x, then −y.
  const m = seen.length
  const column = (real: (k: number) => number, imaginary: (k: number) => number): Float64Array =>
    Float64Array.from({ length: 2 * m }, (_, i) => i < m ? real(seen[i]!) : imaginary(seen[i - m]!))
  const columns = [
    column(() => 1, () => 0), column(() => 0, () => 1), column(k => free.re[k]!, k => free.im[k]!), column(k => -free.im[k]!, k => free.re[k]!)
  ]
  const y = column(k => seenX[k]! - forced.xMas[k]!, k => -seenY[k]! + forced.yMas[k]!)
  const { coefficients: [c1, c2, a1, a2], residuals } = weightedLeastSquares(columns, y) as unknown as { coefficients: [number, number, number, number], residuals: Float64Array }
  const xMas = Float64Array.from({ length: n }, (_, k) => forced.xMas[k]! + c1 + a1 * free.re[k]! - a2 * free.im[k]!)
  const yMas = Float64Array.from({ length: n }, (_, k) => forced.yMas[k]! - c2 - a1 * free.im[k]! - a2 * free.re[k]!)
  return {
    mjd: Float64Array.from(grid.mjd), xMas, yMas, observedXMas: seenX, observedYMas: seenY,
    start: { xMas: xMas[0]!, yMas: yMas[0]! },
    freeWobbleMas: Math.hypot(a1, a2),
    rmsMas: Math.sqrt(residuals.reduce((sum, r) => sum + r * r, 0) / residuals.length)
  }
}

/** e^{iσ(t − t₀)}. */
function freeMode(mjd: readonly number[], chandler: ChandlerSettings): { re: Float64Array, im: Float64Array } {
  const [frequency, damping] = chandlerFrequency(chandler)
  const size = Float64Array.from(mjd, t => Math.exp(-damping * (t - mjd[0]!)))
  return {
    re: size.map((s, k) => s * Math.cos(frequency * (mjd[k]! - mjd[0]!))),
    im: size.map((s, k) => s * Math.sin(frequency * (mjd[k]! - mjd[0]!)))
  }
}

/** Longest distance between observed poles that a straight line is drawn across, days: 0.03 mas off the usual wobble at most. */
const LONGEST_STEP_DAYS = 6

function interpolated(mjd: ArrayLike<number>, value: ArrayLike<number>, at: readonly number[]): Float64Array {
  let k = 0
  return Float64Array.from(at, (t) => {
    while (k + 1 < mjd.length && mjd[k + 1]! < t) k++
    if (mjd.length === 0 || t < mjd[0]! || k + 1 >= mjd.length && mjd[k]! !== t) return Number.NaN
    if (mjd[k] === t) return value[k]!
    const step = mjd[k + 1]! - mjd[k]!
    if (mjd[k + 1] === t) return value[k + 1]!
    return step > LONGEST_STEP_DAYS ? Number.NaN : value[k]! + (t - mjd[k]!) / step * (value[k + 1]! - value[k]!)
  })
}
