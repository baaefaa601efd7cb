import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'
import { parsePeriod, periodBetween } from './epochColumn.ts'
import type { EpochFormat, ParsedEpoch } from './epochColumn.ts'
import { isMissing, parseNumber } from './numbers.ts'
import type { Steps } from './steps.ts'
import type { Table } from './table.ts'

export interface MassSeriesRow {
  /** Line in the file, counted from 1. */
  row: number
  epochText: string
  /** The epoch, the middle of the period where the row has one. */
  mjd: number
  /** Beginning and end of the row's period; both the epoch itself for a point in time. */
  startMjd: number
  endMjd: number
  valueText: string
  /** Value and one-sigma as the file has them, in its unit and sign. */
  value: number
  sigma: number | null
}

/** A cell that was put right by hand; the file itself stays as it is. */
export interface CellEdit { row: number, column: number, text: string }
/** A row that is left out on purpose, with the reason that was given. */
export interface RowLeftOut { row: number, reason: string }

/** How rows are read. */
export interface RowChoices {
  epochColumn: number
  endColumn: number | null
  /** Month, and day, beside the year in `epochColumn`. */
  monthColumn: number | null
  dayColumn: number | null
  valueColumn: number
  sigmaColumn: number | null
  epochFormat: EpochFormat
  endDayIncluded: boolean
  missingValues: string[]
  edits: CellEdit[]
  leaveOut: RowLeftOut[]
}

export interface RowsRead {
  /** Good rows in order of time. */
  rows: MassSeriesRow[]
  /** One entry for each row that cannot be used, in order of the file. */
  issues: Issue[]
  /** Rows that were left out on purpose. */
  leftOut: (RowLeftOut & { text: string })[]
  /** Cells as they were before they were put right. */
  edited: (CellEdit & { was: string })[]
  /** Good rows that stood before an earlier one. */
  sortedRows: number
}

/** Rows that are read between two pauses. */
const CHUNK = 5000

/**
 * Reads the rows of a table. Every row of the file goes to one of three places: the good rows, the issues, or those left out on
 * purpose.
 *
 * @throws InputError for an edit or a row to leave out that the file does not have
 */
export function* rowSteps(table: Table, chosen: RowChoices): Steps<RowsRead> {
  const read: RowsRead = { rows: [], issues: [], leftOut: [], edited: [], sortedRows: 0 }
  const leaveOut = new Map(chosen.leaveOut.map(({ row, reason }) => [row, reason]))
  const edits = new Map<number, CellEdit[]>()
  for (const edit of chosen.edits) edits.set(edit.row, [...edits.get(edit.row) ?? [], edit])
  checkLines(table, [...leaveOut.keys(), ...edits.keys()])

  for (const { line, text } of table.broken) {
    const reason = leaveOut.get(line)
    if (reason !== undefined) read.leftOut.push({ row: line, reason, text: text.slice(0, 200) })
    else read.issues.push({ row: line, value: text.slice(0, 60), code: 'open-quote', message: 'A quotation mark in this row is never closed.' })
  }
  const lineOfEpoch = new Map<number, number>()
  let latest = -Infinity
  for (let k = 0; k < table.rows.length; k++) {
    if (k > 0 && k % CHUNK === 0) yield 0.7 + 0.3 * k / table.rows.length
    const { line, cells: original } = table.rows[k]!
    const reason = leaveOut.get(line)
    if (reason !== undefined) {
      read.leftOut.push({ row: line, reason, text: original.join(' ').slice(0, 200) })
      continue
    }
    const cells = edits.has(line) ? edited(original, edits.get(line)!, read.edited) : original
    const row = readRow(line, cells, chosen, table)
    if ('code' in row) {
      read.issues.push(row)
      continue
    }
    const earlier = lineOfEpoch.get(row.mjd)
    if (earlier !== undefined) {
      read.issues.push({ row: line, column: nameOf(table, chosen.epochColumn), value: row.epochText, code: 'duplicate-epoch', message: `The epoch stands in row ${earlier} already.` })
      continue
    }
    lineOfEpoch.set(row.mjd, line)
    if (row.mjd < latest) read.sortedRows++
    latest = Math.max(latest, row.mjd)
    read.rows.push(row)
  }
  read.rows.sort((a, b) => a.mjd - b.mjd)
  read.issues.sort((a, b) => a.row! - b.row!)
  read.leftOut.sort((a, b) => a.row - b.row)
  return read
}

