import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'
import { epochFormatTexts, parseEpoch } from './epochColumn.ts'
import type { EpochFormat } from './epochColumn.ts'
import { conversionOf } from './massUnits.ts'
import type { MassUnit } from './massUnits.ts'
import { isMissing, parseNumber } from './numbers.ts'
import { recogniseMassColumns } from './recogniseColumns.ts'
import type { ColumnGuess } from './recogniseColumns.ts'
import { readTable } from './table.ts'
import type { Table, TableOptions } from './table.ts'

export interface MassSeriesOptions extends TableOptions {
  /** Columns counted from 0; absent: recognised. `sigmaColumn: null` reads no one-sigma though a column looks like one. */
  epochColumn?: number
  valueColumn?: number
  sigmaColumn?: number | null
  epochFormat?: EpochFormat
  unit?: MassUnit
  /** Ellipsoidal area of the region, m²; needed for heights. */
  areaM2?: number
  /** The file counts water taken out as positive: the sign is turned. */
  withdrawalPositive?: boolean
  /** Marks of a missing value besides blank, NaN and −9999. */
  missingValues?: string[]
}

export interface MassSeriesRow {
  /** Line in the file, counted from 1. */
  row: number
  epochText: string
  mjd: number
  valueText: string
  /** Value and one-sigma as the file has them, in its unit and sign. */
  value: number
  sigma: number | null
}

export interface MassSeriesReading {
  columns: { index: number, name: string, sample: string[], guess: ColumnGuess }[]
  /** Every choice as it was used: give it back as options, changed where it was wrong. */
  chosen: {
    epochColumn: number, valueColumn: number, sigmaColumn: number | null, epochFormat: EpochFormat, unit: MassUnit, areaM2: number | null
    withdrawalPositive: boolean, delimiter: Table['delimiter'], decimalComma: boolean, header: boolean, missingValues: string[]
  }
  /** Good rows in order of time. */
  rows: MassSeriesRow[]
  /** One entry for each row that cannot be used, in order of the file: rowsRead = rows.length + issues.length. */
  issues: Issue[]
  /** What the user should know and need not mend: rows that were sorted, values that look like another unit. */
  notices: Issue[]
  mjd: number[]
  /** Mass change in Gt on the same epochs, gain positive; one-sigma in Gt or null. */
  massGt: number[]
  sigmaGt: number[] | null
  conversion: { steps: string[], gtPerUnit: number }
  /** Data rows of the file: header, comments and blank lines are none. */
  rowsRead: number
}

/**
 * Reads a mass-change series from delimited text. Nothing is dropped in silence: each row of the file is either in `rows`
 * or in `issues`, with its line number and the reason.
 *
 * @throws InputError when the text is empty or too large, columns cannot be found, or an area is needed and missing
 */
export function readMassSeries(text: string, options: MassSeriesOptions = {}): MassSeriesReading {
  const table = readTable(text, options)
  const guess = recogniseMassColumns(table, options)
  const chosen: MassSeriesReading['chosen'] = {
    ...guess.chosen,
    areaM2: options.areaM2 ?? null,
    withdrawalPositive: options.withdrawalPositive ?? false,
    delimiter: table.delimiter,
    decimalComma: table.decimalComma,
    header: table.header !== null,
    missingValues: options.missingValues ?? []
  }
  checkColumns(chosen, table.width)
  const conversion = conversionOf(chosen.unit, chosen.areaM2, chosen.withdrawalPositive)
  const { rows, issues, sortedRows } = readRows(table, chosen)
  const sign = chosen.withdrawalPositive ? -1 : 1
  return {
    columns: guess.columns,
    chosen,
    rows,
    issues,
    notices: notices(rows, chosen.unit, sortedRows),
    mjd: rows.map(row => row.mjd),
    // + 0 turns −0 into 0, which JSON and people write the same.
    massGt: rows.map(row => sign * row.value * conversion.gtPerUnit + 0),
    sigmaGt: chosen.sigmaColumn === null ? null : rows.map(row => row.sigma! * conversion.gtPerUnit),
    conversion: { steps: [epochFormatTexts[chosen.epochFormat], ...conversion.steps], gtPerUnit: conversion.gtPerUnit },
    rowsRead: table.rows.length + table.broken.length
  }
}

function checkColumns(chosen: MassSeriesReading['chosen'], width: number): void {
  const issues: Issue[] = []
  for (const name of ['epochColumn', 'valueColumn', 'sigmaColumn'] as const) {
    const column = chosen[name]
    if (column !== null && !(Number.isInteger(column) && column >= 0 && column < width)) {
      issues.push({ path: name, code: 'no-such-column', message: `The file has ${width} columns; column ${column + 1} is none of them.` })
    }
  }
  if (chosen.epochColumn === chosen.valueColumn || chosen.valueColumn === chosen.sigmaColumn || chosen.epochColumn === chosen.sigmaColumn) {
    issues.push({ path: 'valueColumn', code: 'same-column', message: 'Epoch, value and one-sigma must be in different columns.' })
  }
  if (issues.length > 0) throw new InputError('The chosen columns do not fit the file', issues)
}

