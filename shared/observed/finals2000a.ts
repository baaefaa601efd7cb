import { calendarFromMjd } from '../earth/time/epochs.ts'
import { ObservedColumns, scaledDecimal, ut1MinusTaiMs } from './columns.ts'
import type { ParsedObserved } from './columns.ts'

/** Fixed columns of finals2000A, 1-based and inclusive. Source: readme.finals2000A, IERS Rapid Service/Prediction Centre. */
const at = {
  date: [1, 6], mjd: [8, 15], poleFlag: [17, 17], x: [19, 27], sigmaX: [28, 36], y: [38, 46], sigmaY: [47, 55],
  ut1Flag: [58, 58], ut1: [59, 68], lod: [80, 86], sigmaLod: [87, 93]
} as const

function field(line: string, [from, to]: readonly [number, number]): string {
  return line.slice(from - 1, to)
}

/** Whether a line has the date and the MJD of finals2000A in their columns, agreeing with each other. */
export function isFinalsLine(line: string): boolean {
  const mjd = field(line, at.mjd)
  if (!/^\s*\d{5}\.\d\d$/.test(mjd) || !/^[\d ]{6}$/.test(field(line, at.date))) return false
  const flag = line.slice(15, 18)
  return (flag.trim() === '' || /^ [IP] ?$/.test(flag)) && dateAgrees(line, Number(mjd))
}

/**
 * Reads finals2000A (all, daily or data). Fields may touch, so the line is cut at its fixed columns. Rows with P in column 17
 * (pole) or 58 (UT1) are predictions; a P in column 96 is about the celestial pole and is not. Length of day is in
 * milliseconds and may be blank. Rows that hold a date and nothing else are counted, not listed.
 */
export function parseFinals2000a(text: string): ParsedObserved {
  const columns = new ObservedColumns()
  columns.understood.push('Read as IERS finals2000A, fixed columns: pole in arcseconds, length of day in milliseconds; predictions are marked.')
  text.split('\n').forEach((raw, index) => {
    const line = raw.endsWith('\r') ? raw.slice(0, -1) : raw
    if (line.trim() === '') return
    columns.rowsRead++
    const number = index + 1
    const mjd = Number(field(line, at.mjd))
    if (field(line, at.mjd).trim() === '' || !Number.isFinite(mjd)) {
      columns.refuse(number, 'no-mjd', 'Columns 8 to 15 hold no Modified Julian Date.', line.trim())
      return
    }
    if (!dateAgrees(line, mjd)) {
      columns.refuse(number, 'date-mismatch', `The date “${field(line, at.date)}” and the MJD ${mjd} do not agree.`, line.trim())
      return
    }
    if (line.slice(15).trim() === '') {
      columns.emptyRows++
      return
    }
    readRow(line, number, mjd, columns)
  })
  return columns.finish('finals2000a')
}

function readRow(line: string, number: number, mjd: number, columns: ObservedColumns): void {
  try {
    columns.add({
      mjd,
      predicted: field(line, at.poleFlag) === 'P' || field(line, at.ut1Flag) === 'P',
      xMas: scaledDecimal(field(line, at.x), 3),
      sigmaXMas: scaledDecimal(field(line, at.sigmaX), 3),
      yMas: scaledDecimal(field(line, at.y), 3),
      sigmaYMas: scaledDecimal(field(line, at.sigmaY), 3),
      ut1MinusTaiMs: ut1MinusTaiMs(field(line, at.ut1), mjd),
      lodMs: scaledDecimal(field(line, at.lod), 0),
      sigmaLodMs: scaledDecimal(field(line, at.sigmaLod), 0)
    }, number)
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    columns.refuse(number, 'not-a-number', `The row could not be read: ${error.message}.`, line.trim())
  }
}

function dateAgrees(line: string, mjd: number): boolean {
  const { year, month, day } = calendarFromMjd(mjd)
  return Number(line.slice(0, 2)) === year % 100 && Number(line.slice(2, 4)) === month && Number(line.slice(4, 6)) === day
}