function checkLines(table: Table, asked: number[]): void {
  if (asked.length === 0) return
  const lines = new Set([...table.rows, ...table.broken].map(({ line }) => line))
  const missing = asked.filter(line => !lines.has(line))
  if (missing.length > 0) {
    throw new InputError('A row that was put right or left out is not in the file', missing.map(row => ({ row, code: 'no-such-row', message: `The file has no data in row ${row}.` })))
  }
}

function edited(original: string[], edits: CellEdit[], done: RowsRead['edited']): string[] {
  const cells = [...original]
  for (const edit of edits) {
    done.push({ ...edit, was: cells[edit.column] ?? '' })
    while (cells.length <= edit.column) cells.push('')
    cells[edit.column] = edit.text
  }
  return cells
}

/** A good row, or the first thing that is wrong with it. */
function readRow(line: number, cells: string[], chosen: RowChoices, table: Table): MassSeriesRow | Issue {
  const fault = (index: number, code: string, message: string): Issue =>
    ({ row: line, column: nameOf(table, index), value: (cells[index] ?? '').trim().slice(0, 60), code, message })
  const { epochColumn, endColumn, monthColumn, dayColumn, valueColumn, sigmaColumn, epochFormat } = chosen
  const needed = Math.max(epochColumn, endColumn ?? 0, monthColumn ?? 0, dayColumn ?? 0, valueColumn, sigmaColumn ?? 0)
  if (cells.length <= needed) return fault(needed, 'missing-cell', `The row has ${cells.length} cells; column ${needed + 1} is missing.`)

  const parts = [epochColumn, monthColumn, dayColumn].flatMap(column => column === null ? [] : [cells[column]!.trim()])
  const epochText = monthColumn === null ? parts[0]! : parts.map(part => /^\d$/.test(part) ? `0${part}` : part).join('-')
  const endText = endColumn === null ? null : cells[endColumn]!.trim()
  let epoch: ParsedEpoch
  try {
    epoch = endText === null
      ? parsePeriod(epochText, epochFormat, table.decimalComma, chosen.endDayIncluded)
      : periodBetween(epochText, endText, epochFormat, table.decimalComma, chosen.endDayIncluded)
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    return fault(epochColumn, parts.some(part => isMissing(part)) ? 'missing-epoch' : 'bad-epoch', `The epoch cannot be read: ${error.message}.`)
  }
  const valueText = cells[valueColumn]!.trim()
  if (isMissing(valueText, chosen.missingValues)) return fault(valueColumn, 'missing-value', 'The row has no value.')
  const value = parseNumber(valueText, table.decimalComma)
  if (!Number.isFinite(value)) return fault(valueColumn, 'not-a-number', `“${valueText.slice(0, 40)}” is not a number${hint(valueText, table.decimalComma)}.`)
  const row = { row: line, epochText: endText === null ? epochText : `${epochText} to ${endText}`, ...epoch, valueText, value }
  if (sigmaColumn === null) return { ...row, sigma: null }

  const sigmaText = cells[sigmaColumn]!.trim()
  if (isMissing(sigmaText, chosen.missingValues)) return fault(sigmaColumn, 'missing-sigma', 'The row has no one-sigma. Choose no one-sigma column to use it all the same.')
  const sigma = parseNumber(sigmaText, table.decimalComma)
  if (!Number.isFinite(sigma)) return fault(sigmaColumn, 'not-a-number', `“${sigmaText.slice(0, 40)}” is not a number${hint(sigmaText, table.decimalComma)}.`)
  if (!(sigma > 0)) return fault(sigmaColumn, 'sigma-not-positive', `A one-sigma must be positive, got ${sigmaText}.`)
  return { ...row, sigma }
}

function hint(text: string, decimalComma: boolean): string {
  if (!decimalComma && /^[+\-\u2212]?\d+,\d+$/.test(text)) return '; is the comma a decimal comma?'
  return decimalComma && /^[+\-\u2212]?\d+\.\d+$/.test(text) ? '; is the point a decimal point?' : ''
}

function nameOf(table: Table, index: number): string {
  return table.header?.[index]?.trim() || `column ${index + 1}`
}
