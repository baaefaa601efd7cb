import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { sigmasOf, varianceOfFunctional } from '../../../shared/earth/time/covariance.ts'
import { trendSigma, trendWeights } from '../../../shared/earth/time/covarianceTrend.ts'
import { mjdFromIsoDate } from '../../../shared/earth/time/epochs.ts'
import { fitTrend } from '../../../shared/earth/time/trend.ts'
import { conversionRecipe } from '../../../shared/series/conversion.ts'
import { periodYears } from '../../../shared/series/periods.ts'
import { plainUnits, type UnderstoodUnit } from '../../../shared/series/quantityKinds.ts'
import { densities, type Recipe, type RecipeStep, type SeriesTable } from '../../../shared/series/recipe.ts'
import { replayRecipe } from '../../../shared/series/replay.ts'
import { seriesCovariance, systematicRates, toBaseline } from '../../../shared/series/uncertainty.ts'
import { InputError } from '../../../shared/types/issue.ts'

const table = (value: number[], sigma: number[] | null = null, step = 30): SeriesTable => ({ mjd: value.map((_, i) => 53000 + step * i), startMjd: null, endMjd: null, value, sigma })
const unit = (quantity: UnderstoodUnit['quantity'], factor: number, perPeriod = false): UnderstoodUnit =>
  ({ quantity, typed: 'u', canonical: 'c', factor, perPeriod, reading: '“u” is read as c.' })
const area = { value: 1e9, sigma: 0, source: null }

function codes(run: () => unknown): string[] {
  try {
    run()
  } catch (error) {
    if (error instanceof InputError) return error.issues.map(issue => issue.code)
    throw error
  }
  return []
}

// Expected masses are worked out by hand from the definitions: 1 Gt = 10¹² kg, water 1000 kg/m³.
describe('conversion to gigatonnes', () => {
  it('of a volume: 2 km³ of brine at 1200 kg/m³ are 2.4 Gt', () => {
    const recipe = conversionRecipe({ unit: unit('volume', 1), density: { material: 'own', value: 1200, sigma: 0, source: null } })
    expect(replayRecipe(recipe, table([2, -1])).massGt).toEqual([2.4, -1.2])
  })

  it('of a height: 5 cm over 1000 km² are 0.05 Gt', () => {
    const done = replayRecipe(conversionRecipe({ unit: plainUnits['cm-we'], area }), table([5], [1]))
    expect(done.massGt[0]).toBeCloseTo(0.05, 15)
    expect(done.sigmaGt![0]).toBeCloseTo(0.01, 15)
    expect(done.factors).toEqual([])
  })

  it('of a head: 1 m of specific yield 0.1 ± 0.03 over 1000 km² are 0.1 Gt, and the yield moves all epochs together', () => {
    const recipe = conversionRecipe({ unit: unit('head', 1), area, storage: { coefficient: 'specific-yield', value: 0.1, sigma: 0.03, source: 'specific yield of the Sand' } })
    const done = replayRecipe(recipe, table([1, -2], [0.5, 0.5]))
    expect(done.massGt[0]).toBeCloseTo(0.1, 15)
    expect(done.sigmaGt![0]).toBeCloseTo(0.05, 15)
    expect(done.factors).toHaveLength(1)
    expect(done.factors[0]).toMatchObject({ source: 'specific yield of the Sand', own: false })
    expect(done.factors[0]!.loading[0]).toBeCloseTo(0.03, 15)
    expect(done.factors[0]!.loading[1]).toBeCloseTo(-0.06, 15)
    expect(done.steps[1]!.sentence).toBe('Head change × specific yield 0.100 ± 0.030, an error that all epochs share (specific yield of the Sand) is a height of water.'.replace(' ± ', '\u00a0±\u00a0'))
  })

  it('of ice: −1 m at 917 kg/m³ over 1000 km² are −0.917 Gt; at 850 ± 60 kg/m³, −0.85 ± 0.06', () => {
    const ice = (material: 'ice' | 'glacier') => replayRecipe(conversionRecipe({ unit: unit('ice-thickness', 1), area, density: { ...densities[material], material } }), table([-1]))
    expect(ice('ice').massGt[0]).toBeCloseTo(-0.917, 15)
    const glacier = ice('glacier')
    expect(glacier.massGt[0]).toBeCloseTo(-0.85, 15)
    expect(glacier.factors[0]!.loading[0]).toBeCloseTo(-0.06, 15)
  })

  it('turns the sign of withdrawal, not of its error', () => {
    const done = replayRecipe(conversionRecipe({ unit: plainUnits.Gt, withdrawalPositive: true }), table([3, 0], [1, 2]))
    expect(done.massGt).toEqual([-3, 0])
    expect(Object.is(done.massGt[1], 0)).toBe(true)
    expect(done.sigmaGt).toEqual([1, 2])
  })

  it('says what is missing or out of range, all at once', () => {
    expect(codes(() => conversionRecipe({ unit: unit('head', 1) }))).toEqual(['storage-missing', 'area-missing'])
    expect(codes(() => conversionRecipe({ unit: unit('volume', 1) }))).toEqual(['density-missing'])
    expect(codes(() => conversionRecipe({ unit: unit('head', 1), area: { ...area, sigma: -1 }, storage: { coefficient: 'storativity', value: 1.5, sigma: 0, source: null } }))).toEqual(['out-of-range', 'sigma-negative'])
  })

  it('is plain data: written as JSON and replayed it gives the same digits', () => {
    const recipe = conversionRecipe({
      unit: unit('head', 0.3048), area: { value: 3.3e10, sigma: 1e8, source: null }, withdrawalPositive: true,
      storage: { coefficient: 'storativity', value: 3e-3, sigma: 1e-3, source: null },
      corrections: [{ kind: 'subtract-rate', on: true, what: 'isostatic', name: 'a model', gtPerYear: { value: 1.5, sigma: 0.4, source: 'isostatic ensemble' } }]
    })
    const values = table([1, 4, 2, -7, 3.3], [1, 1, 2, 1, 1])
    expect(replayRecipe(JSON.parse(JSON.stringify(recipe)) as Recipe, values)).toEqual(replayRecipe(recipe, values))
  })

  it('is linear in the values', () => {
    const recipe = conversionRecipe({ unit: unit('head', 0.01), area, storage: { coefficient: 'specific-yield', value: 0.2, sigma: 0.05, source: null } })
    fc.assert(fc.property(fc.array(fc.double({ min: -50, max: 50, noNaN: true }), { minLength: 1, maxLength: 20 }), fc.constantFrom(1e-9, -3, 1e9), (values, k) => {
      const once = replayRecipe(recipe, table(values))
      const scaled = replayRecipe(recipe, table(values.map(v => k * v)))
      once.massGt.forEach((m, i) => expect(Math.abs(scaled.massGt[i]! - k * m)).toBeLessThanOrEqual(1e-14 * Math.abs(k * m) + 1e-300))
    }))
  })
})

