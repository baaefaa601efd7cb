import { mjdFromIsoDate, monthsBetween } from '../earth/time/epochs.ts'
import { medianStep, present } from '../earth/time/monthlyMeans.ts'
import { excitationOfSeries } from '../earth/time/observedExcitation.ts'
import { smooth } from '../earth/time/smoothing.ts'
import { fitTrend } from '../earth/time/trend.ts'
import { zonalTidesMs } from '../earth/time/zonalTides.ts'
import { InputError } from '../types/issue.ts'
import type { ObservedSeries, RunWarning } from '../types/run.ts'
import { chainConclusions } from './chainConclusions.ts'
import { panelSentence, stepSources, stepTitles } from './chainTexts.ts'
import { chainQuantities } from './chainTypes.ts'
import type { Chain, ChainQuantity, ChainResult, ChainStep, FluidCorrection, StepPanel, StepResult, Track } from './chainTypes.ts'
import { correctionValues, fluidRefusals, fluidWarnings, onEpochs, withoutMean } from './fluidCorrection.ts'
import { gravityWarnings } from './gravityExcitation.ts'
import type { GravityFields } from './gravityTypes.ts'
import { monthsOf, rowsInSpan, seasonsOf, straightPart } from './steps.ts'

export interface ChainInputs {
  /** Series of angular momentum by the keys that the chain names. */
  corrections?: Record<string, FluidCorrection>
  /** Answers stored with gravity coefficients, where the series comes from them. */
  gravity?: GravityFields
}

type Tracks = Partial<Record<ChainQuantity, Track>>
/** Quantities that seasons, smoothing and detrending work on. */
const reducedQuantities = ['lod', 'chi1', 'chi2'] as const

/**
 * Runs a chain over an observed series: every step gives what was there before, what it took away and what is left, with its
 * settings, its source and a sentence. Depends on its arguments alone; the same JSON gives the same digits.
 *
 * @throws InputError for a span without rows, for a correction that is not there, and where water would be counted twice
 */
export function runChain(series: ObservedSeries, chain: Chain, inputs: ChainInputs = {}): ChainResult {
  const span = { fromMjd: chain.from ? mjdFromIsoDate(chain.from) : null, toMjd: chain.to ? mjdFromIsoDate(chain.to) : null }
  const kept = rowsInSpan(series, span, chain.includePredictions)
  const fluids = fluidsOf(chain, inputs, series.from === 'gravity')
  const warnings: RunWarning[] = [...(inputs.gravity ? gravityWarnings(inputs.gravity) : []), ...fluidWarnings(fluids)]
  let tracks = tracksOf(kept)
  let months: ChainResult['months'] = null
  const steps: StepResult[] = []
  for (const step of chain.steps) {
    const before = tracks
    const done = step.on ? apply(step, kept, before, inputs) : null
    if (done) {
      tracks = { ...before, ...done.after }
      months = done.months ?? months
    }
    const panels = done ? panelsOf(done.shown ?? before, done.after, done.removed ?? {}) : []
    steps.push({ kind: step.kind, settings: step, on: step.on, title: stepTitles[step.kind], sentence: panelSentence(step, panels, done !== null, inputs, kept.from === 'gravity'), source: stepSources(step, inputs), panels })
  }
  return { chain, steps, after: tracks, months, ...chainConclusions(kept, chain, tracks, warnings) }
}

interface Done {
  after: Tracks
  removed?: Tracks
  /** What is drawn as “before” where it is not the quantity of the same name: the pole, before it becomes excitation. */
  shown?: Tracks
  months?: NonNullable<ChainResult['months']>
}

/** One step; null where it has nothing to work on. */
function apply(step: ChainStep, series: ObservedSeries, tracks: Tracks, inputs: ChainInputs): Done | null {
  switch (step.kind) {
    case 'zonal-tides': return series.from === 'gravity' ? null : withoutTides(tracks, step.set)
    case 'excitation': return excite(series, tracks, step)
    case 'angular-momentum': return subtractFluid(tracks, step, inputs.corrections![step.correction]!, series)
    case 'background': return step.rows.length === 0 ? null : { after: {} }
    case 'seasons': return subtract(tracks, ({ mjd, value }) => {
      const removed = seasonsOf(mjd, value)?.season
      return removed ? { removed } : null
    })
    case 'smoothing': return subtract(tracks, ({ mjd, value }) => {
      const after = smooth(mjd, value, step.smoothing.kind, step.smoothing.widthDays)
      return { removed: value.map((v, i) => v - after[i]!), after }
    })
    case 'monthly': return averageMonths(tracks)
    case 'detrend': return subtract(tracks, ({ mjd, value }) => {
      const { epochs, values } = present(mjd, value)
      if (epochs.length < 3) return null
      const fit = fitTrend({ mjd: epochs, value: values })
      return { removed: mjd.map(t => straightPart(fit, t)) }
    })
  }
}

function tracksOf(series: ObservedSeries): Tracks {
  const columns: Record<ChainQuantity, Float64Array | undefined> = {
    lod: series.lodMs, ut1: series.ut1MinusTaiMs, x: series.xMas, y: series.yMas, chi1: series.chi1Mas, chi2: series.chi2Mas
  }
  return Object.fromEntries(chainQuantities.flatMap((quantity) => {
    const value = columns[quantity]
    return value?.some(v => !Number.isNaN(v)) ? [[quantity, { mjd: series.mjd, value }]] : []
  }))
}

