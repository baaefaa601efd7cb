import { InputError } from '../../types/issue.ts'
import type { Issue } from '../../types/issue.ts'
import type { RunInput, RunRegionInput } from '../../types/run.ts'
import { monthsBetween } from './epochs.ts'
import type { CalendarMonth } from './epochs.ts'

export interface Span { fromMjd: number, toMjd: number }

/** Fewest epochs of a region inside the span. */
export const LEAST_EPOCHS = 3

/**
 * The span of a run: as set, else what all series have in common (those switched off left out), with the calendar months whose
 * middles it holds.
 *
 * @throws InputError when nothing is switched on, when the series have no time in common, or for a span without a month
 */
export function spanOf(regions: readonly RunRegionInput[], settings: RunInput['settings']): { span: Span, months: CalendarMonth[] } {
  const active = regions.filter(region => region.scale !== 0)
  if (active.length === 0) fail('no-region', 'regions', 'No region is switched on: the run would be empty.')
  let fromMjd = settings.fromMjd
  let toMjd = settings.toMjd
  if (fromMjd === null || toMjd === null) {
    const latestStart = Math.max(...active.map(region => region.series.mjd[0]!))
    const earliestEnd = Math.min(...active.map(region => region.series.mjd.at(-1)!))
    fromMjd ??= latestStart
    toMjd ??= earliestEnd
  }
  if (!(fromMjd < toMjd)) {
    fail('no-common-span', 'settings', settings.fromMjd === null && settings.toMjd === null
      ? 'The series have no time in common. Set a span, or switch regions off.'
      : `The span must end after it begins, got MJD ${fromMjd} to ${toMjd}.`)
  }
  const months = monthsBetween(fromMjd, toMjd)
  if (months.length === 0) fail('span-too-short', 'settings', 'The span holds no middle of a calendar month.')
  return { span: { fromMjd, toMjd }, months }
}

/** Checks that each series is in order and has enough epochs inside the span; all faults in one InputError. */
export function checkSeries(regions: readonly RunRegionInput[]): void {
  const issues: Issue[] = []
  regions.forEach(({ name, series: { mjd, massGt, sigmaGt, sharedRates }, scale }, i) => {
    const path = `regions/${i}/series`
    const add = (code: string, message: string): void => {
      issues.push({ path, code, message: `${name}: ${message}` })
    }
    if (mjd.length === 0) add('no-epochs', 'the series is empty.')
    if (massGt.length !== mjd.length) add('unequal-lengths', `${mjd.length} epochs but ${massGt.length} masses.`)
    if (sigmaGt && sigmaGt.length !== mjd.length) add('unequal-lengths', `${mjd.length} epochs but ${sigmaGt.length} one-sigmas.`)
    if (![...mjd, ...massGt].every(Number.isFinite)) add('not-finite', 'epochs and masses must be finite numbers.')
    if (mjd.some((t, k) => k > 0 && t <= mjd[k - 1]!)) add('epoch-order', 'epochs must increase.')
    if (sigmaGt?.some(s => !(s > 0) || !Number.isFinite(s))) add('sigma-not-positive', 'one-sigmas must be positive.')
    // The sign says which way a source moves this series: one that raises a region may lower another.
    if (sharedRates.some(s => !Number.isFinite(s.sigmaGtPerYear))) add('not-finite', 'systematic one-sigmas must be finite.')
    if (!Number.isFinite(scale)) issues.push({ path: `regions/${i}/scale`, code: 'not-finite', message: `${name}: the factor must be a finite number.` })
  })
  if (issues.length > 0) throw new InputError('Some series cannot be used', issues)
}

function fail(code: string, path: string, message: string): never {
  throw new InputError(message, [{ path, code, message }])
}
