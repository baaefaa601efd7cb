import { describe, expect, it } from 'vitest'
import { movedPart, withPattern, type CellPattern } from '../../../shared/earth/cellPattern.ts'
import { contourOf } from '../../../shared/earth/contour.ts'
import { derivedOf } from '../../../shared/earth/derived.ts'
import { responseOf } from '../../../shared/earth/response.ts'
import { fitTrend } from '../../../shared/earth/time/trend.ts'
import { computeRun } from '../../../shared/earth/time/run.ts'
import { openGrid } from '../../../shared/grids/heightGrid.ts'
import { departureSentence, monthlyDeparture } from '../../../shared/grids/monthlyDeparture.ts'
import { regionSeries } from '../../../shared/grids/regionSeries.ts'
import type { PhysicsSettings } from '../../../shared/types/domain.ts'
import { shippedModel } from '../../reference/earth/shippedModel.ts'
import { region, runInput } from '../time/runFixtures.ts'
import { box, madeGrid, middles } from './gridFixtures.ts'

const model = await shippedModel()
const modes = ['none', 'uniform', 'fingerprint', 'fingerprint-rotation'] as const
const settings = (ocean: PhysicsSettings['ocean']): PhysicsSettings => ({ ocean, coefficients: 'gross-2007', core: 'decoupled' })
const outline = box(0, 30, 20, 50)
const days = Array.from({ length: 36 }, (_, i) => 15 + 30.4375 * i)
const made = (height: (lat: number, lon: number, t: number) => number, step = 1) =>
  regionSeries(openGrid(madeGrid({ lat: middles(20, 60, step), lon: middles(-10, 30, step), days, height })), [{ id: 'a', geometry: outline }], { pattern: { gridSha256: '1'.repeat(64) } })[0]!

