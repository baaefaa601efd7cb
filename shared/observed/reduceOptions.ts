import { mjdFromIsoDate } from '../earth/time/epochs.ts'
import { chandlerBand, defaultChandler } from '../earth/time/polarMotion.ts'
import type { ChandlerSettings } from '../earth/time/polarMotion.ts'
import type { ZonalTideSet } from '../earth/time/zonalTides.ts'
import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'

export interface Smoothing {
  kind: 'gaussian' | 'boxcar'
  /** Full width of the boxcar; full width at half maximum of the Gaussian; days. */
  widthDays: number
}

/** Steps of a reduction, all of them plain JSON, so that a chain can be stored, printed and run again. */
export interface ReduceOptions {
  /** true or 'all': the 62 terms of Table 8.1; 'under-35-days': the 41 short ones; false (default): none. */
  zonalTides?: boolean | ZonalTideSet
  /** Whether the pole is turned into geodetic excitation; default true. */
  excitation?: boolean
  /** Monthly means instead of the epochs of the file; default false. */
  monthly?: boolean
  /** Chandler period, days, and quality factor of the filter. */
  chandlerPeriodDays?: number
  q?: number
  includePredictions?: boolean
  /** First and last day, ISO dates, both included. */
  from?: string
  to?: string
  /** Takes the fitted annual and semiannual terms out of length of day and excitation; default false. */
  removeSeasons?: boolean
  smoothing?: Smoothing | null
}

export interface ReduceSettings {
  zonalTides: ZonalTideSet | 'none'
  excitation: boolean
  monthly: boolean
  chandler: ChandlerSettings
  includePredictions: boolean
  fromMjd: number | null
  toMjd: number | null
  removeSeasons: boolean
  smoothing: Smoothing | null
}

const known = new Set(['zonalTides', 'excitation', 'monthly', 'chandlerPeriodDays', 'q', 'includePredictions', 'from', 'to', 'removeSeasons', 'smoothing', 'csv', 'format'])

/**
 * Checks and completes the options of a reduction.
 * @throws InputError with one issue for each option that is unknown or out of its range
 */
export function reduceSettings(options: ReduceOptions): ReduceSettings {
  const issues: Issue[] = []
  const fault = (path: string, code: string, message: string): void => {
    issues.push({ path, code, message })
  }
  for (const name of Object.keys(options)) if (!known.has(name)) fault(name, 'unknown-option', `There is no option “${name.slice(0, 40)}”.`)
  for (const name of ['excitation', 'monthly', 'includePredictions', 'removeSeasons'] as const) {
    if (options[name] !== undefined && typeof options[name] !== 'boolean') fault(name, 'not-a-boolean', `“${name}” must be true or false.`)
  }
  const tides = options.zonalTides ?? false
  if (![true, false, 'all', 'under-35-days'].includes(tides)) fault('zonalTides', 'unknown-setting', 'zonalTides must be true, false, "all" or "under-35-days".')
  const chandler = { periodDays: options.chandlerPeriodDays ?? defaultChandler.periodDays, q: options.q ?? defaultChandler.q }
  const [shortest, longest] = chandlerBand.periodDays
  if (!(chandler.periodDays >= shortest && chandler.periodDays <= longest)) {
    fault('chandlerPeriodDays', 'chandler-band', `The Chandler period must be between ${shortest} and ${longest} days, the band that the rotational factor 1.608 belongs to.`)
  }
  if (!(chandler.q >= chandlerBand.q[0] && chandler.q <= chandlerBand.q[1])) fault('q', 'chandler-band', `The quality factor must be between ${chandlerBand.q[0]} and ${chandlerBand.q[1]}.`)
  const date = (name: 'from' | 'to'): number | null => {
    if (options[name] === undefined || options[name] === null) return null
    try {
      return mjdFromIsoDate(String(options[name]))
    } catch {
      fault(name, 'bad-date', `“${name}” must be a date like 2002-04-17.`)
      return null
    }
  }
  const fromMjd = date('from')
  const toMjd = date('to')
  if (fromMjd !== null && toMjd !== null && fromMjd > toMjd) fault('to', 'empty-span', 'The last day lies before the first.')
  const smoothing = options.smoothing ?? null
  if (smoothing && !(['gaussian', 'boxcar'].includes(smoothing.kind) && smoothing.widthDays > 0 && smoothing.widthDays <= 3660)) {
    fault('smoothing', 'unknown-setting', 'smoothing must be { kind: "gaussian" | "boxcar", widthDays } with a width of up to 3660 days.')
  }
  if (issues.length > 0) throw new InputError('Some options of the reduction do not hold', issues)
  return {
    zonalTides: tides === true ? 'all' : tides === false ? 'none' : tides,
    excitation: options.excitation ?? true,
    monthly: options.monthly ?? false,
    chandler,
    includePredictions: options.includePredictions ?? false,
    fromMjd,
    toMjd,
    removeSeasons: options.removeSeasons ?? false,
    smoothing
  }
}
