import { RankError } from '../../earth/time/leastSquares.ts'
import type { NoiseModelName } from '../../earth/time/noiseModels.ts'
import { fitTrend } from '../../earth/time/trend.ts'
import type { TrendFit } from '../../earth/time/trend.ts'
import type { TrendOptions } from '../../earth/time/trendDesign.ts'
import { gridStep, trendNoise } from '../../earth/time/trendNoise.ts'
import type { TrendNoiseReport } from '../../earth/time/trendNoise.ts'
import { formatDate } from '../../format/numbers.ts'
import { InputError } from '../../types/issue.ts'
import type { MassSeries } from '../../types/run.ts'
import { autocorrelation } from './autocorrelation.ts'
import type { Correlogram } from './autocorrelation.ts'
import { expectedAmplitude, lombScargle } from './spectrum.ts'
import { termsOf } from './terms.ts'
import type { FitTerm } from './terms.ts'

/** Which terms are fitted beside constant and trend, over which time, and from where on a distance of epochs is a gap. */
export interface FitSettings {
  acceleration: boolean
  annual: boolean
  semiannual: boolean
  /** 161 d: the alias of the S₂ tide in satellite gravimetry. Null: none. */
  aliasDays: number | null
  /** Epochs from which on a step is fitted, MJD. */
  stepsMjd: number[]
  fromMjd: number | null
  toMjd: number | null
  /** Nothing is drawn or joined over a longer distance, days. */
  maxGapDays: number
}

export const ALIAS_DAYS = 161

export interface SeriesGap { fromMjd: number, toMjd: number, days: number }

export interface SeriesFit {
  /** The epochs of the fit with values, fitted values and residuals, Gt. */
  mjd: number[]
  massGt: number[]
  sigmaGt: number[] | null
  modelGt: number[]
  residualGt: number[]
  referenceMjd: number
  /** The usual error of the trend: white, and inflated for the lag-one correlation; Gt per year. */
  trend: { value: number, sigmaWhite: number, sigma: number, r1: number }
  terms: FitTerm[]
  noise: { models: { model: NoiseModelName, parameter: number | null, aic: number }[], quote: NoiseModelName, sentence: string }
  gaps: SeriesGap[]
  correlogram: Correlogram
  spectrum: { frequencyPerYear: number[], amplitudeGt: number[], expected: { model: 'white' | 'ar1', amplitudeGt: number[] }[] }
  residualSigmaGt: number
  warnings: { code: string, message: string }[]
}

/** Lags shown: three years of months, and no more than a third of the record. */
const MOST_LAGS = 36

/**
 * Trend and chosen terms of a mass series by least squares on its own epochs, with errors under three noise models and what is left:
 * residuals, their autocorrelation and spectrum. No value is made up anywhere: gaps stay gaps in all of them.
 *
 * @throws InputError where the span holds too few epochs or the epochs cannot tell the terms apart
 */
export function fitSeries(series: Pick<MassSeries, 'mjd' | 'massGt' | 'sigmaGt'>, settings: FitSettings): SeriesFit {
  const inside = series.mjd.map((t, i) => t >= (settings.fromMjd ?? -Infinity) && t <= (settings.toMjd ?? Infinity) ? i : -1).filter(i => i >= 0)
  const at = (x: readonly number[]): number[] => inside.map(i => x[i]!)
  const mjd = at(series.mjd)
  const massGt = at(series.massGt)
  const sigmaGt = series.sigmaGt && at(series.sigmaGt)
  checkSteps(mjd, settings)
  const input = { mjd, value: massGt, sigma: sigmaGt }
  const [fit, noise] = attempt(input, optionsOf(settings))
  const step = gridStep(mjd)
  const residualGt = [...fit.residuals]
  const ar1 = noise.models.find(({ model }) => model === 'ar1')
  const spectrum = lombScargle(mjd, residualGt, step)
  const expected = (model: 'white' | 'ar1', phi: number) => ({
    model, amplitudeGt: expectedAmplitude(spectrum.frequencyPerYear, { sigma: rms(residualGt), phi, stepDays: step, count: mjd.length })
  })
  return {
    mjd, massGt, sigmaGt, modelGt: [...fit.model], residualGt,
    referenceMjd: fit.referenceMjd,
    trend: { value: fit.value, sigmaWhite: fit.sigmaWhite, sigma: fit.sigma, r1: fit.r1 },
    terms: termsOf(fit, noise, settings),
    noise: { models: noise.models.map(({ model, parameter, aic }) => ({ model, parameter, aic })), quote: noise.quote, sentence: noise.sentence },
    gaps: gapsOf(mjd, settings.maxGapDays),
    correlogram: autocorrelation(mjd, residualGt, step, Math.min(MOST_LAGS, Math.floor(mjd.length / 3))),
    spectrum: { frequencyPerYear: spectrum.frequencyPerYear, amplitudeGt: spectrum.amplitude, expected: [expected('white', 0), ...(ar1 ? [expected('ar1', ar1.parameter!)] : [])] },
    residualSigmaGt: fit.residualSigma,
    warnings: fit.warnings
  }
}

/** Distances of neighbouring epochs that are longer than stated. */
export function gapsOf(mjd: readonly number[], maxGapDays: number): SeriesGap[] {
  return mjd.flatMap((toMjd, i) => i > 0 && toMjd - mjd[i - 1]! > maxGapDays ? [{ fromMjd: mjd[i - 1]!, toMjd, days: toMjd - mjd[i - 1]! }] : [])
}

function optionsOf({ acceleration, annual, semiannual, aliasDays, stepsMjd }: FitSettings): TrendOptions {
  return {
    acceleration,
    seasonal: annual || semiannual ? 'auto' : false,
    harmonics: [...(annual ? [1 as const] : []), ...(semiannual ? [2 as const] : [])],
    ...(aliasDays === null ? {} : { aliasPeriodDays: aliasDays }),
    stepsMjd
  }
}

function checkSteps(mjd: readonly number[], { stepsMjd }: FitSettings): void {
  const issues = stepsMjd.flatMap((step, i) => mjd.length > 0 && step > mjd[0]! && step <= mjd.at(-1)!
    ? []
    : [{ path: `step/${i}`, code: 'outside', message: `The step of ${formatDate(step)} does not lie after the first epoch and not after the last.` }])
  if (issues.length > 0) throw new InputError(issues.map(issue => issue.message).join(' '), issues)
}

function attempt(input: { mjd: number[], value: number[], sigma: number[] | null }, options: TrendOptions): [TrendFit, TrendNoiseReport] {
  try {
    return [fitTrend(input, options), trendNoise(input, options)]
  } catch (error) {
    if (error instanceof RangeError) throw refusal(`These epochs cannot carry this fit: ${error.message}.`, 'too-few-epochs')
    if (error instanceof RankError) throw refusal('These epochs cannot tell the terms of this fit apart: switch one off, or take a longer span.', 'terms-alike')
    throw error
  }
}

function refusal(message: string, code: string): InputError {
  return new InputError(message, [{ code, message }])
}

function rms(x: readonly number[]): number {
  return Math.sqrt(x.reduce((sum, v) => sum + v * v, 0) / x.length)
}
