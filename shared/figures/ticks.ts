import { decimalYear, monthStarts, yearStart } from './calendar.ts'
import { formatLongDate, formatYear, monthNames } from '../format/dates.ts'

/** Decimals that tell neighbouring ticks apart. */
export function tickDecimals(ticks: readonly number[]): number {
  if (ticks.length < 2) return ticks.length && ticks[0] !== 0 ? Math.max(0, 1 - Math.floor(Math.log10(Math.abs(ticks[0]!)))) : 0
  const step = Math.abs(ticks[1]! - ticks[0]!)
  return Math.max(0, -Math.floor(Math.log10(step) + 1e-9))
}

export interface TimeTick { mjd: number, text: string }

const yearSteps = [1, 2, 5, 10, 20, 50, 100, 200, 500]

/** Ticks of a time axis in MJD, about `count` of them: whole years, or months in a span below three years, or days. */
export function timeTicks(fromMjd: number, toMjd: number, count: number): TimeTick[] {
  const [from, to] = [decimalYear(fromMjd), decimalYear(toMjd)]
  const years = to - from
  if (years / count > 0.4) {
    const step = yearSteps.find(candidate => years / candidate <= count) ?? 1000
    const ticks: TimeTick[] = []
    for (let year = Math.ceil(from / step - 1e-9) * step; year <= to + 1e-9; year += step) {
      ticks.push({ mjd: yearStart(year), text: formatYear(yearStart(year)) })
    }
    return ticks
  }
  const months = monthStarts(fromMjd, toMjd)
  if (months.length >= 2) {
    const step = [1, 2, 3, 6].find(candidate => months.length / candidate <= count) ?? 12
    return months
      .filter(({ month }) => month % step === 0)
      .map(({ mjd, month, year }) => ({ mjd, text: month === 0 ? String(year) : `${monthNames[month]!.slice(0, 3)} ${year}` }))
  }
  const step = Math.max(1, Math.ceil((toMjd - fromMjd) / Math.max(1, count)))
  const ticks: TimeTick[] = []
  for (let mjd = Math.ceil(fromMjd); mjd <= toMjd && ticks.length < 50; mjd += step) ticks.push({ mjd, text: dayText(mjd) })
  return ticks
}

function dayText(mjd: number): string {
  const [day, rest] = formatLongDate(mjd).split('\u00a0') as [string, string]
  return `${day} ${rest.slice(0, 3)}`
}