function readRows(table: Table, chosen: MassSeriesReading['chosen']): { rows: MassSeriesRow[], issues: Issue[], sortedRows: number } {
  const rows: MassSeriesRow[] = []
  const issues: Issue[] = table.broken.map(({ line, text }) => ({
    row: line, value: text.slice(0, 60), code: 'open-quote', message: 'A quotation mark in this row is never closed.'
  }))
  const lineOfEpoch = new Map<number, number>()
  let sortedRows = 0
  let latest = -Infinity
  for (const { line, cells } of table.rows) {
    const read = readRow(line, cells, chosen, table)
    if ('code' in read) {
      issues.push(read)
      continue
    }
    const earlier = lineOfEpoch.get(read.mjd)
    if (earlier !== undefined) {
      issues.push({ row: line, column: nameOf(table, chosen.epochColumn), value: read.epochText, code: 'duplicate-epoch', message: `The epoch stands in row ${earlier} already.` })
      continue
    }
    lineOfEpoch.set(read.mjd, line)
    if (read.mjd < latest) sortedRows++
    latest = Math.max(latest, read.mjd)
    rows.push(read)
  }
  rows.sort((a, b) => a.mjd - b.mjd)
  issues.sort((a, b) => a.row! - b.row!)
  return { rows, issues, sortedRows }
}

/** A good row, or the first thing that is wrong with it. */
function readRow(line: number, cells: string[], chosen: MassSeriesReading['chosen'], table: Table): MassSeriesRow | Issue {
  const fault = (index: number, code: string, message: string): Issue =>
    ({ row: line, column: nameOf(table, index), value: (cells[index] ?? '').trim().slice(0, 60), code, message })
  const needed = Math.max(chosen.epochColumn, chosen.valueColumn, chosen.sigmaColumn ?? 0)
  if (cells.length <= needed) return fault(needed, 'missing-cell', `The row has ${cells.length} cells; column ${needed + 1} is missing.`)

  const epochText = cells[chosen.epochColumn]!.trim()
  let mjd: number
  try {
    mjd = parseEpoch(epochText, chosen.epochFormat, chosen.decimalComma)
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    return fault(chosen.epochColumn, isMissing(epochText) ? 'missing-epoch' : 'bad-epoch', `The epoch cannot be read: ${error.message}.`)
  }
  const valueText = cells[chosen.valueColumn]!.trim()
  if (isMissing(valueText, chosen.missingValues)) return fault(chosen.valueColumn, 'missing-value', 'The row has no value.')
  const value = parseNumber(valueText, chosen.decimalComma)
  if (!Number.isFinite(value)) return fault(chosen.valueColumn, 'not-a-number', `“${valueText.slice(0, 40)}” is not a number${hint(valueText, chosen.decimalComma)}.`)
  if (chosen.sigmaColumn === null) return { row: line, epochText, mjd, valueText, value, sigma: null }

  const sigmaText = cells[chosen.sigmaColumn]!.trim()
  if (isMissing(sigmaText, chosen.missingValues)) return fault(chosen.sigmaColumn, 'missing-sigma', 'The row has no one-sigma. Choose no one-sigma column to use it all the same.')
  const sigma = parseNumber(sigmaText, chosen.decimalComma)
  if (!Number.isFinite(sigma)) return fault(chosen.sigmaColumn, 'not-a-number', `“${sigmaText.slice(0, 40)}” is not a number${hint(sigmaText, chosen.decimalComma)}.`)
  if (!(sigma > 0)) return fault(chosen.sigmaColumn, 'sigma-not-positive', `A one-sigma must be positive, got ${sigmaText}.`)
  return { row: line, epochText, mjd, valueText, value, sigma }
}

function hint(text: string, decimalComma: boolean): string {
  if (!decimalComma && /^[+\-\u2212]?\d+,\d+$/.test(text)) return '; is the comma a decimal comma?'
  return decimalComma && /^[+\-\u2212]?\d+\.\d+$/.test(text) ? '; is the point a decimal point?' : ''
}

function nameOf(table: Table, index: number): string {
  return table.header?.[index]?.trim() || `column ${index + 1}`
}

function notices(rows: MassSeriesRow[], unit: MassUnit, sortedRows: number): Issue[] {
  const found: Issue[] = []
  if (sortedRows > 0) {
    found.push({ code: 'sorted', message: `${sortedRows === 1 ? 'One row was' : `${sortedRows} rows were`} not in order of time; the rows have been sorted.` })
  }
  const largest = rows.reduce((most, row) => Math.max(most, Math.abs(row.value)), 0)
  const metres = unit === 'mm-we' ? largest / 1000 : unit === 'cm-we' ? largest / 100 : 0
  if (metres > 100) {
    found.push({ code: 'suspicious-unit', message: `The largest height is ${Math.round(metres)} m of water. Check the unit.` })
  }
  return found
}
