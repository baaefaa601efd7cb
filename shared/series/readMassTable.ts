import { seriesSteps } from './readMassSeries.ts'
import type { MassSeriesOptions, MassSeriesReading } from './readMassSeries.ts'
import { recogniseMassColumns } from './recogniseColumns.ts'
import type { RecognisedColumns } from './recogniseColumns.ts'
import { allAtOnce, withPauses } from './steps.ts'
import type { PaceOptions, Steps } from './steps.ts'
import { tableSteps } from './table.ts'
import type { Table, TableSource } from './table.ts'

/** One series of a wide table: what differs from the others. */
export type WideSeriesChoice = Pick<MassSeriesOptions, 'valueColumn' | 'sigmaColumn' | 'unit' | 'areaM2' | 'withdrawalPositive' | 'recipe' | 'edits' | 'leaveOut'> & { valueColumn: number }

export interface MassTableOptions extends Omit<MassSeriesOptions, 'valueColumn' | 'sigmaColumn'> {
  /** Columns that become series; absent: every column of numbers that is no error and no description. */
  series?: WideSeriesChoice[]
}

export interface MassTableReading {
  columns: MassSeriesReading['columns']
  /** Columns that look like series, whether or not they were chosen. */
  valueColumns: RecognisedColumns['valueColumns']
  /** A reading for each series, which accounts for every row of the file. */
  series: (MassSeriesReading & { name: string })[]
}

/**
 * Reads a wide table, a column for each region, into several series that share their epochs. A row without a value for one region is
 * listed there and good for the others.
 *
 * @throws InputError as `readMassSeries`
 */
export function readMassTable(source: TableSource, options: MassTableOptions = {}): MassTableReading {
  return allAtOnce(wideSteps(source, options))
}

/** As `readMassTable`, with pauses and progress. */
export function readMassTablePaced(source: TableSource, options: MassTableOptions, pace: PaceOptions): Promise<MassTableReading> {
  return withPauses(wideSteps(source, options), pace)
}

function* wideSteps(source: TableSource, { series: chosen, ...common }: MassTableOptions): Steps<MassTableReading> {
  const table = yield* tableSteps(source, common)
  const { columns, valueColumns } = recogniseMassColumns(table, common)
  const choices: WideSeriesChoice[] = chosen ?? valueColumns.map(({ valueColumn, sigmaColumn }) => ({ valueColumn, sigmaColumn }))
  const series: MassTableReading['series'] = []
  for (const choice of choices) {
    const reading = yield* scaledProgress(seriesSteps(table, { ...common, sigmaColumn: null, ...choice }), series.length / choices.length, 1 / choices.length)
    series.push({ ...reading, name: nameOf(table, choice.valueColumn) })
  }
  return { columns, valueColumns, series }
}

function* scaledProgress<T>(steps: Steps<T>, from: number, part: number): Steps<T> {
  for (;;) {
    const { done, value } = steps.next()
    if (done) return value as T
    // Rows are read from 0.7 of the way on; the table itself took what is before.
    yield 0.7 + 0.3 * (from + part * ((value as number) - 0.7) / 0.3)
  }
}

function nameOf(table: Table, index: number): string {
  return table.header?.[index]?.trim() || `column ${index + 1}`
}
