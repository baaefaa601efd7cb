import { taiMinusUtcSeconds } from '../earth/time/timeScales.ts'
import type { Issue } from '../types/issue.ts'
import type { ObservedSeries } from '../types/run.ts'

/** What a reader of observed series gives: the series, the rows that it could not use, and how it read the file. */
export interface ParsedObserved extends ObservedSeries {
  /** Each row that was left out, with its line in the file and the reason. */
  issues: Issue[]
  /** How the file was understood, in sentences. */
  understood: string[]
}

export const observedQuantities = ['xMas', 'yMas', 'sigmaXMas', 'sigmaYMas', 'lodMs', 'sigmaLodMs', 'chi1Mas', 'chi2Mas'] as const
export type ObservedQuantity = typeof observedQuantities[number]
export type ObservedRow = { mjd: number, predicted?: boolean } & Partial<Record<ObservedQuantity | 'ut1MinusTaiMs', number>>

/** Gathers rows in order of the file, refuses epochs that do not increase, and hands out typed columns. */
export class ObservedColumns {
  readonly issues: Issue[] = []
  readonly understood: string[] = []
  emptyRows = 0
  rowsRead = 0
  private readonly rows: ObservedRow[] = []
  private last = -Infinity

  add(row: ObservedRow, line: number): void {
    if (row.mjd <= this.last) {
      const repeated = row.mjd === this.last
      this.refuse(line, repeated ? 'duplicate-epoch' : 'epoch-order', `MJD ${row.mjd} ${repeated ? 'appears twice' : `follows MJD ${this.last}; epochs must increase`}.`, String(row.mjd))
      return
    }
    this.last = row.mjd
    this.rows.push(row)
  }

  refuse(line: number, code: string, message: string, value?: string): void {
    this.issues.push({ row: line, code, message, ...(value === undefined ? {} : { value: value.slice(0, 60) }) })
  }

  get size(): number {
    return this.rows.length
  }

  /** Columns as typed arrays, NaN where a quantity is missing. */
  finish(format: ObservedSeries['format']): ParsedObserved {
    const column = (name: ObservedQuantity | 'ut1MinusTaiMs'): Float64Array => Float64Array.from(this.rows, row => row[name] ?? Number.NaN)
    const holds = (name: ObservedQuantity | 'ut1MinusTaiMs'): boolean => this.rows.some(row => row[name] !== undefined && !Number.isNaN(row[name]))
    return {
      format,
      mjd: Float64Array.from(this.rows, row => row.mjd),
      xMas: column('xMas'),
      yMas: column('yMas'),
      sigmaXMas: column('sigmaXMas'),
      sigmaYMas: column('sigmaYMas'),
      lodMs: column('lodMs'),
      sigmaLodMs: column('sigmaLodMs'),
      predicted: Uint8Array.from(this.rows, row => row.predicted ? 1 : 0),
      emptyRows: this.emptyRows,
      rowsRead: this.rowsRead,
      issues: this.issues,
      understood: this.understood,
      ...(holds('ut1MinusTaiMs') ? { ut1MinusTaiMs: column('ut1MinusTaiMs') } : {}),
      ...(holds('chi1Mas') || holds('chi2Mas') ? { chi1Mas: column('chi1Mas'), chi2Mas: column('chi2Mas') } : {})
    }
  }
}

/** UT1 − TAI in ms from the field of a file that holds UT1 − UTC in seconds: leap seconds and the rates of UTC before 1972 are out. */
export function ut1MinusTaiMs(field: string, mjdUtc: number): number {
  return scaledDecimal(field, 3) - taiMinusUtcSeconds(mjdUtc) * 1000
}

const decimal = /^[+-]?(?:\d+\.?\d*|\.\d+)$/

/**
 * A decimal number of a file times a power of ten, without a rounding of its own: the exponent is put behind the digits,
 * so −0.012700 arcseconds become −12.7 mas exactly. NaN for a blank field; RangeError for anything else.
 */
export function scaledDecimal(field: string, exponent: number): number {
  const text = field.trim()
  if (text === '') return Number.NaN
  if (!decimal.test(text)) throw new RangeError(`expected a number, got “${text.slice(0, 30)}”`)
  return Number(`${text}e${exponent}`)
}
