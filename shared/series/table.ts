import Papa from 'papaparse'
import { InputError } from '../types/issue.ts'
import { isMissing, parseNumber } from './numbers.ts'
import { allAtOnce } from './steps.ts'
import type { Steps } from './steps.ts'

export type Delimiter = ',' | ';' | '\t' | '|' | ' '

export interface TableOptions {
  /** Between the cells; absent: recognised. A space stands for any run of blanks. */
  delimiter?: Delimiter
  decimalComma?: boolean
  /** Whether the first row holds names; absent: recognised. */
  header?: boolean
}

/** What a table is read from: delimited text, or the cells of a sheet. */
export type TableSource = string | { cells: string[][] }

export interface Table {
  delimiter: Delimiter
  decimalComma: boolean
  /** Names of the columns, null without a header row. */
  header: string[] | null
  /** Data rows: cells as text, and the 1-based number of the row's line in the file. */
  rows: { line: number, cells: string[] }[]
  /** Lines whose quotation marks do not close; they are in no row. */
  broken: { line: number, text: string }[]
  /** Most cells in a row. */
  width: number
}

/** Guards memory and the time that one request may take. */
export const tableLimits = { rows: 200_000, bytes: 16 * 1024 * 1024 }
/** A quoted cell may hold line ends; one that runs on further than this is a quotation mark that was never closed. */
const LONGEST_CELL_LINES = 20

