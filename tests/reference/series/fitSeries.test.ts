import { describe, expect, it } from 'vitest'
import { mjdFromIsoDate } from '../../../shared/earth/time/epochs.ts'
import { ALIAS_DAYS, fitSeries, gapsOf, type FitSettings } from '../../../shared/series/fit/fitSeries.ts'
import { autocorrelation } from '../../../shared/series/fit/autocorrelation.ts'
import { expectedAmplitude, lombScargle, powerAt } from '../../../shared/series/fit/spectrum.ts'
import { runsOf } from '../../../shared/figures/series/data.ts'
import { fitTrend } from '../../../shared/earth/time/trend.ts'
import reference from '../../fixtures/series/fit-reference.json'

// Everything here is held against numpy and scipy, see tests/fixtures/README.md; the series has the gap of satellite gravimetry 2017–18.
const settings: FitSettings = { acceleration: true, annual: true, semiannual: true, aliasDays: ALIAS_DAYS, stepsMjd: [reference.stepMjd], fromMjd: null, toMjd: null, maxGapDays: 62 }
const series = { mjd: reference.mjd, massGt: reference.massGt, sigmaGt: reference.sigmaGt }
const fit = fitSeries(series, settings)

describe('a fit of every term across the gravimetry gap', () => {
  it('has the coefficients and white errors of an independent least squares', () => {
    const own = fitTrend({ mjd: series.mjd, value: series.massGt, sigma: series.sigmaGt }, { acceleration: true, aliasPeriodDays: 161, stepsMjd: [reference.stepMjd] })
    const order = reference.names.map(name => own.names.indexOf(name))
    // Both are double precision; the design has a condition number of about 30.
    order.forEach((at, j) => {
      expect(own.coefficients[at]! / reference.coefficients[j]!).toBeCloseTo(1, 10)
      expect(own.sigmaWhiteCoefficients[at]! / reference.sigmas[j]!).toBeCloseTo(1, 10)
    })
    expect(fit.referenceMjd).toBeCloseTo(reference.referenceMjd, 8)
    fit.residualGt.forEach((r, i) => expect(r).toBeCloseTo(reference.residual[i]!, 8))
  })

  it('gives terms as amplitudes, each under three kinds of noise', () => {
    const [, trend, , c, s] = reference.coefficients
    const term = (kind: string) => fit.terms.find(t => t.kind === kind)!
    expect(fit.terms.map(t => t.kind)).toEqual(['trend', 'acceleration', 'annual', 'semiannual', 'alias', 'step'])
    expect(term('trend').under.map(u => u.model)).toEqual(['white', 'ar1', 'power-law'])
    expect(term('trend').under[0]!.value).toBeCloseTo(trend!, 9)
    expect(term('annual').under[0]!.value).toBeCloseTo(Math.hypot(c!, s!), 9)
    // The noise was made with φ = 0.6: white errors are too small, and the sentence says which to quote.
    const [white, ar1] = term('trend').under
    expect(ar1!.sigma).toBeGreaterThan(1.5 * white!.sigma)
    expect(fit.noise.quote).not.toBe('white')
    expect(fit.noise.models.find(m => m.model === 'ar1')!.parameter).toBeGreaterThan(0.45)
    expect(fit.noise.models.find(m => m.model === 'ar1')!.parameter).toBeLessThan(0.75)
    // Made highest at 0.3 of the year: on day 110.
    expect(Math.abs(term('annual').highestDay! - 0.3 * 365.25)).toBeLessThan(3)
  })

  it('lists the gap, makes nothing up inside it and draws no line across it', () => {
    const [from, to] = [mjdFromIsoDate('2017-06-16'), mjdFromIsoDate('2018-06-16')]
    expect(gapsOf(reference.mjd, 100)).toEqual([{ fromMjd: from, toMjd: to, days: 365 }])
    expect(fit.gaps).toContainEqual({ fromMjd: from, toMjd: to, days: 365 })
    expect(fit.mjd.some(t => t > from && t < to)).toBe(false)
    expect(fit.mjd).toEqual(reference.mjd)
    const drawn = runsOf({ label: 'residual', role: 'residual', mjd: fit.mjd, value: fit.residualGt, maxGapDays: settings.maxGapDays })
    for (const run of drawn) expect(run.mjd[0]! >= to || run.mjd.at(-1)! <= from).toBe(true)
  })

  it('refuses steps outside the epochs and spans that cannot carry the terms', () => {
    expect(() => fitSeries(series, { ...settings, stepsMjd: [reference.mjd[0]! - 1] })).toThrow(expect.objectContaining({ issues: [expect.objectContaining({ path: 'step/0' })] }))
    expect(() => fitSeries(series, { ...settings, toMjd: reference.mjd[4]!, stepsMjd: [] })).toThrow(expect.objectContaining({ issues: [expect.objectContaining({ code: 'too-few-epochs' })] }))
    expect(() => fitSeries(series, { ...settings, stepsMjd: [reference.stepMjd, reference.stepMjd] })).toThrow(expect.objectContaining({ issues: [expect.objectContaining({ code: 'terms-alike' })] }))
  })
})

