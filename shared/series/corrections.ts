import { JULIAN_YEAR_DAYS } from '../earth/time/epochs.ts'
import { mean } from '../earth/time/trendDesign.ts'
import { formatDate } from '../format/numbers.ts'
import type { Running } from './periods.ts'
import type { Replayed, RecipeStep, SubtractedSeries } from './recipe.ts'

type RateStep = Extract<RecipeStep, { kind: 'subtract-rate' }>
type SeriesStep = Extract<RecipeStep, { kind: 'subtract-series' }>

/**
 * Takes a rate off, about the mean epoch, so that the mean of the series stays. Its error is a trend that all epochs share, of the
 * source that is named with it.
 */
export function subtractRate(state: Running, { name, gtPerYear }: RateStep): Running {
  if (state.mjd.length === 0) return state
  const middle = mean(state.mjd)
  const years = state.mjd.map(t => (t - middle) / JULIAN_YEAR_DAYS)
  return {
    ...state,
    massGt: state.massGt.map((m, i) => m - gtPerYear.value * years[i]!),
    factors: gtPerYear.sigma > 0
      ? [...state.factors, { source: gtPerYear.source ?? name, own: gtPerYear.source === null, loading: Float64Array.from(years, t => -gtPerYear.sigma * t) }]
      : state.factors
  }
}

/**
 * Takes another series off at the epochs of this one, interpolated linearly between neighbours at most `maxGapDays` apart. Epochs
 * that the other series does not reach are left out and listed: nothing is carried on, and no gap is bridged.
 */
export function subtractSeries(state: Running, { name, series, maxGapDays }: SeriesStep): Running & Pick<Replayed, 'leftOut'> {
  const leftOut: Replayed['leftOut'] = []
  const kept: { at: number, value: number, variance: number }[] = []
  state.mjd.forEach((t, at) => {
    const other = valueAt(series, t, maxGapDays)
    if (typeof other === 'string') leftOut.push({ mjd: t, code: 'not-covered', message: `${formatDate(t)}: “${name}” ${other}.` })
    else kept.push({ at, ...other })
  })
  const hasSigma = state.sigmaGt !== null || series.sigmaGt !== null
  return {
    mjd: kept.map(({ at }) => state.mjd[at]!),
    massGt: kept.map(({ at, value }) => state.massGt[at]! - value),
    sigmaGt: hasSigma ? kept.map(({ at, variance }) => Math.sqrt((state.sigmaGt?.[at] ?? 0) ** 2 + variance)) : null,
    walkGt2: state.walkGt2 && gathered(state.walkGt2, kept.map(({ at }) => at)),
    factors: [
      ...state.factors.map(factor => ({ ...factor, loading: Float64Array.from(kept, ({ at }) => factor.loading[at]!) })),
      ...systematicFactors(series, kept.map(({ at }) => state.mjd[at]!))
    ],
    leftOut
  }
}

/** Systematic errors of the series that is taken off, with their sign turned: a source that both share cancels in part. */
function systematicFactors({ sharedRates }: SubtractedSeries, mjd: number[]): Running['factors'] {
  if (!sharedRates || mjd.length === 0) return []
  const middle = mean(mjd)
  return sharedRates.filter(({ sigmaGtPerYear }) => sigmaGtPerYear !== 0).map(({ source, sigmaGtPerYear }) => ({
    source, own: false, loading: Float64Array.from(mjd, t => -sigmaGtPerYear * (t - middle) / JULIAN_YEAR_DAYS)
  }))
}

/** Variances that enter between two epochs that are kept enter at the later one. */
function gathered(walk: number[], kept: number[]): number[] {
  let from = 0
  return kept.map((at) => {
    let sum = 0
    for (; from <= at; from++) sum += walk[from]!
    return sum
  })
}

function valueAt({ mjd, massGt, sigmaGt }: SubtractedSeries, t: number, maxGapDays: number): { value: number, variance: number } | string {
  if (mjd.length === 0 || t < mjd[0]!) return 'begins later'
  if (t > mjd.at(-1)!) return 'has ended'
  let low = 0
  let high = mjd.length - 1
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (mjd[middle]! <= t) low = middle
    else high = middle
  }
  if (mjd[low] === t) high = low
  else if (mjd[high] === t) low = high
  const gap = mjd[high]! - mjd[low]!
  if (gap > maxGapDays) return `has a gap of ${Math.round(gap)} days there, more than ${maxGapDays}`
  const share = gap > 0 ? (t - mjd[low]!) / gap : 0
  return {
    value: massGt[low]! * (1 - share) + massGt[high]! * share,
    variance: sigmaGt ? (sigmaGt[low]! * (1 - share)) ** 2 + (sigmaGt[high]! * share) ** 2 : 0
  }
}
