import { varianceOfFunctional } from './covariance.ts'
import type { Covariance } from './covariance.ts'
import { weightedLeastSquares } from './leastSquares.ts'
import { trendDesign } from './trendDesign.ts'
import type { TrendOptions } from './trendDesign.ts'

/**
 * Weights of the epochs in the fitted trend, per Julian year: trend = Σ wᵢ yᵢ for the fit that `fitTrend` makes of these epochs. A trend
 * is a linear functional, so every error of the values goes into it through these.
 *
 * @param mjd epochs, MJD
 * @param sigma one-sigmas that the fit is weighted with, any unit; absent: equal weights
 */
export function trendWeights(mjd: ArrayLike<number>, sigma: ArrayLike<number> | null = null, options: TrendOptions = {}): Float64Array {
  const { columns } = trendDesign(mjd, options)
  const fit = weightedLeastSquares(columns, new Float64Array(mjd.length), sigma)
  const weights = new Float64Array(mjd.length)
  columns.forEach((column, j) => {
    const c = fit.cofactor[1]![j]!
    for (let i = 0; i < weights.length; i++) weights[i] = weights[i]! + c * column[i]! / (sigma ? sigma[i]! ** 2 : 1)
  })
  return weights
}

/** One-sigma of a trend from the covariance of the values, per Julian year, for a fit with the same weights and terms. */
export function trendSigma(covariance: Covariance, mjd: ArrayLike<number>, sigma: ArrayLike<number> | null = null, options: TrendOptions = {}): number {
  return Math.sqrt(varianceOfFunctional(covariance, trendWeights(mjd, sigma, options)))
}
