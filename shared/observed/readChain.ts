import { mjdFromIsoDate } from '../earth/time/epochs.ts'
import { chandlerBand, defaultChandler } from '../earth/time/polarMotion.ts'
import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'
import type { BackgroundRow } from '../types/run.ts'
import type { Chain, ChainStep, ChainStepKind } from './chainTypes.ts'
import { reduceSettings } from './reduceOptions.ts'
import type { ReduceOptions, ReduceSettings, Smoothing } from './reduceOptions.ts'

/** Settings that each kind of step has beside `kind` and `on`. */
const settingsOf: Record<ChainStepKind, readonly string[]> = {
  'zonal-tides': ['set'], 'excitation': ['periodDays', 'q'], 'angular-momentum': ['correction', 'mass', 'motion', 'trend'], 'background': ['rows'],
  'seasons': [], 'smoothing': ['smoothing'], 'monthly': [], 'detrend': []
}
/** Steps that must come before another, and why. */
const orders: readonly (readonly [before: ChainStepKind, after: ChainStepKind, why: string])[] = [
  ['zonal-tides', 'smoothing', 'smoothed tides are no longer those of the table'],
  ['zonal-tides', 'monthly', 'monthly means of fortnightly tides are no longer those of the table'],
  ['excitation', 'angular-momentum', 'angular momentum is subtracted from excitation, not from the pole'],
  ['excitation', 'seasons', 'the season is fitted to the excitation'],
  ['excitation', 'smoothing', 'a smoothed pole gives no excitation'],
  ['excitation', 'monthly', 'monthly poles are too far apart for the filter'],
  ['angular-momentum', 'seasons', 'the season that is left is fitted after atmosphere and ocean are out'],
  ['angular-momentum', 'smoothing', 'both series must be smoothed alike'],
  ['angular-momentum', 'monthly', 'both series must be averaged alike'],
  ['angular-momentum', 'detrend', 'a trend that is out cannot be kept'],
  ['seasons', 'smoothing', 'a smoothed season is smaller'],
  ['smoothing', 'monthly', 'widths in days need the days']
]
const MOST_STEPS = 30
const MOST_ROWS = 50

/** The usual chain: all tides, excitation, nothing subtracted; seasons and days kept. */
export function defaultChain(): Chain {
  return {
    schemaVersion: 1, from: null, to: null, includePredictions: false,
    steps: [
      { kind: 'zonal-tides', on: true, set: 'all' },
      { kind: 'excitation', on: true, periodDays: defaultChandler.periodDays, q: defaultChandler.q },
      { kind: 'background', on: true, rows: [] },
      { kind: 'seasons', on: false },
      { kind: 'monthly', on: true }
    ]
  }
}

/** How a chain is called where it is stated: by the name that it is kept under, as the usual one, or as one of its own. */
export function titleOfChain({ name, chain }: { name: string | null, chain: Chain }): string {
  const works = ({ from, to, includePredictions, steps }: Chain): string =>
    JSON.stringify([from, to, includePredictions, steps.filter(step => step.on && !(step.kind === 'background' && step.rows.length === 0)).map(step => Object.entries(step).sort())])
  return name ? `the chain “${name}”` : works(chain) === works(defaultChain()) ? 'the usual chain' : 'a chain without a name'
}

/** The chain that does what the options of `reduceObserved` ask for. */
export function chainOf(options: ReduceOptions): Chain {
  const settings: ReduceSettings = reduceSettings(options)
  return {
    schemaVersion: 1, from: options.from ?? null, to: options.to ?? null, includePredictions: settings.includePredictions,
    steps: [
      { kind: 'zonal-tides', on: settings.zonalTides !== 'none', set: settings.zonalTides === 'none' ? 'all' : settings.zonalTides },
      { kind: 'excitation', on: settings.excitation, ...settings.chandler },
      { kind: 'seasons', on: settings.removeSeasons },
      ...(settings.smoothing ? [{ kind: 'smoothing', on: true, smoothing: settings.smoothing } as const] : []),
      { kind: 'monthly', on: settings.monthly }
    ]
  }
}

