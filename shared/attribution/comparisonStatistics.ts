import { calendarFromMjd } from '../earth/time/epochs.ts'
import { fitTrend } from '../earth/time/trend.ts'
import { trendNoise } from '../earth/time/trendNoise.ts'
import type { TrendNoiseReport } from '../earth/time/trendNoise.ts'
import { formatNumber } from '../format/numbers.ts'
import { bestLag, correlationOf } from './correlation.ts'
import type { Correlation, Lag } from './correlation.ts'
import { bandCoherence, bandVariance, coherenceOf, crossSpectrum, periodogramOf } from './spectra.ts'
import type { CrossSpectrum, Periodogram } from './spectra.ts'

/** Monthly values of one quantity, at the middles of calendar months; null where there is none. */
export interface ComparedSeries { mjd: ArrayLike<number>, observed: ArrayLike<number | null>, model: ArrayLike<number | null> }

export const bandNames = ['annual', 'interannual', 'decadal'] as const
export type BandName = typeof bandNames[number]
/** Bands in cycles per year: decadal beyond 8 years, annual from 9 to 16 months, interannual between. */
export const bands: Readonly<Record<BandName, readonly [low: number, high: number]>> = { annual: [0.74, 1.35], interannual: [1 / 8, 0.74], decadal: [0, 1 / 8] }

export interface BandStatistics {
  band: BandName
  /** In the unit squared, of the series without their straight lines. */
  varianceObserved: number
  varianceModel: number
  varianceResidual: number
  /** 1 − residual/observed; negative where the model makes the residual larger. Null where nothing was observed in the band. */
  varianceExplained: number | null
  /** Magnitude-squared coherence of the band, and what 95 % of unrelated series stay below. Null with a reason. */
  coherence: number | null
  coherenceThreshold95: number | null
  reason: string | null
}

export interface ComparisonStatistics {
  span: { fromMjd: number, toMjd: number }
  /** Months with both values, months between that have none, and gaps of up to three that were bridged for the spectra alone. */
  months: number
  missing: number
  bridged: number
  /** RMS about the mean, in the unit of the series. */
  rms: { observed: number, model: number, residual: number }
  /** 1 − variance of the residual over that of the observed, with trends and seasons in. */
  varianceExplained: number | null
  bands: BandStatistics[]
  /** Coherence at each frequency in cycles per year; null where the record is too short. */
  spectrum: { cyclesPerYear: number[], coherence: number[], segments: number, segmentMonths: number } | null
  /** Trend and seasons removed from both. */
  correlation: Correlation | null
  /** Positive: the model comes later than the observed. */
  lagMonths: Lag | null
  sentences: string[]
}

/** Fewest months that statistics are made of, longest gap that spectra bridge, longest lag. */
const LEAST_MONTHS = 12
const MOST_BRIDGED = 3
const LEAST_STRETCH = 36
const MOST_LAG = 24

/**
 * How well a model describes what was observed, over a span of months: RMS, variance explained and coherence in bands, correlation
 * with its significance under autocorrelation, and lag. Gaps of up to three months are bridged by straight lines for the spectra
 * alone; longer ones cut them into stretches. Null for fewer than twelve months.
 */
export function comparisonStatistics(series: ComparedSeries, span: { fromMjd: number, toMjd: number } | null = null): ComparisonStatistics | null {
  const grid = monthlyGrid(series, span)
  if (!grid) return null
  const { mjd, observed, model, index } = grid
  const residual = observed.map((v, i) => v - model[i]!)
  const variance = { observed: varianceOf(observed), model: varianceOf(model), residual: varianceOf(residual) }
  const { stretches, bridged } = stretchesOf(index, observed, model)
  const spectrum = spectrumFor(stretches)
  const highest = bands.annual[1] / 12
  const periodograms = {
    observed: periodogramOf(stretches.map(s => s.x), highest), model: periodogramOf(stretches.map(s => s.y), highest),
    residual: periodogramOf(stretches.map(s => s.x.map((v, i) => v - s.y[i]!)), highest)
  }
  const prepared = prepare(mjd, observed, model)
  const correlation = prepared && correlationOf(prepared.observed, prepared.model)
  const lagMonths = prepared && onGrid(index, prepared.observed, prepared.model, (a, b) => bestLag(a, b, Math.min(MOST_LAG, Math.floor(mjd.length / 4))))
  const statistics = {
    span: { fromMjd: mjd[0]!, toMjd: mjd.at(-1)! },
    months: mjd.length,
    missing: index.at(-1)! - index[0]! + 1 - mjd.length,
    bridged,
    rms: { observed: Math.sqrt(variance.observed), model: Math.sqrt(variance.model), residual: Math.sqrt(variance.residual) },
    varianceExplained: variance.observed > 0 ? 1 - variance.residual / variance.observed : null,
    bands: bandNames.map(band => bandStatistics(band, stretches, spectrum, periodograms)),
    spectrum: spectrum && {
      cyclesPerYear: Array.from(spectrum.frequency, f => 12 * f), coherence: Array.from(coherenceOf(spectrum)), segments: spectrum.segments, segmentMonths: segmentLength(stretches)
    },
    correlation,
    lagMonths
  }
  return { ...statistics, sentences: sentencesOf(statistics) }
}