describe('autocorrelation', () => {
  it('of pairs that exist, beside numpy', () => {
    const { lags, band } = autocorrelation(reference.mjd, reference.residual, reference.stepDays, 24)
    lags.forEach(({ value }, k) => expect(value).toBeCloseTo(reference.autocorrelation[k]!, 12))
    expect(band).toBeCloseTo(1.96 / Math.sqrt(reference.mjd.length), 12)
  })

  it('without gaps is the textbook Σ rᵢrᵢ₊ₖ / Σ rᵢ²', () => {
    const r = [1, -2, 3, -1, 2, -3]
    const { lags } = autocorrelation([0, 1, 2, 3, 4, 5], r, 1, 2)
    expect(lags.map(l => l.value)).toEqual([1, expect.closeTo((-2 - 6 - 3 - 2 - 6) / 28, 12), expect.closeTo((3 + 2 + 6 + 3) / 28, 12)])
  })
})

describe('spectrum', () => {
  it('has the power of scipy’s signal.lombscargle', () => {
    const years = reference.mjd.map(t => (t - reference.mjd[0]!) / 365.25)
    reference.frequencyPerYear.forEach((f, k) => expect(powerAt(2 * Math.PI * f, years, reference.residual) / reference.power[k]!).toBeCloseTo(1, 9))
  })

  it('shows the amplitude of a sinusoid, gap or no gap', () => {
    const { frequencyPerYear, amplitude } = lombScargle(reference.mjd, reference.mjd.map(t => 5 * Math.cos(2 * Math.PI * 1.3 * t / 365.25)), reference.stepDays)
    const top = amplitude.indexOf(Math.max(...amplitude))
    expect(frequencyPerYear[top]).toBeCloseTo(1.3, 1)
    expect(amplitude[top]! / 5).toBeCloseTo(1, 1)
  })

  it('expects of AR(1) noise the variance of white noise, more of it at long periods', () => {
    const f = Array.from({ length: 601 }, (_, i) => i * 0.01)
    const power = (phi: number) => expectedAmplitude(f, { sigma: 2, phi, stepDays: 365.25 / 12, count: 240 }).map(a => a * a * 240 / Math.PI)
    const [white, ar1] = [power(0), power(0.6)]
    expect(white.every(p => Math.abs(p - 4) < 1e-9)).toBe(true)
    // Mean over the band by the trapezoidal rule: σ² for either.
    expect((ar1.reduce((a, b) => a + b) - (ar1[0]! + ar1.at(-1)!) / 2) / 600).toBeCloseTo(4, 3)
    // S(0)/σ² = (1 + φ)/(1 − φ).
    expect(ar1[0]! / 4).toBeCloseTo(4, 9)
  })
})
