import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { mjdFromDecimalYear, mjdFromIsoDate } from '../../../shared/earth/time/epochs.ts'
import { readMassSeries } from '../../../shared/series/readMassSeries.ts'
import { tableLimits } from '../../../shared/series/table.ts'
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

describe('columns', () => {
  it('finds dates, mass and one-sigma by name', () => {
    const read = readMassSeries('quality,date,error_Gt,mass_Gt\n1,2002-04-17,2.5,-3\n1,2002-05-17,2.6,-4.5\n')
    expect(read.chosen).toMatchObject({ epochColumn: 1, valueColumn: 3, sigmaColumn: 2, epochFormat: 'iso-date', unit: 'Gt', delimiter: ',', header: true })
    expect(read.mjd).toEqual([52381, 52411])
    expect(read.massGt).toEqual([-3, -4.5])
    expect(read.sigmaGt).toEqual([2.5, 2.6])
    expect(read.columns.map(column => column.guess)).toEqual(['other', 'epoch', 'sigma', 'value'])
    expect(read.columns[3]).toMatchObject({ name: 'mass_Gt', sample: ['-3', '-4.5'] })
  })

  it('does not take a German column of errors for the values', () => {
    const read = readMassSeries('Datum;Speicher [mm];Fehler [mm]\n2004-01-15;n/a;4,0\n2004-02-15;1,5;4,0\n2004-03-15;2,5;4,0\n', { areaM2: 1e9 })
    expect(read.chosen).toMatchObject({ valueColumn: 1, sigmaColumn: 2 })
  })

  it('reads a table without header, of decimal years and blanks, under comments and a byte-order mark', () => {
    const read = readMassSeries('\uFEFF# an invented series\n#\n2004.50   10.5\n2005.50  -11\n')
    expect(read.chosen).toMatchObject({ epochFormat: 'decimal-year', delimiter: ' ', header: false, sigmaColumn: null })
    expect(read.mjd).toEqual([mjdFromDecimalYear(2004.5), mjdFromDecimalYear(2005.5)])
    expect(read.rows.map(row => row.row)).toEqual([3, 4])
    expect(read.sigmaGt).toBeNull()
  })

  it.each([
    ['semicolons and decimal commas', 'Datum;Masse Gt\n2002-04;-1,5\n2002-05;\u22122,25\n', [-1.5, -2.25], 'year-month'],
    ['tabs and MJD', 'mjd\tvalue\n52381.5\t1e2\n52382.5\t-2.5D1\n', [100, -25], 'mjd'],
    ['quoted cells with line ends', '"date","a ""note""","Gt"\n"2002-04-17","two\nlines",5\n2002-05-17,,6\n', [5, 6], 'iso-date'],
    ['Windows line ends', 'date,Gt\r\n2002-04-17,5\r\n2002-05-17,6\r\n', [5, 6], 'iso-date']
  ])('reads %s', (_, text, mass, format) => {
    const read = readMassSeries(text)
    expect(read.issues).toEqual([])
    expect(read.massGt).toEqual(mass)
    expect(read.chosen.epochFormat).toBe(format)
  })

  it('puts a month at its middle', () => {
    expect(readMassSeries('month,Gt\n2004-02,1\n2004-03,2\n').mjd[0]).toBe(mjdFromIsoDate('2004-02-15T12:00'))
  })

  it('can be corrected, and its choices can be given back', () => {
    const text = 'year,other,mass\n2004.5,7,1\n2005.5,8,2\n'
    const read = readMassSeries(text, { valueColumn: 1 })
    expect(read.massGt).toEqual([7, 8])
    const { areaM2, ...chosen } = read.chosen
    expect(areaM2).toBeNull()
    expect(readMassSeries(text, chosen)).toEqual(read)
  })

  it('says what is missing or does not fit', () => {
    expect(codesOf(() => readMassSeries(''))).toEqual(['no-rows'])
    expect(codesOf(() => readMassSeries('a,b\nx,y\n'))).toEqual(['no-epoch-column'])
    expect(codesOf(() => readMassSeries('date,b\n2002-04-17,y\n'))).toEqual(['no-value-column'])
    expect(codesOf(() => readMassSeries('date,Gt\n2002-04-17,1\n', { valueColumn: 5 }))).toEqual(['no-such-column'])
    expect(codesOf(() => readMassSeries('date,Gt\n2002-04-17,1\n', { epochColumn: 0, valueColumn: 0 }))).toContain('same-column')
  })
})