/**
 * Trends of observed, model and residual over the same months, each under white, AR(1) and power-law noise. Apart from the rest,
 * since it takes longer. Null for fewer than twelve months.
 */
export function comparisonTrends(series: ComparedSeries, span: { fromMjd: number, toMjd: number } | null = null): Record<'observed' | 'model' | 'residual', TrendNoiseReport> | null {
  const grid = monthlyGrid(series, span)
  if (!grid) return null
  const { mjd, observed, model } = grid
  const under = (value: number[]): TrendNoiseReport => trendNoise({ mjd, value })
  return { observed: under(observed), model: under(model), residual: under(observed.map((v, i) => v - model[i]!)) }
}

interface MonthlyGrid { mjd: number[], observed: number[], model: number[], index: number[] }

/** Months that have both values, with the number of each month since year 0. */
function monthlyGrid({ mjd, observed, model }: ComparedSeries, span: { fromMjd: number, toMjd: number } | null): MonthlyGrid | null {
  if (observed.length !== mjd.length || model.length !== mjd.length) throw new RangeError(`observed and model must have ${mjd.length} values, got ${observed.length} and ${model.length}`)
  const grid: MonthlyGrid = { mjd: [], observed: [], model: [], index: [] }
  for (let i = 0; i < mjd.length; i++) {
    const [o, m, t] = [observed[i], model[i], mjd[i]!]
    if (o === null || o === undefined || m === null || m === undefined || Number.isNaN(o + m) || (span && (t < span.fromMjd || t > span.toMjd))) continue
    const { year, month } = calendarFromMjd(t)
    const number = 12 * year + month - 1
    if (grid.index.length > 0 && number <= grid.index.at(-1)!) throw new RangeError(`mjd must hold one epoch for each month, got a second one at ${t}`)
    grid.mjd.push(t)
    grid.observed.push(o)
    grid.model.push(m)
    grid.index.push(number)
  }
  return grid.mjd.length < LEAST_MONTHS ? null : grid
}

interface Stretch { x: number[], y: number[] }

/** Series without gaps for the spectra: short gaps bridged, long ones cut, short pieces left out. */
function stretchesOf(index: readonly number[], observed: readonly number[], model: readonly number[]): { stretches: Stretch[], bridged: number } {
  const all: Stretch[] = []
  let bridged = 0
  index.forEach((month, i) => {
    const gap = i === 0 ? Infinity : month - index[i - 1]! - 1
    if (gap > MOST_BRIDGED) all.push({ x: [], y: [] })
    const { x, y } = all.at(-1)!
    for (let k = 1; k <= gap && gap <= MOST_BRIDGED; k++) {
      const share = k / (gap + 1)
      x.push(observed[i - 1]! + share * (observed[i]! - observed[i - 1]!))
      y.push(model[i - 1]! + share * (model[i]! - model[i - 1]!))
      bridged++
    }
    x.push(observed[i]!)
    y.push(model[i]!)
  })
  return { stretches: all.filter(({ x }) => x.length >= LEAST_STRETCH), bridged }
}

/** Length of the segments of a coherence: half a short record, a quarter of a long one, ten years at least where it has them. */
function segmentLength(stretches: readonly Stretch[]): number {
  const longest = Math.max(0, ...stretches.map(({ x }) => x.length))
  return longest < 240 ? Math.floor(longest / 2) : Math.max(120, Math.floor(longest / 4))
}

