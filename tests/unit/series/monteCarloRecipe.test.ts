import { describe, expect, it } from 'vitest'
import { conversionRecipe } from '../../../shared/series/conversion.ts'
import { monteCarloRecipe } from '../../../shared/series/monteCarloRecipe.ts'
import { plainUnits, type UnderstoodUnit } from '../../../shared/series/quantityKinds.ts'
import type { Recipe, SeriesTable } from '../../../shared/series/recipe.ts'

const head: UnderstoodUnit = { quantity: 'head', typed: 'm', canonical: 'm', factor: 1, perPeriod: false, reading: '' }
const mjd = Array.from({ length: 60 }, (_, i) => 52275 + 30.4375 * i)
const table: SeriesTable = { mjd, startMjd: null, endMjd: null, value: mjd.map((t, i) => -0.5 * i / 12 + Math.sin(t)), sigma: mjd.map(() => 0.2) }
const options = { members: 5000, seed: 11 }
/** Five standard errors of a standard deviation. */
const TOLERANCE = 5 / Math.sqrt(2 * options.members)

describe('Monte Carlo of a conversion', () => {
  it('agrees with the linear errors where parameters are well known', () => {
    const recipe = conversionRecipe({ unit: head, area: { value: 1e11, sigma: 1e9, source: null }, storage: { coefficient: 'specific-yield', value: 0.1, sigma: 0.01, source: null } })
    const result = monteCarloRecipe(recipe, table, options)
    expect(Math.abs(result.trend.sigma / result.linearSigma - 1)).toBeLessThan(TOLERANCE)
  })

  it('shows what the linear errors leave out: the product of two poorly known numbers spreads more', () => {
    const recipe = conversionRecipe({ unit: head, area: { value: 1e11, sigma: 3e10, source: null }, storage: { coefficient: 'specific-yield', value: 0.1, sigma: 0.03, source: null } })
    const result = monteCarloRecipe(recipe, { ...table, sigma: null }, options)
    // Relative variances a and b of a product are a + b + ab: 0.09 + 0.09 + 0.0081, of which the linear sum lacks the last.
    expect(Math.abs(result.trend.sigma / result.linearSigma - Math.sqrt(0.1881 / 0.18))).toBeLessThan(TOLERANCE)
  })

  it('adds errors of one named source, and those of corrections', () => {
    const named = conversionRecipe({ unit: head, area: { value: 1e11, sigma: 1e9, source: 'survey' }, storage: { coefficient: 'specific-yield', value: 0.1, sigma: 0.001, source: 'survey' } })
    const result = monteCarloRecipe(named, { ...table, sigma: null }, options)
    expect(Math.abs(result.trend.sigma / Math.abs(result.trend.mean) - 0.02)).toBeLessThan(0.001)
    const corrected: Recipe = {
      version: 1, steps: [
        { kind: 'unit', unit: plainUnits.Gt },
        { kind: 'subtract-rate', on: true, what: 'isostatic', name: 'uplift', gtPerYear: { value: 3, sigma: 0.5, source: 'isostatic ensemble' } },
        { kind: 'subtract-series', on: true, what: 'snow', name: 'snow', series: { mjd, massGt: mjd.map(() => 0), sigmaGt: mjd.map(() => 0.3) }, maxGapDays: 40 }
      ]
    }
    const both = monteCarloRecipe(corrected, table, options)
    expect(Math.abs(both.trend.sigma / both.linearSigma - 1)).toBeLessThan(TOLERANCE)
    expect(both.linearSigma).toBeGreaterThan(0.5)
  })

  it('is the same for the same seed', () => {
    const recipe = conversionRecipe({ unit: plainUnits.Gt })
    expect(monteCarloRecipe(recipe, table, { members: 100, seed: 1 })).toEqual(monteCarloRecipe(recipe, table, { members: 100, seed: 1 }))
    expect(() => monteCarloRecipe(recipe, { ...table, mjd: [1, 2], value: [1, 2], sigma: null }, options)).toThrow('at least 3 epochs')
  })
})