/**
 * Checks a chain that was stored or sent; the same JSON gives the same chain.
 * @throws InputError with one issue for each setting that is unknown, missing, out of its range, or out of order
 */
export function readChain(json: unknown): Chain {
  const issues: Issue[] = []
  const fault = (path: string, code: string, message: string): void => {
    issues.push({ path, code, message })
  }
  const source = isObject(json) ? json : {}
  if (!isObject(json)) fault('', 'not-a-chain', 'A chain is an object with steps.')
  if (isObject(json) && source.schemaVersion !== 1) fault('schemaVersion', 'unknown-version', 'The chain must have schemaVersion 1.')
  const date = (name: 'from' | 'to'): string | null => {
    const value = source[name] ?? null
    try {
      if (value !== null) mjdFromIsoDate(String(value))
    } catch {
      fault(name, 'bad-date', `“${name}” must be a date like 2002-04-17, or null.`)
    }
    return value === null ? null : String(value)
  }
  const chain: Chain = { schemaVersion: 1, from: date('from'), to: date('to'), includePredictions: source.includePredictions === true, steps: [] }
  if (source.includePredictions !== undefined && typeof source.includePredictions !== 'boolean') fault('includePredictions', 'not-a-boolean', '“includePredictions” must be true or false.')
  if (issues.length === 0 && chain.from && chain.to && mjdFromIsoDate(chain.from) > mjdFromIsoDate(chain.to)) fault('to', 'empty-span', 'The last day lies before the first.')
  const steps = Array.isArray(source.steps) ? source.steps as unknown[] : []
  if (isObject(json) && (!Array.isArray(source.steps) || steps.length > MOST_STEPS)) fault('steps', 'not-a-list', `“steps” must be a list of up to ${MOST_STEPS} steps.`)
  else steps.forEach((step, i) => {
    const read = readStep(step, `steps/${i}`, fault)
    if (read) chain.steps.push(read)
  })
  if (issues.length === 0) checkOrder(chain.steps, fault)
  if (issues.length > 0) throw new InputError('The chain does not hold', issues)
  return chain
}

type Fault = (path: string, code: string, message: string) => void

function readStep(step: unknown, path: string, fault: Fault): ChainStep | null {
  if (!isObject(step) || typeof step.kind !== 'string' || !(step.kind in settingsOf)) {
    fault(path, 'unknown-step', `A step must be one of ${Object.keys(settingsOf).join(', ')}.`)
    return null
  }
  const kind = step.kind as ChainStepKind
  for (const name of Object.keys(step)) if (!['kind', 'on', ...settingsOf[kind]].includes(name)) fault(`${path}/${name}`, 'unknown-setting', `The step “${kind}” has no setting “${name.slice(0, 40)}”.`)
  const flag = (name: string): boolean => {
    if (typeof step[name] !== 'boolean') fault(`${path}/${name}`, 'not-a-boolean', `“${name}” must be true or false.`)
    return step[name] === true
  }
  const on = flag('on')
  switch (kind) {
    case 'zonal-tides':
      if (step.set !== 'all' && step.set !== 'under-35-days') fault(`${path}/set`, 'unknown-setting', '“set” must be "all" or "under-35-days".')
      return { kind, on, set: step.set === 'under-35-days' ? 'under-35-days' : 'all' }
    case 'excitation': {
      const [periodDays, q] = [Number(step.periodDays), Number(step.q)]
      const inside = (value: number, [low, high]: readonly [number, number]): boolean => value >= low && value <= high
      if (!inside(periodDays, chandlerBand.periodDays)) fault(`${path}/periodDays`, 'chandler-band', `The Chandler period must be between ${chandlerBand.periodDays.join(' and ')} days, the band that the rotational factor 1.608 belongs to.`)
      if (!inside(q, chandlerBand.q)) fault(`${path}/q`, 'chandler-band', `The quality factor must be between ${chandlerBand.q.join(' and ')}.`)
      return { kind, on, periodDays, q }
    }
    case 'angular-momentum':
      if (typeof step.correction !== 'string' || step.correction === '') fault(`${path}/correction`, 'no-series', 'The step needs the series that is subtracted.')
      return { kind, on, correction: String(step.correction), mass: flag('mass'), motion: flag('motion'), trend: flag('trend') }
    case 'background':
      return { kind, on, rows: readRows(step.rows, `${path}/rows`, fault) }
    case 'smoothing':
      return { kind, on, smoothing: readSmoothing(step.smoothing, `${path}/smoothing`, fault) }
    default:
      return { kind, on }
  }
}