function spectrumFor(stretches: readonly Stretch[]): CrossSpectrum | null {
  return stretches.length > 0 ? crossSpectrum(stretches, segmentLength(stretches), 'linear') : null
}

function bandStatistics(band: BandName, stretches: readonly Stretch[], spectrum: CrossSpectrum | null, periodograms: Record<'observed' | 'model' | 'residual', Periodogram>): BandStatistics {
  const [low, high] = bands[band].map(f => f / 12) as [number, number]
  const varianceObserved = bandVariance(periodograms.observed, low, high)
  const varianceResidual = bandVariance(periodograms.residual, low, high)
  const years = Math.max(0, ...stretches.map(({ x }) => x.length)) / 12
  const coherence = spectrum && bandCoherence(spectrum, low, high)
  const resolved = varianceObserved > 0 && (band !== 'decadal' || years >= 16)
  const reason = stretches.length === 0
    ? 'No stretch of three years without a long gap.'
    : !resolved || !coherence
        ? band === 'decadal' ? `${Math.floor(years)} years hold too few decadal swings.` : 'The record is too short for this band.'
        : null
  return {
    band, varianceObserved, varianceModel: bandVariance(periodograms.model, low, high), varianceResidual,
    varianceExplained: resolved ? 1 - varianceResidual / varianceObserved : null,
    coherence: resolved && coherence ? coherence.value : null,
    coherenceThreshold95: resolved && coherence ? coherence.threshold95 : null,
    reason
  }
}

/** Both without trend and seasons; null where a fit is not possible. */
function prepare(mjd: number[], observed: number[], model: number[]): { observed: number[], model: number[] } | null {
  const without = (value: number[]): number[] => Array.from(fitTrend({ mjd, value }).residuals)
  return mjd.length >= LEAST_MONTHS ? { observed: without(observed), model: without(model) } : null
}

function onGrid<T>(index: readonly number[], x: readonly number[], y: readonly number[], fn: (x: Float64Array, y: Float64Array) => T): T {
  const count = index.at(-1)! - index[0]! + 1
  const spread = (values: readonly number[]): Float64Array => {
    const out = new Float64Array(count).fill(Number.NaN)
    values.forEach((v, i) => { out[index[i]! - index[0]!] = v })
    return out
  }
  return fn(spread(x), spread(y))
}

function varianceOf(x: readonly number[]): number {
  const mean = x.reduce((sum, v) => sum + v, 0) / x.length
  return x.reduce((sum, v) => sum + (v - mean) ** 2, 0) / x.length
}

function sentencesOf({ correlation, lagMonths, bands: list, months, missing, bridged }: Omit<ComparisonStatistics, 'sentences'>): string[] {
  const percent = (v: number): string => `${formatNumber(v * 100)} %`
  const explained = list.filter(b => b.varianceExplained !== null)
  return [
    ...(explained.length > 0 ? [`Variance explained: ${explained.map(b => `${b.band} ${percent(b.varianceExplained!)}`).join(', ')}.`] : []),
    ...(correlation
      ? [`Without trend and seasons the correlation is ${correlation.value.toFixed(2).replace('-', '\u2212')}; ${months} months are worth ${Math.round(correlation.effectivePairs)} independent ones, and unrelated series would do as well ${correlation.pValue < 0.001 ? 'in less than one case in a thousand' : `in ${percent(correlation.pValue)} of cases`}.`]
      : []),
    ...(lagMonths && correlation && correlation.pValue < 0.05 && Math.abs(lagMonths.steps) >= 1
      ? [`The two agree best with the model ${Math.abs(lagMonths.steps).toFixed(1)} months ${lagMonths.steps > 0 ? 'late' : 'early'}${lagMonths.atEdge ? ', the longest lag that was tried' : ''}.`]
      : []),
    ...(lagMonths && correlation && correlation.pValue < 0.05 && Math.abs(lagMonths.steps) < 1 ? ['No lag of a month or more, either way, makes the two agree better.'] : []),
    ...(missing > 0 ? [`${missing} month${missing === 1 ? '' : 's'} between ${missing === 1 ? 'has' : 'have'} no value${bridged > 0 ? `; ${bridged} of them ${bridged === 1 ? 'was' : 'were'} bridged by straight lines for the bands alone` : ''}.`] : [])
  ]
}
