import { calendarFromMjd } from '../earth/time/epochs.ts'
import { InputError } from '../types/issue.ts'
import { hasWholeDays, parsePeriod, recogniseEpochFormat, splitPeriod } from './epochColumn.ts'
import type { EpochFormat } from './epochColumn.ts'
import type { MassUnit } from './massUnits.ts'
import { isMissing, parseNumber } from './numbers.ts'
import type { Table } from './table.ts'

export type ColumnGuess = 'epoch' | 'end' | 'value' | 'sigma' | 'other'
export interface ColumnChoices {
  epochColumn?: number
  /** Column in which the period ends that begins in `epochColumn`; null: there is none though a column looks like one. */
  endColumn?: number | null
  /** Month, and day, in columns of their own beside the year in `epochColumn`; null: there is none though a column looks like one. */
  monthColumn?: number | null
  dayColumn?: number | null
  valueColumn?: number
  sigmaColumn?: number | null
  epochFormat?: EpochFormat
  endDayIncluded?: boolean
  unit?: MassUnit
  /** Rows are amounts or rates over periods: a bare year is one. */
  needsPeriods?: boolean
}

export interface RecognisedColumns {
  columns: { index: number, name: string, sample: string[], guess: ColumnGuess }[]
  chosen: {
    epochColumn: number, endColumn: number | null, monthColumn: number | null, dayColumn: number | null, valueColumn: number, sigmaColumn: number | null
    epochFormat: EpochFormat, endDayIncluded: boolean, unit: MassUnit
  }
  /** Every column of numbers with its one-sigma: more than one where the table holds several regions side by side. */
  valueColumns: { valueColumn: number, sigmaColumn: number | null, name: string }[]
}

const epochName = /date|epoch|time|mjd|year|month|period|jahr|datum|fecha/i
const beginName = /start|begin|from|since|von/i
const endName = /(^|[^a-z])(end|stop|until|to|till|bis|through|last)([^a-z]|$)/i
const sigmaName = /sigma|σ|±|\+\/-|err|unc|std|fehler|unsich|incert|s\.?d\b|1s/i
const valueName = /mass|gt\b|gigaton|lwe|tws|ewh|water|storage|value|thick|anomal|mm|cm/i
const otherName = /^(?:lat|lon|lng|id|no|nr|n|row|count|quality|flag|gap|days?|doy)(?:itude|gitude)?$|flag|quality/i
/** Rows that a guess looks at. */
const LOOKED_AT = 100

/**
 * Which column holds the epoch, the value and its one-sigma, by names and by what the cells look like; choices that are given
 * stand. A column named as an error is never taken as the value.
 *
 * @throws InputError where no column of epochs, or none of numbers, is found
 */
export function recogniseMassColumns(table: Table, given: ColumnChoices): RecognisedColumns {
  const cells = (index: number): string[] => table.rows.slice(0, LOOKED_AT).map(row => row.cells[index] ?? '')
  const name = (index: number): string => table.header?.[index]?.trim() ?? ''
  const numeric = (index: number): number => {
    const filled = cells(index).filter(cell => !isMissing(cell))
    return filled.length === 0 ? 0 : filled.filter(cell => !Number.isNaN(parseNumber(cell, table.decimalComma))).length / filled.length
  }
  const indices = Array.from({ length: table.width }, (_, i) => i)

  const epochs = indices.map(index => ({
    index, found: recogniseEpochFormat(cells(index), table.decimalComma, given.needsPeriods), named: epochName.test(name(index)) || beginName.test(name(index))
  }))
  const taken = new Set([given.valueColumn, given.sigmaColumn, given.endColumn])
  const parted = given.endColumn ? null : yearMonthDay(table, given, cells, name)
  const epoch = given.epochColumn !== undefined
    ? epochs[given.epochColumn]
    : parted ? epochs[parted.year] : best(epochs.filter(e => !taken.has(e.index) && e.found && !endName.test(name(e.index))), e => e.found!.share + (e.named ? 0.6 : 0) + (e.index === 0 ? 0.1 : 0))
  const epochColumn = given.epochColumn ?? epoch?.index
  if (epochColumn === undefined) fail('no-epoch-column', 'No column of dates, months, decimal years or Modified Julian Dates was found.')
  const [monthColumn, dayColumn] = parted && parted.year === epochColumn ? [parted.month, parted.day] : [null, null]
  const epochFormat = monthColumn !== null ? dayColumn !== null ? 'iso-date' : 'year-month' : given.epochFormat ?? epoch?.found?.format ?? 'iso-date'
  const endColumn = monthColumn !== null ? null : given.endColumn !== undefined
    ? given.endColumn
    : epochs.find(e => e.index !== epochColumn && !taken.has(e.index) && endName.test(name(e.index)) && e.found?.format === epochFormat)?.index ?? null

  const candidates = indices.filter(index => index !== epochColumn && index !== endColumn && index !== monthColumn && index !== dayColumn && numeric(index) > 0.5)
  const sigmaColumn = given.sigmaColumn !== undefined
    ? given.sigmaColumn
    : candidates.find(index => index !== given.valueColumn && sigmaName.test(name(index))) ?? null
  const valueColumn = given.valueColumn ?? best(candidates.filter(index => index !== sigmaColumn), index =>
    numeric(index) + (valueName.test(name(index)) ? 1 : 0) - (sigmaName.test(name(index)) ? 2 : 0) - (epochName.test(name(index)) ? 0.5 : 0) - index * 1e-3)
  if (valueColumn === undefined) fail('no-value-column', 'No column of numbers was found beside the epochs.')

  return {
    columns: indices.map(index => ({
      index,
      name: name(index) || `column ${index + 1}`,
      sample: cells(index).slice(0, 3).map(cell => cell.trim().slice(0, 40)),
      guess: index === epochColumn || index === monthColumn || index === dayColumn ? 'epoch' : index === endColumn ? 'end' : index === valueColumn ? 'value' : index === sigmaColumn ? 'sigma' : 'other'
    })),
    chosen: {
      epochColumn, endColumn, monthColumn, dayColumn, valueColumn, sigmaColumn, epochFormat,
      endDayIncluded: given.endDayIncluded ?? endsAreIncluded(table, epochColumn, endColumn, epochFormat),
      unit: given.unit ?? unitOf(name(valueColumn))
    },
    valueColumns: sideBySide(candidates, name)
  }
}

