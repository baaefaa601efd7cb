import type { Measured } from '../../types/domain.ts'
import { formatNumber } from '../../format/numbers.ts'
import { JULIAN_YEAR_DAYS } from './epochs.ts'
import { weightedLeastSquares } from './leastSquares.ts'
import { medianStep } from './monthlyMeans.ts'
import { fitByLikelihood, fitUnder } from './noiseModels.ts'
import type { AveragedFit, GridProblem, NoiseModelName } from './noiseModels.ts'
import { fitTrend, lagOneCorrelation } from './trend.ts'
import type { TimeSeriesInput } from './trend.ts'
import { trendDesign } from './trendDesign.ts'
import type { TrendOptions } from './trendDesign.ts'

export interface TrendUnderNoise {
  model: NoiseModelName
  /** Trend per Julian year and its one-sigma under this noise. */
  value: number
  sigma: number
  /** φ of AR(1) at the step of the series; spectral index κ of the power law (0 white, −1 flicker, −2 random walk); null for white. */
  parameter: number | null
  /** All coefficients in the order of `TrendNoiseReport.names` with their one-sigma. */
  coefficients: number[]
  sigmas: number[]
  /** −2 ln restricted likelihood + 2 × parameters, less the smallest of the models: 0 for the model that describes best. */
  aic: number
}

export interface TrendNoiseReport {
  /** The usual fit: white error and the one inflated by the lag-one correlation. */
  simple: Measured & { r1: number }
  /** White, AR(1) and power law, each by restricted likelihood averaged over its parameter; without the latter two where the epochs are too irregular. */
  models: TrendUnderNoise[]
  /** Names of the coefficients. */
  names: string[]
  /** Model whose error is to be quoted. */
  quote: NoiseModelName
  /** Which error to quote and why, in a sentence. */
  sentence: string
}

/** Series that are shorter tell no noise model from another. */
const LEAST_EPOCHS = 36
/** Series that are longer take too long: the power law goes with the square of their length. */
const MOST_EPOCHS = 2000
/** Epochs missing on the grid that are still carried as unknowns. */
const MOST_MISSING = 60
/** Difference in AIC that counts. */
const CLEAR = 2

/**
 * Trend under white, AR(1) and power-law noise side by side, by generalised least squares on the grid of the series' median step.
 * Missing grid epochs are unknowns, which is exact: nothing is interpolated.
 *
 * @throws RangeError as `fitTrend` does
 */
export function trendNoise(series: TimeSeriesInput, options: TrendOptions = {}): TrendNoiseReport {
  const plain = fitTrend(series, options)
  const simple = { value: plain.value, sigmaWhite: plain.sigmaWhite, sigma: plain.sigma, r1: plain.r1 }
  const problem = series.mjd.length >= LEAST_EPOCHS && series.mjd.length <= MOST_EPOCHS ? gridProblem(series, { ...options, seasonal: plain.seasonal }) : null
  if (!problem) {
    const why = series.mjd.length < LEAST_EPOCHS ? `fewer than ${LEAST_EPOCHS} epochs` : series.mjd.length > MOST_EPOCHS ? `more than ${MOST_EPOCHS} epochs` : 'epochs too irregular'
    return {
      simple,
      models: [{ model: 'white', value: plain.value, sigma: plain.sigmaWhite, parameter: null, aic: 0, coefficients: [...plain.coefficients], sigmas: [...plain.sigmaWhiteCoefficients] }],
      names: plain.names,
      quote: 'ar1',
      sentence: `With ${why} the noise cannot be told from the residuals: quote the error inflated for lag-one correlation, and take it as a lower bound.`
    }
  }
  const fits: [NoiseModelName, AveragedFit][] = (['white', 'ar1', 'power-law'] as const).map(model => [model, fitByLikelihood(model, problem)])
  const aics = fits.map(([model, { deviance }]) => deviance + (model === 'white' ? 0 : 2))
  const least = Math.min(...aics)
  const models = fits.map(([model, { coefficients, sigma, parameter }], i): TrendUnderNoise => ({
    model,
    value: coefficients[1]!,
    sigma: sigma[1]!,
    parameter: model === 'white' ? null : model === 'ar1' ? parameter : -2 * parameter,
    aic: aics[i]! - least,
    coefficients: [...coefficients],
    sigmas: [...sigma]
  }))
  return { simple, models, names: plain.names, ...advice(models) }
}

/**
 * Trend by generalised least squares under AR(1), φ from the lag-one correlation of the unwhitened residuals, iterated until it
 * stays (Cochrane & Orcutt 1949, with the first epoch kept: Prais & Winsten 1954). For epochs at equal steps.
 */
