import { medianStep } from '../earth/time/monthlyMeans.ts'
import { fitTrend } from '../earth/time/trend.ts'
import { formatDate, formatNumber, formatSigned, formatSignificant } from '../format/numbers.ts'
import { disagreements } from './agreement.ts'
import type { OtherSeries } from './agreement.ts'
import { gtPerMetre } from './recipe.ts'
import { median, robustSigma, runningMedian } from './robust.ts'

export const markKinds = ['gap', 'duplicate', 'order', 'outlier', 'step', 'suspicious-unit', 'flat-run', 'disagreement'] as const
export type MarkKind = typeof markKinds[number]

/** Something that a check found: a mark on the chart and a row in a list. The data stay as they are. */
export interface Mark {
  /** Kind and place: the same finding has the same id when the check runs again. */
  id: string
  kind: MarkKind
  fromMjd: number
  toMjd: number
  /** Lines of the file that it concerns; empty where rows have none. */
  rows: number[]
  /** What was found, in figures. */
  message: string
  state: 'open' | 'accepted'
  /** Why it was accepted. */
  note?: string
}

/** A decision on a mark, kept with the version. A mark that was corrected is gone once the check runs on the corrected rows. */
export interface MarkDecision { id: string, choice: 'accepted' | 'corrected', note: string }

export interface SeriesToCheck {
  /** Epochs in the order of the file, MJD; duplicates and disorder are found, not refused. */
  mjd: ArrayLike<number>
  massGt: ArrayLike<number>
  sigmaGt?: ArrayLike<number> | null
  /** Lines of the file, one per epoch. */
  rows?: ArrayLike<number> | null
  /** Ellipsoidal area of the region, m²: tells a height that cannot be. */
  areaM2?: number | null
  /** The region's other series. */
  others?: readonly OtherSeries[]
}

export interface CheckOptions {
  /** Steps of the series that may be missing before a gap is marked; default 1.5 steps from epoch to epoch. */
  gapSteps?: number
  /** Robust z from which a value is an outlier; default 6. */
  outlierZ?: number
  /** Equal values in a row that make a flat run; default 4. */
  flatRun?: number
}

/** Greatest change of water over a region that is believed, m; a height of 900 m w.e. is a wrong unit. */
const MOST_METRES = 100
/** Greatest change of one region that is believed where its area is not known, Gt. */
const MOST_GT = 50_000
/** Neighbours on each side that an outlier is held against. */
const REACH = 4
/** Epochs on each side that tell a step from an outlier. */
const STEP_WINDOW = 6
/** Robust z of a step: its size over the noise of the medians on both sides. */
const STEP_Z = 8

/**
 * Looks for gaps, duplicates, disorder, outliers, steps, heights that cannot be, flat runs and disagreement with other series. Nothing is
 * changed: each finding is a mark that somebody accepts, or corrects in the rows.
 */
export function checkSeries(series: SeriesToCheck, options: CheckOptions = {}): Mark[] {
  const order = Array.from({ length: series.mjd.length }, (_, i) => i)
  const marks = [...orderMarks(series, order)]
  order.sort((a, b) => series.mjd[a]! - series.mjd[b]! || a - b)
  const clean: number[] = []
  for (const i of order) {
    const last = clean.at(-1)
    if (last !== undefined && series.mjd[last] === series.mjd[i]) marks.push(mark(series, 'duplicate', [last, i], `${formatDate(series.mjd[i]!)} stands twice, with ${formatSigned(series.massGt[last]!, 2)} and ${formatSigned(series.massGt[i]!, 2)} Gt.`))
    else clean.push(i)
  }
  marks.push(...gapMarks(series, clean, options.gapSteps ?? 1.5), ...unitMarks(series, clean), ...flatMarks(series, clean, options.flatRun ?? 4))
  marks.push(...shapeMarks(series, clean, options.outlierZ ?? 6), ...disagreementMarks(series, clean))
  return marks.sort((a, b) => a.fromMjd - b.fromMjd || markKinds.indexOf(a.kind) - markKinds.indexOf(b.kind))
}

/** Marks with the decisions that were taken on them, and decisions whose finding is no longer there. */
export function settleMarks(marks: readonly Mark[], decisions: readonly MarkDecision[]): { marks: Mark[], gone: MarkDecision[] } {
  const byId = new Map(decisions.map(decision => [decision.id, decision]))
  const present = new Set(marks.map(m => m.id))
  return {
    marks: marks.map((m) => {
      const decision = byId.get(m.id)
      return decision?.choice === 'accepted' ? { ...m, state: 'accepted', note: decision.note } : m
    }),
    gone: decisions.filter(decision => !present.has(decision.id))
  }
}

function mark({ mjd, rows }: SeriesToCheck, kind: MarkKind, indices: number[], message: string, key = ''): Mark {
  const times = indices.map(i => mjd[i]!)
  const [fromMjd, toMjd] = [Math.min(...times), Math.max(...times)]
  return { id: `${kind}:${fromMjd}:${toMjd}${key && `:${key}`}`, kind, fromMjd, toMjd, rows: rows ? indices.map(i => rows[i]!) : [], message, state: 'open' }
}

function orderMarks(series: SeriesToCheck, order: number[]): Mark[] {
  return order.filter(i => i > 0 && series.mjd[i]! < series.mjd[i - 1]!)
    .map(i => mark(series, 'order', [i], `${formatDate(series.mjd[i]!)} follows ${formatDate(series.mjd[i - 1]!)} in the file.`))
}

