import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'
import { epochFormatTexts } from './epochColumn.ts'
import type { EpochFormat } from './epochColumn.ts'
import { rowSteps } from './massRows.ts'
import type { CellEdit, MassSeriesRow, RowLeftOut, RowsRead } from './massRows.ts'
import { recipeOf } from './massUnits.ts'
import type { MassUnit } from './massUnits.ts'
import { gtPerMetre } from './recipe.ts'
import type { Recipe, Replayed, SeriesTable } from './recipe.ts'
import { recogniseMassColumns } from './recogniseColumns.ts'
import type { ColumnGuess, RecognisedColumns } from './recogniseColumns.ts'
import { replayRecipe } from './replay.ts'
import { allAtOnce, withPauses } from './steps.ts'
import type { PaceOptions, Steps } from './steps.ts'
import { tableSteps } from './table.ts'
import type { Table, TableOptions, TableSource } from './table.ts'

export type { MassSeriesRow } from './massRows.ts'

export interface MassSeriesOptions extends TableOptions {
  /** Columns counted from 0; absent: recognised. `sigmaColumn: null` reads no one-sigma though a column looks like one. */
  epochColumn?: number
  /** Where each row's period ends; null: rows have no end though a column looks like one. */
  endColumn?: number | null
  /** Month, and day, in columns of their own beside the year in `epochColumn`; null: none though a column looks like one. */
  monthColumn?: number | null
  dayColumn?: number | null
  valueColumn?: number
  sigmaColumn?: number | null
  epochFormat?: EpochFormat
  /** The last day of a period is part of it. */
  endDayIncluded?: boolean
  unit?: MassUnit
  /** Ellipsoidal area of the region, m²; needed for heights. */
  areaM2?: number | null
  /** The file counts water taken out as positive: the sign is turned. */
  withdrawalPositive?: boolean
  /** Marks of a missing value besides blank, NaN and −9999. */
  missingValues?: string[]
  /** Cells put right by hand, and rows left out on purpose; both are kept with the reading. */
  edits?: CellEdit[]
  leaveOut?: RowLeftOut[]
  /** The way to gigatonnes in place of `unit`, `areaM2` and `withdrawalPositive`. */
  recipe?: Recipe | null
}

export interface MassSeriesReading {
  columns: { index: number, name: string, sample: string[], guess: ColumnGuess }[]
  /** Every choice as it was used: give it back as options, changed where it was wrong. */
  chosen: RecognisedColumns['chosen'] & {
    areaM2: number | null, withdrawalPositive: boolean, recipe: Recipe | null
    delimiter: Table['delimiter'], decimalComma: boolean, header: boolean, missingValues: string[], edits: CellEdit[], leaveOut: RowLeftOut[]
  }
  /** Good rows in order of time. */
  rows: MassSeriesRow[]
  /** Line in the file of each epoch that is stored. */
  lineOf: number[]
  /** One entry for each row that cannot be used, in order of the file: rowsRead = rows.length + issues.length + leftOut.length. */
  issues: Issue[]
  /** Rows that were left out on purpose, and cells that were put right, as they were. */
  leftOut: RowsRead['leftOut']
  edited: RowsRead['edited']
  /** What the user should know and need not mend: rows that were sorted, values that look like another unit. */
  notices: Issue[]
  /** The good rows as a recipe takes them. */
  table: SeriesTable
  /** The recipe that was carried out, and what came of it. */
  recipe: Recipe
  replayed: Replayed
  mjd: number[]
  /** Mass change in Gt on the same epochs, gain positive; one-sigma in Gt or null. One epoch more than rows where rates were summed. */
  massGt: number[]
  sigmaGt: number[] | null
  conversion: { steps: string[], gtPerUnit: number }
  /** Data rows of the file: header, comments and blank lines are none. */
  rowsRead: number
}

/**
 * Reads a mass-change series from delimited text or from the cells of a sheet. Nothing is dropped in silence: each row of the file is
 * in `rows`, in `issues` with its line number and the reason, or in `leftOut`.
 *
 * @throws InputError when the text is empty or too large, columns cannot be found, an area is needed and missing, or rates have no periods
 */
export function readMassSeries(source: TableSource, options: MassSeriesOptions = {}): MassSeriesReading {
  return allAtOnce(readingSteps(source, options))
}

/** As `readMassSeries`, with pauses and progress, and to be cancelled: a page stays alive over 100 000 rows. */
export function readMassSeriesPaced(source: TableSource, options: MassSeriesOptions, pace: PaceOptions): Promise<MassSeriesReading> {
  return withPauses(readingSteps(source, options), pace)
}

function* readingSteps(source: TableSource, options: MassSeriesOptions): Steps<MassSeriesReading> {
  return yield* seriesSteps(yield* tableSteps(source, options), options)
}

