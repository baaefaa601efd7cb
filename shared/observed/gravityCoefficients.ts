import { isoDateFromMjd } from '../earth/time/epochs.ts'
import { present } from '../earth/time/monthlyMeans.ts'
import { epochFormatTexts, parseEpoch, recogniseEpochFormat } from '../series/epochColumn.ts'
import type { EpochFormat } from '../series/epochColumn.ts'
import { isMissing, parseNumber } from '../series/numbers.ts'
import { readTable } from '../series/table.ts'
import type { Table, TableOptions } from '../series/table.ts'
import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'
import type { GravitySeries } from './gravityTypes.ts'

const quantities = ['c20', 'c21', 's21', 'sigmaC20', 'sigmaC21', 'sigmaS21'] as const
type Quantity = typeof quantities[number]

export interface GravityOptions extends TableOptions {
  epochColumn?: number
  epochFormat?: EpochFormat
  columns?: Partial<Record<Quantity, number>>
  /** Power of ten that the values are in, e.g. −10; absent: as the names say, else plain numbers. */
  exponent?: number
  missingValues?: string[]
}

/** A value above this is a full C₂₀ (−4.8 × 10⁻⁴), not a change of one. */
const FULL_VALUE = 1e-5
/** Changes of degree two stay below this: 1e-8 of C₂₀ is centuries of melting ice. */
const LARGEST_CHANGE = 1e-8

/** Whether the names of the columns, in a header row or in a comment, hold a coefficient of degree two. */
export function isGravityTable(text: string): boolean {
  const table = withNames(readTable(text), text)
  return Object.keys(columnsOf(table)).some(name => !name.startsWith('sigma'))
}

/**
 * Reads ΔC₂₀, ΔC₂₁, ΔS₂₁ from a table: an epoch column and any of the three, with sigmas, found by their names (`c20`, `dC21`,
 * `sigma S21` …) in a header row or in the last comment line. Fully normalised; full values have their mean taken off.
 *
 * @throws InputError without an epoch column, without a coefficient, and for values too large to be changes of degree two
 */
export function readGravityCoefficients(text: string, options: GravityOptions = {}): GravitySeries {
  const table = withNames(readTable(text, options), text)
  const chosen = options.columns ?? columnsOf(table)
  const used = quantities.filter(name => chosen[name] !== undefined)
  if (used.every(name => name.startsWith('sigma'))) {
    throw new InputError('No coefficient of degree two was found', [{ code: 'no-quantity', message: 'Name the columns C20, C21 or S21 in a header row, or choose them.' }])
  }
  const epoch = epochOf(table, options)
  const issues: Issue[] = []
  const rows: { mjd: number, values: number[] }[] = []
  let emptyRows = 0
  for (const { line, cells } of table.rows) {
    try {
      const mjd = parseEpoch(cells[epoch.column] ?? '', epoch.format, table.decimalComma)
      const values = used.map(name => valueOf(cells[chosen[name]!] ?? '', exponentOf(table, chosen[name]!, options), table.decimalComma, options.missingValues))
      if (values.every(Number.isNaN)) emptyRows++
      else rows.push({ mjd, values })
    } catch (error) {
      if (!(error instanceof RangeError)) throw error
      issues.push({ row: line, code: 'not-a-row', message: `The row could not be read: ${error.message}.`, value: cells.join(' ').slice(0, 60) })
    }
  }
  rows.sort((a, b) => a.mjd - b.mjd)
  const unique = rows.filter((row, i) => i === 0 || row.mjd > rows[i - 1]!.mjd)
  if (unique.length < rows.length) issues.push({ code: 'duplicate-epoch', message: `${rows.length - unique.length} epochs appear more than once; the first row of each was kept.` })
  if (unique.length === 0) throw new InputError('No row of the file could be used', issues.length > 0 ? issues.slice(0, 100) : [{ code: 'no-rows', message: 'The table holds no coefficient.' }])
  const mjd = Float64Array.from(unique, row => row.mjd)
  const column = (name: Quantity): Float64Array => {
    const at = used.indexOf(name)
    return Float64Array.from(unique, row => at < 0 ? Number.NaN : row.values[at]!)
  }
  const understood = [
    `Read as gravity coefficients of degree two, fully normalised, ${isoDateFromMjd(mjd[0]!)} to ${isoDateFromMjd(mjd.at(-1)!)}. ${epochFormatTexts[epoch.format]}`,
    `Found ${used.map(name => name.replace(/^sigma/, 'sigma ').toUpperCase().replace('SIGMA', 'sigma')).join(', ')}.`
  ]
  const coefficient = (name: 'c20' | 'c21' | 's21'): Float64Array => asChange(name, mjd, column(name), understood)
  return {
    mjd, c20: coefficient('c20'), c21: coefficient('c21'), s21: coefficient('s21'),
    sigmaC20: column('sigmaC20'), sigmaC21: column('sigmaC21'), sigmaS21: column('sigmaS21'),
    rowsRead: table.rows.length, emptyRows, issues, understood
  }
}

