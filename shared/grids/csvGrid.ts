import { recogniseEpochFormat, parseEpoch } from '../series/epochColumn.ts'
import type { EpochFormat } from '../series/epochColumn.ts'
import { isMissing, parseNumber } from '../series/numbers.ts'
import { readTable } from '../series/table.ts'
import type { TableOptions } from '../series/table.ts'
import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'
import { checkBlock } from './gridFile.ts'
import type { GridFile, GridVariable } from './gridFile.ts'

export interface CsvGridOptions extends TableOptions {
  lonColumn?: number
  latColumn?: number
  timeColumn?: number
  valueColumn?: number
  epochFormat?: EpochFormat
  /** Unit of the heights; absent: what the column's name says. */
  units?: string
  missingValues?: string[]
}

export interface CsvGridReading {
  file: GridFile
  chosen: { lonColumn: number, latColumn: number, timeColumn: number, valueColumn: number, epochFormat: EpochFormat, units: string | null }
  /** One for each row that cannot be used: rowsRead = rowsStored + issues.length. */
  issues: Issue[]
  rowsRead: number
  rowsStored: number
}

/** Values that a grid from a table may have. */
const MOST_VALUES = 20_000_000

/**
 * A table of lon, lat, time, value as a grid: every row is a value, or is listed. Places and times without a row are missing values.
 *
 * @throws InputError where columns are not found, and for places that do not lie on a grid
 */
export function readCsvGrid(text: string, options: CsvGridOptions = {}): CsvGridReading {
  const table = readTable(text, options)
  const chosen = columnsOf(table, options)
  const issues: Issue[] = table.broken.map(({ line, text: cell }) => ({ row: line, value: cell.slice(0, 60), code: 'open-quote', message: 'A quotation mark in this row is never closed.' }))
  const name = (index: number): string => table.header?.[index]?.trim() || `column ${index + 1}`
  const rows: { line: number, lon: number, lat: number, mjd: number, value: number }[] = []
  const number = (cells: string[], line: number, column: number, least: number, most: number): number | null => {
    const value = parseNumber(cells[column] ?? '', table.decimalComma)
    if (value >= least && value <= most) return value
    issues.push({ row: line, column: name(column), value: (cells[column] ?? '').trim().slice(0, 60), code: 'not-a-number', message: `A number from ${least} to ${most} is expected here.` })
    return null
  }
  for (const { line, cells } of table.rows) {
    const lon = number(cells, line, chosen.lonColumn, -360, 720)
    if (lon === null) continue
    const lat = number(cells, line, chosen.latColumn, -90, 90)
    if (lat === null) continue
    const mjd = epochAt(cells, line, chosen, table.decimalComma, issues, name(chosen.timeColumn))
    if (mjd === null) continue
    if (isMissing(cells[chosen.valueColumn] ?? '', options.missingValues)) {
      issues.push({ row: line, column: name(chosen.valueColumn), code: 'missing-value', message: 'The row has no value.' })
      continue
    }
    const value = number(cells, line, chosen.valueColumn, -1e12, 1e12)
    if (value !== null) rows.push({ line, lon, lat, mjd, value })
  }
  const { file, kept, repeated } = gridOf(rows, chosen.units)
  issues.push(...repeated)
  issues.sort((a, b) => a.row! - b.row!)
  return { file, chosen, issues, rowsRead: table.rows.length + table.broken.length, rowsStored: kept }
}

function columnsOf(table: ReturnType<typeof readTable>, options: CsvGridOptions): CsvGridReading['chosen'] {
  const names = table.header?.map(cell => cell.trim().toLowerCase()) ?? []
  const named = (pattern: RegExp): number | undefined => {
    const index = names.findIndex(cell => pattern.test(cell))
    return index < 0 ? undefined : index
  }
  const lonColumn = options.lonColumn ?? named(/^lon|^lng|^x$|länge/) ?? 0
  const latColumn = options.latColumn ?? named(/^lat|^y$|breite/) ?? 1
  const timeColumn = options.timeColumn ?? named(/time|date|epoch|month|mjd|year|datum/) ?? 2
  const used = new Set([lonColumn, latColumn, timeColumn])
  const valueColumn = options.valueColumn ?? Array.from({ length: table.width }, (_, i) => i).find(i => !used.has(i)) ?? 3
  if (new Set([lonColumn, latColumn, timeColumn, valueColumn]).size < 4 || Math.max(lonColumn, latColumn, timeColumn, valueColumn) >= table.width) {
    throw new InputError('The columns could not be recognised', [{ code: 'no-grid', message: 'A grid as a table has columns of longitude, latitude, time and value.' }])
  }
  const cells = table.rows.slice(0, 100).map(row => row.cells[timeColumn] ?? '')
  const epochFormat = options.epochFormat ?? recogniseEpochFormat(cells, table.decimalComma)?.format ?? 'iso-date'
  const unit = /(?:^|[^a-z])(mm|cm|m)(?:[^a-z]|$)/.exec(names[valueColumn] ?? '')?.[1]
  return { lonColumn, latColumn, timeColumn, valueColumn, epochFormat, units: options.units ?? unit ?? null }
}

