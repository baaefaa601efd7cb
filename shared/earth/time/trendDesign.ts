import { JULIAN_YEAR_DAYS, julianYearsFromMjd } from './epochs.ts'

export interface TrendOptions {
  /** 'auto' (default): annual and semiannual terms from two years on, where the epochs can carry them. */
  seasonal?: 'auto' | boolean
  /** Which of the two where seasons are carried: 1 annual, 2 semiannual; both unless told. */
  harmonics?: readonly (1 | 2)[]
  /** Adds ½·a·(t − t₀)²; the trend is then the rate at the reference epoch. */
  acceleration?: boolean
  /** Epochs of steps, MJD: each adds a column that is 0 before and 1 from there on. */
  stepsMjd?: number[]
  /** Adds a periodic term, e.g. 161 d, the alias of the S₂ tide in satellite gravimetry. */
  aliasPeriodDays?: number
  /** Epoch of the constant and the trend, MJD; default the mean of the epochs. */
  referenceMjd?: number
}

export interface TrendDesign {
  names: string[]
  columns: Float64Array[]
  seasonal: boolean
  referenceMjd: number
  warnings: { code: string, message: string }[]
}

/** Two calendar years: the shortest record that annual and semiannual terms are fitted to, days. */
export const SEASONAL_MINIMUM_DAYS = 730
/** Constant, two annual and two semiannual terms need five different times of year. */
const SEASONS_NEEDED = 5
const SEASON_WIDTH_YEARS = 15 / JULIAN_YEAR_DAYS

/**
 * Columns of the trend fit: 1, t − t₀ (Julian years), then as asked ½(t − t₀)², cos and sin of 2πt and 4πt, cos and
 * sin of the alias period, steps. Phases count from J2000.0 in Julian years, so that amplitudes of two fits compare.
 */
export function trendDesign(mjd: ArrayLike<number>, options: TrendOptions = {}): TrendDesign {
  const n = mjd.length
  const warnings: TrendDesign['warnings'] = []
  const referenceMjd = options.referenceMjd ?? mean(mjd)
  const seasonal = carriesSeasons(mjd, options.seasonal ?? 'auto', warnings)
  const names = ['constant', 'trend']
  const columns = [new Float64Array(n).fill(1), map(mjd, t => (t - referenceMjd) / JULIAN_YEAR_DAYS)]
  const periodic = (name: string, cyclesPerYear: number): void => {
    names.push(`${name} cos`, `${name} sin`)
    columns.push(
      map(mjd, t => Math.cos(2 * Math.PI * cyclesPerYear * julianYearsFromMjd(t))),
      map(mjd, t => Math.sin(2 * Math.PI * cyclesPerYear * julianYearsFromMjd(t)))
    )
  }
  if (options.acceleration) {
    names.push('acceleration')
    columns.push(map(mjd, t => 0.5 * ((t - referenceMjd) / JULIAN_YEAR_DAYS) ** 2))
  }
  if (seasonal) {
    const harmonics = options.harmonics ?? [1, 2]
    if (harmonics.includes(1)) periodic('annual', 1)
    if (harmonics.includes(2)) periodic('semiannual', 2)
  }
  if (options.aliasPeriodDays !== undefined) {
    if (!(options.aliasPeriodDays > 0)) throw new RangeError(`aliasPeriodDays must be positive, got ${options.aliasPeriodDays}`)
    periodic(`${options.aliasPeriodDays} d`, JULIAN_YEAR_DAYS / options.aliasPeriodDays)
  }
  for (const step of options.stepsMjd ?? []) {
    names.push(`step ${step}`)
    columns.push(map(mjd, t => t >= step ? 1 : 0))
  }
  return { names, columns, seasonal, referenceMjd, warnings }
}

function carriesSeasons(mjd: ArrayLike<number>, wanted: 'auto' | boolean, warnings: TrendDesign['warnings']): boolean {
  if (wanted === false) return false
  let first = Infinity
  let last = -Infinity
  for (let i = 0; i < mjd.length; i++) {
    first = Math.min(first, mjd[i]!)
    last = Math.max(last, mjd[i]!)
  }
  if (last - first < SEASONAL_MINIMUM_DAYS) {
    warnings.push({
      code: 'short-series',
      message: `The record covers ${Math.round(last - first)} days. Annual and semiannual terms are fitted from two years on, so the trend stands alone and may hold part of the season.`
    })
    return false
  }
  // Two more epochs than unknowns, or the residuals would say nothing about the error.
  if (mjd.length < 8 || timesOfYear(mjd) < SEASONS_NEEDED) {
    warnings.push({
      code: 'seasons-not-resolved',
      message: 'The epochs fall on too few times of the year for annual and semiannual terms; the trend is fitted without them.'
    })
    return false
  }
  return true
}

/** Number of times of year that are more than 15 days apart, wrapping at the turn of the year. */
function timesOfYear(mjd: ArrayLike<number>): number {
  const phases: number[] = []
  for (let i = 0; i < mjd.length; i++) {
    const years = julianYearsFromMjd(mjd[i]!)
    phases.push(years - Math.floor(years))
  }
  phases.sort((a, b) => a - b)
  let count = 0
  let last = -Infinity
  for (const phase of phases) {
    if (phase - last > SEASON_WIDTH_YEARS && !(count > 0 && phases[0]! + 1 - phase < SEASON_WIDTH_YEARS)) {
      count++
      last = phase
    }
  }
  return count
}

function map(x: ArrayLike<number>, fn: (value: number) => number): Float64Array {
  const out = new Float64Array(x.length)
  for (let i = 0; i < out.length; i++) out[i] = fn(x[i]!)
  return out
}

/** Mean of n numbers about the first of them, so that large epochs keep their digits. */
export function mean(x: ArrayLike<number>): number {
  const origin = x[0]!
  let sum = 0
  for (let i = 0; i < x.length; i++) sum += x[i]! - origin
  return origin + sum / x.length
}
