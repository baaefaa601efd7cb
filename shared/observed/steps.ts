import { JULIAN_YEAR_DAYS } from '../earth/time/epochs.ts'
import type { CalendarMonth } from '../earth/time/epochs.ts'
import { monthlyMeans, present } from '../earth/time/monthlyMeans.ts'
import { rowsWhere } from '../earth/time/observedExcitation.ts'
import { fitTrend } from '../earth/time/trend.ts'
import type { TrendFit } from '../earth/time/trend.ts'
import type { Measured } from '../types/domain.ts'
import { InputError } from '../types/issue.ts'
import type { ObservedSeries } from '../types/run.ts'

/** Fewest epochs that a seasonal fit is made of. */
const LEAST_FOR_SEASONS = 10

/**
 * Rows of an observed series inside a span, both ends included, predictions left out unless asked for.
 * @throws InputError when none is left
 */
export function rowsInSpan(series: ObservedSeries, span: { fromMjd: number | null, toMjd: number | null }, includePredictions: boolean): ObservedSeries {
  const kept = rowsWhere(series, i => (includePredictions || series.predicted[i] === 0)
    && (span.fromMjd === null || series.mjd[i]! >= span.fromMjd) && (span.toMjd === null || series.mjd[i]! <= span.toMjd))
  if (kept.mjd.length === 0) {
    throw new InputError('No row is left to reduce', [{ code: 'no-rows', message: 'The span holds no observed row; predictions are left out unless asked for.' }])
  }
  return kept
}

/** Constant and trend of a fit at an epoch, seasons left out, in the unit of the series. */
export function straightPart(fit: TrendFit, mjd: number): number {
  return fit.coefficients[0]! + fit.coefficients[1]! * (mjd - fit.referenceMjd) / JULIAN_YEAR_DAYS
}

/** Fitted annual and semiannual terms on the epochs that have a value, NaN elsewhere; null where the record carries no seasons. */
export function seasonsOf(mjd: ArrayLike<number>, value: ArrayLike<number>): { season: Float64Array, fit: TrendFit } | null {
  const { epochs, values } = present(mjd, value)
  if (epochs.length < LEAST_FOR_SEASONS) return null
  const fit = fitTrend({ mjd: epochs, value: values })
  if (!fit.seasonal) return null
  let at = 0
  return { fit, season: Float64Array.from(value, v => Number.isNaN(v) ? v : fit.model[at]! - straightPart(fit, epochs[at++]!)) }
}

/** Means over calendar months, NaN where too little of a month is there, with the epochs in each and how many independent ones they are worth. */
export function monthsOf(mjd: ArrayLike<number>, value: ArrayLike<number>, months: readonly CalendarMonth[]): { mjd: Float64Array, value: Float64Array, samples: number[], effectiveSamples: number[] } {
  const means = monthlyMeans(mjd, value, months)
  return {
    mjd: Float64Array.from(months, month => month.middleMjd),
    value: Float64Array.from(means.value, v => v ?? Number.NaN),
    samples: means.samples,
    effectiveSamples: means.effectiveSamples
  }
}

/** Trend per Julian year with its errors; null for fewer than three values. */
export function trendOf(mjd: ArrayLike<number>, value: ArrayLike<number>): Measured | null {
  const { epochs, values } = present(mjd, value)
  if (epochs.length < 3) return null
  const { value: trend, sigmaWhite, sigma } = fitTrend({ mjd: epochs, value: values })
  return { value: trend, sigmaWhite, sigma }
}