describe('conversion', () => {
  it('turns heights into mass over the ellipsoidal area: 1 mm over 1 000 km² is 1e-3 Gt', () => {
    const read = readMassSeries('date,lwe [mm]\n2002-04-17,1\n2002-05-17,-20\n', { areaM2: 1e9 })
    expect(read.chosen.unit).toBe('mm-we')
    expect(read.massGt[0]).toBeCloseTo(1e-3, 15)
    expect(read.massGt[1]).toBeCloseTo(-2e-2, 15)
    expect(read.conversion.steps.join(' ')).toContain('1 m of water is 1.0000 Gt')
  })

  it('takes ten times as much for centimetres, and turns the sign of withdrawal but not of its error', () => {
    const read = readMassSeries('date,water cm,err\n2002-04-17,1,0.5\n', { areaM2: 1e9, withdrawalPositive: true })
    expect(read.massGt[0]).toBeCloseTo(-1e-2, 15)
    expect(read.sigmaGt![0]).toBeCloseTo(5e-3, 15)
    expect(read.rows[0]!.value).toBe(1)
  })

  it('refuses heights without an area and wonders at 900 m', () => {
    expect(codesOf(() => readMassSeries('date,mm\n2002-04-17,1\n'))).toEqual(['area-missing'])
    expect(readMassSeries('date,mm\n2002-04-17,900000\n', { areaM2: 1e9 }).notices.map(n => n.code)).toEqual(['suspicious-unit'])
  })
})

describe('rows', () => {
  it('lists each row that cannot be used, with its line and its reason', () => {
    const read = readMassSeries([
      'date,Gt,sigma', // 1
      '2002-04-17,1,1',
      '2002-13-17,1,1', // 3
      '2002-05-17,,1', // 4
      '',
      '2002-06-17,1 000,1', // 6
      '2002-07-17,1', // 7
      '2002-08-17,1,-1', // 8
      '2002-04-17,3,1', // 9
      '2002-09-17,2,NaN', // 10
      '# remark',
      '2002-01-17,2,1',
      '2002-09-18,"2,1' // 13
    ].join('\n'))
    expect(read.issues.map(issue => [issue.row, issue.code])).toEqual([
      [3, 'bad-epoch'], [4, 'missing-value'], [6, 'not-a-number'], [7, 'missing-cell'], [8, 'sigma-not-positive'],
      [9, 'duplicate-epoch'], [10, 'missing-sigma'], [13, 'open-quote']
    ])
    expect(read.issues[5]).toMatchObject({ column: 'date', value: '2002-04-17', message: 'The epoch stands in row 2 already.' })
    expect(read.rows.map(row => row.row)).toEqual([12, 2])
    expect(read.notices.map(notice => notice.code)).toEqual(['sorted'])
    expect(read.rowsRead).toBe(10)
  })

  it('knows −9999 and the user’s own mark as missing, and −999 as a mass', () => {
    const read = readMassSeries('date,Gt\n2002-04-17,-9999\n2002-05-17,-999\n2002-06-17,777\n', { missingValues: ['777'] })
    expect(read.massGt).toEqual([-999])
    expect(read.issues.map(issue => issue.code)).toEqual(['missing-value', 'missing-value'])
  })

  it('accounts for every row, whatever the file holds', () => {
    const cell = fc.oneof(fc.string({ maxLength: 8 }), fc.constantFrom('2002-04-17', '2003-01-01', '1.5', '-3', 'nan', '', '"x"', '"', '1,5'))
    fc.assert(fc.property(
      fc.array(fc.array(cell, { minLength: 1, maxLength: 4 }), { maxLength: 30 }), fc.constantFrom(',', ';', '\t'),
      (rows, delimiter) => {
        const text = ['date', 'Gt', 'sigma'].join(delimiter) + '\n' + rows.map(row => row.join(delimiter)).join('\n')
        let read
        try {
          read = readMassSeries(text, { epochColumn: 0, valueColumn: 1, sigmaColumn: null, delimiter: delimiter as ',', header: true, epochFormat: 'iso-date' })
        } catch (error) {
          expect(error).toBeInstanceOf(InputError)
          return
        }
        expect(read.rows.length + read.issues.length).toBe(read.rowsRead)
        const lines = [...read.rows, ...read.issues].map(entry => entry.row!)
        expect(new Set(lines).size).toBe(lines.length)
        expect(read.mjd.every((mjd, i) => i === 0 || mjd > read.mjd[i - 1]!)).toBe(true)
      }
    ), { numRuns: 500 })
  })

  it('stops at its limits with 413', () => {
    const tooMany = `date,Gt\n${'2002-04-17,1\n'.repeat(tableLimits.rows + 1)}`
    expect(() => readMassSeries(tooMany)).toThrow('more than 200000 rows')
    expect(codesOf(() => readMassSeries(tooMany))).toEqual(['too-many-rows'])
    expect(codesOf(() => readMassSeries('a'.repeat(tableLimits.bytes + 1)))).toEqual(['too-large'])
  })
})
