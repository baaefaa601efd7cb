import { formatDate, formatMeasured, formatSpan, hardSpace } from '../format/numbers.ts'
import { monthNames } from '../format/dates.ts'
import type { FitTerm } from '../series/fit/terms.ts'
import type { SeriesFit, SeriesGap } from '../series/fit/fitSeries.ts'

export const noiseNames = { 'white': 'white noise', 'ar1': 'AR(1)', 'power-law': 'power law', 'inflated': 'inflated for lag one' } as const

/** The error of a term that is to be quoted; the inflated one where no noise model could be told from another. */
export function quotedOf(term: FitTerm, quote: SeriesFit['noise']['quote']): FitTerm['under'][number] {
  return term.under.find(({ model }) => model === 'inflated') ?? term.under.find(({ model }) => model === quote) ?? term.under[0]!
}

/** What the fit found, in one sentence. */
export function fitSentence(name: string, fit: Pick<SeriesFit, 'terms' | 'noise' | 'mjd'>): string {
  const trend = fit.terms.find(({ kind }) => kind === 'trend')!
  const { value, sigma, model } = quotedOf(trend, fit.noise.quote)
  const span = formatSpan(fit.mjd[0], fit.mjd.at(-1))
  if (Math.abs(value) < 2 * sigma) return `${name} neither lost nor gained mass within the uncertainty: ${formatMeasured(value, sigma, { significant: 3, unit: 'Gt per year' }).text}, ${span} (1σ, ${noiseNames[model]}).`
  return `${name} ${value < 0 ? 'lost' : 'gained'} ${formatMeasured(Math.abs(value), sigma, { signed: false, significant: 3, unit: 'Gt per year' }).text}, ${span} (1σ, ${noiseNames[model]}).`
}

/** Name of a term, with what has to be known of it. */
export function termName({ kind, at, highestDay }: FitTerm): { name: string, detail: string } {
  switch (kind) {
    case 'trend': return { name: 'Trend', detail: '' }
    case 'acceleration': return { name: 'Acceleration', detail: 'the trend is the rate at the middle epoch' }
    case 'annual': return { name: 'Annual amplitude', detail: `highest about ${dayOfYear(highestDay!)}` }
    case 'semiannual': return { name: 'Semiannual amplitude', detail: `highest about ${dayOfYear(highestDay!)} and half a year later` }
    case 'alias': return { name: `Amplitude at ${at}${hardSpace}days`, detail: 'alias of the S₂ tide in satellite gravimetry' }
    case 'step': return { name: 'Step', detail: `from ${formatDate(at)} on` }
  }
}

/** 14 May, of days after 1 January of a common year. */
function dayOfYear(days: number): string {
  const date = new Date(Date.UTC(2001, 0, 1) + Math.min(364, Math.floor(days)) * 86_400_000)
  return `${date.getUTCDate()}${hardSpace}${monthNames[date.getUTCMonth()]}`
}

/** What becomes of gaps. */
export function gapSentence(gaps: readonly SeriesGap[], maxGapDays: number): string {
  const nothing = 'Nothing is interpolated: fit, residuals, autocorrelation and spectrum take the epochs that exist.'
  if (gaps.length === 0) return `No two neighbouring epochs are more than ${maxGapDays} days apart. ${nothing}`
  const longest = gaps.reduce((most, gap) => gap.days > most.days ? gap : most)
  return `${gaps.length === 1 ? 'One gap' : `${gaps.length} gaps`} of more than ${maxGapDays} days, ${gaps.length === 1 ? '' : 'the longest '}of ${Math.round(longest.days)} days from ${formatDate(longest.fromMjd)} to ${formatDate(longest.toMjd)}. ${nothing}`
}
