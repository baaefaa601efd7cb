import { describe, expect, it } from 'vitest'
import { POLE_MM_PER_MAS } from '../../../shared/earth/constants.ts'
import { contourOf } from '../../../shared/earth/contour.ts'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { responseOf } from '../../../shared/earth/response.ts'
import { mjdFromIsoDate } from '../../../shared/earth/time/epochs.ts'
import { computeRun } from '../../../shared/earth/time/run.ts'
import { InputError } from '../../../shared/types/issue.ts'
import { box, everyMonth, normals, region, runInput } from './runFixtures.ts'

const model = loadEarthModel()
const north = box(-50, 65, -40, 75)
const south = box(-110, -78, -100, -72)
const noisy = (rate: number, seed: number, mjd = everyMonth(61)): { mjd: number[], massGt: number[], sigmaGt: number[], sharedRates: { source: string, sigmaGtPerYear: number }[] } => {
  const normal = normals(seed)
  return { mjd, massGt: mjd.map(t => rate * (t - 53000) / 365.25 + 5 * normal()), sigmaGt: mjd.map(() => 5), sharedRates: [] }
}

function issueCodes(run: () => unknown): string[] {
  try {
    run()
  } catch (error) {
    if (error instanceof InputError) return error.issues.map(issue => issue.code)
    throw error
  }
  return []
}