function gapMarks(series: SeriesToCheck, clean: number[], gapSteps: number): Mark[] {
  const mjd = clean.map(i => series.mjd[i]!)
  const step = medianStep(mjd)
  const marks: Mark[] = []
  for (let k = 1; k < mjd.length; k++) {
    const length = mjd[k]! - mjd[k - 1]!
    // Months are 28 to 31 days: a fifth of a step more than asked is no gap.
    if (length <= gapSteps * step * 1.05) continue
    const missing = Math.max(1, Math.round(length / step) - 1)
    marks.push(mark(series, 'gap', [clean[k - 1]!, clean[k]!], `${Math.round(length)} days without a value, from ${formatDate(mjd[k - 1]!)} to ${formatDate(mjd[k]!)}: ${missing === 1 ? 'one epoch is' : `${missing} epochs are`} missing.`))
  }
  return marks
}

function unitMarks(series: SeriesToCheck, clean: number[]): Mark[] {
  if (clean.length === 0) return []
  let [low, high] = [clean[0]!, clean[0]!]
  for (const i of clean) {
    if (series.massGt[i]! < series.massGt[low]!) low = i
    if (series.massGt[i]! > series.massGt[high]!) high = i
  }
  const range = series.massGt[high]! - series.massGt[low]!
  const metres = series.areaM2 ? range / gtPerMetre(series.areaM2) : null
  if (metres !== null ? metres <= MOST_METRES : range <= MOST_GT) return []
  const what = metres !== null ? `${formatNumber(metres)} m of water over the region` : `${formatNumber(range)} Gt`
  return [mark(series, 'suspicious-unit', [low, high], `The values range over ${what}. Check the unit.`)]
}

function flatMarks(series: SeriesToCheck, clean: number[], flatRun: number): Mark[] {
  const marks: Mark[] = []
  for (let from = 0; from < clean.length;) {
    let to = from
    while (to + 1 < clean.length && series.massGt[clean[to + 1]!] === series.massGt[clean[from]!]) to++
    if (to - from + 1 >= flatRun) {
      marks.push(mark(series, 'flat-run', clean.slice(from, to + 1), `${to - from + 1} epochs in a row have the same value, ${formatSigned(series.massGt[clean[from]!]!, 2)} Gt.`))
    }
    from = to + 1
  }
  return marks
}

/** Outliers against the running median, and steps, both of what a trend and seasons leave. */
function shapeMarks(series: SeriesToCheck, clean: number[], outlierZ: number): Mark[] {
  if (clean.length < 2 * STEP_WINDOW) return []
  const mjd = clean.map(i => series.mjd[i]!)
  const { residuals } = fitTrend({ mjd, value: clean.map(i => series.massGt[i]!) })
  const smooth = runningMedian(residuals, REACH)
  const rough = residuals.map((r, k) => r - smooth[k]!)
  const spread = robustSigma(rough)
  const marks: Mark[] = []
  if (spread > 0) {
    rough.forEach((r, k) => {
      const z = r / spread
      if (Math.abs(z) < outlierZ) return
      marks.push(mark(series, 'outlier', [clean[k]!], `${formatDate(mjd[k]!)}: ${formatSigned(series.massGt[clean[k]!]!, 2)} Gt is ${formatSigned(r, 2)} Gt off its neighbours, ${formatNumber(Math.abs(z), 1)} times their spread.`))
    })
  }
  return [...marks, ...stepMarks(series, clean, mjd, residuals)]
}

function stepMarks(series: SeriesToCheck, clean: number[], mjd: number[], residuals: Float64Array): Mark[] {
  const n = residuals.length
  const noise = robustSigma(Float64Array.from({ length: n - 1 }, (_, k) => residuals[k + 1]! - residuals[k]!)) / Math.SQRT2
  if (!(noise > 0)) return []
  const jumps = new Float64Array(n)
  for (let k = STEP_WINDOW; k <= n - STEP_WINDOW; k++) {
    jumps[k] = median(residuals.subarray(k, k + STEP_WINDOW)) - median(residuals.subarray(k - STEP_WINDOW, k))
  }
  // A slow wander moves the medians everywhere; a step stands out among the jumps, and happens from one epoch to the next.
  const usual = robustSigma(jumps)
  const weight = jumps.map((jump, k) => k === 0 ? 0 : Math.abs(jump) + Math.abs(residuals[k]! - residuals[k - 1]!))
  const marks: Mark[] = []
  for (let k = STEP_WINDOW; k <= n - STEP_WINDOW; k++) {
    const size = Math.abs(jumps[k]!)
    if (size < STEP_Z * noise / Math.sqrt(STEP_WINDOW) * 1.5 || size < 4 * usual) continue
    if (Math.abs(residuals[k]! - residuals[k - 1]!) < size / 2) continue
    if (weight.subarray(Math.max(0, k - STEP_WINDOW), k + STEP_WINDOW + 1).some(w => w > weight[k]!)) continue
    marks.push(mark(series, 'step', [clean[k - 1]!, clean[k]!], `A step of ${formatSigned(jumps[k]!, 2)} Gt from ${formatDate(mjd[k - 1]!)} to ${formatDate(mjd[k]!)}, against noise of ${formatSignificant(noise, 2)} Gt. Was an instrument changed?`))
  }
  return marks
}

function disagreementMarks(series: SeriesToCheck, clean: number[]): Mark[] {
  const own = { mjd: clean.map(i => series.mjd[i]!), massGt: clean.map(i => series.massGt[i]!) }
  return (series.others ?? []).flatMap((other) => {
    const found = disagreements(own, other)
    return found ? [{ ...mark(series, 'disagreement', [clean[0]!], found.message, other.name), fromMjd: found.fromMjd, toMjd: found.toMjd, id: `disagreement:${found.what}:${other.name}`, rows: [] }] : []
  })
}
