import { isoDateFromMjd, mjdFromCalendar } from '../earth/time/epochs.ts'
import { medianStep } from '../earth/time/monthlyMeans.ts'
import { isMissing, parseNumber } from '../series/numbers.ts'
import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'
import type { AngularMomentumSeries, FluidComponent } from './angularMomentumTypes.ts'

export interface AngularMomentumOptions {
  /** Which three columns come first; absent: as the header lines say, else mass. */
  order?: 'mass-first' | 'motion-first'
  missingValues?: string[]
}

/** Lines within which the first data row must appear, and characters of text that are read: 45 years of 3 h rows are 15 MB. */
const HEADER_LINES = 400
export const angularMomentumLimits = { bytes: 48 * 1024 * 1024 }
/** Dimensionless excitation stays far below this: 1e-5 is two arcseconds of the pole or nearly a second of the day. */
const LARGEST_CHI = 1e-5
const VALUES = 6

interface Row { mjd: number, values: string[] }

/** Whether a text is a series of angular momentum: its first data row has a date, the MJD of that date, and six numbers. */
export function isAngularMomentum(text: string): boolean {
  return firstRow(text.replace(/^\uFEFF/, '').split(/\r\n|\n|\r/, HEADER_LINES)) >= 0
}

/**
 * Reads a series of angular momentum: rows of date (year month day, with hour, minute, second if sub-daily, or one ISO date), MJD,
 * three mass and three motion terms, dimensionless; blanks, commas or semicolons between them; header lines of any kind before.
 *
 * @throws InputError for a text without such rows, for values that cannot be dimensionless, and (413) over 48 MB
 */
export function readAngularMomentum(text: string, options: AngularMomentumOptions = {}): AngularMomentumSeries {
  if (text.length > angularMomentumLimits.bytes) {
    throw new InputError('The file is larger than 48 MB', [{ code: 'too-large', message: 'A series of angular momentum may have up to 48 MB.' }], 413)
  }
  const lines = text.replace(/^\uFEFF/, '').split(/\r\n|\n|\r/)
  const first = firstRow(lines.slice(0, HEADER_LINES))
  if (first < 0) {
    throw new InputError('No row of angular momentum was found', [{
      code: 'no-rows', message: 'Each row needs a date, its Modified Julian Date, and six numbers: mass χ₁ χ₂ χ₃ and motion χ₁ χ₂ χ₃.'
    }])
  }
  const header = lines.slice(0, first)
  const { rows, issues, emptyRows, rowsRead } = readRows(lines, first, options.missingValues)
  if (rows.length === 0) throw new InputError('No row of the file could be used', issues.slice(0, 100))
  const motionFirst = (options.order ?? orderOf(header) ?? 'mass-first') === 'motion-first'
  const column = (at: number): Float64Array => Float64Array.from(rows, row => row.values[at]!)
  const terms = (from: number) => ({ chi1: column(from), chi2: column(from + 1), chi3: column(from + 2) })
  const mjd = Float64Array.from(rows, row => row.mjd)
  const series = { mjd, mass: terms(motionFirst ? 3 : 0), motion: terms(motionFirst ? 0 : 3), stepDays: medianStep(mjd), rowsRead, emptyRows, issues }
  checkSize(series)
  const step = series.stepDays < 0.9 ? `every ${Math.round(series.stepDays * 24)} h` : `every ${Math.round(series.stepDays)} d`
  return {
    ...series,
    suggestedComponent: componentOf(header),
    understood: [
      `Read as angular momentum, dimensionless, ${step}, from ${isoDateFromMjd(mjd[0]!)} to ${isoDateFromMjd(mjd.at(-1)!)}.`,
      `${motionFirst ? 'Motion terms come first, then mass terms' : 'Mass terms come first, then motion terms'}${options.order ? ', as chosen' : orderOf(header) ? ', as the header says' : '; the header does not say'}.`
    ]
  }
}