describe('a run of one region', () => {
  const result = computeRun(runInput([region('r1', north, -100)]), model)
  const perGt = responseOf(contourOf(north), model, { ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled' })
  const row = result.regions[0]!

  it('multiplies the mass trend by the response', () => {
    expect(row.massGtPerYear!.value).toBeCloseTo(-100, 9)
    expect(row.lodMicrosecondsPerYear!.value).toBeCloseTo(-100 * perGt.lodMicroseconds, 9)
    expect(row.lodMsPerCentury!.value).toBeCloseTo(-100 * perGt.lodMicroseconds * 0.1, 9)
    expect(row.barystaticMmPerYear!.value).toBeCloseTo(-100 * perGt.barystaticMm, 9)
    expect(row.deltaJ2PerYear!.value / (-100 * perGt.deltaJ2)).toBeCloseTo(1, 9)
    expect(row.driftCmPerYear!.value).toBeCloseTo(100 * Math.hypot(perGt.chi1Mas, perGt.chi2Mas) * POLE_MM_PER_MAS / 10, 9)
    expect(row.perGt).toEqual(perGt)
  })

  it('moves the pole towards a loss in the north and lengthens the day', () => {
    expect(row.directionDegEast!.value).toBeGreaterThan(-50)
    expect(row.directionDegEast!.value).toBeLessThan(-30)
    expect(row.lodMicrosecondsPerYear!.value).toBeGreaterThan(0)
  })

  it('is the whole of its own total', () => {
    expect([row.shareOfModelLod, row.shareOfModelPole]).toEqual([1, 1])
    expect(result.total.driftMasPerYear).toEqual(row.driftMasPerYear)
    expect(result.total.shareOfModelLod).toBeNull()
  })

  it('gives monthly values at the middles of calendar months, relative to their mean', () => {
    expect(result.epochsMjd[0]).toBe(mjdFromIsoDate('2002-01-16') + 0.5)
    expect(result.epochsMjd[1]).toBe(mjdFromIsoDate('2002-02-15'))
    expect(row.massGt).toHaveLength(result.epochsMjd.length)
    expect(row.massGt.reduce((sum: number, m) => sum + m!, 0)).toBeCloseTo(0, 8)
    const years = (result.epochsMjd[13]! - result.epochsMjd[1]!) / 365.25
    expect(row.massGt[13]! - row.massGt[1]!).toBeCloseTo(-100 * years, 8)
    expect(result.total.series.chi1Mas[7]!).toBeCloseTo(row.massGt[7]! * perGt.chi1Mas, 12)
    expect(row.coverage).toBe(1)
  })

  it('is the same to the last digit when run again, and carries no clock', () => {
    expect(JSON.stringify(computeRun(runInput([region('r1', north, -100)]), model))).toBe(JSON.stringify(result))
    expect(JSON.parse(JSON.stringify(result))).toEqual(result)
  })
})

describe('a sum of regions', () => {
  const a = { ...noisy(-100, 1), sharedRates: [{ source: 'gia', sigmaGtPerYear: 8 }] }
  const b = { ...noisy(-60, 2), sharedRates: [{ source: 'gia', sigmaGtPerYear: 5 }, { source: 'frame', sigmaGtPerYear: 3 }] }
  const input = runInput([region('a', north, 0, { series: a }), region('b', south, 0, { series: b, scale: -2 })])
  const result = computeRun(input, model)
  const [ra, rb] = result.regions as [typeof result.regions[0], typeof result.regions[0]]

  it('adds trends, independent errors as squares, and a shared source with the sign of factor and response', () => {
    expect(result.total.massGtPerYear!.value).toBeCloseTo(ra.massGtPerYear!.value + rb.massGtPerYear!.value, 9)
    expect(ra.massGtPerYear!.sigma).toBeGreaterThan(8)
    const own = (row: typeof ra, shared: number): number => row.massGtPerYear!.sigma ** 2 - shared
    const independentA = own(ra, 8 ** 2)
    const independentB = own(rb, 4 * (5 ** 2 + 3 ** 2))
    const [ga, gb] = [ra.perGt.chi1Mas, rb.perGt.chi1Mas]
    const expected = ga ** 2 * independentA + gb ** 2 * independentB + (ga * 8 - gb * 2 * 5) ** 2 + (gb * 2 * 3) ** 2
    expect(result.total.chi1MasPerYear!.sigma ** 2 / expected).toBeCloseTo(1, 10)
    expect(result.total.driftCovariance!.c11 / expected).toBeCloseTo(1, 10)
    expect(result.total.chi1MasPerYear!.sigmaWhite).toBeLessThan(result.total.chi1MasPerYear!.sigma)
  })

  it('keeps χ₁ and χ₂ of one region fully correlated', () => {
    const { c11, c12, c22 } = ra.driftCovariance!
    expect(c12 ** 2 / (c11 * c22)).toBeCloseTo(1, 10)
    expect(ra.directionDegEast!.sigma).toBeCloseTo(0, 5)
    expect(ra.driftMasPerYear!.sigma / ra.driftMasPerYear!.value).toBeCloseTo(ra.massGtPerYear!.sigma / -ra.massGtPerYear!.value, 10)
  })

  it('gives the total a direction error from the covariance across the drift', () => {
    const { c11, c12, c22 } = result.total.driftCovariance!
    const { value, sigma } = result.total.directionDegEast!
    const [x, y] = [-Math.sin(value * Math.PI / 180), Math.cos(value * Math.PI / 180)]
    const across = Math.sqrt(c11 * x * x + 2 * c12 * x * y + c22 * y * y)
    expect(sigma).toBeCloseTo(across / result.total.driftMasPerYear!.value * 180 / Math.PI, 9)
    expect(sigma).toBeGreaterThan(0)
  })

  it('has shares that add up to one', () => {
    expect(ra.shareOfModelLod! + rb.shareOfModelLod!).toBeCloseTo(1, 12)
    expect(ra.shareOfModelPole! + rb.shareOfModelPole!).toBeCloseTo(1, 12)
  })

  it('is linear: the total series is the sum of scaled responses times masses', () => {
    const j = 20
    const sum = ra.massGt[j]! * ra.perGt.lodMicroseconds + rb.massGt[j]! * rb.perGt.lodMicroseconds
    expect(result.total.series.lodMicroseconds[j]).toBeCloseTo(sum, 10)
  })

  it('cancels what cancels: equal and opposite regions leave nothing but independent errors', () => {
    const same = computeRun(runInput([
      region('a', north, 0, { series: a }), region('b', { ...north }, 0, { series: { ...a }, scale: -1 })
    ]), model)
    expect(same.total.massGtPerYear!.value).toBeCloseTo(0, 9)
    expect(same.total.directionDegEast).toBeNull()
    expect(same.total.massGtPerYear!.sigma).toBeLessThan(8)
    expect(same.overlaps[0]).toMatchObject({ a: 'a', b: 'b' })
    expect(same.overlaps[0]!.shareOfA).toBeCloseTo(1, 9)
    expect(same.warnings[0]).toMatchObject({ code: 'overlap', regions: ['a', 'b'] })
  })
})

describe('errors of monthly values', () => {
  it('follow from the epochs, checked by simulation', () => {
    // 300 seeds: the variance of an estimate has a relative error of √(2/300) = 8 %; 5 of them are 41 %.
    const mjd = everyMonth(24, 52300)
    const runs = Array.from({ length: 300 }, (_, seed) =>
      computeRun(runInput([region('a', north, 0, { series: noisy(0, seed, mjd) })]), model).regions[0]!)
    for (const j of [0, 11, 22]) {
      const variance = runs.reduce((sum, run) => sum + run.massGt[j]! ** 2, 0) / runs.length
      expect(Math.abs(variance / runs[0]!.sigmaMassGt[j]! ** 2 - 1)).toBeLessThan(0.41)
    }
  })

  it('grow away from the middle where the trend is uncertain', () => {
    const series = { ...noisy(-100, 3), sigmaGt: everyMonth(61).map(() => 1e-6), sharedRates: [{ source: 'gia', sigmaGtPerYear: 10 }] }
    const result = computeRun(runInput([region('a', north, 0, { series })]), model)
    const years = (result.epochsMjd.at(-1)! - result.epochsMjd[0]!) / 365.25
    expect(result.regions[0]!.sigmaMassGt[0]).toBeCloseTo(10 * years / 2, 1)
    expect(result.total.series.sigmaLodMicroseconds[0]! / Math.abs(result.regions[0]!.perGt.lodMicroseconds)).toBeCloseTo(10 * years / 2, 1)
  })
})

describe('span, gaps and factors', () => {
  it('takes the span that all series share', () => {
    const result = computeRun(runInput([
      region('a', north, -100), region('b', south, -50, { series: { mjd: everyMonth(40, 52600), massGt: everyMonth(40).map((_, i) => -i), sigmaGt: null, sharedRates: [] } })
    ]), model)
    expect(result.span).toEqual({ fromMjd: 52600, toMjd: 52600 + 39 * 30.4375 })
    expect(result.regions[1]!.epochsUsed).toBe(40)
    expect(result.warnings.find(w => w.code === 'sigma-from-scatter')!.regions).toEqual(['b'])
  })

  it('leaves a gap of a year open, in the region and in the sum', () => {
    const mjd = everyMonth(96).filter((_, i) => i < 50 || i >= 62)
    const result = computeRun(runInput([
      region('a', north, -100, { series: { mjd, massGt: mjd.map(t => -0.3 * t), sigmaGt: null, sharedRates: [] } }), region('b', south, -50, { series: noisy(-50, 4, everyMonth(96)) })
    ]), model)
    const open = result.regions[0]!.massGt.filter(m => m === null).length
    expect(open).toBeGreaterThanOrEqual(10)
    expect(result.total.series.lodMicroseconds.filter(v => v === null)).toHaveLength(open)
    expect(result.regions[1]!.massGt.every(m => m !== null)).toBe(true)
    expect(result.regions[0]!.massGtPerYear!.value).toBeCloseTo(-0.3 * 365.25, 6)
    expect(result.warnings.find(w => w.code === 'gaps')!.regions).toEqual(['a'])
  })

  it('does not extrapolate: months outside the data stay open in a span that is set', () => {
    const input = runInput([region('a', north, -100)])
    const result = computeRun({ ...input, settings: { ...input.settings, fromMjd: 52000, toMjd: 55000 } }, model)
    const [first, last] = [52289.5, 52289.5 + 60 * 30.4375]
    result.epochsMjd.forEach((t, j) => {
      const value = result.regions[0]!.massGt[j]
      if (t >= first && t <= last) expect(value).not.toBeNull()
      // Within 16 days of an epoch the month itself holds it.
      if (t < first - 16 || t > last + 16) expect(value).toBeNull()
    })
    expect(result.regions[0]!.massGt.filter(m => m === null).length).toBeGreaterThan(25)
  })

  it('keeps the row of a region that is switched off, with nothing in it', () => {
    const result = computeRun(runInput([region('a', north, -100), region('b', north, -50, { scale: 0 })]), model)
    expect(result.overlaps).toEqual([])
    expect(result.regions[1]!.massGtPerYear).toEqual({ value: 0, sigmaWhite: 0, sigma: 0 })
    expect(result.regions[1]!.directionDegEast).toBeNull()
    expect(result.total.massGtPerYear!.value).toBeCloseTo(-100, 9)
  })

  it('names what it cannot use', () => {
    expect(issueCodes(() => computeRun(runInput([]), model))).toEqual(['no-region'])
    expect(issueCodes(() => computeRun(runInput([region('a', north, 1), region('b', south, 1, { series: noisy(1, 1, everyMonth(20, 58000)) })]), model))).toEqual(['no-common-span'])
    const short = { mjd: [52300, 52400, 53000], massGt: [1, 2, 3], sigmaGt: null, sharedRates: [] }
    expect(issueCodes(() => computeRun(runInput([region('a', north, 1, { series: short }), region('b', south, 1, { series: noisy(1, 1, everyMonth(5, 52350)) })]), model))).toEqual(['too-few-epochs'])
    const wrong = { mjd: [3, 2, 1], massGt: [1, 2], sigmaGt: [1, 0, 1], sharedRates: [] }
    expect(issueCodes(() => computeRun(runInput([region('a', north, 1, { series: wrong })]), model))).toEqual(['unequal-lengths', 'epoch-order', 'sigma-not-positive'])
  })
})

describe('rows that are entered', () => {
  const rate = (value: number, sigma: number): { value: number, sigma: number } => ({ value, sigma })

  it('convert, keep their direction, and warn of another core', () => {
    // The secular pole of the IERS Conventions (2010, ch. 7, 2018 update): ẋ = 1.677, ẏ = 3.460 mas/yr, so χ₂ = −ẏ. As a check of
    // signs only: 3.845 mas/yr, 11.9 cm/yr, towards 64.1° W.
    const result = computeRun(runInput([region('a', north, -100)], {
      background: [{
        key: 'b1', name: 'Secular pole', source: 'IERS Conventions (2010)', core: 'coupled',
        lodMsPerCentury: rate(2.3, 0.1), chi1MasPerYear: rate(1.677, 0.1), chi2MasPerYear: rate(-3.460, 0.1)
      }]
    }), model)
    const row = result.background[0]!
    expect(row.lodMicrosecondsPerYear).toEqual({ value: 23, sigmaWhite: 1, sigma: 1 })
    expect(row.driftMasPerYear!.value).toBeCloseTo(3.845, 3)
    expect(row.driftCmPerYear!.value).toBeCloseTo(11.9, 1)
    expect(row.directionDegEast!.value).toBeCloseTo(-64.1, 1)
    expect(row.directionDegEast!.sigma).toBeCloseTo(0.1 / 3.845 * 180 / Math.PI, 3)
    expect(row.massGtPerYear).toBeNull()
    expect(result.warnings.find(w => w.code === 'core-convention')!.regions).toEqual(['b1'])
    expect(result.restOfWorld).toMatchObject({ key: 'rest-of-world', lodMsPerCentury: null })
  })

  it('give no direction error to a drift that is lost in its error', () => {
    const result = computeRun(runInput([region('a', north, -100)], {
      restOfWorld: { key: 'rest', name: 'Rest', source: 'guess', core: null, lodMsPerCentury: null, chi1MasPerYear: rate(1, 0.6), chi2MasPerYear: rate(0, 0.1) }
    }), model)
    expect(result.restOfWorld.directionDegEast).toEqual({ value: 0, sigma: null })
    expect(result.warnings.some(w => w.code.startsWith('core'))).toBe(false)
  })
})
