import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { mjdFromIsoDate } from '../../../shared/earth/time/epochs.ts'
import { readMassSeries } from '../../../shared/series/readMassSeries.ts'
import { readMassTable } from '../../../shared/series/readMassTable.ts'
import { isWorkbook, readWorkbook, workbookLimits } from '../../../shared/series/workbook.ts'
import { InputError } from '../../../shared/types/issue.ts'

const bytes = new Uint8Array(readFileSync('tests/fixtures/series/invented.xlsx'))

async function codeOf(file: Uint8Array): Promise<string> {
  try {
    await readWorkbook(file)
  } catch (error) {
    if (error instanceof InputError) return error.issues[0]!.code
    throw error
  }
  return ''
}

// Written by openpyxl 3.0.9, another implementation of the format; the script is in tests/fixtures/series/README.md.
describe('XLSX workbooks', () => {
  it('gives numbers with their digits and dates as ISO', async () => {
    const sheets = await readWorkbook(bytes)
    expect(sheets.map(sheet => sheet.name)).toEqual(['storage', 'heads'])
    expect(sheets[0]!.cells[1]).toEqual(['date', 'mass Gt', 'sigma Gt'])
    expect(sheets[0]!.cells[2]).toEqual(['2003-01-16', '0.1', '0.5'])
    expect(sheets[0]!.cells[26]).toEqual(['2005-01-16T12:00:00', 'no value', '0.5'])
    expect(sheets[1]!.cells[1]).toEqual(['2003.5', '12.5', '0.00001'])
  })

  it('reads a sheet as a series: rows that fail are listed by their number in the sheet', async () => {
    const [storage] = await readWorkbook(bytes)
    const read = readMassSeries({ cells: storage!.cells.slice(1) })
    expect(read.chosen).toMatchObject({ epochColumn: 0, valueColumn: 1, sigmaColumn: 2, epochFormat: 'iso-date' })
    expect(read.mjd[0]).toBe(mjdFromIsoDate('2003-01-16'))
    expect(read.massGt[2]).toBeCloseTo(-3.65, 12)
    // A formula that no program has computed yet has no value; the row of words has none either.
    expect(read.issues.map(issue => [issue.row, issue.code])).toEqual([[4, 'missing-value'], [26, 'not-a-number']])
    expect(read.rows.length + read.issues.length).toBe(read.rowsRead)
  })

  it('reads a wide sheet', async () => {
    const sheets = await readWorkbook(bytes)
    expect(readMassTable({ cells: sheets[1]!.cells }).series.map(series => [series.name, series.rows[0]!.value])).toEqual([['north m', 12.5], ['south m', 1e-5]])
  })

  it('refuses what is no workbook, is damaged or unpacks to too much', async () => {
    expect(isWorkbook(bytes)).toBe(true)
    expect(await codeOf(new TextEncoder().encode('date,Gt\n'))).toBe('not-a-workbook')
    expect(await codeOf(bytes.slice(0, 2000))).toBe('not-a-workbook')
    const liar = bytes.slice()
    const view = new DataView(liar.buffer)
    let entry = liar.length - 22
    while (view.getUint32(entry, true) !== 0x02014b50) entry--
    view.setUint32(entry + 24, workbookLimits.unpackedBytes + 1, true)
    expect(await codeOf(liar)).toBe('too-large')
  })
})
