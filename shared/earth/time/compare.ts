import type { Measured } from '../../types/domain.ts'
import type { Comparison, ComparisonQuantity, ObservedSeries, RunResult, RunWarning } from '../../types/run.ts'
import { calendarFromMjd, calendarMonth } from './epochs.ts'
import type { CalendarMonth } from './epochs.ts'
import { medianStep, monthlyMeans } from './monthlyMeans.ts'
import { COARSE_POLE_DAYS, excitationOfSeries, rowsWhere } from './observedExcitation.ts'
import { defaultChandler } from './polarMotion.ts'
import type { ChandlerSettings } from './polarMotion.ts'
import { SEASONAL_MINIMUM_DAYS } from './trendDesign.ts'
import { fitTrend } from './trend.ts'
import type { TrendFit } from './trend.ts'
import { zonalTideLodMs } from './zonalTides.ts'

export interface CompareOptions {
  /** Whether all 62 zonal tides are taken out of the observed length of day; default 'none'. */
  zonalTides?: 'none' | 'all'
  chandler?: ChandlerSettings
}

/** Fewest months that a comparison is made of. */
const LEAST_MONTHS = 6
/** Nodal tide left in: the largest bias of a ten-year and a twenty-year trend, ms per century (physics of Table 8.1, term 62). */
const NODAL_BIAS = 'up to 3.7 ms per century over 10 years and 1.2 over 20'

/**
 * A run beside an observed series: monthly means of ΔLOD and of geodetic excitation over the months that both have, as anomalies
 * from their mean there, with residual (observed − model), trends and RMS. Predictions are left out.
 *
 * The three trends of a quantity are fitted to the same months, so that they add up. Quoted errors: AR(1)-inflated; to the model's
 * the error of the run's own budget is added where it is larger, and the residual's holds it too, since a systematic rate leaves
 * no scatter.
 */
export function compareRun(result: RunResult, observed: ObservedSeries, options: CompareOptions = {}): Comparison {
  const gravity = observed.from === 'gravity'
  const tides = gravity ? 'none' : options.zonalTides ?? 'none'
  const series = rowsWhere(observed, i => observed.predicted[i] === 0)
  const { total } = result
  const months = commonMonths(result, series)
  const warnings: RunWarning[] = []
  const warn = (code: string, message: string): void => {
    warnings.push({ code, message, regions: [] })
  }
  if (months.length === 0) warn('no-common-span', 'The run and the observed series have no month in common.')

  const model = (values: (number | null)[], factor: number): (number | null)[] => {
    const byEpoch = new Map(result.epochsMjd.map((t, i) => [t, values[i] ?? null]))
    return months.map(month => {
      const value = byEpoch.get(month.middleMjd) ?? null
      return value === null ? null : value * factor
    })
  }
  const tide = tides === 'all' ? zonalTideLodMs(series.mjd, 'all') : null
  const lodMs = tide ? series.lodMs.map((lod, i) => lod - tide[i]!) : series.lodMs
  const lod = comparedQuantity('ms', monthlyMeans(series.mjd, lodMs, months).value, model(total.series.lodMicroseconds, 1e-3), months, total.lodMicrosecondsPerYear, 1e-3)
  const excitation = excitationOfSeries(series, options.chandler ?? defaultChandler)
  const pole = (name: 'chi1Mas' | 'chi2Mas', budget: Measured | null): ComparisonQuantity | null => excitation && comparedQuantity(
    'mas', monthlyMeans(excitation.mjd, excitation[name], months).value, model(total.series[name], 1), months, budget, 1
  )
  const chi1 = pole('chi1Mas', total.chi1MasPerYear)
  const chi2 = pole('chi2Mas', total.chi2MasPerYear)

  if (months.length > 0 && !lod && !chi1 && !chi2) warn('too-few-months', `Fewer than ${LEAST_MONTHS} months have both a model and an observed value.`)
  const spanDays = months.length > 0 ? months.at(-1)!.endMjd - months[0]!.startMjd : 0
  if (spanDays > 0 && spanDays < SEASONAL_MINIMUM_DAYS) {
    warn('short-span', 'The common span is shorter than two years: trends are fitted without seasons and may hold part of one.')
  }
  if (lod && tides === 'none' && !gravity) {
    warn('tides-in', `Zonal tides are still in the observed length of day; the 18.6-year one alone biases a trend by ${NODAL_BIAS}.`)
  }
  if (lod && !gravity) warn('core', 'Decadal changes in length of day come mostly from the Earth’s core; surface mass explains a small part. A small explained share is not an error.')
  if (lod && result.background.length > 0) {
    warn('background-apart', 'Background rows are not in the model of this comparison; they stand beside it in the budget.')
  }
  if (excitation && !series.chi1Mas && medianStep(series.mjd) > COARSE_POLE_DAYS) {
    warn('coarse-pole', `The pole is given every ${Math.round(medianStep(series.mjd))} days: excitation is damped at periods under ${Math.round(13 * medianStep(series.mjd))} days.`)
  }
  return {
    ...(gravity ? { from: 'gravity' as const } : {}),
    span: months.length > 0 ? { fromMjd: months[0]!.startMjd, toMjd: months.at(-1)!.endMjd } : { ...result.span },
    epochsMjd: months.map(month => month.middleMjd),
    lod,
    chi1,
    chi2,
    noise: 'ar1',
    notRemoved: gravity ? notRemovedFromGravity : notRemoved(lod !== null, chi1 !== null, tides),
    warnings
  }
}