export function fitAr1ByCorrelation(series: TimeSeriesInput, options: TrendOptions = {}): { names: string[], coefficients: Float64Array, sigma: Float64Array, r1: number } {
  const { columns, names } = trendDesign(series.mjd, options)
  const scale = (x: ArrayLike<number>): Float64Array => Float64Array.from(x, (v, i) => v / (series.sigma ? series.sigma[i]! : 1))
  const problem = { columns: columns.map(scale), y: scale(series.value), designColumns: columns.length }
  let r1 = lagOneCorrelation(weightedLeastSquares(problem.columns, problem.y).residuals)
  for (let round = 0; round < 100; round++) {
    const { fit } = fitUnder('ar1', r1, problem)
    const residuals = problem.y.map((y, i) => y - problem.columns.reduce((sum, column, j) => sum + fit.coefficients[j]! * column[i]!, 0))
    const next = lagOneCorrelation(residuals)
    const settled = Math.abs(next - r1) < 1e-13
    r1 = next
    if (settled) break
  }
  const { fit } = fitUnder('ar1', r1, problem)
  return { names, coefficients: fit.coefficients, sigma: fit.sigma, r1 }
}

/** Usual step, days; a twelfth of a year for calendar months, whose median of 30 to 31 days would run away from them over decades. */
export function gridStep(mjd: ArrayLike<number>): number {
  const step = medianStep(mjd)
  return step >= 28 && step <= 31.5 ? JULIAN_YEAR_DAYS / 12 : step
}

/** The fit on a regular grid; null where the epochs do not lie on one. */
function gridProblem(series: TimeSeriesInput, options: TrendOptions): GridProblem | null {
  const step = gridStep(series.mjd)
  const first = series.mjd[0]!
  const slots = Array.from(series.mjd, t => Math.round((t - first) / step))
  const count = slots.at(-1)! + 1
  if (count - slots.length > MOST_MISSING || slots.some((slot, i) => i > 0 && slot === slots[i - 1])) return null
  // Calendar months drift by a day or two against equal steps; a slot is still its month.
  if (slots.some((slot, i) => Math.abs(series.mjd[i]! - first - slot * step) > 0.45 * step)) return null
  const design = trendDesign(series.mjd, options)
  const onGrid = (x: ArrayLike<number>): Float64Array => {
    const out = new Float64Array(count)
    slots.forEach((slot, i) => { out[slot] = x[i]! / (series.sigma ? series.sigma[i]! : 1) })
    return out
  }
  const held = new Set(slots)
  const missing = Array.from({ length: count }, (_, slot) => slot).filter(slot => !held.has(slot))
  return {
    columns: [...design.columns.map(onGrid), ...missing.map(slot => {
      const indicator = new Float64Array(count)
      indicator[slot] = 1
      return indicator
    })],
    y: onGrid(series.value),
    designColumns: design.columns.length
  }
}

function advice(models: TrendUnderNoise[]): { quote: NoiseModelName, sentence: string } {
  const best = models.find(m => m.aic === 0)!
  const largest = models.reduce((most, m) => m.sigma > most.sigma ? m : most)
  const white = models[0]!
  const rival = models.find(m => m.model !== best.model && m.model !== 'white' && m.aic < CLEAR)
  if (best.model === 'white' && !(rival && rival.sigma > 1.2 * white.sigma)) {
    return { quote: 'white', sentence: 'The residuals look white: quote the white-noise error.' }
  }
  const names: Record<NoiseModelName, string> = { 'white': 'white noise', 'ar1': 'AR(1) noise', 'power-law': 'power-law noise' }
  const detail = (m: TrendUnderNoise): string => m.parameter === null ? '' : m.model === 'ar1' ? ` (φ = ${formatNumber(m.parameter, 2)} per step)` : ` (index ${formatNumber(m.parameter, 1)})`
  if (rival) {
    const quoted = rival.sigma > best.sigma ? rival : best
    return {
      quote: quoted.model,
      sentence: `The record cannot tell ${names[best.model]} from ${names[rival.model]}: quote the larger error, that of ${names[quoted.model]}${detail(quoted)}.`
    }
  }
  const caution = best.model === 'power-law' && best.sigma > 2 * models[1]!.sigma ? ' An AR(1) error would be far too small.' : ''
  return { quote: best.model, sentence: `${names[best.model][0]!.toUpperCase()}${names[best.model].slice(1)}${detail(best)} describes the residuals best: quote its error${largest === best ? '' : ', though another model gives a larger one'}.${caution}` }
}
