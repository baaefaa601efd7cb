import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { mjdFromDecimalYear, mjdFromIsoDate } from '../../../shared/earth/time/epochs.ts'
import { decodeText } from '../../../shared/series/decodeText.ts'
import { plainUnits, type UnderstoodUnit } from '../../../shared/series/quantityKinds.ts'
import { conversionRecipe } from '../../../shared/series/conversion.ts'
import { readMassSeries, readMassSeriesPaced, type MassSeriesOptions } from '../../../shared/series/readMassSeries.ts'
import { readMassTable, readMassTablePaced } from '../../../shared/series/readMassTable.ts'
import { InputError } from '../../../shared/types/issue.ts'

function codesOf(run: () => unknown): string[] {
  try {
    run()
  } catch (error) {
    if (error instanceof InputError) return error.issues.map(issue => issue.code)
    throw error
  }
  return []
}

const bytesOf = (text: string, encoding: 'utf16le' | 'latin1' | 'utf8'): Uint8Array => new Uint8Array(Buffer.from(text, encoding))

describe('bytes of a file', () => {
  const text = 'date,Gt ±\n2002-04-17,1\n2002-05-17,2\n'
  const swapped = (bytes: Uint8Array): Uint8Array => bytes.map((_, i) => bytes[i ^ 1]!)

  it('are UTF-8, with or without mark', () => {
    expect(decodeText(bytesOf(text, 'utf8'))).toBe(text)
    expect(decodeText(bytesOf(`\uFEFF${text}`, 'utf8'))).toBe(text)
  })

  it('are UTF-16 of either order, with or without mark', () => {
    expect(decodeText(bytesOf(`\uFEFF${text}`, 'utf16le'))).toBe(text)
    expect(decodeText(swapped(bytesOf(`\uFEFF${text}`, 'utf16le')))).toBe(text)
    expect(decodeText(bytesOf(text, 'utf16le'))).toBe(text)
    expect(decodeText(swapped(bytesOf(text, 'utf16le')))).toBe(text)
  })

  it('are Windows-1252 where they are no UTF-8', () => {
    expect(decodeText(bytesOf(text, 'latin1'))).toBe(text)
  })
})

