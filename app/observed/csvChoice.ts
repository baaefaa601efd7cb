import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import { recogniseColumns } from '#shared/observed/observedCsv'
import { readTable } from '#shared/series/table'

export type CsvChoice = NonNullable<BodyOf<typeof contracts.observedCreate>['csv']>
export type CsvQuantity = keyof NonNullable<CsvChoice['columns']>

export const csvQuantities: readonly { id: CsvQuantity, name: string }[] = [
  { id: 'lodMs', name: 'excess length of day' },
  { id: 'sigmaLodMs', name: 'one sigma of the length of day' },
  { id: 'xMas', name: 'pole x, towards Greenwich' },
  { id: 'sigmaXMas', name: 'one sigma of x' },
  { id: 'yMas', name: 'pole y, towards 90° W' },
  { id: 'sigmaYMas', name: 'one sigma of y' },
  { id: 'chi1Mas', name: 'excitation χ₁' },
  { id: 'chi2Mas', name: 'excitation χ₂' },
]

export interface TableHead {
  columns: string[]
  sample: string[][]
  /** Quantities that the names of the columns tell. */
  recognised: CsvChoice['columns']
}

/** Names of a table's columns with its first rows, to choose from; null where the text is no table. */
export function tableHead(text: string): TableHead | null {
  try {
    const table = readTable(text.slice(0, 200_000))
    const columns = Array.from({ length: table.width }, (_, i) => table.header?.[i]?.trim() || `column ${i + 1}`)
    return { columns, sample: table.rows.slice(0, 4).map(row => row.cells), recognised: recogniseColumns(table) }
  }
  catch {
    return null
  }
}

/** The choice with one quantity put on a column, or taken off it (null). */
export function withColumn(choice: CsvChoice, quantity: CsvQuantity, column: number | null): CsvChoice {
  const columns = Object.fromEntries(Object.entries(choice.columns ?? {}).filter(([name]) => name !== quantity))
  return { ...choice, columns: column === null ? columns : { ...columns, [quantity]: column } }
}
