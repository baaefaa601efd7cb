import { calendarFromMjd, JULIAN_YEAR_DAYS } from '../earth/time/epochs.ts'
import { formatDate } from '../format/numbers.ts'
import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'
import type { Replayed, SeriesFactor, SeriesTable } from './recipe.ts'

/** Edges of two periods that are nearer than this, days, are one. */
const SAME_EDGE_DAYS = 1e-6

/**
 * Length of a period in years: whole years where it ends on the day of the year on which it began (a calendar or a balance year is
 * one year, leap or not), else days over 365.25.
 */
export function periodYears(startMjd: number, endMjd: number): number {
  const from = calendarFromMjd(startMjd)
  const to = calendarFromMjd(endMjd)
  const whole = from.month === to.month && from.day === to.day && startMjd % 1 === endMjd % 1
  return whole ? to.year - from.year : (endMjd - startMjd) / JULIAN_YEAR_DAYS
}

/** A state that is carried through the steps of a recipe. */
export type Running = Pick<Replayed, 'mjd' | 'massGt' | 'sigmaGt' | 'walkGt2' | 'factors'>

/**
 * Running sum of rates (or of amounts per period) over periods that follow one another: the value 0 at the first beginning, then one
 * at each end. Independent errors of the periods become a walk; loadings of shared errors are summed like the values.
 *
 * @throws InputError where rows have no periods, where periods overlap, and where they leave a gap, across which nothing is assumed
 */
export function integratePeriods(state: Running, table: SeriesTable, perPeriod: boolean): Running {
  const { startMjd, endMjd } = table
  if (!startMjd || !endMjd) {
    throw new InputError('Rates need periods', [{ path: 'epochColumn', code: 'periods-missing', message: 'A rate is integrated over the period of its row: give epochs as years, months, or a beginning and an end.' }])
  }
  checkPeriods(startMjd, endMjd)
  const n = startMjd.length
  const amounts = Array.from({ length: n }, (_, i) => perPeriod ? 1 : periodYears(startMjd[i]!, endMjd[i]!))
  const summed = (x: ArrayLike<number>): number[] => {
    const out = [0]
    for (let i = 0; i < n; i++) out.push(out[i]! + x[i]! * amounts[i]!)
    return out
  }
  const { sigmaGt } = state
  return {
    mjd: [startMjd[0]!, ...endMjd],
    massGt: summed(state.massGt),
    sigmaGt: null,
    walkGt2: sigmaGt ? [0, ...sigmaGt.map((s, i) => (s * amounts[i]!) ** 2)] : null,
    factors: state.factors.map((factor): SeriesFactor => ({ ...factor, loading: Float64Array.from(summed(factor.loading)) }))
  }
}

function checkPeriods(startMjd: number[], endMjd: number[]): void {
  const issues: Issue[] = []
  for (let i = 0; i < startMjd.length; i++) {
    const period = `${formatDate(startMjd[i]!)} to ${formatDate(endMjd[i]!)}`
    if (!(endMjd[i]! > startMjd[i]!)) issues.push({ code: 'period-empty', value: period, message: `A period must end after it begins, got ${period}.` })
    if (i === 0) continue
    const step = startMjd[i]! - endMjd[i - 1]!
    if (step > SAME_EDGE_DAYS) {
      issues.push({ code: 'period-gap', value: period, message: `Nothing is given from ${formatDate(endMjd[i - 1]!)} to ${formatDate(startMjd[i]!)}. A sum cannot cross a gap: give the rate there, or cut the series.` })
    } else if (step < -SAME_EDGE_DAYS) {
      issues.push({ code: 'period-overlap', value: period, message: `The period ${period} begins before the one before it has ended.` })
    }
  }
  if (issues.length > 0) throw new InputError('The periods cannot be summed', issues)
}
