import { describe, expect, it } from 'vitest'
import { estimateScaling } from '../../../shared/attribution/scaling.ts'
import type { AttributionData } from '../../../shared/attribution/types.ts'
import { julianYearsFromMjd } from '../../../shared/earth/time/epochs.ts'
import reference from '../../fixtures/gls-reference.json'
import { monthMiddles } from '../../unit/attribution/series.ts'

// The problem that the reference solved with dense matrices: 45 months with a gap of three, two observables, two groups, one source.
const index = Array.from({ length: 48 }, (_, i) => i).filter(i => i < 20 || i > 22)
const mjd = Float64Array.from(index, i => monthMiddles(48)[i]!)
const middle = (mjd[0]! + mjd.at(-1)!) / 2
const by = (fn: (i: number) => number): Float64Array => Float64Array.from(index, fn)
const lod = [by(i => 0.8 * Math.sin(i / 7) + 0.05 * i), by(i => 0.6 * Math.cos(i / 5) - 0.03 * i)] as const
const chi2 = [by(i => 0.4 * Math.cos(i / 7 + 1) + 0.02 * i), by(i => 0.5 * Math.sin(i / 5 + 0.3) + 0.04 * i)] as const
const season = mjd.map(t => Math.cos(2 * Math.PI * julianYearsFromMjd(t)))
const data: AttributionData = {
  stepDays: 30.4,
  groups: [{ key: 'a', name: 'A', signatures: [lod[0], chi2[0]] }, { key: 'b', name: 'B', signatures: [lod[1], chi2[1]] }],
  sources: [{ source: 's', loadings: [mjd.map(t => 0.3 * (t - middle) / 365.25), mjd.map(t => -0.2 * (t - middle) / 365.25)] }],
  blocks: [
    { quantity: 'lod', mjd, value: lod[0].map((v, k) => 3 + 1.1 * v + 0.7 * lod[1][k]! + 0.3 * ((index[k]! * 7919) % 97 / 97 - 0.5) + season[k]!) },
    { quantity: 'chi2', mjd, value: chi2[0].map((v, k) => -2 + 0.9 * v + 0.8 * chi2[1][k]! + 0.2 * ((index[k]! * 6271) % 89 / 89 - 0.5)) }
  ]
}
const noise = { lod: { sigma: 0.5, phi: 0.6 }, chi2: { sigma: 0.3, phi: 0.2 } }

describe.each(['in', 'out'] as const)('generalised least squares against dense matrices (numpy), trend %s', (trend) => {
  const scaling = estimateScaling(data, { band: 'interannual', trend, noise, priors: { a: { mean: 1, sigma: 0.5 }, b: { mean: 1, sigma: 0.3 } } })
  const truth = reference[trend]

  it('agrees to 1e-9 in factors and errors, with and without priors, and without one observable', () => {
    scaling.factors.forEach((factor, g) => {
      expect(Math.abs(factor.posterior.value - truth.posterior[g]!)).toBeLessThan(1e-9)
      expect(Math.abs(factor.posterior.sigma - truth.sigma[g]!)).toBeLessThan(1e-9)
      expect(Math.abs(factor.dataOnly!.value - truth.dataOnly[g]!)).toBeLessThan(1e-9)
      expect(Math.abs(factor.dataOnly!.sigma - truth.dataOnlySigma[g]!)).toBeLessThan(1e-9)
      expect(Math.abs(factor.sigmaWithout.chi2! - truth.sigmaWithoutChi2[g]!)).toBeLessThan(1e-9)
    })
    expect(scaling.correlation[0]![1]!).toBeCloseTo(truth.correlation, 9)
  })
})