describe('epochs', () => {
  const first = (text: string, options: MassSeriesOptions = {}) => {
    const read = readMassSeries(text, options)
    return { format: read.chosen.epochFormat, issues: read.issues, ...read.rows[0]! }
  }

  it.each([
    ['day of year', 'epoch,Gt\n2002-107,1\n2002-137,2\n', 'day-of-year', mjdFromIsoDate('2002-04-17')],
    ['day of year in seven digits', 'epoch,Gt\n2004366,1\n2005001,2\n', 'day-of-year', mjdFromIsoDate('2004-12-31')],
    ['year-month in six digits', 'epoch,Gt\n200402,1\n200403,2\n', 'year-month', mjdFromIsoDate('2004-02-15T12:00')],
    ['decimal year with comma', 'epoch;Gt\n2004,5;1,5\n2005,5;2,5\n', 'decimal-year', mjdFromDecimalYear(2004.5)],
    ['decimal years that are whole', 'epoch,Gt\n2004,1\n2005,2\n', 'decimal-year', mjdFromIsoDate('2004-01-01')],
    ['periods in one cell', 'epoch,Gt\n2002-10-01/2003-09-30,1\n2003-10-01/2004-09-30,2\n', 'period', (mjdFromIsoDate('2002-10-01') + mjdFromIsoDate('2003-10-01')) / 2],
    ['periods of months', 'epoch,Gt\n2002-10 – 2003-09,1\n2003-10 – 2004-09,2\n', 'period', (mjdFromIsoDate('2002-10-01') + mjdFromIsoDate('2003-10-01')) / 2],
    ['periods of decimal years', 'epoch,Gt\n2002.75 to 2003.75,1\n', 'period', (mjdFromDecimalYear(2002.75) + mjdFromDecimalYear(2003.75)) / 2]
  ])('reads %s', (_, text, format, mjd) => {
    const read = first(text)
    expect(read.issues).toEqual([])
    expect(read.format).toBe(format)
    expect(read.mjd).toBeCloseTo(mjd, 9)
  })

  it('refuses days that the year does not have', () => {
    expect(readMassSeries('epoch,Gt\n2003-366,1\n2004-366,1\n2004-000,1\n').issues.map(issue => [issue.row, issue.code])).toEqual([[2, 'bad-epoch'], [4, 'bad-epoch']])
  })

  it('takes the last day of a period as part of it where the next begins a day later, and not where it begins on it', () => {
    const included = readMassSeries('start,end,Gt\n2002-10-01,2003-09-30,1\n2003-10-01,2004-09-30,2\n')
    expect(included.chosen).toMatchObject({ epochColumn: 0, endColumn: 1, valueColumn: 2, endDayIncluded: true })
    expect(included.table.endMjd).toEqual([mjdFromIsoDate('2003-10-01'), mjdFromIsoDate('2004-10-01')])
    expect(included.conversion.steps).toContain('The last day of a period is part of it.')
    const excluded = readMassSeries('from;to;Gt\n2002-10-01;2003-10-01;1\n2003-10-01;2004-10-01;2\n')
    expect(excluded.chosen.endDayIncluded).toBe(false)
    expect(excluded.table.endMjd).toEqual(included.table.endMjd)
    expect(readMassSeries('start,end,Gt\n2002-10-01,2003-09-30,1\n', { endDayIncluded: false }).table.endMjd).toEqual([mjdFromIsoDate('2003-09-30')])
  })

  it('lists a period that ends before it begins', () => {
    const read = readMassSeries('start,end,Gt\n2003-10-01,2002-09-30,1\n2003-10-01,2004-09-30,2\n')
    expect(read.issues).toMatchObject([{ row: 2, code: 'bad-epoch' }])
    expect(read.issues[0]!.message).toContain('expected an end after the beginning')
  })

  it('takes bare years as periods where a rate is integrated, and sums them', () => {
    const unit: UnderstoodUnit = { quantity: 'mass-rate', typed: 'Gt/yr', canonical: 'Gt/yr', factor: 1, perPeriod: false, reading: '“Gt/yr” is read as gigatonnes per year.' }
    const read = readMassSeries('year,rate\n2003,-10\n2004,-20\n', { recipe: conversionRecipe({ unit }) })
    expect(read.chosen.epochFormat).toBe('year')
    expect(read.mjd).toEqual([2003, 2004, 2005].map(y => mjdFromIsoDate(`${y}-01-01`)))
    expect(read.massGt).toEqual([0, -10, -30])
    expect(read.rows).toHaveLength(2)
  })
})

describe('files as people keep them', () => {
  it('passes over comments of several kinds and keeps the numbers of the lines', () => {
    const read = readMassSeries('% made up\n! so is this\n// and this\n# epoch value\n2002-04-17\t1\n\n2002-05-17\t2\n')
    expect(read.rows.map(row => row.row)).toEqual([5, 7])
    expect(read.chosen.delimiter).toBe('\t')
  })

  it('takes the cells of a sheet', () => {
    const read = readMassSeries({ cells: [['date', 'Gt'], ['', ''], ['2002-04-17', '1'], ['2002-05-17', 'x'], ['2002-06-17', '3']] })
    expect(read.rows).toMatchObject([{ row: 3, value: 1 }, { row: 5, value: 3 }])
    expect(read.issues).toMatchObject([{ row: 4, code: 'not-a-number' }])
  })

  it('puts cells right in place and leaves rows out on purpose, and keeps what stood there', () => {
    const text = 'date,Gt\n2002-04-17,1\n2002-05-17,1O\n2002-06-17,oops\n2002-07-17,4\n2002-08-17,5\n'
    expect(readMassSeries(text).issues.map(issue => issue.row)).toEqual([3, 4])
    const read = readMassSeries(text, { edits: [{ row: 3, column: 1, text: '10' }], leaveOut: [{ row: 4, reason: 'sensor failed' }, { row: 5, reason: 'after repair' }] })
    expect(read.issues).toEqual([])
    expect(read.massGt).toEqual([1, 10, 5])
    expect(read.edited).toEqual([{ row: 3, column: 1, text: '10', was: '1O' }])
    expect(read.leftOut).toEqual([{ row: 4, reason: 'sensor failed', text: '2002-06-17 oops' }, { row: 5, reason: 'after repair', text: '2002-07-17 4' }])
    expect(read.rows.length + read.issues.length + read.leftOut.length).toBe(read.rowsRead)
    expect(readMassSeries(text, read.chosen)).toEqual(read)
    expect(codesOf(() => readMassSeries(text, { leaveOut: [{ row: 40, reason: '' }] }))).toEqual(['no-such-row'])
  })
})

