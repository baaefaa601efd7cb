import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { covarianceOf } from '../../../shared/earth/time/covariance.ts'
import { trendWeights } from '../../../shared/earth/time/covarianceTrend.ts'
import { distribution, monteCarlo, monteCarloPaced, type MonteCarloInput, type MonteCarloSeries } from '../../../shared/earth/time/monteCarlo.ts'
import { seededNormals } from '../../../shared/earth/time/monteCarloNormals.ts'

const mjd = Array.from({ length: 60 }, (_, i) => 52275 + 30.4375 * i)
const weights = trendWeights(mjd)
const years = mjd.map(t => (t - mjd[30]!) / 365.25)
const MEMBERS = 20_000
/** Five standard errors of a standard deviation from so many normal members, relative. */
const SIGMA_TOLERANCE = 5 / Math.sqrt(2 * MEMBERS)

function region(key: string, part: Partial<MonteCarloSeries> = {}): MonteCarloSeries {
  return { key, rate: -10, weights, covariance: covarianceOf(mjd.map(() => 3)), perGt: { massGt: 1, chi1Mas: 0.012, chi2Mas: -0.005, lodMicroseconds: 0.01 }, ...part }
}
const input = (...series: MonteCarloSeries[]): MonteCarloInput => ({ series, members: MEMBERS, seed: 20_020_317 })

describe('seeded normal numbers', () => {
  const x = new Float64Array(1_000_000)
  seededNormals(7)(x)
  const moment = (p: number): number => x.reduce((sum, v) => sum + v ** p, 0) / x.length

  it('have the moments of the normal distribution, within five standard errors', () => {
    const n = x.length
    // Variances of the sample moments: 1, 2, 15 and 96 over n.
    expect(Math.abs(moment(1))).toBeLessThan(5 / Math.sqrt(n))
    expect(Math.abs(moment(2) - 1)).toBeLessThan(5 * Math.sqrt(2 / n))
    expect(Math.abs(moment(3))).toBeLessThan(5 * Math.sqrt(15 / n))
    expect(Math.abs(moment(4) - 3)).toBeLessThan(5 * Math.sqrt(96 / n))
  })

  it('lie beyond one to four sigmas as often as Abramowitz & Stegun (1964), table 26.1, have it', () => {
    for (const [limit, part] of [[1, 0.317310508], [2, 0.045500264], [3, 0.002699796], [4, 0.0000633425]] as const) {
      const found = x.filter(v => Math.abs(v) > limit).length / x.length
      expect(Math.abs(found - part), `beyond ${limit}`).toBeLessThan(5 * Math.sqrt(part / x.length))
    }
  })

  it('do not follow one another', () => {
    for (const lag of [1, 2, 3, 17]) {
      let sum = 0
      for (let i = lag; i < x.length; i++) sum += x[i]! * x[i - lag]!
      expect(Math.abs(sum / Math.sqrt(x.length)), `lag ${lag}`).toBeLessThan(5)
    }
  })

  it('are the same for the same seed, in pieces or at once, and others for another', () => {
    const pieces = seededNormals(7)
    const first = new Float64Array(3)
    const second = new Float64Array(5)
    pieces(first)
    pieces(second)
    expect([...first, ...second]).toEqual([...x.subarray(0, 8)])
    const other = new Float64Array(8)
    seededNormals(8)(other)
    expect([...other]).not.toEqual([...x.subarray(0, 8)])
    expect(() => seededNormals(-1)).toThrow('got -1')
  })
})