/** Changes as they are; of full values the mean is taken off, and said. */
function asChange(name: string, mjd: Float64Array, value: Float64Array, understood: string[]): Float64Array {
  const { values } = present(mjd, value)
  if (values.length === 0) return value
  const origin = values[0]!
  const mean = origin + values.reduce((sum, v) => sum + (v - origin), 0) / values.length
  const full = Math.abs(mean) > FULL_VALUE || (name !== 'c20' && Math.abs(mean) > 1e-10)
  const change = full ? value.map(v => v - mean) : value
  if (full) understood.push(`${name.toUpperCase()} holds full values; their mean over the record, ${mean.toExponential(6)}, was taken off.`)
  const largest = change.reduce((most, v) => Math.abs(v) > most ? Math.abs(v) : most, 0)
  if (largest > LARGEST_CHANGE) {
    throw new InputError('The values are too large to be changes of degree two', [{
      column: name, code: 'unit', message: `${name.toUpperCase()} changes by ${largest.toPrecision(2)}; more than ${LARGEST_CHANGE} means another unit. Give the power of ten that the values are in.`
    }])
  }
  return change
}

function valueOf(cell: string, exponent: number, decimalComma: boolean, missing: string[] = []): number {
  if (isMissing(cell, missing)) return Number.NaN
  const value = parseNumber(cell, decimalComma, exponent)
  if (Number.isNaN(value)) throw new RangeError(`expected a number, got “${cell.trim().slice(0, 30)}”`)
  return value
}

/** Takes the names from the last comment line that has as many words as the table has columns, where there is no header row. */
function withNames(table: Table, text: string): Table {
  if (table.header) return table
  const comments = text.split(/\r\n|\n|\r/, 400).filter(line => line.trimStart().startsWith('#')).map(line => line.trim().replace(/^#+\s*/, ''))
  for (const comment of comments.reverse()) {
    const words = comment.split(table.delimiter === ' ' ? /\s+/ : table.delimiter).map(word => word.trim()).filter(word => word !== '')
    if (words.length === table.width && words.some(word => /[cs]2[01]/i.test(word))) return { ...table, header: words }
  }
  return table
}

const sigmaWord = /sigma|σ|err|std|unc/i

function columnsOf(table: Table): Partial<Record<Quantity, number>> {
  const found: Partial<Record<Quantity, number>> = {}
  table.header?.forEach((cell, index) => {
    const coefficient = /(?:^|[^a-z0-9])(?:sigma|err|std|unc)?[_ -]?(?:d|delta[_ -]?|δ)?([cs])[_ ]?(2)[_, ]?([01])/i.exec(cell.trim())
      ?? /Δ([CS])(2)([01])/i.exec(cell.trim())
    if (!coefficient) return
    const name = `${coefficient[1]!.toLowerCase()}2${coefficient[3]}`
    const key = sigmaWord.test(cell) ? `sigma${name[0]!.toUpperCase()}${name.slice(1)}` : name
    if ((quantities as readonly string[]).includes(key) && found[key as Quantity] === undefined) found[key as Quantity] = index
  })
  return found
}

/** The power of ten in a name, as (1e-10), [10^-11] or x1.0E-10. */
function exponentOf(table: Table, column: number, options: GravityOptions): number {
  if (options.exponent !== undefined) return options.exponent
  const match = /(?:1(?:\.0*)?e|10\^?)\s*([-\u2212]\d+)/i.exec(table.header?.[column] ?? '')
  return match ? Number(match[1]!.replace('\u2212', '-')) : 0
}

function epochOf(table: Table, options: GravityOptions): { column: number, format: EpochFormat } {
  const columns = options.epochColumn === undefined ? Array.from({ length: table.width }, (_, i) => i) : [options.epochColumn]
  let best: { column: number, format: EpochFormat, score: number } | null = null
  for (const column of columns) {
    const guess = recogniseEpochFormat(table.rows.slice(0, 50).map(row => row.cells[column] ?? ''), table.decimalComma)
    if (!guess) continue
    const score = guess.share + (/date|epoch|time|mjd|year|month/i.test(table.header?.[column] ?? '') ? 0.5 : 0) - column * 1e-3
    if (score > (best?.score ?? 0.5)) best = { column, format: options.epochFormat ?? guess.format, score }
  }
  if (best) return best
  throw new InputError('No column of epochs was found', [{ code: 'no-epoch-column', message: 'A column of dates, months, decimal years or Modified Julian Dates is needed.' }])
}