describe('wide tables', () => {
  const text = [
    'month;north Gt;north sigma;south Gt;± south;flag',
    '2002-04;1,5;0,5;-2;0,1;0',
    '2002-05;2,5;0,5;;0,1;0',
    '2002-06;NaN;0,5;-4;0,1;1'
  ].join('\n')

  it('makes a series of every column of numbers, each with its one-sigma and its own account of rows', () => {
    const read = readMassTable(text)
    expect(read.valueColumns.map(({ valueColumn, sigmaColumn }) => [valueColumn, sigmaColumn])).toEqual([[1, 2], [3, 4]])
    expect(read.series.map(series => [series.name, series.massGt, series.sigmaGt, series.issues.map(issue => issue.row)])).toEqual([
      ['north Gt', [1.5, 2.5], [0.5, 0.5], [4]],
      ['south Gt', [-2, -4], [0.1, 0.1], [3]]
    ])
    for (const series of read.series) expect(series.rows.length + series.issues.length).toBe(series.rowsRead)
  })

  it('takes the columns that are chosen, each with its own way to gigatonnes', () => {
    const read = readMassTable(text, {
      series: [
        { valueColumn: 3, sigmaColumn: null, leaveOut: [{ row: 3, reason: 'no visit' }] },
        { valueColumn: 1, recipe: conversionRecipe({ unit: plainUnits['cm-we'], area: { value: 1e11, sigma: 0, source: null } }) }
      ]
    })
    expect(read.series[0]).toMatchObject({ massGt: [-2, -4], sigmaGt: null, issues: [], leftOut: [{ row: 3 }] })
    expect(read.series[1]!.massGt).toEqual([1.5, 2.5])
  })
})

describe('year, month and day in columns of their own', () => {
  it('are recognised by their names and values', () => {
    const read = readMassSeries('Year,Month,TWS (Gt),sigma\n2004,1,5,1\n2004,2,6,1\n2004,12,7,1\n')
    expect(read.chosen).toMatchObject({ epochColumn: 0, monthColumn: 1, dayColumn: null, valueColumn: 2, sigmaColumn: 3, epochFormat: 'year-month' })
    // The middle of January 2004, from MJD 53005 (IERS).
    expect(read.mjd[0]).toBe(53005 + 15.5)
    const daily = readMassSeries('mass;Jahr;Monat;Tag\n5;2004;2;29\n6;2004;3;1\n7;2004;2;30\n')
    expect(daily.chosen).toMatchObject({ epochColumn: 1, monthColumn: 2, dayColumn: 3, valueColumn: 0, epochFormat: 'iso-date' })
    // MJD 53064 is 29 February 2004 (53005 is 1 January).
    expect(daily.mjd).toEqual([53064, 53065])
    expect(daily.issues).toMatchObject([{ row: 4, code: 'bad-epoch' }])
  })

  it('are told by hand, or that there are none', () => {
    const text = 'a,b,c\n2004,1,5\n2005,2,6\n2006,3,7\n'
    expect(readMassSeries(text, { epochColumn: 0, monthColumn: 1, valueColumn: 2 }).mjd[1]).toBe(mjdFromIsoDate('2005-02-01') + 14)
    expect(readMassSeries('year,month,Gt\n2004,1,5\n2005,2,6\n2006,3,7\n', { monthColumn: null }).chosen).toMatchObject({ epochFormat: 'decimal-year', monthColumn: null })
    expect(codesOf(() => readMassSeries(text, { epochColumn: 0, monthColumn: 2, valueColumn: 2 }))).toEqual(['same-column'])
    expect(codesOf(() => readMassSeries(text, { epochColumn: 0, monthColumn: 7, valueColumn: 2 }))).toEqual(['no-such-column'])
  })
})

