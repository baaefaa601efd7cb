import { describe, expect, it } from 'vitest'
import { coefficientsFor } from '../../../shared/earth/coefficientSets.ts'
import { CHANDLER_PERIOD_DAYS, DYNAMICAL_FLATTENING_MOMENT, EQUATORIAL_MOMENT, MANTLE_EQUATORIAL_MOMENT, POLAR_MOMENT, POLE_MM_PER_MAS, ROTATION_RATE, ROTATIONAL_FACTOR_OCEAN_FREE } from '../../../shared/earth/constants.ts'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { excitationScale, poleDirectionDegEast, poleShiftMm } from '../../../shared/earth/excitation.ts'
import { responseOf } from '../../../shared/earth/response.ts'
import { contourOf } from '../../../shared/earth/contour.ts'
import type { OceanMode, Outline, PhysicsSettings } from '../../../shared/types/domain.ts'

const model = loadEarthModel()
const settings = (ocean: OceanMode): PhysicsSettings => ({ ocean, coefficients: 'gross-2007', core: 'decoupled' })

/** A box of 0.02° round a place: for the published digits a point. */
function point(lat: number, lon: number): Outline {
  const h = 0.01
  return { type: 'Polygon', coordinates: [[[lon - h, lat - h], [lon + h, lat - h], [lon + h, lat + h], [lon - h, lat + h], [lon - h, lat - h]]] }
}

function load(massGt: number, lat: number, lon: number, ocean: OceanMode) {
  const r = responseOf(contourOf(point(lat, lon)), model, settings(ocean))
  const chi1 = massGt * r.chi1Mas
  const chi2 = massGt * r.chi2Mas
  return { lod: massGt * r.lodMicroseconds, chi1, chi2, cm: poleShiftMm(chi1, chi2) / 10, direction: poleDirectionDegEast(chi1, chi2)! }
}

describe('ocean function', () => {
  // Independent reference, land-50m with the Caspian filled: fraction 0.71144, means 0.68863, −0.01505, −0.02228.
  it('has the reference fraction, area and means', () => {
    // The reference rasterises the coast; here it is integrated along its edges: 1.5e-6 apart.
    expect(Math.abs(model.ocean.fraction - 0.711436)).toBeLessThan(5e-6)
    expect(model.ocean.areaM2 / 3.62878293e14).toBeCloseTo(1, 5)
    expect(Math.abs(model.ocean.means.cos2 - 0.68863)).toBeLessThan(1e-5)
    expect(Math.abs(model.ocean.means.xz + 0.01505)).toBeLessThan(1e-5)
    expect(Math.abs(model.ocean.means.yz + 0.02228)).toBeLessThan(1e-5)
  })
})

describe('reservoir of 40 km³ at 30.8° N 111° E', () => {
  // NASA, 10 January 2005: the day 0.06 µs longer, the pole about 2 cm. One digit: an order of magnitude.
  it('lengthens the day by the order of 0.06 µs and moves the pole by about 2 cm', () => {
    const { lod, cm } = load(40, 30.8, 111, 'uniform')
    expect(lod).toBeGreaterThan(0.03)
    expect(lod).toBeLessThan(0.12)
    expect(cm).toBeGreaterThan(1.5)
    expect(cm).toBeLessThan(2.5)
  })

  it('fails by a factor of eighteen where the sea does not pay for the water', () => {
    expect(load(40, 30.8, 111, 'none').lod).toBeCloseTo(1.09, 2)
  })
})

describe('point loads with a uniform ocean', () => {
  // Independent reference at degree 128, Gross (2007) decoupled; the last printed digit is the tolerance.
  it.each([
    [40, 30.8, 111, 0.0762, 0.1989, -0.6042, 1.96, -71.8],
    [-100, 72, -40, 2.179, 0.8450, -0.5868, 3.18, -34.8],
    [-100, -76, -105, 2.317, 0.2666, 0.8763, 2.83, 73.1],
    [-100, 61, -145, 1.661, -1.1673, -0.7763, 4.33, -146.4],
    [-100, 29, 77, -0.2899, 0.3853, 1.5189, 4.84, 75.8]
  ])('%d Gt at %d° N %d° E', (mass, lat, lon, lod, chi1, chi2, cm, direction) => {
    const got = load(mass, lat, lon, 'uniform')
    expect(Math.abs(got.lod - lod)).toBeLessThan(6e-4 * Math.max(1, Math.abs(lod)))
    expect(Math.abs(got.chi1 - chi1)).toBeLessThan(1e-4)
    expect(Math.abs(got.chi2 - chi2)).toBeLessThan(1e-4)
    expect(Math.abs(got.cm - cm)).toBeLessThan(0.006)
    expect(Math.abs(got.direction - direction)).toBeLessThan(0.06)
  })

  it('drives the pole 2.7° apart from 76° S 105° W and 29° N 77° E, to 73.1° E and 75.8° E', () => {
    const ice = load(-100, -76, -105, 'uniform')
    const water = load(-100, 29, 77, 'uniform')
    expect(water.direction - ice.direction).toBeCloseTo(2.7, 1)
    expect(Math.sign(ice.lod)).toBe(-Math.sign(water.lod))
  })
})

