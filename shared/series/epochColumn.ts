import { calendarMonth, daysInYear, mjdFromCalendar, mjdFromDecimalYear, mjdFromIsoDate } from '../earth/time/epochs.ts'
import { parseNumber } from './numbers.ts'

export const epochFormats = ['iso-date', 'year-month', 'day-of-year', 'decimal-year', 'mjd', 'year', 'period'] as const
export type EpochFormat = typeof epochFormats[number]

/** What each format means, word for word, for screens and the steps of a conversion. */
export const epochFormatTexts: Record<EpochFormat, string> = {
  'iso-date': 'Dates mean 0 h UTC of the day.',
  'year-month': 'A month stands for its middle.',
  'day-of-year': 'A day of the year means 0 h UTC; day 1 is 1 January.',
  'decimal-year': 'Decimal years are fractions of the calendar year.',
  'mjd': 'Epochs are Modified Julian Dates.',
  'year': 'A year stands for its middle, from 1 January to 1 January.',
  'period': 'A period stands for its middle.'
}

const expected: Record<EpochFormat, string> = {
  'iso-date': 'a date like 2002-04-17',
  'year-month': 'a year and month like 2002-04',
  'day-of-year': 'a year and day of the year like 2002-107',
  'decimal-year': 'a decimal year between 1800 and 2200',
  'mjd': 'a Modified Julian Date between 1 and 200 000',
  'year': 'a year like 2002',
  'period': 'a period like 2002-10-01/2003-09-30'
}

/** A cell that is a point in time has its period's ends in itself. */
export interface ParsedEpoch { mjd: number, startMjd: number, endMjd: number }

/** Epoch of a cell as MJD, the middle where the cell is a month, year or period; RangeError with what was expected for one that does not hold. */
export function parseEpoch(cell: string, format: EpochFormat, decimalComma = false): number {
  return parsePeriod(cell, format, decimalComma).mjd
}

/**
 * Epoch of a cell with the beginning and end of what it names, MJD: a month, a year, a period; both are the epoch itself for a point in
 * time. `endDayIncluded`: the last day of a period is part of it, so that it ends a day later.
 *
 * @throws RangeError with what was expected
 */
export function parsePeriod(cell: string, format: EpochFormat, decimalComma = false, endDayIncluded = false): ParsedEpoch {
  const text = cell.trim()
  const fail = (): never => {
    throw new RangeError(`expected ${expected[format]}, got “${text.slice(0, 40)}”`)
  }
  const point = (mjd: number): ParsedEpoch => ({ mjd, startMjd: mjd, endMjd: mjd })
  switch (format) {
    case 'iso-date': {
      try {
        return point(mjdFromIsoDate(text.replace(/^(\d{4})\/(\d{2})\/(\d{2})/, '$1-$2-$3').replace(/^(\d{4})(\d{2})(\d{2})$/, '$1-$2-$3')))
      } catch {
        return fail()
      }
    }
    case 'year-month': {
      const match = /^(\d{4})[-/. ]?(\d{1,2})$/.exec(text)
      const month = Number(match?.[2])
      if (!match || !(month >= 1 && month <= 12)) return fail()
      const { startMjd, middleMjd, endMjd } = calendarMonth(Number(match[1]), month)
      return { mjd: middleMjd, startMjd, endMjd }
    }
    case 'day-of-year': {
      const match = /^(\d{4})[-/ ]?(\d{3}(?:\.\d+)?)$/.exec(text)
      const year = Number(match?.[1])
      const day = Number(match?.[2])
      return match && day >= 1 && day < daysInYear(year) + 1 ? point(mjdFromCalendar(year, 1, 1) + day - 1) : fail()
    }
    case 'year': {
      if (!/^(1[89]|2[01])\d{2}$/.test(text)) return fail()
      const startMjd = mjdFromCalendar(Number(text), 1, 1)
      const endMjd = mjdFromCalendar(Number(text) + 1, 1, 1)
      return { mjd: (startMjd + endMjd) / 2, startMjd, endMjd }
    }
    case 'period': return periodOfCell(text, decimalComma, endDayIncluded) ?? fail()
    default: {
      const number = parseNumber(text, decimalComma)
      if (format === 'decimal-year') return number >= 1800 && number <= 2200 ? point(mjdFromDecimalYear(number)) : fail()
      return number >= 1 && number <= 200_000 ? point(number) : fail()
    }
  }
}

const pointFormats = ['iso-date', 'year-month', 'day-of-year', 'decimal-year', 'mjd'] as const

