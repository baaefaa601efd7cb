import { describe, expect, it } from 'vitest'
import { isAngularMomentum, readAngularMomentum } from '../../../shared/observed/angularMomentum.ts'
import { recogniseObserved } from '../../../shared/observed/parse.ts'
import { InputError } from '../../../shared/types/issue.ts'

// Invented values in the layout that is usual for such files.
const header = `Atmospheric angular momentum, invented values
year month day hour   MJD     mass term: X  Y  Z     motion term: X  Y  Z
`
const rows = `2010  1  1  0  55197.000  -1.1E-07  2.2E-07 -3.3E-09  4.4E-09 -5.5E-09  6.6E-09
2010  1  1  6  55197.250  -1.2E-07  2.3E-07 -3.4E-09  4.5E-09 -5.6E-09  6.7E-09
2010  1  1 12  55197.500  -1.3E-07  2.4E-07 -3.5E-09  4.6E-09 -5.7E-09  6.8D-09
`
const issuesOf = (text: string): string[] => {
  try {
    readAngularMomentum(text)
  } catch (error) {
    if (error instanceof InputError) return error.issues.map(issue => issue.code)
    throw error
  }
  return []
}

describe('a series of angular momentum', () => {
  it('is recognised by content and read to the digit, mass and motion apart', () => {
    expect(isAngularMomentum(header + rows)).toBe(true)
    const series = readAngularMomentum(header + rows)
    expect([...series.mjd]).toEqual([55197, 55197.25, 55197.5])
    expect([...series.mass.chi1]).toEqual([-1.1e-7, -1.2e-7, -1.3e-7])
    expect([...series.mass.chi3]).toEqual([-3.3e-9, -3.4e-9, -3.5e-9])
    expect([...series.motion.chi2]).toEqual([-5.5e-9, -5.6e-9, -5.7e-9])
    expect([...series.motion.chi3]).toEqual([6.6e-9, 6.7e-9, 6.8e-9])
    expect([series.stepDays, series.rowsRead, series.issues.length]).toEqual([0.25, 3, 0])
    expect(series.suggestedComponent).toBe('atmosphere')
    expect(series.understood.join(' ')).toContain('every 6 h')
  })

  it('takes the order of the terms from the header, or as chosen', () => {
    const wind = header.replace('mass term', 'wind term').replace('motion term', 'pressure term') + rows
    expect([...readAngularMomentum(wind).motion.chi1]).toEqual([-1.1e-7, -1.2e-7, -1.3e-7])
    expect([...readAngularMomentum(wind, { order: 'mass-first' }).mass.chi1]).toEqual([-1.1e-7, -1.2e-7, -1.3e-7])
    expect(readAngularMomentum(rows).understood.join(' ')).toContain('the header does not say')
  })

  it('reads daily rows with an ISO date, commas, Windows line ends and a byte-order mark', () => {
    const text = '\uFEFF# ocean\r\n2010-01-01,55197,1e-8,2e-8,3e-10,4e-9,5e-9,6e-11\r\n2010-01-02,55198,1e-8,2e-8,3e-10,4e-9,5e-9,6e-11\r\n'
    const series = readAngularMomentum(text)
    expect([...series.mjd]).toEqual([55197, 55198])
    expect(series.suggestedComponent).toBe('ocean')
    expect(series.understood.join(' ')).toContain('every 1 d')
  })

  it('lists rows that do not hold by their line and keeps the rest', () => {
    const bad = `${rows}2010 1 2 0 55199.0 1e-8 1e-8 1e-9 1e-9 1e-9 1e-9
2010 1 1 12 55197.500 1e-8 1e-8 1e-9 1e-9 1e-9 1e-9
2010 1 2 0 55198.0 1e-8 ***** 1e-9 1e-9 1e-9 1e-9
2010 1 2 6 55198.25 NaN NaN NaN NaN NaN NaN
2010 1 2 12 55198.5 1e-8 NaN 1e-9 1e-9 1e-9 1e-9
`
    const series = readAngularMomentum(bad)
    expect(series.issues.map(issue => [issue.row, issue.code])).toEqual([[4, 'not-a-row'], [5, 'duplicate-epoch'], [6, 'not-a-number']])
    expect([series.mjd.length, series.emptyRows, series.rowsRead]).toEqual([4, 1, 8])
    expect(series.mass.chi2[3]).toBeNaN()
  })

  it('refuses values in other units, and texts of another kind', () => {
    expect(issuesOf(rows.replaceAll('E-07', 'E-01'))).toEqual(['unit'])
    expect(issuesOf('date,Gt\n2010-01-01,5\n')).toEqual(['no-rows'])
    expect(isAngularMomentum('2014 1 1 0 56658.00 0.1 0.2')).toBe(false)
    // A C04 row has sixteen fields: four too many for a date and six values.
    const c04 = '2015   1   1  57023   0.026786   0.282400  -0.4634520   0.0012000   0.000010   0.000100   0.000030   0.000030  0.0000100  0.0000100    0.000030    0.000030'
    expect(isAngularMomentum(c04)).toBe(false)
    expect(recogniseObserved(c04)).toBe('eop14c04')
  })
})
