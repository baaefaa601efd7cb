import { fitTrend } from '#shared/earth/time/trend'
import type { OtherSeries } from '#shared/series/agreement'
import { checkSeries, type Mark } from '#shared/series/checks'
import { readMassSeries, readMassSeriesPaced, type MassSeriesOptions, type MassSeriesReading, type MassSeriesRow } from '#shared/series/readMassSeries'
import type { Recipe, StepDone } from '#shared/series/recipe'
import type { PaceOptions } from '#shared/series/steps'
import { readTable, type TableSource } from '#shared/series/table'
import { InputError, type Issue } from '#shared/types/issue'
import { wideColumns } from './wide'

/** What somebody set by hand; what is left out is recognised. */
export type ColumnChoices = Pick<MassSeriesOptions,
  'epochColumn' | 'endColumn' | 'monthColumn' | 'dayColumn' | 'endDayIncluded' | 'valueColumn' | 'sigmaColumn' | 'epochFormat' | 'unit' | 'withdrawalPositive' | 'delimiter' | 'decimalComma' | 'header' | 'missingValues' | 'edits' | 'leaveOut'>
/** What a reading needs beside the table and the choices. */
export interface PreviewSetting {
  /** Name of the region, which a wide table may have as a column. */
  regionName?: string
  /** The way to gigatonnes where it is not that of a plain unit. */
  recipe?: Recipe | null
  /** What the series is held against: earlier versions, and series of regions on the same ground. */
  others?: readonly OtherSeries[]
}

export interface FileColumn { index: number, name: string, sample: string[] }
export interface PreviewRow { row: number, epochText: string, valueText: string, sigma: number | null, mjd: number, massGt: number, sigmaGt: number | null }

/** What would be stored, read in the browser by the same reader as on the server. */
export interface Preview {
  state: 'read'
  columns: FileColumn[]
  chosen: MassSeriesReading['chosen']
  /** First and last good rows in order of time. */
  head: PreviewRow[]
  tail: PreviewRow[]
  issues: Issue[]
  notices: Issue[]
  mjd: Float64Array
  massGt: Float64Array
  sigmaGt: Float64Array | null
  steps: string[]
  /** Steps of the conversion with their numbers. */
  stepsDone: StepDone[]
  /** What checks found; nothing is changed for it. */
  marks: Mark[]
  /** Cells of the value in the rows that a mark is about. */
  cells: Record<number, string>
  leftOut: MassSeriesReading['leftOut']
  edited: MassSeriesReading['edited']
  /** Names of the columns of values, where there are several side by side. */
  sideBySide: string[]
  rowsRead: number
  /** Trend of the mass, Gt per year; null for fewer than three epochs. */
  trend: { value: number, sigmaWhite: number, sigma: number } | null
}

/** The text cannot be read as it stands: why, and its columns where there is a table at all. */
export interface Refusal { state: 'refused', message: string, issues: Issue[], columns: FileColumn[], chosen: MassSeriesReading['chosen'] | null }

const ends = 4

/** Reads a table as the server will, and keeps what a person needs to see of it. Pure, so that a worker can do it. */
export function previewOf(source: TableSource, given: ColumnChoices, areaM2: number, setting: PreviewSetting = {}): Preview | Refusal {
  const { options, choices, names } = readingOptions(source, given, areaM2, setting)
  try {
    return shownOf(readMassSeries(source, options), names, areaM2, setting)
  }
  catch (error) {
    return refusalOf(error, source, choices, setting)
  }
}

/** As `previewOf`, with progress, for a table that takes a while. */
export async function previewPaced(source: TableSource, given: ColumnChoices, areaM2: number, setting: PreviewSetting, pace: PaceOptions): Promise<Preview | Refusal> {
  const { options, choices, names } = readingOptions(source, given, areaM2, setting)
  try {
    return shownOf(await readMassSeriesPaced(source, options, pace), names, areaM2, setting)
  }
  catch (error) {
    return refusalOf(error, source, choices, setting)
  }
}

function readingOptions(source: TableSource, given: ColumnChoices, areaM2: number, { regionName = '', recipe = null }: PreviewSetting) {
  const wide = wideColumns(source, given, regionName)
  const choices: ColumnChoices = { ...given, ...wide.choices }
  return { choices, names: wide.names, options: { ...choices, areaM2, recipe } }
}