/** Looks of a cell in each format. Loose: what looks like a date and is none becomes an issue of its row. */
const looks: Record<Exclude<EpochFormat, 'year' | 'period'>, (text: string, number: number) => boolean> = {
  'iso-date': text => /^\d{4}[-/]\d{2}[-/]\d{2}/.test(text) || /^(18|19|20|21)\d{2}(0[1-9]|1[0-2])([0-2]\d|3[01])$/.test(text),
  'year-month': text => /^\d{4}[-/]\d{1,2}$/.test(text) || /^(18|19|20|21)\d{2}(0[1-9]|1[0-2])$/.test(text),
  'day-of-year': text => /^(18|19|20|21)\d{2}[-/ ]?[0-3]\d{2}(\.\d+)?$/.test(text) && !/^\d{4}\.\d+$/.test(text),
  'decimal-year': (_, number) => number >= 1800 && number < 2200,
  'mjd': (_, number) => number >= 15_000 && number < 100_000
}

/** Formats whose days are whole: the last day of a period may be part of it. */
export function hasWholeDays(format: EpochFormat): boolean {
  return format === 'iso-date' || format === 'day-of-year' || format === 'period'
}

/** The two cells in a cell like 2002-10-01/2003-09-30, 2002-10 – 2003-09 or 2002.75 to 2003.75, with their format; null where it is none. */
export function splitPeriod(text: string, decimalComma = false): { from: string, to: string, format: typeof pointFormats[number] } | null {
  const match = /^(.{4,}?)\s*(?:\/|–|—|\.\.+|\s-\s|\bto\b)\s*(.{4,})$/.exec(text.trim())
  if (!match) return null
  const [from, to] = [match[1]!.trim(), match[2]!.trim()]
  const format = pointFormats.find(f => looks[f](from, parseNumber(from, decimalComma)) && looks[f](to, parseNumber(to, decimalComma)))
  // Two bare years may be a hydrological year, of which the cell does not say when it begins.
  return format && !(/^\d{4}$/.test(from) && /^\d{4}$/.test(to)) ? { from, to, format } : null
}

function periodOfCell(text: string, decimalComma: boolean, endDayIncluded: boolean): ParsedEpoch | null {
  const parts = splitPeriod(text, decimalComma)
  return parts && periodBetween(parts.from, parts.to, parts.format, decimalComma, endDayIncluded)
}

/**
 * The period from one cell to another, of one format. The last month or year is part of it, the last day if `endDayIncluded`.
 * The epoch is the middle.
 *
 * @throws RangeError for cells that do not hold, and for an end that is not after the beginning
 */
export function periodBetween(from: string, to: string, format: EpochFormat, decimalComma = false, endDayIncluded = false): ParsedEpoch {
  const { startMjd } = parsePeriod(from, format, decimalComma)
  const endMjd = parsePeriod(to, format, decimalComma).endMjd + (endDayIncluded && hasWholeDays(format) ? 1 : 0)
  if (!(endMjd > startMjd)) throw new RangeError(`expected an end after the beginning, got “${from.trim().slice(0, 20)}” to “${to.trim().slice(0, 20)}”`)
  return { mjd: (startMjd + endMjd) / 2, startMjd, endMjd }
}

/**
 * The format that most of the cells have, and the part of them that have it; null where none fits.
 * Bare years are decimal years (the first of January) unless `yearsArePeriods`.
 */
export function recogniseEpochFormat(cells: readonly string[], decimalComma = false, yearsArePeriods = false): { format: EpochFormat, share: number } | null {
  if (cells.length === 0) return null
  const candidates: [EpochFormat, (text: string, number: number) => boolean][] = [
    ...(yearsArePeriods ? [['year', (text: string) => /^(18|19|20|21)\d{2}$/.test(text)] as [EpochFormat, (text: string) => boolean]] : []),
    // Before dates, since a period begins with one.
    ['period', text => splitPeriod(text, decimalComma) !== null],
    ...pointFormats.map((format): [EpochFormat, (text: string, number: number) => boolean] => [format, looks[format]])
  ]
  let best: { format: EpochFormat, share: number } | null = null
  for (const [format, test] of candidates) {
    const fitting = cells.filter(cell => test(cell.trim(), parseNumber(cell, decimalComma))).length
    if (fitting > 0 && fitting / cells.length > (best?.share ?? 0)) best = { format, share: fitting / cells.length }
  }
  return best
}
