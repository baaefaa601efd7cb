import { isoDateFromMjd, monthsBetween } from '../earth/time/epochs.ts'
import type { CalendarMonth } from '../earth/time/epochs.ts'
import { medianStep } from '../earth/time/monthlyMeans.ts'
import { COARSE_POLE_DAYS, excitationOfSeries } from '../earth/time/observedExcitation.ts'
import { FILTER_VALID_STEPS } from '../earth/time/polarMotion.ts'
import { smooth } from '../earth/time/smoothing.ts'
import { zonalTideLodMs } from '../earth/time/zonalTides.ts'
import type { Measured } from '../types/domain.ts'
import type { ObservedSeries, RunWarning } from '../types/run.ts'
import { reduceSettings } from './reduceOptions.ts'
import type { ReduceOptions, ReduceSettings } from './reduceOptions.ts'
import { monthsOf, rowsInSpan, seasonsOf, trendOf } from './steps.ts'

type Column = (number | null)[]

/** A reduced series, as the API answers it: plain numbers, null where a quantity is missing. */
export interface ReducedSeries {
  format: ObservedSeries['format']
  /** First and last day, ISO dates. */
  from: string
  to: string
  /** Epochs in `mjd`. */
  count: number
  settings: ReduceSettings
  mjd: number[]
  /** As observed, what the zonal tides add, and what is left after every step, ms. */
  lodMs: Column
  tideMs: Column
  lodReducedMs: Column
  xMas: Column
  yMas: Column
  /** Midpoints between the epochs of the pole; middles of months for monthly means. */
  chiMjd: number[]
  chi1Mas: Column
  chi2Mas: Column
  /** With monthly means: epochs in each month of the length of day, and how many independent ones they are worth. */
  samples: number[] | null
  effectiveSamples: number[] | null
  /** Per Julian year; null where the quantity is missing, too short, or must not be quoted. */
  trends: Record<'lodMsPerYear' | 'xMasPerYear' | 'yMasPerYear' | 'chi1MasPerYear' | 'chi2MasPerYear', Measured | null>
  /** Shortest period, days, at which the excitation is right to 1 %. */
  excitationValidFromDays: number | null
  warnings: RunWarning[]
}

interface Daily { mjd: ArrayLike<number>, lod: ArrayLike<number>, tide: ArrayLike<number>, reduced: ArrayLike<number>, x: ArrayLike<number>, y: ArrayLike<number> }

/**
 * Observed rotation with the known parts taken out: zonal tides from the length of day, pole to geodetic excitation, then as asked
 * seasons, smoothing and monthly means. Stores nothing and depends on nothing else.
 *
 * With only the tides under 35 days removed no trend of the length of day is quoted: the 18.6-year tide would be in it.
 *
 * @throws InputError for options that do not hold and when no row is left
 */
export function reduceObserved(series: ObservedSeries, options: ReduceOptions = {}): ReducedSeries {
  const settings = reduceSettings(options)
  const kept = rowsInSpan(series, settings, settings.includePredictions)
  const tide = settings.zonalTides === 'none' ? new Float64Array(kept.mjd.length) : zonalTideLodMs(kept.mjd, settings.zonalTides)
  const finish = (mjd: ArrayLike<number>, value: ArrayLike<number>): ArrayLike<number> => afterwards(mjd, value, settings)
  const daily: Daily = {
    mjd: kept.mjd, lod: kept.lodMs, tide, reduced: finish(kept.mjd, kept.lodMs.map((lod, i) => lod - tide[i]!)), x: kept.xMas, y: kept.yMas
  }
  const raw = settings.excitation ? excitationOfSeries(kept, settings.chandler) : null
  const chi = raw && { mjd: raw.mjd, chi1: finish(raw.mjd, raw.chi1Mas), chi2: finish(raw.mjd, raw.chi2Mas) }
  const { columns, months, lodMonthly } = settings.monthly ? monthly(daily) : { columns: daily, months: null, lodMonthly: null }
  const excitation = chi && months ? monthlyChi(chi, months) : chi
  const step = medianStep(kept.mjd)
  return {
    format: series.format,
    from: isoDateFromMjd(kept.mjd[0]!),
    to: isoDateFromMjd(kept.mjd.at(-1)!),
    count: columns.mjd.length,
    settings,
    mjd: Array.from(columns.mjd),
    lodMs: plain(columns.lod),
    tideMs: plain(columns.tide),
    lodReducedMs: plain(columns.reduced),
    xMas: plain(columns.x),
    yMas: plain(columns.y),
    chiMjd: excitation ? Array.from(excitation.mjd) : [],
    chi1Mas: excitation ? plain(excitation.chi1) : [],
    chi2Mas: excitation ? plain(excitation.chi2) : [],
    samples: lodMonthly?.samples ?? null,
    effectiveSamples: lodMonthly?.effectiveSamples ?? null,
    trends: {
      lodMsPerYear: settings.zonalTides === 'under-35-days' ? null : trendOf(columns.mjd, columns.reduced),
      xMasPerYear: trendOf(columns.mjd, columns.x),
      yMasPerYear: trendOf(columns.mjd, columns.y),
      chi1MasPerYear: excitation ? trendOf(excitation.mjd, excitation.chi1) : null,
      chi2MasPerYear: excitation ? trendOf(excitation.mjd, excitation.chi2) : null
    },
    excitationValidFromDays: raw && !series.chi1Mas ? FILTER_VALID_STEPS * step : null,
    warnings: warningsOf(kept, settings, raw !== null && !series.chi1Mas ? step : null)
  }
}

