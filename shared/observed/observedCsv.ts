import { InputError } from '../types/issue.ts'
import { epochFormatTexts, parseEpoch, recogniseEpochFormat } from '../series/epochColumn.ts'
import type { EpochFormat } from '../series/epochColumn.ts'
import { isMissing, parseNumber } from '../series/numbers.ts'
import { readTable } from '../series/table.ts'
import type { Table, TableOptions } from '../series/table.ts'
import { ObservedColumns, observedQuantities } from './columns.ts'
import type { ObservedQuantity, ObservedRow, ParsedObserved } from './columns.ts'

export type PoleUnit = 'mas' | 'arcsec'
export type LodUnit = 'ms' | 's' | 'us'

export interface ObservedCsvOptions extends TableOptions {
  epochColumn?: number
  epochFormat?: EpochFormat
  /** Column of each quantity, counted from 0; those left out are not read. Absent altogether: recognised by name. */
  columns?: Partial<Record<ObservedQuantity, number>>
  poleUnit?: PoleUnit
  lodUnit?: LodUnit
  missingValues?: string[]
}

const names: Record<ObservedQuantity, RegExp> = {
  xMas: /^(x|xp|x[_ -]?p|x[_ -]?pole|pm[_ -]?x|polar[_ -]?motion[_ -]?x)$/,
  yMas: /^(y|yp|y[_ -]?p|y[_ -]?pole|pm[_ -]?y|polar[_ -]?motion[_ -]?y)$/,
  sigmaXMas: /^(sigma|err|error|s|std)[_ -]?x([_ -]?p(ole)?)?$|^x([_ -]?p(ole)?)?[_ -]?(sigma|err|error|std)$/,
  sigmaYMas: /^(sigma|err|error|s|std)[_ -]?y([_ -]?p(ole)?)?$|^y([_ -]?p(ole)?)?[_ -]?(sigma|err|error|std)$/,
  lodMs: /^(lod|d?lod|Δlod|delta[_ -]?lod|excess[_ -]?length[_ -]?of[_ -]?day|length[_ -]?of[_ -]?day)$/,
  sigmaLodMs: /^(sigma|err|error|s|std)[_ -]?lod$|^lod[_ -]?(sigma|err|error|std)$/,
  chi1Mas: /^(chi|χ)[_ -]?(1|x|₁)$/,
  chi2Mas: /^(chi|χ)[_ -]?(2|y|₂)$/
}
/** Powers of ten that turn each unit into ms or mas. */
const lodExponent: Record<LodUnit, number> = { s: 3, ms: 0, us: -3 }
const poleExponent: Record<PoleUnit, number> = { arcsec: 3, mas: 0 }

/**
 * Reads an observed series from delimited text: an epoch column and any of pole, length of day and excitation. Columns are
 * recognised by name and units by the names or by size; what was understood is said, and every choice can be given.
 *
 * @throws InputError when no epoch column or no quantity can be found
 */
export function parseObservedCsv(text: string, options: ObservedCsvOptions = {}): ParsedObserved {
  const table = readTable(text, options)
  const epoch = epochOf(table, options)
  const chosen = options.columns ?? recogniseColumns(table)
  const used = observedQuantities.filter(name => chosen[name] !== undefined)
  if (used.every(name => name.startsWith('sigma'))) {
    throw new InputError('No column of the pole, the length of day or the excitation was found', [{
      code: 'no-quantity', message: 'Name the columns lod, x and y, or chi1 and chi2 in a header row, or choose them.'
    }])
  }
  const columns = new ObservedColumns()
  const scale = scales(table, chosen, options)
  columns.understood.push(`Read as a table with ${epoch.format} epochs. ${epochFormatTexts[epoch.format]}`, ...scale.understood)
  for (const { line } of table.broken) columns.refuse(line, 'open-quote', 'A quotation mark in this row is never closed.')
  columns.rowsRead = table.rows.length + table.broken.length
  for (const row of sorted(table, epoch, columns, options)) {
    const read = readRow(row.cells, row.mjd, row.line, used, chosen, scale.exponentOf, columns, table.decimalComma, options.missingValues)
    if (read) columns.add(read, row.line)
  }
  return columns.finish('csv')
}

function epochOf(table: Table, options: ObservedCsvOptions): { column: number, format: EpochFormat } {
  if (options.epochColumn !== undefined && options.epochFormat) return { column: options.epochColumn, format: options.epochFormat }
  const candidates = options.epochColumn === undefined ? Array.from({ length: table.width }, (_, i) => i) : [options.epochColumn]
  let best: { column: number, format: EpochFormat, score: number } | null = null
  for (const column of candidates) {
    const cells = table.rows.slice(0, 50).map(row => row.cells[column] ?? '')
    const guess = recogniseEpochFormat(cells, table.decimalComma)
    if (!guess) continue
    const named = /date|epoch|time|mjd|year|month/i.test(table.header?.[column] ?? '')
    const score = guess.share + (named ? 0.5 : 0)
    if (score > (best?.score ?? 0.5)) best = { column, format: options.epochFormat ?? guess.format, score }
  }
  if (best) return best
  throw new InputError('No column of epochs was found', [{
    code: 'no-epoch-column', message: 'A column of dates like 2002-04-17, months, decimal years or Modified Julian Dates is needed.'
  }])
}

