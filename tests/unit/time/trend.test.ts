import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { fitTrend, lagOneCorrelation } from '../../../shared/earth/time/trend.ts'

const months = (count: number, from = 52275): number[] => Array.from({ length: count }, (_, i) => from + i * 30.4375)

describe('trend', () => {
  it('finds a line, a season, a step and an acceleration exactly', () => {
    const mjd = months(120)
    const reference = mjd.reduce((a, b) => a + b) / mjd.length
    const value = mjd.map(t => {
      const years = (t - reference) / 365.25
      return 7 - 280 * years + 0.5 * 12 * years ** 2 + 90 * Math.cos(2 * Math.PI * t / 365.25 + 1) + 20 * Math.sin(4 * Math.PI * t / 365.25) + (t >= 54000 ? 33 : 0)
    })
    const fit = fitTrend({ mjd, value }, { acceleration: true, stepsMjd: [54000] })
    expect(fit.value).toBeCloseTo(-280, 8)
    expect(fit.coefficients[fit.names.indexOf('acceleration')]).toBeCloseTo(12, 8)
    expect(fit.coefficients[fit.names.indexOf('step 54000')]).toBeCloseTo(33, 8)
    expect(Math.hypot(fit.coefficients[fit.names.indexOf('annual cos')]!, fit.coefficients[fit.names.indexOf('annual sin')]!)).toBeCloseTo(90, 8)
  })

  it('fits the 161-day alias when asked', () => {
    const mjd = months(100)
    const fit = fitTrend({ mjd, value: mjd.map(t => 3 * Math.cos(2 * Math.PI * t / 161)) }, { aliasPeriodDays: 161 })
    expect(Math.hypot(fit.coefficients.at(-1)!, fit.coefficients.at(-2)!)).toBeCloseTo(3, 9)
    expect(fit.value).toBeCloseTo(0, 9)
  })

  it('fits seasons from two years on only, and says so', () => {
    const short = months(24)
    const fit = fitTrend({ mjd: short, value: short.map((_, i) => i) })
    expect(fit.seasonal).toBe(false)
    expect(fit.warnings.map(w => w.code)).toEqual(['short-series'])
    const long = months(25)
    const longFit = fitTrend({ mjd: long, value: long.map((_, i) => i) })
    expect(longFit.seasonal).toBe(true)
    expect(longFit.warnings).toEqual([])
  })

  it('does not invent seasons from yearly or half-yearly epochs', () => {
    for (const step of [365.25, 182.625]) {
      const mjd = Array.from({ length: 20 }, (_, i) => 50000 + i * step)
      const fit = fitTrend({ mjd, value: mjd.map((t, i) => t / 365.25 + (i % 3)) })
      expect(fit.seasonal).toBe(false)
      expect(fit.warnings[0]!.code).toBe('seasons-not-resolved')
    }
  })

  it('keeps its trend across a gap of a year', () => {
    const mjd = months(180).filter((_, i) => i < 100 || i >= 112)
    const value = mjd.map(t => 2.5 * (t - 52275) / 365.25 + 4 * Math.sin(2 * Math.PI * t / 365.25))
    expect(fitTrend({ mjd, value }).value).toBeCloseTo(2.5, 9)
  })

  it('scales with the unit, ignores the zero, and answers a common factor on sigma with the same errors', () => {
    fc.assert(fc.property(
      fc.array(fc.double({ min: -100, max: 100, noNaN: true }), { minLength: 30, maxLength: 60 }),
      fc.constantFrom(1e-9, 1e-3, 1e9),
      (value, factor) => {
        const mjd = months(value.length)
        const sigma = value.map((_, i) => 1 + i % 3)
        const fit = fitTrend({ mjd, value, sigma })
        const scaled = fitTrend({ mjd, value: value.map(v => v * factor + 5 * factor), sigma: sigma.map(s => s * 7 * factor) })
        const size = Math.abs(fit.sigmaWhite) + 1e-6
        expect(Math.abs(scaled.value / factor - fit.value)).toBeLessThan(1e-8 * size + 1e-8)
        expect(Math.abs(scaled.sigma / factor - fit.sigma)).toBeLessThan(1e-7 * size)
      }
    ))
  })

  it('refuses what it cannot fit', () => {
    expect(() => fitTrend({ mjd: [1, 2], value: [1, 2] })).toThrow('at least 3 epochs, got 2')
    expect(() => fitTrend({ mjd: [1, 3, 2], value: [1, 2, 3] })).toThrow('must not decrease, got 2 after 3')
    expect(() => fitTrend({ mjd: [1, 2, 3], value: [1, Number.NaN, 3] })).toThrow('value must be finite, got NaN at index 1')
    expect(() => fitTrend({ mjd: [1, 1, 1], value: [1, 2, 3] })).toThrow('different epochs')
  })

  it('measures lag-one correlation', () => {
    expect(lagOneCorrelation([1, 1, 1, 1])).toBe(0.75)
    expect(lagOneCorrelation([1, -1, 1, -1])).toBe(-0.75)
    expect(lagOneCorrelation([0, 0])).toBe(0)
  })
})
