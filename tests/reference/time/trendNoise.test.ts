import { describe, expect, it } from 'vitest'
import { J2000_MJD } from '../../../shared/earth/time/epochs.ts'
import { fitAr1ByCorrelation, trendNoise } from '../../../shared/earth/time/trendNoise.ts'
import reference from '../../../shared/validation/data/timeReference.json'
import { normals } from '../../unit/time/runFixtures.ts'

const months = (count: number): number[] => Array.from({ length: count }, (_, i) => 52000 + i * 30.4375)

function ar1(n: number, phi: number, seed: number): number[] {
  const normal = normals(seed)
  let state = normal()
  return Array.from({ length: n }, (_, i) => {
    if (i > 0) state = phi * state + Math.sqrt(1 - phi * phi) * normal()
    return state
  })
}

/** Sum of white noise with the weights of fractional integration of order d (Hosking 1981). */
function powerLaw(n: number, d: number, seed: number): number[] {
  const normal = normals(seed)
  const white = Array.from({ length: n }, () => normal())
  const weight = [1]
  for (let k = 1; k < n; k++) weight.push(weight[k - 1]! * (k - 1 + d) / k)
  return white.map((_, i) => white.slice(0, i + 1).reduce((sum, w, k) => sum + w * weight[i - k]!, 0))
}

describe('AR(1) generalised least squares against an independent reference implementation', () => {
  const { stats } = reference
  const fit = fitAr1ByCorrelation({ mjd: stats.t.map(t => J2000_MJD + (t - 2000) * 365.25), value: stats.y })

  it('gives its coefficients, errors and correlation', () => {
    expect(Math.abs(fit.r1 / stats.r1_gls - 1)).toBeLessThan(stats.rel_tol)
    stats.coef_ar1.forEach((c, i) => expect(Math.abs(fit.coefficients[i]! / c - 1)).toBeLessThan(stats.rel_tol))
    stats.sigma_ar1.forEach((s, i) => expect(Math.abs(fit.sigma[i]! / s - 1)).toBeLessThan(stats.rel_tol))
  })
})

describe('coverage of one-sigma errors in 400 seeded simulations', () => {
  // 68.3 % of the trends must lie within one sigma; 400 runs scatter by √(0.683 · 0.317/400) = 2.3 %, so three of them are 7 %.
  const band = 3 * Math.sqrt(0.683 * 0.317 / 400)
  const mjd = months(72)
  const season = mjd.map(t => 3 * Math.cos(2 * Math.PI * t / 365.25) + 0.7 * (t - 52000) / 365.25)
  const covered = (make: (seed: number) => number[]): Record<'white' | 'ar1' | 'power-law', number> => {
    const share = { 'white': 0, 'ar1': 0, 'power-law': 0 }
    for (let seed = 1; seed <= 400; seed++) {
      const noise = make(seed)
      for (const { model, value, sigma } of trendNoise({ mjd, value: season.map((s, i) => s + noise[i]!) }).models) {
        if (Math.abs(value - 0.7) < sigma) share[model] += 1 / 400
      }
    }
    return share
  }

  it('holds under AR(1) noise of φ = 0.6, and fails for the white error, which is why that is not quoted', () => {
    const share = covered(seed => ar1(mjd.length, 0.6, seed))
    expect(Math.abs(share.ar1 - 0.683)).toBeLessThan(band)
    expect(share.white).toBeLessThan(0.5)
  }, 60000)

  it('holds under flicker noise', () => {
    const share = covered(seed => powerLaw(mjd.length, 0.5, seed))
    expect(Math.abs(share['power-law'] - 0.683)).toBeLessThan(band)
    expect(share.white).toBeLessThan(0.4)
  }, 60000)
})

describe('the sentence on which error to quote', () => {
  const report = (noise: number[]): ReturnType<typeof trendNoise> => trendNoise({ mjd: months(noise.length), value: noise })

  it('tells white noise, AR(1) and a random walk apart', () => {
    expect(report(ar1(300, 0, 5)).quote).toBe('white')
    expect(report(ar1(600, 0.7, 5)).quote).toBe('ar1')
    const walk = report(powerLaw(400, 1, 5))
    expect(walk.quote).toBe('power-law')
    expect(walk.models[2]!.parameter!).toBeCloseTo(-2, 0)
    expect(walk.sentence).toMatch(/power-law noise \(index \u2212[12]\.\d\)/i)
  })

  it('answers short and irregular series with a caution', () => {
    expect(report(ar1(24, 0.5, 1)).sentence).toContain('fewer than 36 epochs')
    const mjd = months(60).map((t, i) => t + (i % 2) * 14)
    expect(trendNoise({ mjd, value: ar1(60, 0.5, 1) }).models).toHaveLength(1)
  })

  it('carries a gap as unknowns: the same trend as without the filled epochs', () => {
    const noise = ar1(150, 0.5, 9)
    const mjd = months(150)
    const kept = mjd.map((_, i) => i).filter(i => i < 80 || i >= 91)
    const gappy = trendNoise({ mjd: kept.map(i => mjd[i]!), value: kept.map(i => noise[i]!) })
    const whole = trendNoise({ mjd, value: noise })
    expect(gappy.models).toHaveLength(3)
    // White noise: the unknowns must change nothing against the plain fit of the epochs that exist.
    expect(gappy.models[0]!.value).toBeCloseTo(gappy.simple.value, 9)
    expect(gappy.models[0]!.sigma).toBeCloseTo(gappy.simple.sigmaWhite, 9)
    expect(gappy.models[1]!.sigma).toBeGreaterThan(0.9 * whole.models[1]!.sigma)
  })
})
