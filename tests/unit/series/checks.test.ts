import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { mjdFromIsoDate } from '../../../shared/earth/time/epochs.ts'
import { checkSeries, settleMarks, type Mark } from '../../../shared/series/checks.ts'
import { median, robustSigma, runningMedian } from '../../../shared/series/robust.ts'

/** Reproducible normal numbers for made-up series (Park & Miller's generator, Box & Muller). */
function noise(seed: number): () => number {
  let state = seed
  const uniform = (): number => (state = state * 48271 % 2147483647) / 2147483647
  return () => Math.sqrt(-2 * Math.log(uniform())) * Math.cos(2 * Math.PI * uniform())
}
const months = (n: number): number[] => Array.from({ length: n }, (_, i) => 52275 + i * 30.4375)
const usual = (n: number, seed = 7): { mjd: number[], massGt: number[] } => {
  const next = noise(seed)
  const mjd = months(n)
  return { mjd, massGt: mjd.map(t => 5 - 20 * (t - 52275) / 365.25 + 30 * Math.sin(2 * Math.PI * t / 365.25) + 3 * next()) }
}
const kinds = (marks: Mark[]): string[] => marks.map(m => m.kind)

describe('checks of a series', () => {
  it('find nothing in ordinary series: noise, seasons, trend', () => {
    for (let seed = 1; seed <= 20; seed++) expect(checkSeries({ ...usual(180, seed), areaM2: 1e12 }), `seed ${seed}`).toEqual([])
  })

  it('mark gaps with their length, but not months of 31 days', () => {
    const calendar = ['2016-12-16', '2017-01-16', '2017-02-15', '2017-03-16', '2017-04-16', '2017-05-16', '2017-06-16', '2018-06-16', '2018-07-16'].map(mjdFromIsoDate)
    const [gap, ...others] = checkSeries({ mjd: calendar, massGt: calendar.map((_, i) => i % 3), rows: calendar.map((_, i) => i + 2) })
    expect(others).toEqual([])
    expect(gap).toMatchObject({ kind: 'gap', fromMjd: mjdFromIsoDate('2017-06-16'), toMjd: mjdFromIsoDate('2018-06-16'), rows: [8, 9] })
    expect(gap!.message).toBe('365 days without a value, from 2017-06-16 to 2018-06-16: 11 epochs are missing.')
  })

  it('mark duplicates and disorder with their rows', () => {
    const marks = checkSeries({ mjd: [10, 20, 20, 40, 30, 50], massGt: [1, 2, 3, 4, 5, 6], rows: [2, 3, 4, 5, 6, 7] })
    expect(marks.map(m => [m.kind, m.rows])).toEqual([['duplicate', [3, 4]], ['order', [6]]])
  })

  it('mark an outlier where it is, by its robust z', () => {
    const series = usual(180)
    series.massGt[77]! += 40
    series.massGt[140]! -= 60
    const marks = checkSeries(series)
    expect(kinds(marks)).toEqual(['outlier', 'outlier'])
    expect(marks.map(m => m.fromMjd)).toEqual([series.mjd[77], series.mjd[140]])
    expect(marks[0]!.message).toMatch(/is \+\d+\.\d+ Gt off its neighbours, \d+\.\d times their spread/)
  })

  it('mark a step and not the season or a slow wander', () => {
    for (let seed = 1; seed <= 10; seed++) {
      const series = usual(180, seed)
      series.massGt = series.massGt.map((m, i) => i >= 100 ? m + 40 : m)
      const steps = checkSeries(series).filter(m => m.kind === 'step')
      expect(steps, `seed ${seed}`).toHaveLength(1)
      expect([steps[0]!.fromMjd, steps[0]!.toMjd], `seed ${seed}`).toEqual([series.mjd[99], series.mjd[100]])
      const wander = { mjd: series.mjd, massGt: usual(180, seed).massGt.map((m, i) => m + 40 * Math.sin(i / 25)) }
      expect(kinds(checkSeries(wander)), `seed ${seed}`).not.toContain('step')
    }
  })

  it('mark 900 m of water as a wrong unit, and a mass that no region has', () => {
    const mm = { mjd: months(3), massGt: [0, 450_000, 900_000] }
    const [unit] = checkSeries({ ...mm, areaM2: 1e12 })
    expect(unit).toMatchObject({ kind: 'suspicious-unit' })
    expect(unit!.message).toBe('The values range over 900 m of water over the region. Check the unit.')
    expect(kinds(checkSeries(mm))).toEqual(['suspicious-unit'])
    expect(checkSeries({ mjd: months(3), massGt: [0, 450, 900], areaM2: 1e12 })).toEqual([])
  })

  it('mark a flat run from four equal values on', () => {
    const marks = checkSeries({ mjd: months(9), massGt: [1, 2, 2, 2, 5, 7, 7, 7, 7], rows: [2, 3, 4, 5, 6, 7, 8, 9, 10] })
    expect(marks.map(m => [m.kind, m.rows])).toEqual([['flat-run', [7, 8, 9, 10]]])
  })

  it('mark disagreement with another series: turned, in trend, in size; not a series that agrees', () => {
    const own = usual(120, 3)
    const other = usual(120, 4)
    const against = (massGt: number[]): string => checkSeries({ ...own, others: [{ name: 'gravimetry', mjd: other.mjd.slice(0, massGt.length), massGt }] }).map(m => m.message).join()
    expect(against(other.massGt)).toBe('')
    expect(against(other.massGt.map(m => -m))).toMatch(/“gravimetry” goes the other way from 2002-01-01 .*Is the sign of one of them turned\?/)
    expect(against(other.massGt.map((m, i) => m + i))).toMatch(/The trend is −\d.* that of “gravimetry” −\d.* apart\./)
    const still = usual(120, 3).mjd.map(t => 30 * Math.sin(2 * Math.PI * t / 365.25))
    expect(checkSeries({ mjd: own.mjd, massGt: still, others: [{ name: 'wells', mjd: own.mjd, massGt: still.map(m => m / 10) }] }).map(m => m.message).join()).toContain('varies 10.0 times less')
    expect(against(other.massGt.slice(0, 5))).toBe('')
  })

  it('never change a series, whatever it holds', () => {
    fc.assert(fc.property(fc.array(fc.tuple(fc.integer({ min: 0, max: 60 }), fc.double({ min: -1e6, max: 1e6, noNaN: true })), { maxLength: 40 }), (pairs) => {
      const mjd = Float64Array.from(pairs, ([t]) => 50000 + t)
      const massGt = Float64Array.from(pairs, ([, m]) => m)
      const before = [[...mjd], [...massGt]]
      const marks = checkSeries({ mjd, massGt, others: [{ name: 'o', mjd: [50000, 50030, 50060], massGt: [1, 2, 3] }] })
      expect([[...mjd], [...massGt]]).toEqual(before)
      expect(marks.every(m => m.toMjd >= m.fromMjd && m.message.endsWith('.') || m.message.endsWith('?'))).toBe(true)
    }))
  })
})

