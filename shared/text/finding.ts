import { formatMeasured } from '../format/measured.ts'
import { formatDirection, openDirectionDeg } from '../format/places.ts'
import { formatSpan } from '../format/dates.ts'
import { driftOf } from '../figures/drift/vector.ts'
import { counted } from './words.ts'
import type { Measured } from '../types/domain.ts'
import type { Comparison, ComparisonQuantity, RunResult } from '../types/run.ts'

export interface FindingOptions {
  /** Subject of the sentence in place of “Reported mass change in six regions”. */
  subject?: string
}

/** Fewer sigmas than this and the sentence says that nothing stands out. */
const tellingSigmas = 2

function stands(measured: Measured): boolean {
  return measured.value !== 0 && Math.abs(measured.value) >= tellingSigmas * measured.sigma
}

const perYear = (measured: Measured, unit: string, signed = false) =>
  formatMeasured(measured.value, measured.sigma, { signed, unit: `${unit} per year` }).text

function subjectOf(result: RunResult): string {
  const counting = result.regions.filter(region => region.scale !== 0 && !region.keptFrom)
  const named = counting.length === 1 ? ` (${counting[0]!.name})` : ''
  return `Reported mass change in ${counted(counting.length, 'region')}${named}`
}

function dayClause(lod: Measured | null): string | null {
  if (!lod) return null
  if (lod.value === 0 && lod.sigma === 0) return 'to leave the length of the day unchanged'
  if (!stands(lod)) return `to leave the length of the day unchanged within its uncertainty (${perYear(lod, 'µs', true)}, 1σ)`
  const size = { ...lod, value: Math.abs(lod.value) }
  return `to ${lod.value > 0 ? 'lengthen' : 'shorten'} the day by ${perYear(size, 'µs')} (1σ)`
}

function poleClause(drift: Measured | null, direction: { value: number, sigma: number | null } | null): string | null {
  if (!drift) return null
  if (drift.value === 0 && drift.sigma === 0) return 'to leave the pole in place'
  if (!stands(drift)) return `to leave the pole in place within its uncertainty (${perYear(drift, 'cm')}, 1σ)`
  return `to move the pole ${perYear(drift, 'cm')}${towards(direction)}`
}

function towards(direction: { value: number, sigma: number | null } | null): string {
  if (!direction || (direction.sigma !== null && direction.sigma > openDirectionDeg)) return ''
  return ` towards ${formatDirection(direction)}`
}

/**
 * The finding of a run in one sentence: what reported mass change is calculated to do to the day and to the pole, per
 * Julian year, with one sigma. A change below two sigma is said to be unchanged within its uncertainty.
 */
export function findingSentence(result: RunResult, options: FindingOptions = {}): string {
  const span = formatSpan(result.span.fromMjd, result.span.toMjd)
  const clauses = [
    dayClause(result.total.lodMicrosecondsPerYear),
    poleClause(result.total.driftCmPerYear, result.total.directionDegEast),
  ].filter(clause => clause !== null)
  const subject = options.subject ?? subjectOf(result)
  if (clauses.length === 0) return `${subject}, ${span}, is too short a record for a trend in the length of the day or the pole.`
  return `${subject}, ${span}, is calculated ${clauses.join(' and ')}.`
}

function scaled(measured: Measured, factor: number): Measured {
  return { value: measured.value * factor, sigmaWhite: measured.sigmaWhite * factor, sigma: measured.sigma * factor }
}

function dayRemainder(lod: ComparisonQuantity | null, gravity: boolean): string | null {
  if (!lod) return null
  const observed = scaled(lod.trends.observed, 1000)
  const residual = scaled(lod.trends.residual, 1000)
  if (gravity) return `The observed gravity stands for a change of the length of day of ${perYear(observed, 'µs', true)}; ${perYear(residual, 'µs', true)} is left when the model is taken away.`
  return `The observed length of day changed by ${perYear(observed, 'µs', true)}; `
    + `${perYear(residual, 'µs', true)} is left when the model is taken away, most of it from the Earth’s core.`
}

function poleRemainder(chi1: ComparisonQuantity | null, chi2: ComparisonQuantity | null, gravity: boolean): string | null {
  if (!chi1 || !chi2) return null
  const observed = driftOf(chi1.trends.observed, chi2.trends.observed)
  const residual = driftOf(chi1.trends.residual, chi2.trends.residual)
  const say = (drift: ReturnType<typeof driftOf>) => `${perYear(drift.cm, 'cm')}${stands(drift.cm) ? towards(drift.direction) : ''}`
  return `${gravity ? 'The observed gravity stands for a pole that moved' : 'The observed pole moved'} ${say(observed)}; ${say(residual)} is left when the model is taken away.`
}

/** What observation leaves unexplained over the common span, as sentences; empty where the series holds neither quantity. */
export function remainderSentences(comparison: Comparison): string[] {
  return [dayRemainder(comparison.lod, comparison.from === 'gravity'), poleRemainder(comparison.chi1, comparison.chi2, comparison.from === 'gravity')].filter(text => text !== null)
}