describe('rates over periods', () => {
  const years = (from: number, to: number, values: number[], sigma: number[] | null = null): SeriesTable => {
    const starts = Array.from({ length: to - from + 1 }, (_, i) => mjdFromIsoDate(`${from + i}-10-01`))
    return { mjd: starts.map(t => t + 182), startMjd: starts, endMjd: starts.map((_, i) => mjdFromIsoDate(`${from + i + 1}-10-01`)), value: values, sigma }
  }

  it('counts a balance year as one year, leap or not, and other periods by their days', () => {
    expect(periodYears(mjdFromIsoDate('2003-10-01'), mjdFromIsoDate('2004-10-01'))).toBe(1)
    expect(periodYears(mjdFromIsoDate('2000-01-01'), mjdFromIsoDate('2005-01-01'))).toBe(5)
    expect(periodYears(mjdFromIsoDate('2004-01-01'), mjdFromIsoDate('2004-02-01'))).toBeCloseTo(31 / 365.25, 15)
  })

  it('sums an annual balance over the glaciers’ area: −1, −0.5 m w.e./yr over 2000 km² are −2, −3 Gt', () => {
    const recipe = conversionRecipe({ unit: unit('specific-balance', 1), area: { value: 2e9, sigma: 2e8, source: null } })
    const done = replayRecipe(recipe, years(2002, 2003, [-1, -0.5], [0.2, 0.3]))
    expect(done.mjd).toEqual([mjdFromIsoDate('2002-10-01'), mjdFromIsoDate('2003-10-01'), mjdFromIsoDate('2004-10-01')])
    expect(done.massGt).toEqual([0, -2, -3])
    expect(done.sigmaGt).toBeNull()
    // Errors of the years add as squares, those of the area in proportion to the sum.
    const sigmas = sigmasOf(seriesCovariance({ ...done, factors: [] }, 'north'))
    expect([...sigmas]).toEqual([0, expect.closeTo(0.4, 12), expect.closeTo(Math.hypot(0.4, 0.6), 12)])
    expect([...done.factors[0]!.loading]).toEqual([0, expect.closeTo(-0.2, 12), expect.closeTo(-0.3, 12)])
  })

  it('takes amounts over a period as they are', () => {
    expect(replayRecipe(conversionRecipe({ unit: unit('specific-balance', 1, true), area }), years(2002, 2002, [-1.5])).massGt).toEqual([0, -1.5])
  })

  it('does not cross a gap, and refuses overlaps and rows without periods', () => {
    const recipe = conversionRecipe({ unit: unit('mass-rate', 1) })
    const gap = years(2002, 2004, [1, 2, 3])
    gap.startMjd!.splice(1, 1)
    gap.endMjd!.splice(1, 1)
    expect(codes(() => replayRecipe(recipe, { ...gap, value: [1, 3], mjd: [0, 1] }))).toEqual(['period-gap'])
    const overlap = years(2002, 2003, [1, 2])
    overlap.startMjd![1]! -= 30
    expect(codes(() => replayRecipe(recipe, overlap))).toEqual(['period-overlap'])
    expect(codes(() => replayRecipe(recipe, table([1, 2])))).toEqual(['periods-missing'])
  })
})