/** Takes what `find` finds off each reduced quantity; it may say itself what is left. */
function subtract(tracks: Tracks, find: (track: Track) => { removed: Float64Array, after?: Float64Array } | null): Done | null {
  const after: Tracks = {}
  const removed: Tracks = {}
  for (const quantity of reducedQuantities) {
    const track = tracks[quantity]
    const part = track && find(track)
    if (!track || !part) continue
    removed[quantity] = { mjd: track.mjd, value: part.removed }
    after[quantity] = part.after ? { mjd: track.mjd, value: part.after } : less(track, part.removed)
  }
  return Object.keys(after).length > 0 ? { after, removed } : null
}

function less({ mjd, value }: Track, part: Float64Array): Track {
  return { mjd, value: value.map((v, i) => v - part[i]!) }
}

function withoutTides({ lod, ut1 }: Tracks, set: 'all' | 'under-35-days'): Done | null {
  const epochs = (lod ?? ut1)?.mjd
  if (!epochs) return null
  // Length of day and UT1 stand on the same epochs of the file.
  const { lodMs, ut1Ms } = zonalTidesMs(epochs, set)
  return {
    after: { ...(lod ? { lod: less(lod, lodMs) } : {}), ...(ut1 ? { ut1: less(ut1, ut1Ms) } : {}) },
    removed: { ...(lod ? { lod: { mjd: epochs, value: lodMs } } : {}), ...(ut1 ? { ut1: { mjd: epochs, value: ut1Ms } } : {}) }
  }
}

function excite(series: ObservedSeries, tracks: Tracks, chandler: { periodDays: number, q: number }): Done | null {
  // A file that holds excitation in place of the pole is excitation already.
  if (tracks.chi1 || !tracks.x || !tracks.y) return null
  const excitation = excitationOfSeries(series, chandler)
  if (!excitation) return null
  const { mjd, chi1Mas, chi2Mas } = excitation
  const wobble = (value: Float64Array, sign: 1 | -1, chi: Float64Array): Float64Array => {
    const at = onEpochs({ mjd: series.mjd, stepDays: medianStep(series.mjd) }, value, mjd, 0)
    return chi.map((c, i) => sign * at[i]! - c)
  }
  return {
    shown: { chi1: tracks.x, chi2: { mjd: tracks.y.mjd, value: tracks.y.value.map(v => -v) } },
    removed: { chi1: { mjd, value: wobble(series.xMas, 1, chi1Mas) }, chi2: { mjd, value: wobble(series.yMas, -1, chi2Mas) } },
    after: { chi1: { mjd, value: chi1Mas }, chi2: { mjd, value: chi2Mas } }
  }
}

function subtractFluid(tracks: Tracks, step: Extract<ChainStep, { kind: 'angular-momentum' }>, correction: FluidCorrection, series: ObservedSeries): Done | null {
  const motion = step.motion && series.from !== 'gravity'
  const widthDays = medianStep(series.mjd)
  const after: Tracks = {}
  const removed: Tracks = {}
  for (const quantity of reducedQuantities) {
    const track = tracks[quantity]
    if (!track) continue
    const values = onEpochs(correction.series, correctionValues(correction, { mass: step.mass, motion }, quantity), track.mjd, widthDays)
    const part = withoutMean(track.mjd, values, !step.trend).removed
    removed[quantity] = { mjd: track.mjd, value: part }
    after[quantity] = less(track, part)
  }
  return Object.keys(after).length > 0 && (step.mass || motion) ? { after, removed } : null
}

function averageMonths(tracks: Tracks): Done {
  const after: Tracks = {}
  const counts: NonNullable<ChainResult['months']> = {}
  const all = chainQuantities.flatMap(quantity => tracks[quantity] ? [[quantity, tracks[quantity]] as const] : [])
  // The months of the whole record, the same for every quantity: excitation begins and ends half a step inside the pole.
  const from = Math.min(...all.map(([, { mjd }]) => mjd[0]!))
  const to = Math.max(...all.map(([, { mjd }]) => mjd.at(-1)!))
  const months = monthsBetween(from, to)
  for (const [quantity, { mjd, value }] of all) {
    const { samples, effectiveSamples, ...track } = monthsOf(mjd, value, months)
    after[quantity] = track
    counts[quantity] = { samples, effectiveSamples }
  }
  return { after, months: counts }
}

function panelsOf(before: Tracks, after: Tracks, removed: Tracks): StepPanel[] {
  return chainQuantities.flatMap((quantity): StepPanel[] => {
    const [first, last] = [before[quantity], after[quantity]]
    return first && last ? [{ quantity, unit: quantity === 'lod' || quantity === 'ut1' ? 'ms' : 'mas', before: first, removed: removed[quantity] ?? null, after: last }] : []
  })
}

/** The corrections that are on, with their places in the chain; refuses those that are missing or count water twice. */
function fluidsOf(chain: Chain, inputs: ChainInputs, gravity: boolean): { path: string, step: Extract<ChainStep, { kind: 'angular-momentum' }>, correction: FluidCorrection }[] {
  const wanted = chain.steps.flatMap((step, i) => step.on && step.kind === 'angular-momentum' ? [{ path: `steps/${i}`, step }] : [])
  const missing = wanted.filter(({ step }) => !inputs.corrections?.[step.correction])
  if (missing.length > 0) {
    throw new InputError('A series that the chain subtracts is not there', missing.map(({ path, step }) => ({
      path: `${path}/correction`, code: 'no-series', message: `There is no series “${step.correction.slice(0, 60)}” to subtract.`
    })))
  }
  const fluids = wanted.map(({ path, step }) => ({ path, step, correction: inputs.corrections![step.correction]! }))
  const refusals = fluidRefusals(fluids, gravity && inputs.gravity?.dealiasing === 'not-restored')
  if (refusals.length > 0) throw new InputError('The chain would count water twice', refusals)
  return fluids
}