describe('every row is accounted for', () => {
  const cell = fc.oneof(
    fc.string({ maxLength: 6 }),
    fc.constantFrom('2002-04-17', '2003-01-01', '2003-02-30', '2002-107', '2004.5', '1.5', '-3', 'nan', '', '"x"', '"', '1,5', '#', '%', '−9999', '-9999', '2002-10/2003-09')
  )
  const file = fc.record({
    rows: fc.array(fc.array(cell, { minLength: 1, maxLength: 5 }), { maxLength: 25 }),
    delimiter: fc.constantFrom(',' as const, ';' as const, '\t' as const, '|' as const, ' ' as const),
    ending: fc.constantFrom('\n', '\r\n', '\r')
  })
  const options = fc.record({
    epochFormat: fc.constantFrom('iso-date' as const, 'day-of-year' as const, 'decimal-year' as const, 'period' as const, 'year-month' as const),
    leaveOut: fc.boolean().map((some): { row: number, reason: string }[] => some ? [{ row: 2, reason: 'try' }] : []), decimalComma: fc.boolean()
  })

  function accounted(read: { rows: { row: number }[], issues: { row?: number }[], leftOut: { row: number }[], rowsRead: number, mjd: number[] }): void {
    const lines = [...read.rows, ...read.issues, ...read.leftOut].map(entry => entry.row!)
    expect(lines.length).toBe(read.rowsRead)
    expect(new Set(lines).size).toBe(lines.length)
    expect(read.mjd.every((mjd, i) => i === 0 || mjd > read.mjd[i - 1]!)).toBe(true)
  }
  const orRefused = (run: () => void): void => {
    try {
      run()
    } catch (error) {
      expect(error).toBeInstanceOf(InputError)
    }
  }

  it('by the reader of text, of sheets and of wide tables alike', () => {
    fc.assert(fc.property(file, options, ({ rows, delimiter, ending }, chosen) => {
      const text = ['date', 'a', 'b', 'c'].join(delimiter) + ending + rows.map(row => row.join(delimiter)).join(ending)
      orRefused(() => accounted(readMassSeries(text, { ...chosen, epochColumn: 0, valueColumn: 1, sigmaColumn: null, endColumn: null, delimiter, header: true })))
      orRefused(() => accounted(readMassSeries({ cells: [['date', 'a', 'b', 'c'], ...rows] }, { ...chosen, epochColumn: 0, valueColumn: 1, sigmaColumn: 2, endColumn: 3, header: true })))
      orRefused(() => readMassTable(text, { ...chosen, epochColumn: 0, delimiter, header: true, series: [{ valueColumn: 1 }, { valueColumn: 2, sigmaColumn: 3 }] }).series.forEach(accounted))
    }), { numRuns: 300 })
  })

  it('with year, month and day in columns of their own', () => {
    const part = fc.constantFrom('2004', '2005', '1', '02', '12', '13', '30', '31', '', 'x', '1.5')
    fc.assert(fc.property(fc.array(fc.array(part, { minLength: 1, maxLength: 4 }), { maxLength: 20 }), fc.boolean(), (rows, days) => {
      const text = `year,month,day,mass\n${rows.map(row => row.join(',')).join('\n')}`
      orRefused(() => accounted(readMassSeries(text, { epochColumn: 0, monthColumn: 1, dayColumn: days ? 2 : null, valueColumn: 3, sigmaColumn: null })))
    }), { numRuns: 300 })
  })

  it('whatever is recognised', () => {
    fc.assert(fc.property(file, ({ rows, delimiter, ending }) => {
      orRefused(() => accounted(readMassSeries(rows.map(row => row.join(delimiter)).join(ending))))
    }), { numRuns: 300 })
  })
})

describe('reading in steps', () => {
  const text = `date,Gt,sigma\n${Array.from({ length: 30_000 }, (_, i) => `${20_000 + i},${i % 7},1`).join('\n')}\nbad,1,1`

  it('gives what reading at once gives, with pauses and rising progress', async () => {
    let pauses = 0
    const progress: number[] = []
    const read = await readMassSeriesPaced(text, {}, { pause: async () => { pauses++ }, onProgress: done => progress.push(done) })
    expect(read).toEqual(readMassSeries(text))
    expect(read.rowsRead).toBe(30_001)
    expect(pauses).toBeGreaterThanOrEqual(12)
    expect(progress.every((done, i) => done >= 0 && done <= 1 && (i === 0 || done >= progress[i - 1]!))).toBe(true)
  })

  it('can be ended', async () => {
    const end = new AbortController()
    let pauses = 0
    const reading = readMassTablePaced(text, {}, { pause: async () => { if (++pauses === 3) end.abort(new Error('enough')) }, signal: end.signal })
    await expect(reading).rejects.toThrow('enough')
    expect(pauses).toBe(3)
  })
})