/** Which column holds which quantity, by the names in the header row; empty without one. */
export function recogniseColumns(table: Table): Partial<Record<ObservedQuantity, number>> {
  const found: Partial<Record<ObservedQuantity, number>> = {}
  table.header?.forEach((cell, index) => {
    const name = cell.trim().toLowerCase().replace(/\s*[([].*$/, '').replace(/[_ ](mas|ms|us|s|arcsec|as)$/, '')
    const quantity = observedQuantities.find(candidate => found[candidate] === undefined && names[candidate].test(name))
    if (quantity) found[quantity] = index
  })
  return found
}

interface Scales { exponentOf: (quantity: ObservedQuantity) => number, understood: string[] }

function scales(table: Table, chosen: Partial<Record<ObservedQuantity, number>>, options: ObservedCsvOptions): Scales {
  const understood: string[] = []
  const header = (quantity: ObservedQuantity): string => (table.header?.[chosen[quantity] ?? -1] ?? '').toLowerCase()
  const median = (quantity: ObservedQuantity): number => {
    const sizes = table.rows.map(row => Math.abs(parseNumber(row.cells[chosen[quantity] ?? -1] ?? '', table.decimalComma))).filter(v => v > 0).sort((a, b) => a - b)
    return sizes[sizes.length >> 1] ?? 0
  }
  let pole: PoleUnit = options.poleUnit ?? 'mas'
  if (chosen.xMas !== undefined || chosen.yMas !== undefined) {
    if (!options.poleUnit) {
      const label = `${header('xMas')} ${header('yMas')}`
      pole = /mas/.test(label) ? 'mas' : /arcsec|["″]|\bas\b/.test(label) || Math.max(median('xMas'), median('yMas')) < 2 ? 'arcsec' : 'mas'
    }
    understood.push(`Pole in ${pole === 'mas' ? 'milliarcseconds' : 'arcseconds'}, x towards Greenwich and y towards 90° W.`)
  }
  let lod: LodUnit = options.lodUnit ?? 'ms'
  if (chosen.lodMs !== undefined) {
    if (!options.lodUnit) {
      const label = header('lodMs')
      const size = median('lodMs')
      lod = /[µμu]s\b/.test(label) ? 'us' : /ms\b/.test(label) ? 'ms' : /[([_ ]s[)\]]?$/.test(label) || size < 0.02 ? 's' : size > 20 ? 'us' : 'ms'
    }
    understood.push(`Length of day in ${{ ms: 'milliseconds', s: 'seconds', us: 'microseconds' }[lod]}.`)
  }
  if (chosen.chi1Mas !== undefined || chosen.chi2Mas !== undefined) understood.push('Excitation in milliarcseconds.')
  const exponentOf = (quantity: ObservedQuantity): number =>
    quantity === 'lodMs' || quantity === 'sigmaLodMs' ? lodExponent[lod] : quantity.startsWith('chi') ? 0 : poleExponent[pole]
  return { exponentOf, understood }
}

/** Rows with their epochs in order of time; rows whose epoch cannot be read are refused. */
function sorted(table: Table, epoch: { column: number, format: EpochFormat }, columns: ObservedColumns, options: ObservedCsvOptions): { mjd: number, line: number, cells: string[] }[] {
  const rows: { mjd: number, line: number, cells: string[] }[] = []
  for (const { line, cells } of table.rows) {
    try {
      rows.push({ mjd: parseEpoch(cells[epoch.column] ?? '', epoch.format, table.decimalComma), line, cells })
    } catch (error) {
      if (!(error instanceof RangeError)) throw error
      columns.refuse(line, 'epoch', `The epoch could not be read: ${error.message}.`, cells[epoch.column])
    }
  }
  if (rows.some((row, i) => i > 0 && row.mjd < rows[i - 1]!.mjd)) {
    rows.sort((a, b) => a.mjd - b.mjd)
    columns.understood.push('The rows were not in order of time and have been sorted.')
  }
  if (options.epochFormat === undefined && epoch.format === 'mjd' && rows.length > 0 && rows.at(-1)!.mjd > 90_000) {
    columns.understood.push('Some epochs lie beyond the year 2100; check that they are Modified Julian Dates.')
  }
  return rows
}

function readRow(
  cells: string[], mjd: number, line: number, used: ObservedQuantity[], chosen: Partial<Record<ObservedQuantity, number>>,
  exponent: (quantity: ObservedQuantity) => number, columns: ObservedColumns, decimalComma: boolean, missing: string[] = []
): ObservedRow | null {
  const row: ObservedRow = { mjd }
  let filled = false
  for (const name of used) {
    const cell = cells[chosen[name]!] ?? ''
    if (isMissing(cell, missing)) continue
    const value = parseNumber(cell, decimalComma, exponent(name))
    if (Number.isNaN(value)) {
      columns.refuse(line, 'not-a-number', `“${cell.trim().slice(0, 40)}” is not a number.`, cell)
      return null
    }
    row[name] = value
    filled ||= !name.startsWith('sigma')
  }
  if (filled) return row
  columns.emptyRows++
  return null
}