function epochAt(cells: string[], line: number, chosen: CsvGridReading['chosen'], decimalComma: boolean, issues: Issue[], column: string): number | null {
  const text = cells[chosen.timeColumn] ?? ''
  try {
    return parseEpoch(text, chosen.epochFormat, decimalComma)
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    issues.push({ row: line, column, value: text.trim().slice(0, 60), code: 'bad-epoch', message: `The epoch cannot be read: ${error.message}.` })
    return null
  }
}

function gridOf(rows: { line: number, lon: number, lat: number, mjd: number, value: number }[], units: string | null): { file: GridFile, kept: number, repeated: Issue[] } {
  const axis = (pick: (row: typeof rows[number]) => number): { values: Float64Array, index: Map<number, number> } => {
    const values = Float64Array.from(new Set(rows.map(pick))).sort()
    return { values, index: new Map(Array.from(values, (v, i) => [v, i])) }
  }
  const [lon, lat, time] = [axis(r => r.lon), axis(r => r.lat), axis(r => r.mjd)]
  const [columns, perEpoch] = [lon.values.length, lon.values.length * lat.values.length]
  if (time.values.length * perEpoch > MOST_VALUES) {
    throw new InputError('The places do not lie on a grid', [{ code: 'not-a-grid', message: `${lat.values.length} latitudes and ${columns} longitudes over ${time.values.length} epochs are more than ${MOST_VALUES} places for ${rows.length} rows: a grid has rows and columns.` }])
  }
  const values = new Float64Array(time.values.length * perEpoch).fill(Number.NaN)
  const repeated: Issue[] = []
  for (const row of rows) {
    const at = time.index.get(row.mjd)! * perEpoch + lat.index.get(row.lat)! * columns + lon.index.get(row.lon)!
    if (Number.isNaN(values[at]!)) values[at] = row.value
    else repeated.push({ row: row.line, code: 'duplicate-place', value: `${row.lon}, ${row.lat}`, message: 'The place has a value at this time already.' })
  }
  const dimensions = { time: { name: 'time', size: time.values.length }, lat: { name: 'lat', size: lat.values.length }, lon: { name: 'lon', size: columns } }
  const variables = [
    inMemory('time', [dimensions.time], time.values, { units: 'days since 1858-11-17 00:00:00', calendar: 'standard' }),
    inMemory('lat', [dimensions.lat], lat.values, { units: 'degrees_north' }),
    inMemory('lon', [dimensions.lon], lon.values, { units: 'degrees_east' }),
    inMemory('height', [dimensions.time, dimensions.lat, dimensions.lon], values, units === null ? {} : { units })
  ]
  return { file: { format: 'csv', attributes: {}, variables }, kept: rows.length - repeated.length, repeated }
}

/** A variable whose values are in memory, the last dimension fastest. */
export function inMemory(name: string, dimensions: GridVariable['dimensions'], values: Float64Array, attributes: GridVariable['attributes']): GridVariable {
  const sizes = dimensions.map(d => d.size)
  return {
    name,
    dimensions,
    attributes,
    numeric: true,
    chunks: null,
    read: (start, count) => {
      checkBlock(name, sizes, start, count)
      const out = new Float64Array(count.reduce((n, c) => n * c, 1))
      const run = count.at(-1) ?? 1
      for (let written = 0; written < out.length; written += run) {
        let rest = written / run
        let at = start.at(-1) ?? 0
        let stride = sizes.at(-1) ?? 1
        for (let d = sizes.length - 2; d >= 0; d--) {
          at += (start[d]! + rest % count[d]!) * stride
          rest = Math.floor(rest / count[d]!)
          stride *= sizes[d]!
        }
        out.set(values.subarray(at, at + run), written)
      }
      return out
    }
  }
}
