import { RankError, weightedLeastSquares } from './leastSquares.ts'
import type { LeastSquaresFit } from './leastSquares.ts'
import { trendDesign } from './trendDesign.ts'
import type { TrendDesign, TrendOptions } from './trendDesign.ts'

export interface TimeSeriesInput {
  /** Epochs, MJD, in any order of time that is not decreasing. */
  mjd: ArrayLike<number>
  value: ArrayLike<number>
  /** One-sigma per epoch in the unit of value; absent or null: equal weights. */
  sigma?: ArrayLike<number> | null
}

export interface TrendFit {
  /** Trend in units of value per Julian year. */
  value: number
  /** One-sigma under white noise, scaled by the residuals. */
  sigmaWhite: number
  /** One-sigma that is quoted: sigmaWhite · √((1 + r₁)/(1 − r₁)). */
  sigma: number
  /** Lag-one autocorrelation of the standardised residuals, Σ rᵢ rᵢ₊₁ / Σ rᵢ². */
  r1: number
  seasonal: boolean
  names: string[]
  coefficients: Float64Array
  sigmaWhiteCoefficients: Float64Array
  sigmaCoefficients: Float64Array
  model: Float64Array
  residuals: Float64Array
  /** Standard deviation of the residuals with n − p degrees of freedom, in the unit of value (of weight one). */
  residualSigma: number
  degreesOfFreedom: number
  /** Epoch of the constant and the trend: the mean of the epochs unless it was given. */
  referenceMjd: number
  warnings: { code: string, message: string }[]
}

/**
 * Weighted least squares of a constant and a trend, with annual and semiannual terms from two years on, and whatever
 * `options` adds. Errors are scaled by the residuals; the quoted one is inflated for lag-one correlation, the large-n
 * factor of an AR(1) process (e.g. Bartlett 1935; Santer et al. 2000, J. Geophys. Res. 105, 7337).
 *
 * @throws RangeError for fewer than three epochs, unequal lengths, or values that are not finite
 */
export function fitTrend(series: TimeSeriesInput, options: TrendOptions = {}): TrendFit {
  checkSeries(series)
  let design = trendDesign(series.mjd, options)
  let fit: LeastSquaresFit
  try {
    fit = weightedLeastSquares(design.columns, series.value, series.sigma)
  } catch (error) {
    if (!(error instanceof RankError) || !design.seasonal) throw error
    design = withoutSeasons(series, options)
    fit = weightedLeastSquares(design.columns, series.value, series.sigma)
  }
  if (fit.degreesOfFreedom < 1) {
    throw new RangeError(`a fit of ${design.columns.length} coefficients needs at least ${design.columns.length + 1} epochs, got ${series.mjd.length}`)
  }
  const r1 = lagOneCorrelation(fit.standardised)
  const inflation = inflationOf(r1)
  return {
    value: fit.coefficients[1]!,
    sigmaWhite: fit.sigma[1]!,
    sigma: fit.sigma[1]! * inflation,
    r1,
    seasonal: design.seasonal,
    names: design.names,
    coefficients: fit.coefficients,
    sigmaWhiteCoefficients: fit.sigma,
    sigmaCoefficients: fit.sigma.map(s => s * inflation),
    model: fit.model,
    residuals: fit.residuals,
    residualSigma: Math.sqrt(fit.variance * meanVariance(series)),
    degreesOfFreedom: fit.degreesOfFreedom,
    referenceMjd: design.referenceMjd,
    warnings: design.warnings
  }
}

/** Lag-one autocorrelation Σ rᵢ rᵢ₊₁ / Σ rᵢ² of residuals in order of time; 0 for residuals that vanish. */
export function lagOneCorrelation(residuals: ArrayLike<number>): number {
  let lagged = 0
  let total = 0
  for (let i = 0; i < residuals.length; i++) {
    total += residuals[i]! ** 2
    if (i > 0) lagged += residuals[i]! * residuals[i - 1]!
  }
  return total > 0 ? lagged / total : 0
}

/** √((1 + r₁)/(1 − r₁)), the factor by which an AR(1) process widens the error of a mean or a slow trend. */
export function inflationOf(r1: number): number {
  return Math.sqrt((1 + r1) / (1 - r1))
}

function withoutSeasons(series: TimeSeriesInput, options: TrendOptions): TrendDesign {
  const design = trendDesign(series.mjd, { ...options, seasonal: false })
  design.warnings.push({
    code: 'seasons-not-resolved',
    message: 'The epochs cannot tell the annual and semiannual terms from the other terms; the trend is fitted without them.'
  })
  return design
}

function checkSeries({ mjd, value, sigma }: TimeSeriesInput): void {
  if (mjd.length !== value.length) throw new RangeError(`value must have ${mjd.length} numbers, one per epoch, got ${value.length}`)
  if (sigma && sigma.length !== mjd.length) throw new RangeError(`sigma must have ${mjd.length} numbers, one per epoch, got ${sigma.length}`)
  if (mjd.length < 3) throw new RangeError(`a trend needs at least 3 epochs, got ${mjd.length}`)
  for (let i = 0; i < mjd.length; i++) {
    if (!Number.isFinite(mjd[i]!)) throw new RangeError(`mjd must be finite, got ${mjd[i]} at index ${i}`)
    if (!Number.isFinite(value[i]!)) throw new RangeError(`value must be finite, got ${value[i]} at index ${i}`)
    if (i > 0 && mjd[i]! < mjd[i - 1]!) throw new RangeError(`mjd must not decrease, got ${mjd[i]} after ${mjd[i - 1]}`)
  }
  if (mjd[0] === mjd[mjd.length - 1]) throw new RangeError(`a trend needs different epochs, got ${mjd[0]} only`)
}

/** Mean of σ² over the epochs, 1 without sigmas: turns the variance of weight one into the unit of value. */
function meanVariance({ sigma }: TimeSeriesInput): number {
  if (!sigma) return 1
  let sum = 0
  for (let i = 0; i < sigma.length; i++) sum += sigma[i]! ** 2
  return sum / sigma.length
}