/** Lines that are worked on between two pauses. */
const CHUNK = 5000
/** Marks of a line that is a comment. */
const comment = /^(?:[#%!]|\/\/)/

/**
 * Cells of a delimited text: comma, semicolon, tab, bar or blanks; byte-order mark, Windows line ends, blank lines and
 * lines that begin with `#`, `%`, `!` or `//` are passed over, yet every row keeps the number of its line in the file.
 * The cells of a sheet are taken as they are, a row's line being its number in the sheet.
 *
 * @throws InputError (413) over 200 000 rows or 16 MB, InputError (422) for a text without rows
 */
export function readTable(source: TableSource, options: TableOptions = {}): Table {
  return allAtOnce(tableSteps(source, options))
}

/** As `readTable`, in steps. */
export function* tableSteps(source: TableSource, options: TableOptions = {}): Steps<Table> {
  const { rows, broken, delimiter } = typeof source === 'string' ? yield* textRows(source, options) : { ...sheetRows(source.cells), delimiter: options.delimiter ?? ',' }
  const sample = rows.slice(0, 50).map(row => row.cells)
  const decimalComma = options.decimalComma ?? (delimiter !== ',' && usesDecimalComma(sample))
  const hasHeader = options.header ?? (rows.length > 0 && looksLikeHeader(sample[0]!, decimalComma))
  const header = hasHeader ? rows.shift()?.cells ?? null : null
  return { delimiter, decimalComma, header, rows, broken, width: rows.reduce((most, row) => Math.max(most, row.cells.length), header?.length ?? 0) }
}

type Rows = Pick<Table, 'rows' | 'broken'>

function* textRows(text: string, options: TableOptions): Steps<Rows & Pick<Table, 'delimiter'>> {
  checkSize(text)
  const { blocks, broken } = yield* logicalLines(text.charCodeAt(0) === 0xFEFF ? text.slice(1) : text)
  checkCount(blocks.length, broken.length)
  const delimiter = options.delimiter ?? recogniseDelimiter(blocks.slice(0, 50).map(block => block.text))
  const rows: Table['rows'] = []
  for (let from = 0; from < blocks.length; from += CHUNK) {
    const chunk = blocks.slice(from, from + CHUNK)
    const cells = splitCells(chunk.map(block => block.text), delimiter)
    chunk.forEach((block, i) => rows.push({ line: block.line, cells: cells[i]! }))
    yield 0.3 + 0.4 * from / blocks.length
  }
  return { rows, broken, delimiter }
}

function sheetRows(sheet: string[][]): Rows {
  const rows = sheet.map((cells, i) => ({ line: i + 1, cells })).filter(({ cells }) => cells.some(cell => cell.trim() !== '') && !comment.test(cells[0]!.trim()))
  checkCount(rows.length, 0)
  return { rows, broken: [] }
}

function checkCount(rows: number, broken: number): void {
  if (rows > tableLimits.rows + 1) tooLarge('rows', `The file has more than ${tableLimits.rows} rows`, 'too-many-rows')
  if (rows === 0 && broken === 0) {
    throw new InputError('The file holds no rows', [{ code: 'no-rows', message: 'The file is empty or holds comments only.' }])
  }
}

function checkSize(text: string): void {
  // A UTF-16 code unit becomes at most three bytes; only texts that may be too long are measured.
  if (text.length > tableLimits.bytes || (text.length * 3 > tableLimits.bytes && new TextEncoder().encode(text).length > tableLimits.bytes)) {
    tooLarge('bytes', 'The file is larger than 16 MB', 'too-large')
  }
}

function tooLarge(what: string, message: string, code: string): never {
  throw new InputError(message, [{ path: what, code, message: `${message}; cut it into parts.` }], 413)
}

/** Lines joined where a quoted cell runs over line ends, without comments and blank lines. */
function* logicalLines(text: string): Steps<{ blocks: { line: number, text: string }[], broken: { line: number, text: string }[] }> {
  const lines = text.split(/\r\n|\n|\r/)
  const blocks: { line: number, text: string }[] = []
  const broken: { line: number, text: string }[] = []
  let pauseAt = CHUNK
  for (let i = 0; i < lines.length; i++) {
    if (i >= pauseAt) {
      yield 0.3 * i / lines.length
      pauseAt += CHUNK
    }
    const line = lines[i]!
    const trimmed = line.trim()
    if (trimmed === '' || comment.test(trimmed) || /^[;,\t| ]+$/.test(line)) continue
    if (!line.includes('"') || closes(line)) {
      blocks.push({ line: i + 1, text: line })
      continue
    }
    let joined = line
    let end = i
    while (end + 1 < lines.length && end - i < LONGEST_CELL_LINES && !closes(joined)) joined += `\n${lines[++end]!}`
    if (closes(joined)) {
      blocks.push({ line: i + 1, text: joined })
      i = end
    } else broken.push({ line: i + 1, text: line })
  }
  return { blocks, broken }
}

function closes(text: string): boolean {
  let marks = 0
  for (let i = text.indexOf('"'); i >= 0; i = text.indexOf('"', i + 1)) marks++
  return marks % 2 === 0
}

/** The delimiter that cuts most lines into the same number of cells, two at least. */
function recogniseDelimiter(lines: string[]): Delimiter {
  const bare = lines.map(line => line.replace(/"[^"]*"/g, '""'))
  let best: { delimiter: Delimiter, agreeing: number } = { delimiter: ',', agreeing: 0 }
  for (const delimiter of [';', '\t', '|', ',', ' '] as const) {
    const counts = new Map<number, number>()
    for (const line of bare) {
      const cells = delimiter === ' ' ? line.trim().split(/\s+/).length : line.split(delimiter).length
      if (cells > 1) counts.set(cells, (counts.get(cells) ?? 0) + 1)
    }
    const agreeing = Math.max(0, ...counts.values())
    if (agreeing > best.agreeing) best = { delimiter, agreeing }
  }
  return best.delimiter
}

function splitCells(lines: string[], delimiter: Delimiter): string[][] {
  if (delimiter === ' ') return lines.map(line => line.trim().split(/\s+/))
  const cells = Papa.parse<string[]>(lines.join('\n'), { delimiter, newline: '\n' }).data
  // A stray mark inside a cell can make the splitter run on over lines: then each line is split by itself.
  return cells.length === lines.length ? cells : lines.map(line => Papa.parse<string[]>(line, { delimiter, newline: '\n' }).data[0] ?? [])
}

function usesDecimalComma(cells: string[][]): boolean {
  let comma = 0
  let point = 0
  for (const row of cells) {
    for (const cell of row) {
      if (/^\s*[+\-\u2212]?\d*,\d+(?:[eE][+-]?\d+)?\s*$/.test(cell)) comma++
      else if (/^\s*[+\-\u2212]?\d*\.\d+(?:[eE][+-]?\d+)?\s*$/.test(cell)) point++
    }
  }
  return comma > 0 && comma > point
}

/** A first row without any number, date or missing mark is a row of names. */
function looksLikeHeader(cells: string[], decimalComma: boolean): boolean {
  const filled = cells.filter(cell => cell.trim() !== '')
  return filled.length > 0 && filled.every(cell => Number.isNaN(parseNumber(cell, decimalComma)) && !/^\s*\d{4}[-/]\d/.test(cell) && !isMissing(cell))
}
