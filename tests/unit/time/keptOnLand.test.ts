import { describe, expect, it } from 'vitest'
import { contourOf } from '../../../shared/earth/contour.ts'
import { responseAtPlace } from '../../../shared/earth/pointResponse.ts'
import { landResponse } from '../../../shared/earth/landResponse.ts'
import { geodeticFromGeocentricDeg } from '../../../shared/earth/latitude.ts'
import { valuesAt } from '../../../shared/earth/gridStack.ts'
import { computeRun } from '../../../shared/earth/time/run.ts'
import { derivedOf } from '../../../shared/earth/derived.ts'
import type { BudgetRow } from '../../../shared/types/run.ts'
import { shippedModel } from '../../reference/earth/shippedModel.ts'
import { box, everyMonth, region, runInput } from './runFixtures.ts'

const model = await shippedModel()
const ice = box(-50, 65, -40, 75)
const basin = box(20, 0, 30, 10)
const settings = { ocean: 'fingerprint', coefficients: 'gross-2007', core: 'decoupled' } as const
const run = (regions: Parameters<typeof runInput>[0]) => computeRun(runInput(regions, { settings: { ...runInput([]).settings, ocean: 'fingerprint' } }), model)
const figures = (row: BudgetRow) => [row.massGtPerYear, row.lodMicrosecondsPerYear, row.chi1MasPerYear, row.chi2MasPerYear, row.barystaticMmPerYear, row.deltaJ2PerYear].map(m => m!.value)

describe('water that does not reach the sea', () => {
  it('counts as if the other region had gained it', () => {
    const sent = run([region('a', ice, -100, { fractionToOcean: 0.4, restTo: 'b' }), region('b', basin, 7)])
    const mjd = everyMonth(61)
    // The same account with the gain written into the other region's series: 7 + 0.6 × 100.
    const written = run([region('a', ice, -100), region('b', basin, 67, { series: { mjd, massGt: mjd.map(t => 67 * (t - 53000) / 365.25), sigmaGt: mjd.map(() => 5), sharedRates: [] } })])
    figures(sent.total).forEach((value, i) => expect(value).toBeCloseTo(figures(written.total)[i]!, 8))
    expect(sent.total.derived!.deltaC21PerYear.value / written.total.derived!.deltaC21PerYear.value).toBeCloseTo(1, 8)
    sent.total.series.lodMicroseconds.forEach((lod, i) => expect(lod).toBeCloseTo(written.total.series.lodMicroseconds[i]!, 8))
  })

  it('keeps the region’s own row, adds one of its own, and the rows sum to the total', () => {
    const sent = run([region('a', ice, -100, { fractionToOcean: 0.25 })])
    const plain = run([region('a', ice, -100)])
    expect(sent.regions.map(r => r.key)).toEqual(['a', 'a-kept'])
    expect(figures(sent.regions[0]!)).toEqual(figures(plain.regions[0]!))
    figures(sent.total).forEach((value, i) => expect(value).toBeCloseTo(figures(sent.regions[0]!)[i]! + figures(sent.regions[1]!)[i]!, 10))
    expect(sent.total.massGtPerYear!.value).toBeCloseTo(-25, 6)
    expect(sent.total.barystaticMmPerYear!.value).toBeCloseTo(0.25 * plain.total.barystaticMmPerYear!.value, 8)
    // One series, one error: the parts are fully correlated, so the total's error is smaller, not larger.
    expect(sent.total.massGtPerYear!.sigma).toBeCloseTo(0.25 * plain.total.massGtPerYear!.sigma, 8)
  })

  it('scales the load of ice that floats away', () => {
    const half = run([region('a', ice, -100, { groundedFraction: 0.5 })])
    const plain = run([region('a', ice, -100)])
    figures(half.total).forEach((value, i) => expect(value).toBeCloseTo(figures(plain.total)[i]! / 2, 10))
  })

  it('refuses parts outside 0 to 1 and targets that are not there', () => {
    expect(() => run([region('a', ice, -1, { fractionToOcean: 1.2 })])).toThrow(expect.objectContaining({ issues: [expect.objectContaining({ path: 'regions/0/fractionToOcean' })] }))
    expect(() => run([region('a', ice, -1, { fractionToOcean: 0.2, restTo: 'z' })])).toThrow(expect.objectContaining({ issues: [expect.objectContaining({ path: 'regions/0/restTo' })] }))
    expect(() => run([region('a', ice, -1, { fractionToOcean: 0.2, restTo: 'a' })])).toThrow(expect.objectContaining({ issues: [expect.objectContaining({ path: 'regions/0/restTo' })] }))
  })
})

describe('water over all land evenly', () => {
  const meanOf = (ocean: 'uniform' | 'fingerprint', wantsSea: boolean) => {
    const sum = { lod: 0, chi1: 0, chi2: 0, area: 0 }
    for (let psi = -89; psi < 90; psi += 2) {
      for (let lon = -179; lon < 180; lon += 2) {
        const lat = geodeticFromGeocentricDeg(psi)
        const sea = Math.min(1, Math.max(0, valuesAt(model.oceanField!, lon, lat)[0]!))
        const weight = (wantsSea ? sea : 1 - sea) * Math.cos(psi * Math.PI / 180)
        const r = responseAtPlace(lon, lat, model, { ...settings, ocean })
        sum.lod += weight * r.lodMicroseconds
        sum.chi1 += weight * r.chi1Mas
        sum.chi2 += weight * r.chi2Mas
        sum.area += weight
      }
    }
    return [sum.lod / sum.area, sum.chi1 / sum.area, sum.chi2 / sum.area]
  }

  it('has the mean of the sensitivity over land, by brute force', () => {
    for (const ocean of ['uniform', 'fingerprint'] as const) {
      const land = landResponse(model, { ...settings, ocean })
      const [lod, chi1, chi2] = meanOf(ocean, false)
      // Midpoints of 2° against 1° and against closed means: 1e-4 of scale (0.037 µs and 0.018 mas per gigatonne).
      expect(Math.abs(land.lodMicroseconds - lod!)).toBeLessThan(1e-3 * 0.037)
      expect(Math.abs(land.chi1Mas - chi1!)).toBeLessThan(1e-3 * 0.018)
      expect(Math.abs(land.chi2Mas - chi2!)).toBeLessThan(1e-3 * 0.018)
    }
  })

  it('does nothing where it is poured into the sea evenly: the sea gives it back', () => {
    // P = cO is answered by S = −cO: no net load, whatever the Earth's elasticity.
    for (const value of meanOf('fingerprint', true)) expect(Math.abs(value)).toBeLessThan(1e-3 * 0.037)
  })
})

it('gives the derived quantities of a region as derivedOf does', () => {
  const [row] = run([region('a', ice, -100)]).regions
  const per = derivedOf(contourOf(ice), model, 'fingerprint')
  expect(row!.derived!.deltaC21PerYear.value / (per.deltaC21 * row!.massGtPerYear!.value)).toBeCloseTo(1, 10)
  expect(row!.derived!.geocentreMmPerYear!.z.value / (per.geocentreMm!.z * row!.massGtPerYear!.value)).toBeCloseTo(1, 10)
  // Ice lost in the north moves the centre of mass south.
  expect(row!.derived!.geocentreMmPerYear!.z.value).toBeLessThan(0)
})
