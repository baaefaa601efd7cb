import { toBaseline, type Baseline } from '#shared/series/uncertainty'
import { formatDate, formatMeasured, formatSpan } from '#shared/format/numbers'
import type { Prediction } from './types'

export const zeroKinds = ['stored', 'first', 'mean', 'span'] as const
export type ZeroKind = typeof zeroKinds[number]
/** What a chart counts from: a setting of use that never changes the data. */
export interface Zero { kind: ZeroKind, fromMjd: number | null, toMjd: number | null }

export const zeroTexts: Record<ZeroKind, string> = { stored: 'as stored', first: 'the first epoch', mean: 'the mean of the series', span: 'the mean of a span' }

/** The zero that an address asks for: `zero=first`, or `zero=2004-01-01_2009-12-31`. */
export function zeroOfQuery(value: unknown, mjdOf: (text: unknown) => number | null): Zero {
  const none = { fromMjd: null, toMjd: null }
  if (value === 'first' || value === 'mean' || value === 'span') return { kind: value, ...none }
  if (typeof value !== 'string' || !value.includes('_')) return { kind: 'stored', ...none }
  const [from, to] = value.split('_')
  return { kind: 'span', fromMjd: mjdOf(from), toMjd: mjdOf(to) }
}

export function queryOfZero({ kind, fromMjd, toMjd }: Zero, dateOf: (mjd: number | null) => string): string | undefined {
  if (kind === 'stored') return undefined
  return kind === 'span' && (fromMjd !== null || toMjd !== null) ? `${dateOf(fromMjd)}_${dateOf(toMjd)}` : kind
}

function baselineOf({ kind, fromMjd, toMjd }: Zero, mjd: readonly number[]): Baseline {
  const [first, last] = [mjd[0] ?? 0, mjd.at(-1) ?? 0]
  if (kind === 'stored') return null
  if (kind === 'first') return { fromMjd: first, toMjd: first }
  return kind === 'mean' ? { fromMjd: first, toMjd: last } : { fromMjd: fromMjd ?? first, toMjd: toMjd ?? last }
}

export interface Shifted { prediction: Prediction, sentence: string, fault: string | null }

/** The prediction with mass, day and pole counted from a zero. The error of the zero itself is common to all epochs and is said, not drawn. */
export function countedFrom(prediction: Prediction, zero: Zero): Shifted {
  const { mjd, massGt, sigmaMassGt, perGt } = prediction
  const baseline = baselineOf(zero, mjd)
  if (!baseline) return { prediction, sentence: 'mass as stored, length of day from its mean', fault: null }
  const sigmaGt = sigmaMassGt.every(s => s !== null) ? sigmaMassGt as number[] : null
  let shifted: { massGt: number[], baselineSigmaGt: number }
  try {
    shifted = toBaseline({ mjd, massGt, sigmaGt, walkGt2: null, factors: [] }, baseline)
  }
  catch (error) {
    if (!(error instanceof RangeError)) throw error
    return { prediction, sentence: 'mass as stored, length of day from its mean', fault: 'No epoch of the series lies in this span.' }
  }
  const where = zero.kind === 'first' ? formatDate(mjd[0]) : `the mean of ${formatSpan(baseline.fromMjd, baseline.toMjd)}`
  const known = shifted.baselineSigmaGt > 0 ? `, known to ${formatMeasured(0, shifted.baselineSigmaGt, { signed: false, unit: 'Gt' }).sigma.replace(/^±\s*/, '±\u00A0')}\u00A0Gt` : ''
  return {
    prediction: { ...prediction, massGt: shifted.massGt, lodMicroseconds: shifted.massGt.map(m => m * perGt.lodMicroseconds), chi1Mas: shifted.massGt.map(m => m * perGt.chi1Mas), chi2Mas: shifted.massGt.map(m => m * perGt.chi2Mas) },
    sentence: `mass and length of day from ${where}${known}`, fault: null,
  }
}
