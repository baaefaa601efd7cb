import { formatMeasured, formatSpan } from '#shared/format/numbers'
import { formatLongitude } from '#shared/format/places'
import { formatNumber, decimalsFor } from '#shared/format/digits'
import { counted } from '#shared/text/words'
import { POLE_MM_PER_MAS } from '#shared/earth/constants'
import type { Measured } from '#shared/types/domain'
import type { PerGt, RegionTotal, TrendSummary } from './types'

/** Fewer sigmas than this and a sentence says that nothing stands out. */
const tellingSigmas = 2

export function stands(measured: Measured): boolean {
  return measured.value !== 0 && Math.abs(measured.value) >= tellingSigmas * measured.sigma
}

const capital = (text: string) => text.charAt(0).toUpperCase() + text.slice(1)
/** The figure and its error on one line, wherever the sentence breaks. */
const held = (text: string) => text.replace(' ±', '\u00a0±')
const size = (m: Measured, unit: string) => held(formatMeasured(Math.abs(m.value), m.sigma, { signed: false, significant: 3, unit }).text)
const signed = (m: Measured, unit: string) => held(formatMeasured(m.value, m.sigma, { significant: 3, unit }).text)

function spanOf(total: RegionTotal): string {
  const span = formatSpan(total.fromMjd, total.toMjd)
  return total.oneSpan ? span : `each over its own span within ${span}`
}

/** What all regions of the account come to, in one sentence: the sum of their latest trends with one sigma. */
export function totalSentence(total: RegionTotal): string {
  const { withTrend, massGtPerYear: mass } = total
  if (total.regions === 0) return 'No region is in this account yet.'
  if (!mass) {
    return total.regions === 1
      ? 'One region is in this account; it has no mass series with a trend yet.'
      : `${capital(counted(total.regions, 'region'))} are in this account; none has a mass series with a trend yet.`
  }
  const one = withTrend === 1
  const who = `${capital(counted(withTrend, 'region'))}`
  const together = one ? '' : ' together'
  if (!stands(mass)) return `${who}${together} ${one ? 'neither loses nor gains' : 'neither lose nor gain'} mass within the uncertainty: ${signed(mass, 'Gt per year')}, ${spanOf(total)} (1σ).`
  const verb = mass.value < 0 ? (one ? 'loses' : 'lose') : (one ? 'gains' : 'gain')
  return `${who} ${verb} ${size(mass, 'Gt per year')}${together}, ${spanOf(total)} (1σ).`
}

/** What stands under the sentence: how the sum was made, what it does to the day, and what is not in it. */
export function totalNotes(total: RegionTotal): string[] {
  const notes: string[] = []
  const pairs = total.overlaps.length
  if (pairs > 0) notes.push(`${capital(counted(pairs, 'pair'))} of regions ${pairs === 1 ? 'shares' : 'share'} ground and ${pairs === 1 ? 'is' : 'are'} not settled, so mass there may be counted twice.`)
  const { lodMicrosecondsPerYear: lod, regions, withTrend, withoutSeries } = total
  if (withTrend > 0) notes.push('The sum of each region’s latest trend, not a run; an error that series share by name is added as one error.')
  if (lod && stands(lod)) notes.push(`Calculated, not observed: it ${lod.value > 0 ? 'lengthens' : 'shortens'} the day by ${size(lod, 'µs per year')}.`)
  if (withoutSeries > 0) notes.push(`${capital(counted(withoutSeries, 'region'))} ${withoutSeries === 1 ? 'has' : 'have'} no mass series yet.`)
  const short = regions - withTrend - withoutSeries
  if (short > 0) notes.push(`${capital(counted(short, 'region'))} ${short === 1 ? 'has' : 'have'} a series too short for a trend.`)
  return notes
}

/** East longitude that the pole goes towards when the region changes mass by this sign; null for no effect. */
export function poleDirection(perGt: PerGt, sign: number): number | null {
  if (sign === 0 || (perGt.chi1Mas === 0 && perGt.chi2Mas === 0)) return null
  const degrees = Math.atan2(sign * perGt.chi2Mas, sign * perGt.chi1Mas) * 180 / Math.PI
  return degrees === -180 ? 180 : degrees
}

/** Shift of the pole per gigatonne on the ground, mm. */
export function poleMmPerGt(perGt: PerGt): number {
  return Math.hypot(perGt.chi1Mas, perGt.chi2Mas) * POLE_MM_PER_MAS
}

export interface RegionFinding { name: string, hasSeries: boolean, trend: TrendSummary | null, perGt: PerGt }

/** A region's own finding in one sentence. */
export function regionSentence({ name, hasSeries, trend, perGt }: RegionFinding): string {
  if (!hasSeries) return `${name} has no mass series yet. ${perGtSentence(perGt)}`
  if (!trend) return `The mass series of ${name} is too short for a trend. ${perGtSentence(perGt)}`
  const { massGtPerYear: mass, lodMicrosecondsPerYear: lod, driftCmPerYear: drift } = trend
  const span = formatSpan(trend.fromMjd, trend.toMjd)
  if (!stands(mass)) return `${name} neither lost nor gained mass within the uncertainty: ${signed(mass, 'Gt per year')}, ${span} (1σ).`
  const day = lod.value === 0 ? 'to leave the day as it is' : `to ${lod.value > 0 ? 'lengthen' : 'shorten'} the day by ${size(lod, 'µs per year')}`
  const pole = drift.value === 0 ? 'to leave the pole in place' : `to move the pole ${size(drift, 'cm per year')}${trend.directionDegEast === null ? '' : ` towards ${formatLongitude(trend.directionDegEast)}`}`
  return `${name} ${mass.value < 0 ? 'lost' : 'gained'} ${size(mass, 'Gt per year')}, ${span}; that is calculated ${day} and ${pole} (1σ).`
}

function perGtSentence(perGt: PerGt): string {
  const lod = -perGt.lodMicroseconds
  const mm = poleMmPerGt(perGt)
  const direction = poleDirection(perGt, -1)
  const figure = (value: number) => formatNumber(Math.abs(value), Math.min(6, decimalsFor(value, 2)))
  return `Each gigatonne lost there would ${lod < 0 ? 'shorten' : 'lengthen'} the day by ${figure(lod)}\u00a0µs and move the pole ${figure(mm)}\u00a0mm${direction === null ? '' : ` towards ${formatLongitude(direction)}`}.`
}