function readRows(lines: string[], first: number, missing: string[] = []): { rows: { mjd: number, values: number[] }[], issues: Issue[], emptyRows: number, rowsRead: number } {
  const rows: { mjd: number, values: number[] }[] = []
  const issues: Issue[] = []
  let emptyRows = 0
  let rowsRead = 0
  let last = -Infinity
  for (let i = first; i < lines.length; i++) {
    const line = lines[i]!.trim()
    if (line === '' || /^[#%!;*]/.test(line)) continue
    rowsRead++
    const refuse = (code: string, message: string): void => {
      issues.push({ row: i + 1, code, message, value: line.slice(0, 60) })
    }
    const row = rowOf(line)
    if (!row) {
      refuse('not-a-row', 'The row is not a date, its Modified Julian Date and six numbers.')
      continue
    }
    if (row.mjd <= last) {
      refuse(row.mjd === last ? 'duplicate-epoch' : 'epoch-order', `MJD ${row.mjd} ${row.mjd === last ? 'appears twice' : `follows MJD ${last}; epochs must increase`}.`)
      continue
    }
    const values = row.values.map(cell => isMissing(cell, missing) ? Number.NaN : parseNumber(cell))
    const bad = row.values.findIndex((cell, k) => Number.isNaN(values[k]!) && !isMissing(cell, missing))
    if (bad >= 0) {
      refuse('not-a-number', `“${row.values[bad]!.slice(0, 30)}” is not a number.`)
      continue
    }
    if (values.every(Number.isNaN)) {
      emptyRows++
      continue
    }
    last = row.mjd
    rows.push({ mjd: row.mjd, values })
  }
  return { rows, issues, emptyRows, rowsRead }
}

function firstRow(lines: string[]): number {
  return lines.findIndex((line) => {
    const row = rowOf(line.trim())
    return row !== null && row.values.every(cell => !Number.isNaN(parseNumber(cell)) || isMissing(cell))
  })
}

/** Epoch and six cells of a line; null where the date and the MJD do not agree to a day or the number of cells is another. */
function rowOf(line: string): Row | null {
  const cells = line.split(/[\s,;]+/).filter(cell => cell !== '')
  const iso = /^(\d{4})-(\d{2})-(\d{2})(?:T.*)?$/.exec(cells[0] ?? '') ?? /^(\d{4})(\d{2})(\d{2})$/.exec(cells[0] ?? '')
  const dateCells = cells.length - VALUES - 1
  if (dateCells < 1 || dateCells > 6) return null
  const date = iso ? iso.slice(1, 4).map(Number) : dateCells >= 3 && cells.slice(0, dateCells).every(cell => /^\d+(\.\d*)?$/.test(cell)) ? cells.slice(0, 3).map(Number) : null
  if (!date || (iso && dateCells > 4)) return null
  const mjd = parseNumber(cells[dateCells]!)
  const [year, month, day] = date as [number, number, number]
  if (!(month >= 1 && month <= 12 && day >= 1 && day <= 31) || !(Math.floor(mjd + 1e-6) === mjdFromCalendar(year, month, Math.floor(day)))) return null
  return { mjd, values: cells.slice(dateCells + 1) }
}

const massWord = /mass|matter|pressure|press\b/i
const motionWord = /motion|wind|current|velocity/i

/** The last header line that names both terms decides: the word that stands first in it. */
function orderOf(header: string[]): 'mass-first' | 'motion-first' | null {
  for (const line of [...header].reverse()) {
    const mass = line.search(massWord)
    const motion = line.search(motionWord)
    if (mass >= 0 && motion >= 0) return mass < motion ? 'mass-first' : 'motion-first'
  }
  return null
}

function componentOf(header: string[]): FluidComponent | null {
  const text = header.join(' ').toLowerCase()
  const tests: [FluidComponent, RegExp][] = [
    ['sea-level', /sea[- ]level|\bslam\b/], ['land-water', /hydrolog|land water|\bham\b/], ['ocean', /ocean|\boam\b/], ['atmosphere', /atmospher|\baam\b/]
  ]
  const found = tests.filter(([, test]) => test.test(text)).map(([component]) => component)
  return found.length === 1 ? found[0]! : null
}

function checkSize({ mass, motion }: Pick<AngularMomentumSeries, 'mass' | 'motion'>): void {
  const largest = (values: Float64Array): number => values.reduce((most, v) => Math.abs(v) > most ? Math.abs(v) : most, 0)
  const most = Math.max(...[mass, motion].flatMap(({ chi1, chi2, chi3 }) => [chi1, chi2, chi3].map(largest)))
  if (most <= LARGEST_CHI) return
  throw new InputError('The values are too large to be dimensionless', [{
    code: 'unit', message: `The largest value is ${most.toPrecision(2)}; dimensionless excitation stays below ${LARGEST_CHI}. Convert the file from mas, ms or powers of ten first.`
  }])
}
