import { fitTrend } from '#shared/earth/time/trend'
import { readMassSeries, type MassSeriesOptions, type MassSeriesReading, type MassSeriesRow } from '#shared/series/readMassSeries'
import { readTable } from '#shared/series/table'
import { InputError, type Issue } from '#shared/types/issue'

/** What somebody set by hand; what is left out is recognised. */
export type ColumnChoices = Pick<MassSeriesOptions,
  'epochColumn' | 'valueColumn' | 'sigmaColumn' | 'epochFormat' | 'unit' | 'withdrawalPositive' | 'delimiter' | 'decimalComma' | 'header' | 'missingValues'>

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
  rowsRead: number
  /** Trend of the mass, Gt per year; null for fewer than three epochs. */
  trend: { value: number, sigmaWhite: number, sigma: number } | null
}

/** The text cannot be read as it stands: why, and its columns where there is a table at all. */
export interface Refusal { state: 'refused', message: string, issues: Issue[], columns: FileColumn[] }

const ends = 4

/** Reads a text as the server will, and keeps what a person needs to see of it. Pure, so that a worker can do it. */
export function previewOf(text: string, choices: ColumnChoices, areaM2: number): Preview | Refusal {
  let reading: MassSeriesReading
  try {
    reading = readMassSeries(text, { ...choices, areaM2 })
  }
  catch (error) {
    if (!(error instanceof InputError)) throw error
    return { state: 'refused', message: error.message, issues: error.issues, columns: columnsOf(text, choices) }
  }
  const { rows, mjd, massGt, sigmaGt } = reading
  const at = (row: MassSeriesRow, i: number): PreviewRow => ({ row: row.row, epochText: row.epochText, valueText: row.valueText, sigma: row.sigma, mjd: row.mjd, massGt: massGt[i]!, sigmaGt: sigmaGt?.[i] ?? null })
  const cut = rows.length <= 2 * ends ? rows.length : ends
  return {
    state: 'read',
    columns: reading.columns.map(({ index, name, sample }) => ({ index, name, sample })),
    chosen: reading.chosen,
    head: rows.slice(0, cut).map((row, i) => at(row, i)),
    tail: rows.slice(Math.max(cut, rows.length - ends)).map((row, i, all) => at(row, rows.length - all.length + i)),
    issues: reading.issues,
    notices: reading.notices,
    mjd: Float64Array.from(mjd),
    massGt: Float64Array.from(massGt),
    sigmaGt: sigmaGt && Float64Array.from(sigmaGt),
    steps: reading.conversion.steps,
    rowsRead: reading.rowsRead,
    trend: trendOf(mjd, massGt, sigmaGt),
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
function columnsOf(text: string, { delimiter, decimalComma, header }: ColumnChoices): FileColumn[] {
  try {
    const table = readTable(text, { delimiter, decimalComma, header })
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
  const { epochColumn, valueColumn, sigmaColumn, epochFormat, unit, withdrawalPositive, delimiter, decimalComma, header, missingValues } = chosen
  return { epochColumn, valueColumn, sigmaColumn, epochFormat, unit, withdrawalPositive, delimiter, decimalComma, header, ...(missingValues.length ? { missingValues } : {}) }
}
