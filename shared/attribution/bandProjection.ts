import { JULIAN_YEAR_DAYS, julianYearsFromMjd } from '../earth/time/epochs.ts'
import { ar1Whitening, estimateAr1, stepsOf } from './ar1.ts'
import type { Ar1Noise } from './ar1.ts'
import { dot, orthonormal, withoutSpan } from './linearAlgebra.ts'
import type { Whitening } from './metric.ts'
import type { ObservedBlock } from './types.ts'

/**
 * Which part of the series a fit looks at: `interannual` all but the seasons, `annual` the annual and semiannual terms alone, `all` everything.
 * Fitted apart, since coherent seasons must not scale a trend.
 */
export type FitBand = 'interannual' | 'annual' | 'all'

/** Columns that belong to no group: constant and trend; then the cosines and sines of one and two cycles a year. */
export interface NuisanceColumns { straight: Float64Array[], seasonal: Float64Array[] }

/** The columns that belong to no group, on the epochs of a block. */
export function nuisanceColumns(mjd: ArrayLike<number>): NuisanceColumns {
  const column = (fn: (t: number) => number): Float64Array => {
    const out = new Float64Array(mjd.length)
    for (let k = 0; k < out.length; k++) out[k] = fn(mjd[k]!)
    return out
  }
  const middle = (mjd[0]! + mjd[mjd.length - 1]!) / 2
  const wave = (cycles: number): Float64Array[] => [Math.cos, Math.sin].map(fn => column(t => fn(2 * Math.PI * cycles * julianYearsFromMjd(t))))
  return { straight: [column(() => 1), column(t => (t - middle) / JULIAN_YEAR_DAYS)], seasonal: [...wave(1), ...wave(2)] }
}

/**
 * Coordinates of a series of one observable in which its noise has unit variance and what belongs to no group is projected out. For
 * `interannual` constant and seasons are out, and the trend too with `trend: 'out'`; for `annual` the four seasonal coordinates beside a
 * constant and trend are what is left.
 */
export function bandProjection(
  { mjd }: Pick<ObservedBlock, 'mjd'>, noise: Ar1Noise, stepDays: number, band: FitBand, trend: 'in' | 'out', nuisance: NuisanceColumns = nuisanceColumns(mjd)
): Whitening {
  const whiten = ar1Whitening(noise, stepsOf(mjd, stepDays))
  const { straight, seasonal } = nuisance
  const level = straight.map(whiten)
  if (band === 'annual') {
    const basis = orthonormal(level)
    const units = orthonormal(seasonal.map(column => withoutSpan(whiten(column), basis)))
    return (x) => {
      const white = whiten(x)
      return Float64Array.from(units, unit => dot(white, unit))
    }
  }
  const out = orthonormal([...(trend === 'out' ? level : level.slice(0, 1)), ...(band === 'interannual' ? seasonal.map(whiten) : [])])
  return x => withoutSpan(whiten(x), out)
}

/** Noise of a residual of one observable about constant, trend and seasons. */
export function residualNoise(
  block: Pick<ObservedBlock, 'mjd'>, residual: Float64Array, stepDays: number, lost = 0, nuisance: NuisanceColumns = nuisanceColumns(block.mjd)
): Ar1Noise {
  const { straight, seasonal } = nuisance
  return estimateAr1(residual, [...straight, ...seasonal], stepsOf(block.mjd, stepDays), lost)
}