describe('Monte Carlo of trends', () => {
  it('agrees with the linear propagation: epochs, walks and shared sources of either sign', () => {
    const gia = (sign: number) => [{ source: 'isostatic ensemble', loading: years.map(t => sign * 2 * t) }]
    const result = monteCarlo(input(
      region('a', { covariance: covarianceOf(mjd.map(() => 3), gia(1)) }),
      region('b', { rate: 4, covariance: covarianceOf(mjd.map(() => 1), gia(-1)), perGt: { massGt: 1, chi1Mas: -0.004, chi2Mas: 0.013, lodMicroseconds: 0.02 } }),
      region('c', { covariance: { ...covarianceOf(mjd.map(() => 0)), walk: Float64Array.from(mjd, () => 0.5) } })
    ))
    for (const name of ['massGt', 'chi1Mas', 'chi2Mas', 'lodMicroseconds'] as const) {
      expect(Math.abs(result.total[name].sigma / result.linear[name] - 1), name).toBeLessThan(SIGMA_TOLERANCE)
    }
    expect(Math.abs(result.total.massGt.mean - (-10 + 4 - 10))).toBeLessThan(5 * result.linear.massGt / Math.sqrt(MEMBERS))
    // One normal distribution: its sixth and median.
    expect(result.total.massGt.p84 - result.total.massGt.p50).toBeCloseTo(result.linear.massGt, 1)
  })

  it('lets a source cancel between regions that it moves apart, and add where it moves them together', () => {
    const shared = (sign: number, source = 'frame') => region('x', { covariance: covarianceOf(mjd.map(() => 0), [{ source, loading: years.map(t => sign * t) }]) })
    expect(monteCarlo(input(shared(1), shared(-1))).total.massGt.sigma).toBeLessThan(1e-11)
    expect(Math.abs(monteCarlo(input(shared(1), shared(1))).total.massGt.sigma / 2 - 1)).toBeLessThan(SIGMA_TOLERANCE)
    expect(Math.abs(monteCarlo(input(shared(1), shared(1, 'another'))).total.massGt.sigma / Math.SQRT2 - 1)).toBeLessThan(SIGMA_TOLERANCE)
  })

  it('gives the direction of the drift with its spread, across ±180° as well', () => {
    const west = monteCarlo(input(region('a', { perGt: { massGt: 1, chi1Mas: 0.01, chi2Mas: 0, lodMicroseconds: 0 } }), region('b', { rate: 0, perGt: { massGt: 1, chi1Mas: 0, chi2Mas: 0.01, lodMicroseconds: 0 } })))
    expect(Math.abs(west.drift.directionDegEast!)).toBe(180)
    // Across a drift of 0.1 mas per year lies an error of its own: the angle in radians is their ratio.
    const expected = west.linear.chi2Mas / 0.1 * 180 / Math.PI
    expect(Math.abs(west.drift.direction.sigma / expected - 1)).toBeLessThan(0.03)
    expect(Math.abs(west.drift.direction.mean)).toBeLessThan(1)
    expect(monteCarlo(input(region('a', { rate: 0 }))).drift.directionDegEast).toBeNull()
  })

  it('is the same for the same seed, in steps or at once, and tells how far it is', async () => {
    const small = { ...input(region('a'), region('b')), members: 1000 }
    const progress: number[] = []
    const paced = await monteCarloPaced(small, { pause: async () => {}, onProgress: done => progress.push(done) })
    expect(paced).toEqual(monteCarlo(small))
    expect(progress.length).toBeGreaterThanOrEqual(10)
    expect(monteCarlo({ ...small, seed: 2 })).not.toEqual(paced)
  })

  it('can be ended between two steps', async () => {
    const end = new AbortController()
    let pauses = 0
    await expect(monteCarloPaced(input(region('a')), { pause: async () => { if (++pauses === 5) end.abort(new Error('enough')) }, signal: end.signal })).rejects.toThrow('enough')
    expect(pauses).toBe(5)
  })

  it('refuses what does not fit', () => {
    expect(() => monteCarlo({ ...input(region('a')), members: 1 })).toThrow('members must be from 2 to 100000, got 1')
    expect(() => monteCarlo(input(region('a', { weights: new Float64Array(3) })))).toThrow('weights of “a” must be 60 numbers, one per epoch, got 3')
  })

  it('gives quantiles that lie in order', () => {
    fc.assert(fc.property(fc.array(fc.double({ min: -1e6, max: 1e6, noNaN: true }), { minLength: 2, maxLength: 50 }), (values) => {
      const d = distribution(Float64Array.from(values))
      expect(d.p2_5 <= d.p16 && d.p16 <= d.p50 && d.p50 <= d.p84 && d.p84 <= d.p97_5).toBe(true)
      expect(d.p2_5).toBeGreaterThanOrEqual(Math.min(...values))
      expect(d.p97_5).toBeLessThanOrEqual(Math.max(...values))
    }))
  })
})