function readSmoothing(value: unknown, path: string, fault: Fault): Smoothing {
  const { kind, widthDays } = isObject(value) ? value : {}
  const known = kind === 'gaussian' || kind === 'boxcar'
  if (!known || typeof widthDays !== 'number' || !(widthDays > 0 && widthDays <= 3660)) {
    fault(path, 'unknown-setting', 'smoothing must be { kind: "gaussian" | "boxcar", widthDays } with a width of up to 3660 days.')
  }
  return { kind: known ? kind : 'gaussian', widthDays: Number(widthDays) }
}

function readRows(value: unknown, path: string, fault: Fault): BackgroundRow[] {
  if (!Array.isArray(value) || value.length > MOST_ROWS) {
    fault(path, 'not-a-list', `“rows” must be a list of up to ${MOST_ROWS} background rates.`)
    return []
  }
  return value.flatMap((row: unknown, i): BackgroundRow[] => {
    const at = `${path}/${i}`
    if (!isObject(row) || typeof row.key !== 'string' || typeof row.name !== 'string' || typeof row.source !== 'string') {
      fault(at, 'not-a-row', 'A background rate needs key, name and source.')
      return []
    }
    if (/secular\s+pole/i.test(`${row.name} ${row.key.replace(/-/g, ' ')}`)) fault(at, 'secular-pole', 'The secular pole is the observed drift itself: it is drawn, never subtracted.')
    const core = row.core ?? null
    if (core !== null && core !== 'decoupled' && core !== 'coupled') fault(`${at}/core`, 'unknown-setting', '“core” must be "decoupled", "coupled" or null.')
    const rate = (name: string): { value: number, sigma: number } | null => {
      const given = row[name] ?? null
      if (given === null) return null
      const ok = isObject(given) && Number.isFinite(given.value) && typeof given.sigma === 'number' && given.sigma >= 0 && Number.isFinite(given.sigma)
      if (!ok) fault(`${at}/${name}`, 'not-a-rate', 'A rate needs a value and a one-sigma that is not negative.')
      return isObject(given) ? { value: Number(given.value), sigma: Number(given.sigma) } : null
    }
    return [{
      key: row.key, name: row.name, source: row.source, core: core as BackgroundRow['core'],
      lodMsPerCentury: rate('lodMsPerCentury'), chi1MasPerYear: rate('chi1MasPerYear'), chi2MasPerYear: rate('chi2MasPerYear')
    }]
  })
}

function checkOrder(steps: readonly ChainStep[], fault: Fault): void {
  const active = steps.map((step, i) => ({ step, i })).filter(({ step }) => step.on)
  for (const kind of ['zonal-tides', 'excitation', 'seasons', 'monthly', 'detrend', 'smoothing'] as const) {
    const of = active.filter(({ step }) => step.kind === kind)
    if (of.length > 1) fault(`steps/${of[1]!.i}`, 'twice', `The step “${kind}” is in the chain twice.`)
  }
  for (const [before, after, why] of orders) {
    const first = active.find(({ step }) => step.kind === after)
    const late = first && active.find(({ step, i }) => step.kind === before && i > first.i)
    if (late) fault(`steps/${late.i}`, 'order', `“${before}” must come before “${after}”: ${why}.`)
  }
}

function isObject(value: unknown): value is Record<string, unknown> {
  return typeof value === 'object' && value !== null && !Array.isArray(value)
}