describe('corrections', () => {
  const gia: RecipeStep = { kind: 'subtract-rate', on: true, what: 'isostatic', name: 'uplift', gtPerYear: { value: 10, sigma: 3, source: 'isostatic ensemble' } }
  const recipe = (...steps: RecipeStep[]): Recipe => ({ version: 1, steps: [{ kind: 'unit', unit: plainUnits.Gt }, ...steps] })
  const plain: SeriesTable = table(Array.from({ length: 48 }, (_, i) => 100 - 2 * i), Array.from({ length: 48 }, () => 1), 365.25 / 12)

  it('takes a rate off the trend and adds its error to the trend’s, under its source', () => {
    const before = replayRecipe(recipe(), plain)
    const after = replayRecipe(recipe(gia), plain)
    expect(fitTrend({ mjd: after.mjd, value: after.massGt }).value).toBeCloseTo(fitTrend({ mjd: before.mjd, value: before.massGt }).value - 10, 9)
    expect(after.massGt.reduce((a, b) => a + b)).toBeCloseTo(before.massGt.reduce((a, b) => a + b), 9)
    expect(systematicRates(after, 'x')).toEqual([{ source: 'isostatic ensemble', sigmaGtPerYear: expect.closeTo(-3, 9) }])
  })

  it('can be switched off, and says so', () => {
    const off = replayRecipe(recipe({ ...gia, on: false }), plain)
    expect(off.massGt).toEqual(replayRecipe(recipe(), plain).massGt)
    expect(off.factors).toEqual([])
    expect(off.steps[1]).toMatchObject({ on: false, kind: 'subtract-rate' })
    expect(off.steps[1]!.sentence.replace(/\s/g, ' ')).toContain('Switched off: Less glacial isostatic adjustment, “uplift”: +10.0 ± 3.0 Gt/yr')
  })

  it('takes another series off between its epochs, and bridges no gap: 2017–18 without gravimetry leaves those epochs out', () => {
    // Last month of the first gravimetry mission and first of the second: June 2017 and June 2018.
    const [last, first] = [mjdFromIsoDate('2017-06-15'), mjdFromIsoDate('2018-06-15')]
    const other = { mjd: [last - 30, last, first, first + 30], massGt: [1, 2, 10, 12], sigmaGt: [0.3, 0.4, 1, 1] }
    const step: RecipeStep = { kind: 'subtract-series', on: true, what: 'surface-water', name: 'lakes', series: other, maxGapDays: 92 }
    const own: SeriesTable = { mjd: [last - 60, last - 15, last, last + 100, first - 1, first, first + 31], startMjd: null, endMjd: null, value: [5, 5, 5, 5, 5, 5, 5], sigma: Array.from({ length: 7 }, () => 1) }
    const done = replayRecipe(recipe(step), own)
    expect(done.mjd).toEqual([last - 15, last, first])
    expect(done.massGt).toEqual([3.5, 3, -5])
    expect(done.sigmaGt![0]).toBeCloseTo(Math.sqrt(1 + 0.15 ** 2 + 0.2 ** 2), 14)
    expect(done.leftOut.map(l => l.mjd)).toEqual([last - 60, last + 100, first - 1, first + 31])
    expect(done.leftOut.map(l => l.message.split('“lakes” ')[1])).toEqual(['begins later.', 'has a gap of 365 days there, more than 92.', 'has a gap of 365 days there, more than 92.', 'has ended.'])
    expect(done.steps[1]!.sentence).toContain('4 epochs that it does not cover are left out')
  })

  it('brings the systematic errors of the series along with their sign turned, so that a source of both cancels in part', () => {
    const mjd = Array.from({ length: 25 }, (_, i) => 55000 + i * 30)
    const other = { mjd, massGt: mjd.map(() => 1), sigmaGt: null, sharedRates: [{ source: 'isostatic adjustment model', sigmaGtPerYear: 3 }] }
    const step: RecipeStep = { kind: 'subtract-series', on: true, what: 'leakage', name: 'around', series: other, maxGapDays: 62 }
    const rates = systematicRates(replayRecipe(recipe(step), { mjd, startMjd: null, endMjd: null, value: mjd.map(() => 2), sigma: null }), 'own')
    // The trend of a straight line is its slope: the error of the difference is −3 Gt per year.
    expect(rates).toEqual([{ source: 'isostatic adjustment model', sigmaGtPerYear: expect.closeTo(-3, 10) as number }])
  })
})

