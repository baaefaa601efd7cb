import { cmPerMas } from '#shared/figures/drift/vector'
import { decimalsFor, formatLongitude, formatMeasured, formatSigned, formatSignificant } from '#shared/format/numbers'
import { kindTexts } from '#shared/text/kinds'
import type { Measured } from '#shared/types/domain'
import { stands } from '~/regions/sentences'
import type { RegionItem } from '~/regions/types'

/** What the colours of the regions tell. */
export const colourings = ['mass', 'day', 'pole', 'kind', 'month'] as const
export type Colouring = typeof colourings[number]
/** Those that are of a trend. */
export type TrendColouring = Exclude<Colouring, 'kind' | 'month'>

export const colouringTexts: Readonly<Record<Colouring, { name: string, unit: string }>> = {
  mass: { name: 'Mass trend', unit: 'Gt/yr' },
  day: { name: 'Effect on the day', unit: 'µs/yr' },
  pole: { name: 'Effect on the pole', unit: 'cm/yr' },
  kind: { name: 'Kind', unit: '' },
  month: { name: 'Month by month', unit: 'Gt' },
}

/** The colouring that an address names; by mass trend unless it names another. */
export function colouringOf(named: unknown): Colouring {
  return colourings.find(colouring => colouring === named) ?? 'mass'
}

/** How a region is drawn, and the figure that stands below its name: colour never tells it alone. */
export interface RegionPaint {
  tone: 'loss' | 'gain' | 'model' | 'ink'
  /** Opacity of the fill, 0 to 1. */
  tint: number
  /** Image that lies over the fill; empty for none. */
  pattern: string
  figure: string
}

export const lossHatch = 'hatch-loss'
/** A shorter day: calculated, so in the colour of the model. */
export const modelHatch = 'hatch-model'
export const kindPattern = (kind: RegionItem['kind']) => `kind-${kind}`

type Trended = Pick<RegionItem, 'kind' | 'series' | 'trend'>

/** By kind and month by month, words and list still tell the trend of the mass. */
export function trendColouring(colouring: Colouring): TrendColouring {
  return colouring === 'kind' || colouring === 'month' ? 'mass' : colouring
}

/** The quantity that a colouring shows of a region; null without a trend. */
export function quantityOf({ trend }: Pick<RegionItem, 'trend'>, colouring: TrendColouring): Measured | null {
  if (!trend) return null
  return { mass: trend.massGtPerYear, day: trend.lodMicrosecondsPerYear, pole: trend.driftCmPerYear }[colouring]
}

/** Why a region has no figure. */
export function withoutTrend({ series }: Pick<RegionItem, 'series'>): string {
  return series ? 'series too short for a trend' : 'no series'
}

/** The largest size among what stands out, by which tints are scaled; 0 where nothing does. */
export function largestOf(regions: readonly Trended[], colouring: Colouring): number {
  if (colouring === 'kind' || colouring === 'month') return 0
  return Math.max(0, ...regions.map(region => quantityOf(region, colouring)).filter(value => value !== null && stands(value)).map(value => Math.abs(value!.value)))
}

/** @param largest from `largestOf`: the darkest tint */
export function paintOf(region: Trended, colouring: Exclude<Colouring, 'month'>, largest: number): RegionPaint {
  if (colouring === 'kind') return { tone: 'ink', tint: 0.08, pattern: kindPattern(region.kind), figure: kindTexts[region.kind] }
  const value = quantityOf(region, colouring)
  if (!value) return { tone: 'ink', tint: 0.1, pattern: '', figure: withoutTrend(region) }
  const figure = figureOf(region, colouring, value)
  if (!stands(value)) return { tone: 'ink', tint: 0.1, pattern: '', figure }
  const falls = colouring !== 'pole' && value.value < 0
  if (colouring === 'mass') return { tone: falls ? 'loss' : 'gain', tint: falls ? 0.22 : 0.34, pattern: falls ? lossHatch : '', figure }
  return { tone: 'model', tint: tintOf(value.value, largest), pattern: falls ? modelHatch : '', figure }
}

/** Opacity by size: a twentieth of the largest is still seen, since areas are judged by their root. */
export function tintOf(value: number, largest: number): number {
  return largest === 0 ? 0.1 : 0.1 + 0.42 * Math.sqrt(Math.min(1, Math.abs(value) / largest))
}

function figureOf({ trend }: Trended, colouring: TrendColouring, { value }: Measured): string {
  const { unit } = colouringTexts[colouring]
  if (colouring !== 'pole') return `${shortSigned(value)}\u00A0${unit}`
  return `${formatSignificant(value, 2)}\u00A0${unit}${trend!.directionDegEast === null ? '' : ` to ${formatLongitude(trend!.directionDegEast)}`}`
}

function shortSigned(value: number): string {
  return formatSigned(value, Math.abs(value) >= 10 ? 0 : Math.max(1, Math.min(4, decimalsFor(value, 2))))
}

/** A region's figure with its error and unit, in words for the line above the map. */
export function measuredWords(region: Trended, colouring: Colouring): string {
  const { trend } = region
  const value = quantityOf(region, trendColouring(colouring))
  if (!trend || !value) return withoutTrend(region)
  const text = (measured: { value: number, sigma: number }, unit: string, signed = true) => formatMeasured(measured.value, measured.sigma, { significant: 3, signed, unit }).text
  if (colouring === 'day') return `${text(value, 'µs/yr')} on the day`
  if (colouring === 'pole') {
    const mas = { value: value.value / cmPerMas, sigma: value.sigma / cmPerMas }
    return `pole ${text(value, 'cm/yr', false)} (${text(mas, 'mas/yr', false)})${trend.directionDegEast === null ? '' : ` towards ${formatLongitude(trend.directionDegEast)}`}`
  }
  return text(value, 'Gt/yr')
}