function refusalOf(error: unknown, source: TableSource, choices: ColumnChoices, { recipe }: PreviewSetting): Refusal {
  if (!(error instanceof InputError)) throw error
  return { state: 'refused', message: error.message, issues: error.issues, columns: columnsOf(source, choices), chosen: recipe ? chosenOf(source, choices) : null }
}

function shownOf(reading: MassSeriesReading, names: string[], areaM2: number, { others = [] }: PreviewSetting): Preview {
  const { rows, mjd, massGt, sigmaGt } = reading
  const { lineOf } = reading
  // Summed rates have one epoch more than rows: each row's sum stands at its end. An epoch that a step left out has none.
  const placeOf = new Map(lineOf.map((line, i) => [line, i]))
  const kept = rows.filter(row => placeOf.has(row.row))
  const at = (row: MassSeriesRow): PreviewRow => {
    const i = placeOf.get(row.row)!
    return { row: row.row, epochText: row.epochText, valueText: row.valueText, sigma: row.sigma, mjd: mjd[i]!, massGt: massGt[i]!, sigmaGt: sigmaGt?.[i] ?? null }
  }
  const cut = kept.length <= 2 * ends ? kept.length : ends
  const marks = checkSeries({ mjd, massGt, sigmaGt, rows: lineOf, areaM2, others })
  const marked = new Set(marks.flatMap(mark => mark.rows))
  return {
    state: 'read',
    columns: reading.columns.map(({ index, name, sample }) => ({ index, name, sample })),
    chosen: reading.chosen,
    head: kept.slice(0, cut).map(at),
    tail: kept.slice(Math.max(cut, kept.length - ends)).map(at),
    issues: reading.issues,
    notices: reading.notices,
    mjd: Float64Array.from(mjd),
    massGt: Float64Array.from(massGt),
    sigmaGt: sigmaGt && Float64Array.from(sigmaGt),
    steps: reading.conversion.steps,
    stepsDone: reading.replayed.steps,
    marks,
    cells: Object.fromEntries(rows.filter(row => marked.has(row.row)).map(row => [row.row, row.valueText])),
    leftOut: reading.leftOut,
    edited: reading.edited,
    sideBySide: names.length > 1 ? names : [],
    rowsRead: reading.rowsRead,
    trend: trendOf(mjd, massGt, sigmaGt),
  }
}

/** The columns as they are understood where the conversion alone fails. */
function chosenOf(source: TableSource, choices: ColumnChoices): MassSeriesReading['chosen'] | null {
  try {
    return readMassSeries(source, { ...choices, unit: 'Gt' }).chosen
  }
  catch (error) {
    if (error instanceof InputError) return null
    throw error
  }
}

function trendOf(mjd: number[], value: number[], sigma: number[] | null): Preview['trend'] {
  try {
    const { value: trend, sigmaWhite, sigma: quoted } = fitTrend({ mjd, value, sigma })
    return { value: trend, sigmaWhite, sigma: quoted }
  }
  catch (error) {
    if (error instanceof RangeError) return null
    throw error
  }
}

/** Columns of a table whose meaning was not recognised, so that it can be said by hand. */
function columnsOf(source: TableSource, { delimiter, decimalComma, header }: ColumnChoices): FileColumn[] {
  try {
    const table = readTable(source, { delimiter, decimalComma, header })
    return Array.from({ length: table.width }, (_, index) => ({
      index, name: table.header?.[index]?.trim() || `column ${index + 1}`, sample: table.rows.slice(0, 3).map(row => (row.cells[index] ?? '').trim().slice(0, 40)),
    }))
  }
  catch (error) {
    if (error instanceof InputError) return []
    throw error
  }
}

/** The choices that the server is to read with: every one that the preview used. */
export function columnsToSend({ chosen }: Preview) {
  const { epochColumn, endColumn, monthColumn, dayColumn, endDayIncluded, valueColumn, sigmaColumn, epochFormat, unit, withdrawalPositive, delimiter, decimalComma, header, missingValues, edits, leaveOut } = chosen
  return {
    epochColumn, endColumn, monthColumn, dayColumn, endDayIncluded, valueColumn, sigmaColumn, epochFormat, unit, withdrawalPositive, delimiter, decimalComma, header,
    ...(missingValues.length ? { missingValues } : {}), ...(edits.length ? { edits } : {}), ...(leaveOut.length ? { leaveOut } : {}),
  }
}