describe('uncertainty of a series', () => {
  it('gives the fit’s trend as a functional, weights and seasons included', () => {
    const mjd = Array.from({ length: 60 }, (_, i) => 52000 + 30.4 * i)
    const value = mjd.map((t, i) => Math.sin(i * i) + t / 300)
    const sigma = mjd.map((_, i) => 1 + i % 4)
    const weights = trendWeights(mjd, sigma)
    expect(weights.reduce((sum, w, i) => sum + w * value[i]!, 0)).toBeCloseTo(fitTrend({ mjd, value, sigma }).value, 10)
    expect(trendSigma(seriesCovariance({ mjd, sigmaGt: sigma, walkGt2: null, factors: [] }, 'x'), mjd, sigma)).toBeCloseTo(
      fitTrend({ mjd, value, sigma }).sigmaWhite / Math.sqrt(fitTrend({ mjd, value, sigma }).residualSigma ** 2 / (sigma.reduce((a, s) => a + s * s, 0) / 60)), 10)
  })

  it('equals the dense matrix with a walk, as the lower triangle of ones makes it', () => {
    const numbers = fc.array(fc.double({ min: -3, max: 3, noNaN: true }), { minLength: 4, maxLength: 4 })
    fc.assert(fc.property(numbers, numbers, numbers, (sigma, walk, a) => {
      const w = walk.map(x => x * x)
      const c = { ...seriesCovariance({ mjd: [1, 2, 3, 4], sigmaGt: sigma.map(Math.abs), walkGt2: w, factors: [] }, 'x') }
      let dense = 0
      for (let i = 0; i < 4; i++) {
        for (let j = 0; j < 4; j++) dense += a[i]! * a[j]! * ((i === j ? sigma[i]! ** 2 : 0) + w.slice(0, Math.min(i, j) + 1).reduce((x, y) => x + y, 0))
      }
      expect(varianceOfFunctional(c, a)).toBeCloseTo(dense, 9)
    }))
  })

  it('keeps a series’ own sources apart from another’s, and shares named ones', () => {
    const factor = (own: boolean) => [{ source: 'area', own, loading: Float64Array.of(1, 2, 3) }]
    expect(seriesCovariance({ mjd: [1, 2, 3], sigmaGt: null, walkGt2: null, factors: factor(true) }, 'north').factors[0]!.source).toBe('area of north')
    expect(seriesCovariance({ mjd: [1, 2, 3], sigmaGt: null, walkGt2: null, factors: factor(false) }, 'north').factors[0]!.source).toBe('area')
  })

  it('takes a baseline without touching what is stored: differences and trends stay', () => {
    const done = replayRecipe(conversionRecipe({ unit: plainUnits['cm-we'], area: { value: 1e12, sigma: 1e11, source: null } }), table([450, 451, 449, 448], [1, 1, 1, 1]))
    const based = toBaseline(done, { fromMjd: 53000, toMjd: 53030 })
    expect(based.massGt[0]! + based.massGt[1]!).toBeCloseTo(0, 9)
    expect(based.massGt[3]! - based.massGt[0]!).toBeCloseTo(done.massGt[3]! - done.massGt[0]!, 9)
    // An absolute level of 450 is no error of the change: the loading is a tenth of the change itself.
    expect(based.factors[0]!.loading[3]).toBeCloseTo(based.massGt[3]! / 10, 9)
    expect(based.baselineSigmaGt).toBeCloseTo(10 / Math.sqrt(2), 9)
    expect(done.massGt[0]).toBeCloseTo(4500, 9)
    expect(() => toBaseline(done, { fromMjd: 1, toMjd: 2 })).toThrow('must hold an epoch')
  })
})