/** Seasons and smoothing, in that order; missing values stay missing. */
function afterwards(mjd: ArrayLike<number>, value: ArrayLike<number>, { removeSeasons, smoothing }: ReduceSettings): ArrayLike<number> {
  const unseasoned = removeSeasons ? withoutSeasons(mjd, value) : value
  return smoothing ? smooth(mjd, unseasoned, smoothing.kind, smoothing.widthDays) : unseasoned
}

function withoutSeasons(mjd: ArrayLike<number>, value: ArrayLike<number>): ArrayLike<number> {
  const seasons = seasonsOf(mjd, value)
  return seasons ? Float64Array.from(value, (v, i) => v - seasons.season[i]!) : value
}

function monthly(daily: Daily): { columns: Daily, months: CalendarMonth[], lodMonthly: { samples: number[], effectiveSamples: number[] } } {
  const months = monthsBetween(daily.mjd[0]!, daily.mjd[daily.mjd.length - 1]!)
  const means = (value: ArrayLike<number>): Float64Array => monthsOf(daily.mjd, value, months).value
  const reduced = monthsOf(daily.mjd, daily.reduced, months)
  return {
    columns: { mjd: reduced.mjd, lod: means(daily.lod), tide: means(daily.tide), reduced: reduced.value, x: means(daily.x), y: means(daily.y) },
    months,
    lodMonthly: reduced
  }
}

function monthlyChi(chi: { mjd: ArrayLike<number>, chi1: ArrayLike<number>, chi2: ArrayLike<number> }, months: CalendarMonth[]): { mjd: Float64Array, chi1: Float64Array, chi2: Float64Array } {
  const first = monthsOf(chi.mjd, chi.chi1, months)
  return { mjd: first.mjd, chi1: first.value, chi2: monthsOf(chi.mjd, chi.chi2, months).value }
}

function warningsOf(series: ObservedSeries, settings: ReduceSettings, poleStep: number | null): RunWarning[] {
  const warnings: RunWarning[] = []
  const warn = (code: string, message: string): void => {
    warnings.push({ code, message, regions: [] })
  }
  const hasLod = series.lodMs.some(lod => !Number.isNaN(lod))
  if (hasLod && settings.zonalTides === 'under-35-days') {
    warn('no-trend', 'Only the tides under 35 days are removed: the 18.6-year tide would be in a trend of the length of day, so none is quoted.')
  }
  if (hasLod && settings.zonalTides === 'none') {
    warn('tides-in', 'Zonal tides are still in the length of day: the 18.6-year tide biases its trend by up to 3.7 ms per century over 10 years and 1.2 over 20.')
  }
  if (settings.includePredictions && series.predicted.some(p => p === 1)) warn('predictions-in', 'Predicted rows are included.')
  if (poleStep !== null && poleStep > COARSE_POLE_DAYS) {
    warn('coarse-pole', `The pole is given every ${Math.round(poleStep)} days: excitation is damped at periods under ${Math.round(FILTER_VALID_STEPS * poleStep)} days.`)
  }
  if (settings.smoothing) warn('smoothed', 'Errors of trends are those of the smoothed series; the lag-one correlation holds the smoothing.')
  return warnings
}

function plain(column: ArrayLike<number>): Column {
  return Array.from(column, v => Number.isNaN(v) ? null : v)
}
