import { covarianceOf } from '../earth/time/covariance.ts'
import type { Covariance } from '../earth/time/covariance.ts'
import { trendWeights } from '../earth/time/covarianceTrend.ts'
import { JULIAN_YEAR_DAYS } from '../earth/time/epochs.ts'
import { mean } from '../earth/time/trendDesign.ts'
import type { Replayed } from './recipe.ts'

/** A systematic error of a trend, Gt per year one-sigma; the same source in two series is the same error. */
export interface SystematicRate { source: string, sigmaGtPerYear: number }

type Errors = Pick<Replayed, 'mjd' | 'sigmaGt' | 'walkGt2' | 'factors'>

/** Name of a source in a sum over series: a series' own sources carry its name, so that two of them never meet. */
export function sourceName(source: string, own: boolean, seriesName: string): string {
  return own ? `${source} of ${seriesName}` : source
}

/**
 * Covariance of a series' masses, Gt²: independent errors on the diagonal, summed ones as a walk, parameters of the conversion and
 * corrections as factors, systematic trends as factors that grow from the mean epoch.
 *
 * @param seriesName goes into the names of sources that are the series' own
 */
export function seriesCovariance(series: Errors, seriesName: string, systematic: readonly SystematicRate[] = []): Covariance {
  const n = series.mjd.length
  const middle = n > 0 ? mean(series.mjd) : 0
  const covariance = covarianceOf(series.sigmaGt ?? new Float64Array(n), [
    ...series.factors.map(({ source, own, loading }) => ({ source: sourceName(source, own, seriesName), loading })),
    ...systematic.map(({ source, sigmaGtPerYear }) => ({ source, loading: series.mjd.map(t => sigmaGtPerYear * (t - middle) / JULIAN_YEAR_DAYS) }))
  ])
  return series.walkGt2 ? { ...covariance, walk: Float64Array.from(series.walkGt2) } : covariance
}

/**
 * Errors that all epochs share as errors of the fitted trend, Gt per year, for the budget of a run: each factor's own trend, with the
 * sign that it has, since a source may raise one series and lower another; and the walk of summed rates as one source.
 */
export function systematicRates(series: Errors, seriesName: string): SystematicRate[] {
  if (series.mjd.length < 3) return []
  const weights = trendWeights(series.mjd, series.sigmaGt)
  const rates = series.factors.map(({ source, own, loading }) => ({
    source: sourceName(source, own, seriesName),
    sigmaGtPerYear: loading.reduce((sum, l, i) => sum + weights[i]! * l, 0)
  }))
  if (series.walkGt2) {
    let later = 0
    let variance = 0
    for (let i = weights.length - 1; i >= 0; i--) {
      later += weights[i]!
      variance += series.walkGt2[i]! * later ** 2
    }
    if (variance > 0) rates.push({ source: sourceName('errors of the summed rates', true, seriesName), sigmaGtPerYear: Math.sqrt(variance) })
  }
  return rates
}

/** A stretch of time that a series is taken relative to: its mean there is zero. Null: as it stands. */
export type Baseline = { fromMjd: number, toMjd: number } | null

/**
 * The series relative to a baseline, with loadings that follow: a setting of use, of which the stored data know nothing. Independent
 * errors are those of the epochs; that of the baseline's mean is `baselineSigmaGt`, common to all.
 *
 * @throws RangeError where no epoch lies in the baseline
 */
export function toBaseline<T extends Errors & { massGt: number[] }>(series: T, baseline: Baseline): T & { baselineSigmaGt: number } {
  if (!baseline) return { ...series, baselineSigmaGt: 0 }
  const inside = series.mjd.map((t, i) => t >= baseline.fromMjd && t <= baseline.toMjd ? i : -1).filter(i => i >= 0)
  if (inside.length === 0) throw new RangeError(`the baseline must hold an epoch of the series, got MJD ${baseline.fromMjd} to ${baseline.toMjd}`)
  const meanOf = (x: ArrayLike<number>): number => inside.reduce((sum, i) => sum + x[i]!, 0) / inside.length
  const shift = meanOf(series.massGt)
  return {
    ...series,
    massGt: series.massGt.map(m => m - shift),
    factors: series.factors.map((factor) => {
      const zero = meanOf(factor.loading)
      return { ...factor, loading: factor.loading.map(l => l - zero) }
    }),
    baselineSigmaGt: series.sigmaGt ? Math.sqrt(meanOf(series.sigmaGt.map(s => s * s)) / inside.length) : 0
  }
}
