import { beforeAll, describe, expect, it } from 'vitest'
import { contourOf } from '../../../shared/earth/contour.ts'
import { derivedOf, geocentreFactor } from '../../../shared/earth/derived.ts'
import type { EarthModel } from '../../../shared/earth/earthModel.ts'
import { poleDirectionDegEast, reportedPoleOf } from '../../../shared/earth/excitation.ts'
import { deltaJ2Of, inertiaFromRigidStokes, inertiaOf, rigidStokesOf, yieldedStokesOf } from '../../../shared/earth/inertia.ts'
import { geocentricFromGeodeticDeg, geodeticFromGeocentricDeg, squaredRadiusRatio } from '../../../shared/earth/latitude.ts'
import { loveNumbersAt, seaLevelFactors, wahrK } from '../../../shared/earth/loadLoveNumbers.ts'
import { modelUncertainty } from '../../../shared/earth/modelUncertainty.ts'
import { observables } from '../../../shared/earth/observables.ts'
import { responseAtPlace } from '../../../shared/earth/pointResponse.ts'
import { responseOf } from '../../../shared/earth/response.ts'
import { oceanModes, type Outline, type PhysicsSettings } from '../../../shared/types/domain.ts'
import { shippedModel } from '../../reference/earth/shippedModel.ts'

const box = (w: number, s: number, e: number, n: number): Outline => ({ type: 'Polygon', coordinates: [[[w, s], [e, s], [e, n], [w, n], [w, s]]] })
const ice = contourOf(box(-45, 68, -35, 76))
let model: EarthModel
beforeAll(async () => {
  model = await shippedModel()
})

describe('latitude', () => {
  it('goes to the sphere and back', () => {
    for (const lat of [-90, -45, -0.1, 0, 12.3, 89.999, 90]) expect(geodeticFromGeocentricDeg(geocentricFromGeodeticDeg(lat))).toBeCloseTo(lat, 12)
    // At 45° the two differ by 11.545 arcminutes (WGS 84; Snyder 1987, table 3).
    expect((45 - geocentricFromGeodeticDeg(45)) * 60).toBeCloseTo(11.545, 3)
    expect(() => geocentricFromGeodeticDeg(91.2)).toThrow('latitudeDeg must be in [-90, 90], got 91.2')
  })
  it('has the radii of WGS 84 at equator and pole', () => {
    expect(Math.sqrt(squaredRadiusRatio(0)) * 6_371_000).toBeCloseTo(6_378_137, 6)
    expect(Math.sqrt(squaredRadiusRatio(90)) * 6_371_000).toBeCloseTo(6_356_752.3142, 4)
  })
})

describe('Love numbers', () => {
  it('are those of the tables', () => {
    // Wang et al. (2012), PREM; Wahr et al. (1998), Table 1, printed and half-way between printed degrees.
    expect(loveNumbersAt(2)).toEqual({ h: -0.99079949, l: 0.023286695, k: -0.30516104 })
    expect(loveNumbersAt(128)).toEqual({ h: -3.1081296, l: 0.0070504134, k: -0.011206828 })
    expect(wahrK(15)).toBe(-0.058)
    expect(wahrK(35)).toBeCloseTo(-0.0365, 12)
    expect(seaLevelFactors(3)[2]).toBeCloseTo(1 - 0.30516104 + 0.99079949, 12)
    expect(seaLevelFactors(3)[0]).toBe(0)
  })
  it('of the two tables agree to 5 % in k up to degree 100', () => {
    for (let l = 2; l <= 100; l++) expect(Math.abs(wahrK(l) / loveNumbersAt(l).k - 1)).toBeLessThan(0.05)
  })
  it('end at degree 256', () => {
    expect(() => seaLevelFactors(257)).toThrow('degree must be an integer in [0, 256], got 257')
    expect(() => loveNumbersAt(0)).toThrow('degree must be at least 1, got 0')
  })
})

