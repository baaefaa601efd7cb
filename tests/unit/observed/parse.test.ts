import { readFileSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { parseObserved, recogniseObserved } from '../../../shared/observed/parse.ts'
import { InputError } from '../../../shared/types/issue.ts'

const fixture = (name: string): string => readFileSync(new URL(`../../fixtures/${name}`, import.meta.url), 'latin1')

describe('IERS EOP 14 C04', () => {
  const text = fixture('eop14c04_cut.txt')

  it('is recognised by content and read to the digit', () => {
    expect(recogniseObserved(text)).toBe('eop14c04')
    const series = parseObserved(text)
    expect(series.format).toBe('eop14c04')
    expect(series.issues).toEqual([])
    expect(series.rowsRead).toBe(159)
    expect(series.mjd).toHaveLength(159)
    // 1962-01-01: -0.012700 0.213000 … 0.0017230 … 0.030000 0.030000 … 0.0014000
    expect([series.mjd[0], series.xMas[0], series.yMas[0], series.lodMs[0]]).toEqual([37665, -12.7, 213, 1.723])
    expect([series.sigmaXMas[0], series.sigmaYMas[0], series.sigmaLodMs[0]]).toEqual([30, 30, 1.4])
    // UT1−UTC of 1962-01-01, 0.0326338 s, and the 1.845858 s of TAI−UTC that day (IERS, UTC-TAI.history); 37 s in 2022.
    expect(series.ut1MinusTaiMs![0]!).toBeCloseTo(32.6338 - 1845.858, 6)
    expect(series.ut1MinusTaiMs![158]! + 37000).toBeCloseTo(-19.2085, 6)
    // 2022-11-29: 0.149881 0.189736 … 0.0000128 … 0.000032 0.000022 … 0.0000071
    expect([series.mjd[158], series.xMas[158], series.yMas[158], series.lodMs[158]]).toEqual([59912, 149.881, 189.736, 0.0128])
    expect([series.sigmaXMas[158], series.sigmaYMas[158], series.sigmaLodMs[158]]).toEqual([0.032, 0.022, 0.0071])
  })

  it('is read whole, 22 248 days of it', () => {
    const whole = gunzipSync(readFileSync(new URL('../../fixtures/eop14c04_1962_2022.txt.gz', import.meta.url))).toString('latin1')
    const series = parseObserved(whole)
    expect(series.issues).toEqual([])
    expect(series.mjd).toHaveLength(59912 - 37665 + 1)
    expect(series.mjd.every((mjd, i) => mjd === 37665 + i)).toBe(true)
  })

  it('does not mind Windows line ends or a byte-order mark', () => {
    expect(parseObserved(`\uFEFF${text.replaceAll('\n', '\r\n')}`)).toEqual(parseObserved(text))
  })

  it('lists rows that do not hold, by their line, and keeps the rest', () => {
    const lines = text.split('\n')
    lines[20] = lines[20]!.slice(0, 60)
    lines[21] = lines[21]!.replace('37672', '37675')
    lines[22] = lines[22]!.replace(/-?0\.\d{6}/, '********')
    lines[24] = lines[23]!
    const series = parseObserved(lines.join('\n'))
    expect(series.issues.map(issue => [issue.row, issue.code])).toEqual([[21, 'field-count'], [22, 'date-mismatch'], [23, 'not-a-number'], [25, 'duplicate-epoch']])
    expect(series.mjd.length + series.issues.length).toBe(series.rowsRead)
  })
})

describe('IERS EOP 20 C04', () => {
  // Invented values in the format that the header of the published files states.
  const header = `# EOP (IERS) 20 C04 TIME SERIES  consistent with ITRF 2020 - sampled at 0h UTC
# format(4(i4),f10.2,2(f12.6),f12.7,2(f12.6),2(f12.6),f12.7,2(f12.6),f12.7,2(f12.6),2(f12.6),f12.7)
`
  const row = (day: number, mjd: string): string =>
    `2014   1${String(day).padStart(4)}   0${mjd.padStart(10)}    0.111111    0.222222  -0.0333333    0.000044    0.000055   -0.000666    0.000777   0.0012345    0.000071    0.000052   0.0000163    0.000109    0.000110    0.000087    0.000124   0.0000529`

  it('takes length of day from field 13 and its error from the last', () => {
    const series = parseObserved(`${header}${row(1, '56658.00')}\n${row(2, '56659.00')}\n`)
    expect(series.format).toBe('eop20c04')
    expect([series.mjd[1], series.xMas[1], series.yMas[1], series.lodMs[1]]).toEqual([56659, 111.111, 222.222, 1.2345])
    expect([series.sigmaXMas[1], series.sigmaYMas[1], series.sigmaLodMs[1]]).toEqual([0.071, 0.052, 0.0529])
  })
})

describe('IERS finals2000A', () => {
  const text = fixture('finals2000A_excerpt.txt')
  const series = parseObserved(text)

  it('is read from its fixed columns, to the digit', () => {
    expect(series.format).toBe('finals2000a')
    expect(series.issues).toEqual([])
    // 2015-01-26: 0.002902 0.000024 0.302160 0.000040, length of day 1.2748 0.0071 ms
    expect([series.mjd[0], series.xMas[0], series.sigmaXMas[0], series.yMas[0], series.sigmaYMas[0]]).toEqual([57048, 2.902, 0.024, 302.16, 0.04])
    expect([series.lodMs[0], series.sigmaLodMs[0]]).toEqual([1.2748, 0.0071])
  })

  it('marks the seven predictions by columns 17 and 58, not by column 96', () => {
    expect([...series.predicted].map((p, i) => p ? series.mjd[i] : 0).filter(Boolean)).toEqual([57101, 57102, 57103, 57104, 57105, 57106, 57107])
    expect(text.split('\n').filter(line => line[95] === 'P').length).toBeGreaterThan(7)
  })

  it('leaves a blank length of day open', () => {
    const at = series.mjd.indexOf(57100)
    expect(series.predicted[at]).toBe(0)
    expect(series.xMas[at]).toBe(3.45)
    expect(series.lodMs[at]).toBeNaN()
  })

  it('counts rows that hold a date only and lists broken ones', () => {
    const longer = `${text.trimEnd()}\n15 327 57108.00${' '.repeat(60)}\n15 328 57109.00\n15 329 57111.00 P  0.007984 0.002113\n`
    const read = parseObserved(longer)
    expect(read.emptyRows).toBe(2)
    expect(read.issues).toHaveLength(1)
    expect(read.issues[0]).toMatchObject({ row: 63, code: 'date-mismatch' })
    expect(read.mjd.length + read.emptyRows + read.issues.length).toBe(read.rowsRead)
  })

  it('reads fields that touch', () => {
    const touching = `${text.split('\n')[0]!.slice(0, 18)}-10.002902${text.split('\n')[0]!.slice(28)}`
    expect(parseObserved(touching).xMas[0]).toBeCloseTo(-10.002902e3, 0)
  })
})

describe('a table of observed rotation', () => {
  it('finds columns and units by name', () => {
    const series = parseObserved('date,LOD [ms],xp (mas),yp (mas)\n2010-01-01,0.8,100,200\n2010-01-02,,101,201\n2010-01-03,nan,,\n')
    expect(series.format).toBe('csv')
    expect([...series.lodMs]).toEqual([0.8, Number.NaN])
    expect([...series.xMas]).toEqual([100, 101])
    expect([series.emptyRows, series.rowsRead]).toEqual([1, 3])
    expect(series.understood.join(' ')).toContain('Length of day in milliseconds.')
  })

  it('tells arcseconds and seconds by size where the names say nothing', () => {
    const series = parseObserved('mjd;x;y;lod\n55197;0,1;0,2;0,00081\n55198;0,1;0,2;0,00082\n')
    expect([series.xMas[0], series.lodMs[0]]).toEqual([100, 0.81])
  })

  it('takes chosen columns without a header, excitation too', () => {
    const series = parseObserved('2010.0 5 -3\n2010.5 6 -4\n', { csv: { columns: { chi1Mas: 1, chi2Mas: 2 } } })
    expect([...series.chi1Mas!]).toEqual([5, 6])
    expect(series.mjd[0]).toBe(55197)
  })

  it('says what is missing', () => {
    expect(() => parseObserved('')).toThrow(InputError)
    expect(() => parseObserved('a,b\n1,2\n')).toThrow('No column of epochs')
    expect(() => parseObserved('date,b\n2010-01-01,2\n')).toThrow('No column of the pole')
  })

  it('accounts for every row: read = kept + empty + listed', () => {
    const cell = fc.oneof(fc.integer({ min: -5, max: 5 }).map(String), fc.constantFrom('', 'nan', 'x', '1e3', '"'))
    const row = fc.tuple(fc.constantFrom('2010-01-01', '2010-01-02', '2010-02-30', '2011-05-05', 'oops'), cell)
    fc.assert(fc.property(fc.array(row, { minLength: 1, maxLength: 30 }), rows => {
      const text = `date,lod\n${rows.map(r => r.join(',')).join('\n')}\n2012-01-01,1\n`
      const series = parseObserved(text, { csv: { epochColumn: 0, epochFormat: 'iso-date' } })
      expect(series.mjd.length + series.emptyRows + series.issues.length).toBe(series.rowsRead)
    }))
  })
})

describe('anything else', () => {
  it('never throws other than InputError', () => {
    fc.assert(fc.property(fc.oneof(fc.string({ maxLength: 400 }), fc.string({ unit: fc.constantFrom('1', '9', ' ', '\n', ',', '.', '-', 'I', '"'), maxLength: 400 })), text => {
      try {
        parseObserved(text)
      } catch (error) {
        expect(error).toBeInstanceOf(InputError)
      }
    }), { numRuns: 300 })
  })
})