const yearName = /^(?:year|yr|yyyy|jahr|año|année|anno)$/i
const monthName = /^(?:month|mon|mm|monat|mes|mois|mese)$/i
const dayName = /^(?:day|dd|tag|día|dia|jour|giorno|day of month)$/i

/** Columns named as year and month, and day, that hold whole numbers in their range; those that are given stand. */
function yearMonthDay(table: Table, given: ColumnChoices, cells: (index: number) => string[], name: (index: number) => string): { year: number, month: number, day: number | null } | null {
  if (given.monthColumn === null) return null
  const holds = (index: number, low: number, high: number): boolean => {
    const numbers = cells(index).filter(cell => !isMissing(cell)).map(cell => parseNumber(cell, table.decimalComma))
    return numbers.length > 0 && numbers.filter(x => Number.isInteger(x) && x >= low && x <= high).length > 0.9 * numbers.length
  }
  const find = (named: RegExp, low: number, high: number): number | undefined =>
    Array.from({ length: table.width }, (_, i) => i).find(index => named.test(name(index)) && index !== given.valueColumn && index !== given.sigmaColumn && holds(index, low, high))
  const year = given.epochColumn ?? find(yearName, 1800, 2200)
  const month = given.monthColumn ?? find(monthName, 1, 12)
  if (year === undefined || month === undefined || (given.monthColumn === undefined && !holds(year, 1800, 2200))) return null
  return { year, month, day: given.dayColumn !== undefined ? given.dayColumn : find(dayName, 1, 31) ?? null }
}

/** Columns of numbers that are neither errors nor descriptions, each with the column of errors that follows it or bears its name. */
function sideBySide(candidates: number[], name: (index: number) => string): RecognisedColumns['valueColumns'] {
  const sigmas = candidates.filter(index => sigmaName.test(name(index)))
  const values = candidates.filter(index => !sigmaName.test(name(index)) && !otherName.test(name(index)) && !epochName.test(name(index)))
  return values.map((index) => {
    const named = name(index) === '' ? undefined : sigmas.find(s => bareName(name(s)) === bareName(name(index)))
    const next = sigmas.includes(index + 1) && /^\W*$/.test(bareName(name(index + 1))) ? index + 1 : undefined
    const alone = values.length === 1 ? sigmas[0] : undefined
    return { valueColumn: index, sigmaColumn: named ?? next ?? alone ?? null, name: name(index) || `column ${index + 1}` }
  })
}

/** A column's name without the words for errors and units. */
function bareName(name: string): string {
  return name.toLowerCase().replace(/one[- ]?sigma|sigma|σ|±|\+\/-|errors?|err|uncertainty|unc|std|s\.?d\b|1s|[[(].*?[\])]|(^|[^a-z])(gt|mm|cm|km3|km³|m)(?=[^a-z]|$)/g, ' ').replace(/[\s_.,:-]+/g, ' ').trim()
}

/** Whether the last day of a period is part of it: by where the next period begins, or by its being the last of a month. */
function endsAreIncluded(table: Table, epochColumn: number, endColumn: number | null, format: EpochFormat): boolean {
  if (!hasWholeDays(format)) return false
  const ends: { startMjd: number, endMjd: number }[] = []
  for (const { cells } of table.rows.slice(0, LOOKED_AT)) {
    try {
      const parts = endColumn === null ? splitPeriod(cells[epochColumn] ?? '', table.decimalComma) : { from: cells[epochColumn] ?? '', to: cells[endColumn] ?? '', format }
      if (!parts || !hasWholeDays(parts.format)) continue
      ends.push({ startMjd: parsePeriod(parts.from, parts.format).mjd, endMjd: parsePeriod(parts.to, parts.format).mjd })
    } catch (error) {
      // A cell that is no date is listed when the rows are read.
      if (!(error instanceof RangeError)) throw error
    }
  }
  if (ends.length === 0) return false
  const steps = ends.slice(1).map((end, i) => end.startMjd - ends[i]!.endMjd)
  const included = steps.filter(step => step === 1).length
  const excluded = steps.filter(step => step === 0).length
  if (included !== excluded) return included > excluded
  return ends.every(({ startMjd, endMjd }) => endMjd === startMjd || isLastOfMonth(endMjd))
}

function isLastOfMonth(mjd: number): boolean {
  return calendarFromMjd(mjd + 1).day === 1
}

/** Unit by the name of the column; gigatonnes where it says nothing. */
function unitOf(name: string): MassUnit {
  if (/(^|[^a-z])mm([^a-z]|$)/i.test(name)) return 'mm-we'
  return /(^|[^a-z])cm([^a-z]|$)/i.test(name) ? 'cm-we' : 'Gt'
}

function best<T>(items: T[], score: (item: T) => number): T | undefined {
  let found: T | undefined
  let highest = -Infinity
  for (const item of items) {
    const value = score(item)
    if (value > highest) {
      highest = value
      found = item
    }
  }
  return found
}

function fail(code: string, message: string): never {
  throw new InputError('The columns could not be recognised', [{ code, message }])
}