describe('the pattern of a grid', () => {
  it('of mass in one cell has the effect of a point load there, by the closed form', () => {
    const [lat, lon, step] = [42.25, 7.25, 0.5]
    const { pattern } = made((y, x, t) => y === lat && x === lon ? -t : 0, step).pattern!
    const got = responseOf(withPattern(contourOf(outline), pattern), model, settings('none'))
    // Gross (2007), Treatise on Geophysics 3, 239–294: χ = 1.608 × 0.684 ΔI/(C − A), ΔLOD = 86 400 s × 0.997 × 0.750 ΔI₃₃/C_m with
    // C − A = 2.63095e35 kg m² (mean of both equatorial moments) and C_m = 7.1236e37 kg m²; ΔI₁₃ = −m R² sin ψ cos ψ cos λ, ΔI₃₃ = m R² cos² ψ.
    const psi = Math.atan((1 - 0.00669437999014) * Math.tan(lat * Math.PI / 180))
    const lambda = lon * Math.PI / 180
    const moment = 1e12 * 6_371_000 ** 2
    const mas = 180 / Math.PI * 3600 * 1000
    const chi = -1.608 * 0.684 * moment * Math.sin(psi) * Math.cos(psi) / 2.63095e35 * mas
    const lod = 86_400e6 * 0.997 * 0.750 * moment * Math.cos(psi) ** 2 / 7.1236e37
    // A cell of half a degree is no point: its means differ from the middle's by the square of its size, some 2e-5, and an even height is even per area of the ellipsoid, 1e-4.
    expect(Math.abs(got.chi1Mas / (chi * Math.cos(lambda)) - 1)).toBeLessThan(2e-4)
    expect(Math.abs(got.chi2Mas / (chi * Math.sin(lambda)) - 1)).toBeLessThan(2e-4)
    expect(Math.abs(got.lodMicroseconds / lod - 1)).toBeLessThan(2e-4)
  })

  it('in every mode is what an outline of that cell alone has', () => {
    const { pattern } = made((y, x, t) => y === 42.5 && x === 7.5 ? 3 - t : 0).pattern!
    expect(pattern.basis).toBe('trend')
    for (const mode of modes) {
      const [with_, alone] = [withPattern(contourOf(outline), pattern), contourOf(box(7, 42, 8, 43))]
      const [got, expected] = [responseOf(with_, model, settings(mode)), responseOf(alone, model, settings(mode))]
      // An even height is even per area of the ellipsoid, an outline's own mean per area of the sphere: 1e-4 of scale over twenty degrees.
      for (const [name, scale] of [['chi1Mas', 0.0185], ['chi2Mas', 0.0185], ['lodMicroseconds', 0.0254]] as const) expect(Math.abs(got[name] - expected[name]) / scale).toBeLessThan(2e-4)
      const [a, b] = [derivedOf(with_, model, mode), derivedOf(alone, model, mode)]
      if (a.geocentreMm) expect(Math.abs(a.geocentreMm.z / b.geocentreMm!.z - 1)).toBeLessThan(2e-4)
    }
  })

  it('without structure is the even spread, and its excess always sums to zero', () => {
    const even = made((_, __, t) => Math.sin(t) - 0.2 * t).pattern!
    expect(movedPart(even.pattern)).toBeLessThan(1e-6)
    const wild = made((lat, lon, t) => Math.sin(lat * 3 + t) + lon / 20 * t).pattern!
    expect(movedPart(wild.pattern)).toBeGreaterThan(0.1)
    for (const { pattern } of [even, wild]) expect(Math.abs(pattern.excess.reduce((sum, e) => sum + e, 0))).toBeLessThan(1e-12)
  })

  it('makes the trend of the effect that of the monthly fields', () => {
    const grid = openGrid(madeGrid({ lat: middles(20, 60, 1), lon: middles(-10, 30, 1), days, height: (lat, lon, t) => -0.01 * t * (lat - 28) + 0.3 * Math.sin(t / 2 + lon) }))
    const [series] = regionSeries(grid, [{ id: 'a', geometry: outline }], { pattern: { gridSha256: '1'.repeat(64) }, effect: { model, settings: settings('fingerprint') } })
    const perGt = responseOf(withPattern(contourOf(outline), series!.pattern!.pattern), model, settings('fingerprint'))
    const trend = (value: number[]) => fitTrend({ mjd: series!.mjd, value, sigma: null }).value
    // Exact but for the common shift of the cells along the outline's edge and single precision of the volumes.
    for (const name of ['chi1Mas', 'chi2Mas', 'lodMicroseconds'] as const) expect(Math.abs(perGt[name] * trend(series!.massGt) / trend(series!.effect!.pattern[name]) - 1)).toBeLessThan(1e-6)
  })

  it('misses nothing of a field that only grows and shrinks, and says how much of one that moves', () => {
    const departure = (height: (lat: number, lon: number, t: number) => number) => {
      const [series] = regionSeries(openGrid(madeGrid({ lat: middles(20, 60, 1), lon: middles(-10, 30, 1), days, height })), [{ id: 'a', geometry: outline }], { pattern: { gridSha256: '1'.repeat(64) }, effect: { model, settings: settings('uniform') } })
      return monthlyDeparture(series!.massGt, series!.effect!.pattern, responseOf(withPattern(contourOf(outline), series!.pattern!.pattern), model, settings('uniform')))!
    }
    // Separable in space and time: one pattern is exact, to single precision.
    const still = departure((lat, lon, t) => (lat - 25) * (lon + 12) * (Math.sin(t) - 0.1 * t))
    expect(Math.max(still.lod, still.pole)).toBeLessThan(1e-4)
    const moving = departure((lat, _, t) => -0.05 * t + (lat - 40) * Math.sin(t / 2))
    expect(moving.lod).toBeGreaterThan(0.05)
    expect(departureSentence({ lod: 0.123, pole: 1e-5 })).toContain('off by 12 % of its own scatter, that on the pole by less than 0.05 %')
  })

  it('is that of the variation where the trends of the cells cancel', () => {
    const found = made((_, lon, t) => (lon < 10 ? 1 : -1) * t + (lon < 5 ? 40 : 0) * Math.sin(2 * Math.PI * days[t]! / 365.25)).pattern!
    expect(found.agreement).toBeLessThan(0.25)
    expect(found.pattern.basis).toBe('variation')
    // What varies with the whole is the season, which is in the west alone.
    const part = (from: number, to: number) => found.pattern.excess.reduce((sum, e, i) => found.pattern.westDeg[i]! >= from && found.pattern.westDeg[i]! < to ? sum + e : sum, 0)
    expect(part(0, 5)).toBeGreaterThan(0.5)
    expect(made(() => 1).pattern).toBeNull()
  })
})

describe('a run with a pattern', () => {
  const { pattern } = made((lat, _, t) => -t * (lat - 29)).pattern!
  const of = (more: { pattern?: CellPattern }) => computeRun(runInput([region('a', outline as never, -50, more)]), model).regions[0]!

  it('has its effect, the mass unchanged, and says what an even spread would do', () => {
    const [plain, patterned] = [of({}), of({ pattern })]
    expect(plain.evenSpread).toBeUndefined()
    expect(patterned.massGtPerYear).toEqual(plain.massGtPerYear)
    expect(patterned.evenSpread!.perGt).toEqual(plain.perGt)
    expect(patterned.evenSpread).toMatchObject({ basis: 'trend', cells: 400 })
    const expected = responseOf(withPattern(contourOf(outline), pattern), model, settings('uniform'))
    expect(patterned.lodMicrosecondsPerYear!.value).toBeCloseTo(expected.lodMicroseconds * patterned.massGtPerYear!.value, 12)
    // What lies further north lies nearer the axis: a gigatonne gained there shortens the day by more.
    expect(patterned.perGt.lodMicroseconds).toBeLessThan(plain.perGt.lodMicroseconds)
  })
})