describe('groundwater 1993–2010', () => {
  // Seo et al. (2023), GRL, 2023GL103509: 2150 Gt. All of it at 29° N 77° E gives 104 cm towards 75.8° E (recomputed).
  it('would move the pole by 104 cm if all of it came from one place', () => {
    const { cm, direction } = load(-2150, 29, 77, 'uniform')
    expect(cm).toBeCloseTo(104, 0)
    expect(direction).toBeCloseTo(75.8, 1)
  })
})

describe('guards per gigatonne', () => {
  // Uniform ocean, Gross (2007): |χ| ≤ 0.0185 mas and |ΔLOD| ≤ 0.0254 µs wherever the mass lies.
  it('no place exceeds 0.0185 mas or 0.0254 µs', () => {
    let chi = 0
    let lod = 0
    for (let lat = -89; lat <= 89; lat += 2) {
      for (let lon = -180; lon < 180; lon += 5) {
        const r = responseOf(contourOf(point(lat, lon)), model, settings('uniform'))
        chi = Math.max(chi, Math.hypot(r.chi1Mas, r.chi2Mas))
        lod = Math.max(lod, Math.abs(r.lodMicroseconds))
      }
    }
    expect(chi).toBeLessThan(0.0185)
    expect(chi).toBeGreaterThan(0.0180)
    expect(lod).toBeLessThan(0.0254)
    expect(lod).toBeGreaterThan(0.0250)
  })
})

describe('coefficient sets', () => {
  const scale = (id: 'gross-2007' | 'eubanks-1993' | 'barnes-1983', core: 'decoupled' | 'coupled' = 'decoupled') => excitationScale(1, coefficientsFor(id, core))

  // Barnes et al. (1983) against Gross (2007): χ +2.0 %, LOD −5.3 % (recomputed from both papers' numbers).
  it('differ as the papers differ', () => {
    expect(scale('barnes-1983').chiMas / scale('gross-2007').chiMas).toBeCloseTo(1.0205, 3)
    expect(scale('barnes-1983').lodMicroseconds / scale('gross-2007').lodMicroseconds).toBeCloseTo(0.9473, 3)
    expect(scale('eubanks-1993').chiMas / scale('gross-2007').chiMas).toBeCloseTo(1.098 / 2.610 * 2.63095 / 1.099872, 9)
  })

  it('coupled replaces the axial pair in every set and leaves χ₁, χ₂ alone; decoupled is 21 % larger', () => {
    for (const id of ['gross-2007', 'eubanks-1993', 'barnes-1983'] as const) {
      expect(scale(id, 'coupled').chiMas).toBe(scale(id).chiMas)
      expect(scale(id, 'coupled').lodMicroseconds).toBe(scale('gross-2007', 'coupled').lodMicroseconds)
    }
    expect(scale('gross-2007').lodMicroseconds / scale('gross-2007', 'coupled').lodMicroseconds).toBeCloseTo(1.21, 2)
  })

  // Gross (2007): the rotational factor is that of a 433 d wobble, the Euler period 304.5 d.
  it('agrees with the Chandler and the Euler period', () => {
    expect(DYNAMICAL_FLATTENING_MOMENT * ROTATION_RATE / (MANTLE_EQUATORIAL_MOMENT * 2 * Math.PI / (CHANDLER_PERIOD_DAYS * 86_400))).toBeCloseTo(1.609, 3)
    expect(EQUATORIAL_MOMENT / DYNAMICAL_FLATTENING_MOMENT).toBeCloseTo(304.5, 1)
    expect(ROTATIONAL_FACTOR_OCEAN_FREE).toBeCloseTo(1.4869, 4)
  })
})

describe('published arithmetic', () => {
  // Ren (2021): 10.1e27 kg m²/yr with the whole Earth's C of 8.0365e37 gives 10.86 µs/yr before the yielding.
  it('turns 10.1e27 kg m² into 10.86 µs', () => {
    expect(86_400e6 * 10.1e27 / POLAR_MOMENT).toBeCloseTo(10.86, 2)
  })

  // J₂ and the day: 1e-11 per year is 0.174 ms/century with the whole Earth's C, 0.211 decoupled.
  it.each([['coupled', 0.174], ['decoupled', 0.211]] as const)('holds the ratio of J₂ and the day, %s', (core, msPerCentury) => {
    const r = responseOf(contourOf(point(72, -40)), model, { ...settings('uniform'), core })
    expect(r.lodMicroseconds / r.deltaJ2 * 1e-11 * 100 / 1000).toBeCloseTo(msPerCentury, 3)
  })

  // IERS Conventions (2010) ch. 7, 2018 update: x_s rises by 1.677, y_s by 3.460 mas/yr; y_p = −χ₂. 3.845 mas/yr towards 64.1° W.
  it('has the secular pole drift towards 64.1° W', () => {
    expect(poleDirectionDegEast(1.677, -3.460)).toBeCloseTo(-64.1, 1)
    expect(poleShiftMm(1.677, -3.460) / POLE_MM_PER_MAS).toBeCloseTo(3.845, 3)
    expect(poleShiftMm(1.677, -3.460) / 10).toBeCloseTo(11.9, 1)
  })
})
