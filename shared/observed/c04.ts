import { mjdFromCalendar } from '../earth/time/epochs.ts'
import { ObservedColumns, scaledDecimal, ut1MinusTaiMs } from './columns.ts'
import type { ParsedObserved } from './columns.ts'

interface Layout {
  fields: number
  mjd: number
  x: number
  y: number
  ut1: number
  lod: number
  sigmaX: number
  sigmaY: number
  sigmaLod: number
}

/**
 * Fields of the two C04 layouts, counted from 0. 14 C04: year, month, day, MJD, x, y, UT1−UTC, LOD, dX, dY, then the six
 * errors. 20 C04: year, month, day, hour, MJD, x, y, UT1−UTC, dX, dY, x rate, y rate, LOD, then the eight errors.
 * Arcseconds and seconds. Source: the header lines of the files, IERS Earth Orientation Centre, Paris Observatory.
 */
const layouts: Record<'eop14c04' | 'eop20c04', Layout> = {
  eop14c04: { fields: 16, mjd: 3, x: 4, y: 5, ut1: 6, lod: 7, sigmaX: 10, sigmaY: 11, sigmaLod: 13 },
  eop20c04: { fields: 21, mjd: 4, x: 5, y: 6, ut1: 7, lod: 12, sigmaX: 13, sigmaY: 14, sigmaLod: 20 }
}

const dataLine = /^\s*\d{4}\s+\d{1,2}\s+\d{1,2}\s/

/** Which C04 layout a line has, by its date, the number of its fields and an MJD that agrees with the date; null for none. */
export function c04LayoutOf(line: string): 'eop14c04' | 'eop20c04' | null {
  if (!dataLine.test(line)) return null
  const fields = line.trim().split(/\s+/)
  for (const id of ['eop14c04', 'eop20c04'] as const) {
    const { fields: count, mjd } = layouts[id]
    if (fields.length === count && agrees(fields, Number(fields[mjd]))) return id
  }
  return null
}

/** Reads EOP 14 C04 or EOP 20 C04. Lines before the data and lines that begin with # are headers. */
export function parseC04(text: string, format: 'eop14c04' | 'eop20c04'): ParsedObserved {
  const layout = layouts[format]
  const columns = new ObservedColumns()
  const title = /EOP \(IERS\) (\d\d) C04/.exec(text.slice(0, 4000))
  const expectedTitle = format === 'eop14c04' ? '14' : '20'
  columns.understood.push(`Read as IERS EOP ${expectedTitle} C04: pole in arcseconds, length of day in seconds.`)
  if (title && title[1] !== expectedTitle) {
    columns.understood.push(`The title says ${title[1]} C04, whose columns are those of ${expectedTitle} C04.`)
  }
  let started = false
  text.split('\n').forEach((line, index) => {
    if (line.trim() === '' || line.trimStart().startsWith('#')) return
    if (!started && !dataLine.test(line)) return
    started = true
    columns.rowsRead++
    readRow(line, index + 1, layout, columns)
  })
  return columns.finish(format)
}

function readRow(line: string, number: number, layout: Layout, columns: ObservedColumns): void {
  const fields = line.trim().split(/\s+/)
  if (fields.length !== layout.fields) {
    columns.refuse(number, 'field-count', `The row has ${fields.length} fields; this format has ${layout.fields}.`, line.trim())
    return
  }
  const mjd = Number(fields[layout.mjd])
  if (!agrees(fields, mjd)) {
    columns.refuse(number, 'date-mismatch', `The date ${fields[0]}-${fields[1]}-${fields[2]} and the MJD ${fields[layout.mjd]} do not agree.`, fields[layout.mjd])
    return
  }
  try {
    columns.add({
      mjd,
      xMas: scaledDecimal(fields[layout.x]!, 3),
      yMas: scaledDecimal(fields[layout.y]!, 3),
      sigmaXMas: scaledDecimal(fields[layout.sigmaX]!, 3),
      sigmaYMas: scaledDecimal(fields[layout.sigmaY]!, 3),
      ut1MinusTaiMs: ut1MinusTaiMs(fields[layout.ut1]!, mjd),
      lodMs: scaledDecimal(fields[layout.lod]!, 3),
      sigmaLodMs: scaledDecimal(fields[layout.sigmaLod]!, 3)
    }, number)
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    columns.refuse(number, 'not-a-number', `The row could not be read: ${error.message}.`, line.trim())
  }
}

function agrees(fields: string[], mjd: number): boolean {
  return Number.isFinite(mjd) && mjdFromCalendar(Number(fields[0]), Number(fields[1]), Number(fields[2])) === Math.floor(mjd)
}