/** Months of the run that the observed series reaches into, from its first to its last row. */
export function commonMonths(result: RunResult, series: ObservedSeries): CalendarMonth[] {
  if (series.mjd.length === 0) return []
  const from = series.mjd[0]!
  const to = series.mjd.at(-1)!
  return result.epochsMjd
    .map(t => {
      const { year, month } = calendarFromMjd(t)
      return calendarMonth(year, month)
    })
    .filter(month => month.endMjd > from && month.startMjd <= to)
}

/**
 * One quantity over some months, in ms or mas, as anomalies about the mean of the months that have both, with trends per Julian year; null
 * for fewer than six such months.
 *
 * @param budget trend of the run's own budget, whose sigma times `factor` is in `unit`
 */
export function comparedQuantity(
  unit: 'ms' | 'mas', observed: (number | null)[], model: (number | null)[], months: readonly CalendarMonth[], budget: Measured | null, factor: number
): ComparisonQuantity | null {
  const both = months.map((_, j) => j).filter(j => observed[j] !== null && model[j] !== null)
  if (both.length < LEAST_MONTHS) return null
  const anomalies = (values: (number | null)[]): (number | null)[] => {
    const mean = both.reduce((sum, j) => sum + values[j]!, 0) / both.length
    return values.map(value => value === null ? null : value - mean)
  }
  const seen = anomalies(observed)
  const made = anomalies(model)
  const residual = seen.map((value, j) => value === null || made[j] === null ? null : value - made[j]!)
  const mjd = both.map(j => months[j]!.middleMjd)
  const fit = (values: (number | null)[]): TrendFit => fitTrend({ mjd, value: both.map(j => values[j]!) })
  const fits = { observed: fit(seen), model: fit(made), residual: fit(residual) }
  const budgetSigma = (budget?.sigma ?? 0) * factor
  const rms = (values: (number | null)[]): number => Math.sqrt(both.reduce((sum, j) => sum + values[j]! ** 2, 0) / both.length)
  return {
    unit,
    observed: seen,
    model: made,
    residual,
    trends: {
      observed: measured(fits.observed, fits.observed.sigma),
      model: measured(fits.model, Math.max(fits.model.sigma, budgetSigma)),
      residual: measured(fits.residual, Math.hypot(fits.residual.sigma, budgetSigma))
    },
    r1: { observed: fits.observed.r1, model: fits.model.r1, residual: fits.residual.r1 },
    rmsObserved: rms(seen),
    rmsResidual: rms(residual)
  }
}

function measured(fit: TrendFit, sigma: number): Measured {
  return { value: fit.value, sigmaWhite: fit.sigmaWhite, sigma }
}

const notRemovedFromGravity = [
  'mass of atmosphere and ocean, unless the series was made without them', 'glacial isostatic adjustment and other background rates'
]

function notRemoved(lod: boolean, pole: boolean, tides: 'none' | 'all'): string[] {
  return [
    ...(lod && tides === 'none' ? ['zonal tides in the length of day, among them the 18.6-year one of about 0.15 ms'] : []),
    ...(lod ? ['coupling of core and mantle, a few ms over decades'] : []),
    ...(lod || pole ? ['angular momentum of atmosphere and ocean, most of the seasonal and interannual change'] : []),
    ...(lod || pole ? ['glacial isostatic adjustment and other background rates'] : []),
    ...(pole ? ['long-period ocean tides in polar motion'] : [])
  ]
}