/** A series of a table that is read already. */
export function* seriesSteps(table: Table, options: MassSeriesOptions): Steps<MassSeriesReading> {
  const needsPeriods = options.recipe?.steps.some(step => step.kind === 'integrate') ?? false
  const recognised = recogniseMassColumns(table, { ...options, needsPeriods })
  const chosen: MassSeriesReading['chosen'] = {
    ...recognised.chosen,
    areaM2: options.areaM2 ?? null,
    withdrawalPositive: options.withdrawalPositive ?? false,
    recipe: options.recipe ?? null,
    delimiter: table.delimiter,
    decimalComma: table.decimalComma,
    header: table.header !== null,
    missingValues: options.missingValues ?? [],
    edits: options.edits ?? [],
    leaveOut: options.leaveOut ?? []
  }
  checkColumns(chosen, table.width)
  const recipe = chosen.recipe ?? recipeOf(chosen.unit, chosen.areaM2, chosen.withdrawalPositive)
  const { rows, issues, leftOut, edited, sortedRows } = yield* rowSteps(table, chosen)
  const values = tableOf(rows)
  const replayed = replayRecipe(recipe, values)
  return {
    columns: recognised.columns,
    chosen,
    rows,
    lineOf: linesOf(rows, replayed, needsPeriods),
    issues,
    leftOut,
    edited,
    notices: [...notices(rows, recipe, sortedRows), ...uncovered(replayed)],
    table: values,
    recipe,
    replayed,
    mjd: replayed.mjd,
    massGt: replayed.massGt,
    sigmaGt: replayed.sigmaGt,
    conversion: {
      steps: [epochFormatTexts[chosen.epochFormat], ...chosen.endDayIncluded ? ['The last day of a period is part of it.'] : [], ...replayed.steps.map(step => step.sentence)],
      gtPerUnit: gtPerUnitOf(recipe)
    },
    rowsRead: table.rows.length + table.broken.length
  }
}

/** Columns of good rows; periods only where every row has one. */
function tableOf(rows: readonly MassSeriesRow[]): SeriesTable {
  const periods = rows.length > 0 && rows.every(row => row.endMjd > row.startMjd)
  return {
    mjd: rows.map(row => row.mjd),
    startMjd: periods ? rows.map(row => row.startMjd) : null,
    endMjd: periods ? rows.map(row => row.endMjd) : null,
    value: rows.map(row => row.value),
    sigma: rows.length > 0 && rows[0]!.sigma !== null ? rows.map(row => row.sigma!) : null
  }
}

/** Lines of the epochs that stay: summed rates have one epoch more than rows, and a step may have left some out. */
function linesOf(rows: readonly MassSeriesRow[], { leftOut }: Replayed, summed: boolean): number[] {
  const gone = new Set(leftOut.map(({ mjd }) => mjd))
  const epochs = summed && rows.length > 0 ? [{ mjd: rows[0]!.startMjd, row: rows[0]!.row }, ...rows.map(({ endMjd, row }) => ({ mjd: endMjd, row }))] : rows
  return epochs.filter(({ mjd }) => !gone.has(mjd)).map(({ row }) => row)
}

/** Epochs that a step left out, as one notice. */
function uncovered({ leftOut }: Replayed): Issue[] {
  if (leftOut.length === 0) return []
  const first = leftOut.slice(0, 3).map(({ message }) => message).join(' ')
  return [{ code: 'not-covered', message: `${leftOut.length === 1 ? 'One epoch is' : `${leftOut.length} epochs are`} left out, since nothing is carried on beyond a series that is taken off. ${first}${leftOut.length > 3 ? ' …' : ''}` }]
}

/** Size of the step from a unit of the file to gigatonnes (per year for a rate), its sign left out. */
function gtPerUnitOf({ steps }: Recipe): number {
  return steps.reduce((factor, step) => {
    if (step.kind === 'unit') return factor * step.unit.factor
    if (step.kind === 'storage') return factor * step.parameter.value
    if (step.kind === 'density') return factor * step.parameter.value / 1000
    return step.kind === 'area' ? factor * gtPerMetre(step.parameter.value) : factor
  }, 1)
}

function checkColumns(chosen: MassSeriesReading['chosen'], width: number): void {
  const issues: Issue[] = []
  const used = (['epochColumn', 'endColumn', 'monthColumn', 'dayColumn', 'valueColumn', 'sigmaColumn'] as const).filter(name => chosen[name] !== null)
  for (const name of used) {
    const column = chosen[name]!
    if (!(Number.isInteger(column) && column >= 0 && column < width)) {
      issues.push({ path: name, code: 'no-such-column', message: `The file has ${width} columns; column ${column + 1} is none of them.` })
    }
  }
  if (new Set(used.map(name => chosen[name])).size < used.length) {
    issues.push({ path: 'valueColumn', code: 'same-column', message: 'Epoch, end, month, day, value and one-sigma must be in different columns.' })
  }
  if (issues.length > 0) throw new InputError('The chosen columns do not fit the file', issues)
}

/** Greatest height of water that is believed, m. */
const MOST_METRES = 100

function notices(rows: readonly MassSeriesRow[], { steps }: Recipe, sortedRows: number): Issue[] {
  const found: Issue[] = []
  if (sortedRows > 0) {
    found.push({ code: 'sorted', message: `${sortedRows === 1 ? 'One row was' : `${sortedRows} rows were`} not in order of time; the rows have been sorted.` })
  }
  const unit = steps.find(step => step.kind === 'unit')?.unit
  if (unit?.quantity === 'water-height') {
    const metres = rows.reduce((most, row) => Math.max(most, Math.abs(row.value)), 0) * unit.factor
    if (metres > MOST_METRES) found.push({ code: 'suspicious-unit', message: `The largest height is ${Math.round(metres)} m of water. Check the unit.` })
  }
  return found
}
