import { fitTrend } from '../earth/time/trend.ts'
import { formatDate, formatMeasured, formatNumber, formatSigned } from '../format/numbers.ts'

/** What is compared of a version: data, errors, the steps of its conversion, and what is said of it. */
export interface VersionToCompare {
  mjd: ArrayLike<number>
  massGt: ArrayLike<number>
  sigmaGt: ArrayLike<number> | null
  sharedRates: readonly { source: string, sigmaGtPerYear: number }[]
  /** Sentences of the conversion. */
  steps: readonly string[]
  /** Citation, licence, method, instrument, independence, …: name to text. */
  facts: Readonly<Record<string, string>>
}

export interface VersionDiff {
  same: boolean
  epochs: { before: number, after: number, added: number[], removed: number[] }
  /** Epochs whose mass or one-sigma differs, in order of time. */
  changed: { mjd: number, before: number, after: number, sigmaBefore: number | null, sigmaAfter: number | null }[]
  /** A shift that all common epochs share: another zero. Null where they share none. */
  shiftGt: number | null
  /** Root mean square and largest of the changes of mass that are left after the shift, Gt. */
  rmsGt: number
  largest: { mjd: number, changeGt: number } | null
  /** Trends, Gt per year; null for fewer than three epochs. */
  trends: { before: Trend | null, after: Trend | null }
  sharedRates: { source: string, before: number | null, after: number | null }[]
  steps: { removed: string[], added: string[] }
  facts: { name: string, before: string, after: string }[]
  /** The difference in sentences, the weightiest first. */
  sentences: string[]
}
interface Trend { value: number, sigmaWhite: number, sigma: number }

/** Changes below this part of the largest mass are rounding. */
const ROUNDING = 1e-12

/** What a new version changed, in figures: epochs, masses, errors, trend, conversion and what is said of it. */
export function diffVersions(before: VersionToCompare, after: VersionToCompare): VersionDiff {
  const old = new Map(Array.from(before.mjd, (t, i) => [t, i]))
  const fresh = new Set(Array.from(after.mjd))
  const added = Array.from(after.mjd).filter(t => !old.has(t))
  const removed = Array.from(before.mjd).filter(t => !fresh.has(t))
  const pairs = Array.from(after.mjd, (t, j) => ({ t, i: old.get(t), j })).filter((p): p is { t: number, i: number, j: number } => p.i !== undefined)
  const size = pairs.reduce((most, { i, j }) => Math.max(most, Math.abs(before.massGt[i]!), Math.abs(after.massGt[j]!)), 0)
  const changes = pairs.map(({ i, j }) => after.massGt[j]! - before.massGt[i]!)
  const changed = pairs.filter(({ i, j }, k) => Math.abs(changes[k]!) > ROUNDING * size || (before.sigmaGt?.[i] ?? null) !== (after.sigmaGt?.[j] ?? null)).map(({ t, i, j }) => ({
    mjd: t, before: before.massGt[i]!, after: after.massGt[j]!, sigmaBefore: before.sigmaGt?.[i] ?? null, sigmaAfter: after.sigmaGt?.[j] ?? null
  }))
  const mean = changes.length > 0 ? changes.reduce((a, b) => a + b, 0) / changes.length : 0
  const shifted = changes.length > 1 && Math.abs(mean) > 1e-9 * size && changes.every(c => Math.abs(c - mean) <= 1e-9 * size)
  const left = changes.map(c => shifted ? 0 : c)
  const largest = left.reduce((most, c, k) => Math.abs(c) > Math.abs(left[most] ?? 0) ? k : most, 0)
  const diff: Omit<VersionDiff, 'sentences' | 'same'> = {
    epochs: { before: before.mjd.length, after: after.mjd.length, added, removed },
    changed,
    shiftGt: shifted ? mean : null,
    rmsGt: left.length > 0 ? Math.sqrt(left.reduce((sum, c) => sum + c * c, 0) / left.length) : 0,
    largest: left.length > 0 && Math.abs(left[largest]!) > ROUNDING * size ? { mjd: pairs[largest]!.t, changeGt: left[largest]! } : null,
    trends: { before: trendOf(before), after: trendOf(after) },
    sharedRates: rateChanges(before, after),
    steps: { removed: before.steps.filter(step => !after.steps.includes(step)), added: after.steps.filter(step => !before.steps.includes(step)) },
    facts: [...new Set([...Object.keys(before.facts), ...Object.keys(after.facts)])]
      .map(name => ({ name, before: before.facts[name] ?? '', after: after.facts[name] ?? '' })).filter(fact => fact.before !== fact.after)
  }
  const sentences = sentencesOf(diff, pairs.length)
  return { same: sentences.length === 0, ...diff, sentences: sentences.length > 0 ? sentences : ['Nothing differs.'] }
}

