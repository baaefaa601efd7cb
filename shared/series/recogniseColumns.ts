import { InputError } from '../types/issue.ts'
import { recogniseEpochFormat } from './epochColumn.ts'
import type { EpochFormat } from './epochColumn.ts'
import type { MassUnit } from './massUnits.ts'
import { isMissing, parseNumber } from './numbers.ts'
import type { Table } from './table.ts'

export type ColumnGuess = 'epoch' | 'value' | 'sigma' | 'other'
export interface ColumnChoices { epochColumn?: number, valueColumn?: number, sigmaColumn?: number | null, epochFormat?: EpochFormat, unit?: MassUnit }

export interface RecognisedColumns {
  columns: { index: number, name: string, sample: string[], guess: ColumnGuess }[]
  chosen: { epochColumn: number, valueColumn: number, sigmaColumn: number | null, epochFormat: EpochFormat, unit: MassUnit }
}

const epochName = /date|epoch|time|mjd|year|month|jahr|datum|fecha/i
const sigmaName = /sigma|σ|±|\+\/-|err|unc|std|fehler|unsich|incert|s\.?d\b|1s/i
const valueName = /mass|gt\b|gigaton|lwe|tws|ewh|water|storage|value|thick|anomal|mm|cm/i
/** Rows that a guess looks at. */
const LOOKED_AT = 100

/**
 * Which column holds the epoch, the value and its one-sigma, by names and by what the cells look like; choices that are given
 * stand. A column named as an error is never taken as the value.
 */
export function recogniseMassColumns(table: Table, given: ColumnChoices): RecognisedColumns {
  const count = table.width
  const cells = (index: number): string[] => table.rows.slice(0, LOOKED_AT).map(row => row.cells[index] ?? '')
  const name = (index: number): string => table.header?.[index]?.trim() ?? ''
  const numeric = (index: number): number => {
    const filled = cells(index).filter(cell => !isMissing(cell))
    return filled.length === 0 ? 0 : filled.filter(cell => !Number.isNaN(parseNumber(cell, table.decimalComma))).length / filled.length
  }
  const indices = Array.from({ length: count }, (_, i) => i)

  const epochs = indices.map(index => ({ index, found: recogniseEpochFormat(cells(index), table.decimalComma), named: epochName.test(name(index)) }))
  const taken = new Set([given.valueColumn, given.sigmaColumn])
  const epoch = given.epochColumn !== undefined
    ? epochs[given.epochColumn]
    : best(epochs.filter(e => !taken.has(e.index) && e.found), e => e.found!.share + (e.named ? 0.6 : 0) + (e.index === 0 ? 0.1 : 0))
  const epochColumn = given.epochColumn ?? epoch?.index
  if (epochColumn === undefined) fail('no-epoch-column', 'No column of dates, months, decimal years or Modified Julian Dates was found.')

  const candidates = indices.filter(index => index !== epochColumn && numeric(index) > 0.5)
  const sigmaColumn = given.sigmaColumn !== undefined
    ? given.sigmaColumn
    : candidates.find(index => index !== given.valueColumn && sigmaName.test(name(index))) ?? null
  const valueColumn = given.valueColumn ?? best(candidates.filter(index => index !== sigmaColumn), index =>
    numeric(index) + (valueName.test(name(index)) ? 1 : 0) - (sigmaName.test(name(index)) ? 2 : 0) - (epochName.test(name(index)) ? 0.5 : 0) - index * 1e-3)
  if (valueColumn === undefined) fail('no-value-column', 'No column of numbers was found beside the epochs.')

  const unit = given.unit ?? unitOf(name(valueColumn))
  const epochFormat = given.epochFormat ?? epoch?.found?.format ?? 'iso-date'
  return {
    columns: indices.map(index => ({
      index,
      name: name(index) || `column ${index + 1}`,
      sample: cells(index).slice(0, 3).map(cell => cell.trim().slice(0, 40)),
      guess: index === epochColumn ? 'epoch' : index === valueColumn ? 'value' : index === sigmaColumn ? 'sigma' : 'other'
    })),
    chosen: { epochColumn, valueColumn, sigmaColumn, epochFormat, unit }
  }
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
