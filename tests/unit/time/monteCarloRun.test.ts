import { describe, expect, it } from 'vitest'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { monteCarlo } from '../../../shared/earth/time/monteCarlo.ts'
import { arWeights, monteCarloCheck, monteCarloInputOf } from '../../../shared/earth/time/monteCarloRun.ts'
import { computeRun } from '../../../shared/earth/time/run.ts'
import { box, everyMonth, normals, region, runInput } from './runFixtures.ts'

const model = loadEarthModel()

describe('weights of AR(1) errors', () => {
  it('give the variance of the closed form, Σ Σ wᵢ wⱼ r^|i−j|', () => {
    // Autocovariance of a stationary AR(1) process of unit variance: Box & Jenkins (1976), Time Series Analysis, section 3.2.3.
    for (const r of [0, 0.5, 0.9, -0.4]) {
      const w = Float64Array.from({ length: 30 }, (_, i) => Math.sin(i) + 0.1 * i)
      let expected = 0
      for (let i = 0; i < 30; i++) for (let j = 0; j < 30; j++) expected += w[i]! * w[j]! * r ** Math.abs(i - j)
      const got = arWeights(w, r).reduce((sum, g) => sum + g * g, 0)
      expect(Math.abs(got / expected - 1)).toBeLessThan(1e-12)
    }
  })
})

describe('a Monte Carlo of a run', () => {
  const noisy = (key: string, rate: number, seed: number, more = {}) => {
    const mjd = everyMonth(240)
    const z = normals(seed)
    return region(key, box(-50 + 20 * seed, 60, -40 + 20 * seed, 70), rate, { series: { mjd, massGt: mjd.map(t => rate * (t - 55000) / 365.25 + 20 * z()), sigmaGt: null, sharedRates: [{ source: 'isostatic', sigmaGtPerYear: 4 }] }, ...more })
  }
  const input = runInput([noisy('r1', -100, 1), noisy('r2', 40, 2, { fractionToOcean: 0.6 }), noisy('r3', -30, 3, { scale: 0 })])
  const result = computeRun(input, model)
  const series = monteCarloInputOf(input, result)

  it('centres on the trends of the run, what is kept on land included, and leaves out what is switched off', () => {
    expect(series.map(s => s.key)).toEqual(['r1', 'r2'])
    for (const [name, total] of [['massGt', result.total.massGtPerYear], ['chi1Mas', result.total.chi1MasPerYear], ['chi2Mas', result.total.chi2MasPerYear], ['lodMicroseconds', result.total.lodMicrosecondsPerYear]] as const) {
      const sum = series.reduce((s, { rate, perGt }) => s + rate * perGt[name], 0)
      expect(Math.abs(sum / total!.value - 1)).toBeLessThan(1e-12)
    }
  })

  it('agrees with the quoted errors for nearly white noise, and the same seed gives the same members', () => {
    const check = monteCarloCheck(monteCarlo({ series, members: 4000, seed: 7 }), result)
    // Within 3/√(2 × 3999), 3.4 %, as 4 000 members allow; shared sources make up most of it.
    expect(check.total.massGt.agrees).toBe(true)
    expect(check.total.lodMicroseconds.agrees).toBe(true)
    expect(check.sentence).toContain('agree with those that the run quotes')
    expect(monteCarlo({ series, members: 4000, seed: 7 })).toEqual(monteCarlo({ series, members: 4000, seed: 7 }))
    expect(check.regions.map(r => r.name)).toEqual(['Region r1', 'Region r2'])
  })

  it('says so where they do not', () => {
    const sampled = monteCarlo({ series, members: 4000, seed: 7 })
    const wrong = { ...result, total: { ...result.total, lodMicrosecondsPerYear: { ...result.total.lodMicrosecondsPerYear!, sigma: 2 * sampled.total.lodMicroseconds.sigma } } }
    const check = monteCarloCheck(sampled, wrong)
    expect(check.total.lodMicroseconds.agrees).toBe(false)
    expect(check.sentence).toContain('length of day 50 % smaller')
  })
})