function trendOf({ mjd, massGt, sigmaGt }: VersionToCompare): Trend | null {
  if (mjd.length < 3) return null
  const { value, sigmaWhite, sigma } = fitTrend({ mjd, value: massGt, sigma: sigmaGt })
  return { value, sigmaWhite, sigma }
}

function rateChanges(before: VersionToCompare, after: VersionToCompare): VersionDiff['sharedRates'] {
  const rate = (version: VersionToCompare, source: string): number | null => version.sharedRates.find(r => r.source === source)?.sigmaGtPerYear ?? null
  const sources = new Set([...before.sharedRates, ...after.sharedRates].map(r => r.source))
  return [...sources].map(source => ({ source, before: rate(before, source), after: rate(after, source) })).filter(r => r.before !== r.after)
}

function sentencesOf(diff: Omit<VersionDiff, 'sentences' | 'same'>, common: number): string[] {
  const { epochs, changed, shiftGt, largest, rmsGt, trends } = diff
  const counted = (n: number, what: string): string => `${n === 1 ? 'One' : formatNumber(n)} ${n === 1 ? what : `${what}s`}`
  const sentences: string[] = []
  const trend = (t: Trend): string => formatMeasured(t.value, t.sigma, { unit: 'Gt/yr' }).text
  if (trends.before && trends.after && trend(trends.before) !== trend(trends.after)) sentences.push(`The trend goes from ${trend(trends.before)} to ${trend(trends.after)}.`)
  if (epochs.added.length > 0) sentences.push(`${counted(epochs.added.length, 'epoch')} added, ${rangeOf(epochs.added)}.`)
  if (epochs.removed.length > 0) sentences.push(`${counted(epochs.removed.length, 'epoch')} removed, ${rangeOf(epochs.removed)}.`)
  const moved = changed.filter(c => c.before !== c.after).length
  if (shiftGt !== null) sentences.push(`All ${formatNumber(common)} common epochs are shifted by ${formatSigned(shiftGt, 2)} Gt: another zero.`)
  else if (largest) sentences.push(`${counted(moved, 'value')} of ${formatNumber(common)} changed, by ${formatNumber(rmsGt, 2)} Gt in the root mean square and at most ${formatSigned(largest.changeGt, 2)} Gt, on ${formatDate(largest.mjd)}.`)
  const errors = changed.filter(c => c.sigmaBefore !== c.sigmaAfter).length
  if (errors > 0) sentences.push(`${counted(errors, 'one-sigma')} changed.`)
  for (const { source, before, after } of diff.sharedRates) {
    const figure = (x: number | null): string => x === null ? 'none' : `${formatNumber(x, 2)} Gt/yr`
    sentences.push(`Systematic error of the trend, “${source}”: ${figure(before)}, now ${figure(after)}.`)
  }
  for (const step of diff.steps.removed) sentences.push(`No longer: ${step}`)
  for (const step of diff.steps.added) sentences.push(`New: ${step}`)
  for (const { name, before, after } of diff.facts) sentences.push(`${name}: “${before}” is now “${after}”.`)
  return sentences
}

function rangeOf(mjd: number[]): string {
  const [from, to] = [Math.min(...mjd), Math.max(...mjd)]
  return from === to ? formatDate(from) : `from ${formatDate(from)} to ${formatDate(to)}`
}