describe('decisions on marks', () => {
  const series = usual(180)
  series.massGt[77]! += 40
  const [found] = checkSeries(series)

  it('stay with a finding when the check runs again', () => {
    const settled = settleMarks(checkSeries(series), [{ id: found!.id, choice: 'accepted', note: 'flood of that month' }])
    expect(settled).toMatchObject({ marks: [{ state: 'accepted', note: 'flood of that month' }], gone: [] })
  })

  it('leave a mark open that was said to be corrected and is still there', () => {
    expect(settleMarks([found!], [{ id: found!.id, choice: 'corrected', note: '' }]).marks[0]!.state).toBe('open')
    const corrected = usual(180)
    expect(settleMarks(checkSeries(corrected), [{ id: found!.id, choice: 'corrected', note: 'typing error' }])).toMatchObject({ marks: [], gone: [{ note: 'typing error' }] })
  })
})

describe('robust measures', () => {
  it('give the median, and the standard deviation of normal numbers', () => {
    expect(median([3, 1, 2])).toBe(2)
    expect(median([4, 1, 2, 3])).toBe(2.5)
    const next = noise(11)
    // 20 000 numbers: the robust sigma has a standard error of 1.17/√(2n), half a per cent.
    expect(Math.abs(robustSigma(Array.from({ length: 20_000 }, next)) - 1)).toBeLessThan(0.03)
    expect([...runningMedian([1, 9, 2, 3, 50], 1)]).toEqual([5, 2, 3, 3, 26.5])
  })
})
