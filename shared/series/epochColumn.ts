import { calendarMonth, mjdFromDecimalYear, mjdFromIsoDate } from '../earth/time/epochs.ts'
import { parseNumber } from './numbers.ts'

export const epochFormats = ['iso-date', 'year-month', 'decimal-year', 'mjd'] as const
export type EpochFormat = typeof epochFormats[number]

/** What each format means, word for word, for screens and the steps of a conversion. */
export const epochFormatTexts: Record<EpochFormat, string> = {
  'iso-date': 'Dates mean 0 h UTC of the day.',
  'year-month': 'A month stands for its middle.',
  'decimal-year': 'Decimal years are fractions of the calendar year.',
  'mjd': 'Epochs are Modified Julian Dates.'
}

const expected: Record<EpochFormat, string> = {
  'iso-date': 'a date like 2002-04-17',
  'year-month': 'a year and month like 2002-04',
  'decimal-year': 'a decimal year between 1800 and 2200',
  'mjd': 'a Modified Julian Date between 1 and 200 000'
}

/** Epoch of a cell as MJD; RangeError with what was expected for one that does not hold. */
export function parseEpoch(cell: string, format: EpochFormat, decimalComma = false): number {
  const text = cell.trim()
  const fail = (): never => {
    throw new RangeError(`expected ${expected[format]}, got “${text.slice(0, 40)}”`)
  }
  if (format === 'iso-date') {
    try {
      return mjdFromIsoDate(text.replace(/^(\d{4})\/(\d{2})\/(\d{2})/, '$1-$2-$3').replace(/^(\d{4})(\d{2})(\d{2})$/, '$1-$2-$3'))
    } catch {
      return fail()
    }
  }
  if (format === 'year-month') {
    const match = /^(\d{4})[-/. ]?(\d{1,2})$/.exec(text)
    const month = Number(match?.[2])
    return match && month >= 1 && month <= 12 ? calendarMonth(Number(match[1]), month).middleMjd : fail()
  }
  const number = parseNumber(text, decimalComma)
  if (format === 'decimal-year') return number >= 1800 && number <= 2200 ? mjdFromDecimalYear(number) : fail()
  return number >= 1 && number <= 200_000 ? number : fail()
}

/** The format that most of the cells have, and the part of them that have it; null where none fits. */
export function recogniseEpochFormat(cells: readonly string[], decimalComma = false): { format: EpochFormat, share: number } | null {
  if (cells.length === 0) return null
  const tests: Record<EpochFormat, (text: string, number: number) => boolean> = {
    'iso-date': text => /^\d{4}[-/]\d{2}[-/]\d{2}/.test(text) || /^(18|19|20|21)\d{2}(0[1-9]|1[0-2])([0-2]\d|3[01])$/.test(text),
    'year-month': text => /^\d{4}[-/]\d{1,2}$/.test(text) || /^(18|19|20|21)\d{2}(0[1-9]|1[0-2])$/.test(text),
    'decimal-year': (_, number) => number >= 1800 && number < 2200,
    'mjd': (_, number) => number >= 15_000 && number < 100_000
  }
  let best: { format: EpochFormat, share: number } | null = null
  for (const format of epochFormats) {
    const fitting = cells.filter(cell => tests[format](cell.trim(), parseNumber(cell, decimalComma))).length
    if (fitting > 0 && fitting / cells.length > (best?.share ?? 0)) best = { format, share: fitting / cells.length }
  }
  return best
}