describe('gravity field and geocentre', () => {
  it('rigid Stokes changes and inertia increments are one another’s inverse for a load without net mass', () => {
    const inertia = inertiaOf(1e15, { xz: 0.21, yz: -0.18, cos2: -0.3 })
    const back = inertiaFromRigidStokes(rigidStokesOf(inertia))
    expect(back.i13 / inertia.i13).toBeCloseTo(1, 13)
    expect(back.i23 / inertia.i23).toBeCloseTo(1, 13)
    expect(back.i33 / inertia.i33).toBeCloseTo(1, 13)
  })

  it('ΔJ₂ by the Stokes coefficient is ΔJ₂ by the moments, in every mode', () => {
    for (const ocean of oceanModes) {
      const response = responseOf(ice, model, { ocean, coefficients: 'gross-2007', core: 'decoupled' })
      const derived = derivedOf(ice, model, ocean)
      expect(derived.deltaJ2 / response.deltaJ2).toBeCloseTo(1, 12)
      expect(derived.deltaJ2).toBe(deltaJ2Of({ c20: derived.deltaC20, c21: 0, s21: 0 }))
    }
    expect(yieldedStokesOf({ c20: 1, c21: 2, s21: 3 })).toEqual({ c20: 0.695, c21: 1.39, s21: 2.085 })
  })

  // Wahr et al. (1998), Table 1: k₁ = 0.027 in the frame of the centre of figure, which is −(h₁ + 2 l₁)/3 of any frame with k₁ = 0.
  it('geocentre factor is 1 + k₁ of the centre of figure', () => {
    expect(geocentreFactor() - 1).toBeCloseTo(0.027, 2)
    expect(Math.abs(geocentreFactor() - 1.027)).toBeLessThan(1.5e-3)
  })

  it('the geocentre moves towards mass gained, none without the sea', () => {
    const { geocentreMm } = derivedOf(ice, model, 'fingerprint')
    // 1 Gt of 5.97e12 Gt at nearly one Earth radius: 1.067e-3 mm, and the sea that pays.
    expect(geocentreMm!.z).toBeGreaterThan(-0.0013 * -0.8)
    expect(geocentreMm!.x).toBeGreaterThan(0)
    expect(geocentreMm!.y).toBeLessThan(0)
    expect(Math.hypot(geocentreMm!.x, geocentreMm!.y, geocentreMm!.z)).toBeLessThan(1.4e-3)
    expect(derivedOf(ice, model, 'none').geocentreMm).toBeNull()
  })
})

describe('pole', () => {
  it('is reported with y towards 90° W', () => expect(reportedPoleOf(3, 4)).toEqual({ xMas: 3, yMas: -4 }))
  it('has no direction at rest and lies in (−180, 180]', () => {
    expect(poleDirectionDegEast(0, 0)).toBeNull()
    expect(poleDirectionDegEast(-1, 0)).toBe(180)
    expect(poleDirectionDegEast(-1, -0)).toBe(180)
    expect(poleDirectionDegEast(0, -2)).toBe(-90)
  })
})

describe('response at a place', () => {
  it.each(oceanModes)('is that of a tiny outline there, mode %s', (ocean) => {
    const settings = { ocean, coefficients: 'gross-2007', core: 'decoupled' } as const
    for (const [lon, lat] of [[-40, 72], [77, 29], [-105, -76], [179.9, -16.5], [12.3, 0.1]] as const) {
      const h = 0.002
      const outline = responseOf(contourOf(box(lon - h, lat - h, lon + h, lat + h)), model, settings)
      const place = responseAtPlace(lon, lat, model, settings)
      for (const key of ['chi1Mas', 'chi2Mas', 'lodMicroseconds', 'barystaticMm'] as const) expect(Math.abs(place[key] - outline[key])).toBeLessThan(1e-5 * 0.04)
    }
  })
})

describe('model uncertainty', () => {
  const gross = (ocean: PhysicsSettings['ocean']): PhysicsSettings => ({ ocean, coefficients: 'gross-2007', core: 'decoupled' })
  it('names its lines with sizes of the expected order', () => {
    const lines = modelUncertainty([{ contour: ice, massGt: -100 }], gross('fingerprint'), model)
    expect(lines.map(line => line.id)).toEqual(['coefficients', 'love-numbers', 'truncation', 'ellipsoid', 'frequency'])
    const result = responseOf(ice, model, gross('fingerprint'))
    const of = (id: string) => lines.find(line => line.id === id)!
    // Barnes et al. (1983) against Gross (2007): χ 2.05 %, ΔLOD 5.3 %.
    expect(of('coefficients').chi1Mas / Math.abs(100 * result.chi1Mas)).toBeCloseTo(0.0205, 3)
    expect(of('coefficients').lodMicroseconds / Math.abs(100 * result.lodMicroseconds)).toBeCloseTo(0.053, 3)
    expect(of('frequency').chi1Mas).toBeCloseTo(2 * Math.abs(result.chi1Mas), 12)
    // r²/R² is 0.9962 at 72° N: 4e-3 of the region's own moment.
    expect(of('ellipsoid').chi1Mas / Math.abs(100 * result.chi1Mas)).toBeGreaterThan(2e-3)
    expect(of('ellipsoid').chi1Mas / Math.abs(100 * result.chi1Mas)).toBeLessThan(5e-3)
  })
  it('has no Love numbers with a uniform ocean, and scales with the mass', () => {
    const one = modelUncertainty([{ contour: ice, massGt: 1 }], gross('uniform'), model)
    const ten = modelUncertainty([{ contour: ice, massGt: -10 }], gross('uniform'), model)
    expect(one.map(line => line.id)).toEqual(['coefficients', 'ellipsoid', 'frequency'])
    one.forEach((line, i) => expect(ten[i]!.lodMicroseconds).toBeCloseTo(10 * line.lodMicroseconds, 12))
  })
})

it('observables are one table with a text for each sign', () => {
  expect(new Set(observables.map(o => o.id)).size).toBe(observables.length)
  for (const o of observables) for (const text of [o.symbol, o.name, o.unit, o.positive, o.negative]) expect(text.length).toBeGreaterThan(0)
})
