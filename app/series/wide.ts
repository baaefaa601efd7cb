import { recogniseMassColumns } from '#shared/series/recogniseColumns'
import { readTable, type TableSource } from '#shared/series/table'
import { InputError } from '#shared/types/issue'
import type { ColumnChoices } from './preview'

/** Lines that are looked at. */
const head = 120

function headOf(source: TableSource): TableSource {
  if (typeof source !== 'string') return { cells: source.cells.slice(0, head) }
  let end = -1
  for (let i = 0; i < head; i++) {
    const next = source.indexOf('\n', end + 1)
    if (next < 0) return source
    end = next
  }
  return source.slice(0, end)
}

export interface RegionColumn { valueColumn: number, sigmaColumn: number | null, name: string, regionId: string | null }

/**
 * Columns of values of a wide table, each with the region whose name it bears: the longest name that stands in the column's, and no
 * region twice. Throws nothing: a table that is none has no columns.
 */
export function regionColumns(source: TableSource, regions: readonly { id: string, name: string }[]): RegionColumn[] {
  let columns: Omit<RegionColumn, 'regionId'>[]
  try {
    columns = recogniseMassColumns(readTable(headOf(source)), {}).valueColumns
  }
  catch (error) {
    if (error instanceof InputError) return []
    throw error
  }
  const byLength = [...regions].sort((a, b) => b.name.length - a.name.length)
  const taken = new Set<string>()
  const named = new Map<number, string>()
  // Whole names first, so that “Basin” does not take the column of “Basin North”.
  for (const fits of [(column: string, name: string) => column === name, (column: string, name: string) => column.includes(name)]) {
    for (const column of columns) {
      if (named.has(column.valueColumn)) continue
      const found = byLength.find(({ id, name }) => bare(name) !== '' && !taken.has(id) && fits(bare(column.name), bare(name)))
      if (!found) continue
      named.set(column.valueColumn, found.id)
      taken.add(found.id)
    }
  }
  return columns.map(({ valueColumn, sigmaColumn, name }) => ({ valueColumn, sigmaColumn, name, regionId: named.get(valueColumn) ?? null }))
}

/** Names of all columns of a table; empty for one that is none. */
export function namesOfColumns(source: TableSource): string[] {
  try {
    const table = readTable(headOf(source))
    return Array.from({ length: table.width }, (_, index) => table.header?.[index]?.trim() || `column ${index + 1}`)
  }
  catch (error) {
    if (error instanceof InputError) return []
    throw error
  }
}

/** Letters and digits of a name, for comparing names of columns and regions. */
const bare = (name: string) => name.toLowerCase().replace(/[^\p{L}\p{N}]+/gu, ' ').trim()

export interface WideColumns {
  /** Columns of values that stand side by side; one or none in a plain table. */
  names: string[]
  /** What a wide table makes of the columns that were not chosen by hand. */
  choices: Pick<ColumnChoices, 'valueColumn' | 'sigmaColumn'>
}

/**
 * In a table with a column for each region: the column that bears the region's name, and the one-sigma that belongs to the
 * chosen column rather than the first one of the table.
 */
export function wideColumns(source: TableSource, given: ColumnChoices, regionName: string): WideColumns {
  let found: ReturnType<typeof recogniseMassColumns>
  try {
    const { delimiter, decimalComma, header } = given
    found = recogniseMassColumns(readTable(headOf(source), { delimiter, decimalComma, header }), { ...given })
  }
  catch (error) {
    if (error instanceof InputError) return { names: [], choices: {} }
    throw error
  }
  const { valueColumns } = found
  const names = valueColumns.map(column => column.name)
  if (valueColumns.length < 2) return { names, choices: {} }
  const choices: WideColumns['choices'] = {}
  let value = found.chosen.valueColumn
  if (given.valueColumn === undefined) {
    const named = regionName ? valueColumns.filter(column => bare(column.name).includes(bare(regionName))) : []
    if (named.length === 1) {
      value = named[0]!.valueColumn
      choices.valueColumn = value
    }
  }
  if (given.sigmaColumn === undefined) {
    const own = valueColumns.find(column => column.valueColumn === value)?.sigmaColumn ?? null
    const owner = valueColumns.find(column => column.sigmaColumn !== null && column.sigmaColumn === found.chosen.sigmaColumn)
    if (own !== null || (owner && owner.valueColumn !== value)) choices.sigmaColumn = own
  }
  return { names, choices }
}
