import { describe, expect, it } from 'vitest'
import { contourOf } from '../../../shared/earth/contour.ts'
import { loadOceanCells } from '../../../shared/earth/detailedEarthModel.ts'
import { geodeticFromGeocentricDeg } from '../../../shared/earth/latitude.ts'
import { coefficientIndex } from '../../../shared/earth/legendre.ts'
import { loadResponse } from '../../../shared/earth/loadResponse.ts'
import type { OceanCells } from '../../../shared/earth/oceanCells.ts'
import { seaLevelEquation, solveSeaLevel } from '../../../shared/earth/seaLevelEquation.ts'
import { functionalAt, functionalHarmonics, functionals, sensitivityOf } from '../../../shared/earth/sensitivity.ts'
import { analyse, emptyHarmonics, harmonicGrid, sphereMean, transformScratch, type Harmonics } from '../../../shared/earth/sphericalHarmonics.ts'
import { innerProduct, integralOf, loadHarmonics, seaLevelChange, totalLoad } from '../../../shared/earth/surfaceLoad.ts'
import type { Outline } from '../../../shared/types/domain.ts'
import { loadCases } from '../../reference/earth/loadCases.ts'

const cells = loadOceanCells()
const degree = 40
const water: OceanCells = { rows: 18, columns: 36, fraction: new Float64Array(18 * 36).fill(1) }
const box = (w: number, s: number, e: number, n: number): Outline => ({ type: 'Polygon', coordinates: [[[w, s], [e, s], [e, n], [w, n], [w, s]]] })
const R2 = 6.371e6 ** 2

function load(...parts: [Outline, number][]): Harmonics {
  return loadHarmonics(harmonicGrid(degree), parts.map(([geometry, massGt]) => ({ contour: contourOf(geometry), massGt })))
}

describe('load spectrum', () => {
  // A cap of half-angle α and density σ: f_l = σ/2 (P_{l−1}(cos α) − P_{l+1}(cos α)) for Σ f_l P_l, so C̄_l0 = f_l/√(2l + 1).
  // Farrell (1972), Rev. Geophys. 10, eq. A3. Cells on the rim are part covered: 2 % at these degrees.
  it('of a polar cap', () => {
    const alpha = 20
    const lat = geodeticFromGeocentricDeg(90 - alpha)
    const cap = contourOf({ type: 'Polygon', coordinates: [[[0, lat], [120, lat], [-120, lat], [0, lat]]] })
    const harmonics = loadHarmonics(harmonicGrid(degree), [{ contour: cap, massGt: cap.areaSphereM2 / 1e12 }])
    const x = Math.cos(alpha * Math.PI / 180)
    const p = [1, x]
    for (let l = 2; l < 14; l++) p.push(((2 * l - 1) * x * p[l - 1]! - (l - 1) * p[l - 2]!) / l)
    expect(harmonics.cosine[0]).toBeCloseTo((1 - x) / 2, 12)
    for (let l = 1; l <= 12; l++) {
      const wanted = (p[l - 1]! - p[l + 1]!) / 2 / Math.sqrt(2 * l + 1)
      expect(Math.abs(harmonics.cosine[coefficientIndex(degree, l, 0)]! - wanted)).toBeLessThan(1e-3)
      for (let m = 1; m <= l; m++) expect(Math.abs(harmonics.cosine[coefficientIndex(degree, l, m)]!)).toBeLessThan(1e-13)
    }
  })

  it('keeps the mass of any outline to rounding', () => {
    for (const { loads } of loadCases()) {
      for (const { mass_Gt: massGt, geometry } of loads) {
        expect(4 * Math.PI * R2 * load([geometry, massGt]).cosine[0]! / (massGt * 1e12)).toBeCloseTo(1, 9)
      }
    }
  })
})

describe('a planet all of ocean', () => {
  // Every degree by itself: u_l = G_l P_l / (1 − ρ_w G_l).
  it.each([false, true])('has the closed solution, feedback %s', (feedback) => {
    const equation = seaLevelEquation(water, { degree, feedback })
    const P = load([box(-60, 20, 10, 55), 500])
    const { surface } = seaLevelChange(equation, P)
    const g = loadResponse({ degree, feedback })
    for (let k = 1; k < P.cosine.length; k++) {
      expect(Math.abs(surface.cosine[k]! - g.cosine[k]! * P.cosine[k]! / (1 - 1000 * g.cosine[k]!))).toBeLessThan(1e-15)
      expect(Math.abs(surface.sine[k]! - g.sine[k]! * P.sine[k]! / (1 - 1000 * g.sine[k]!))).toBeLessThan(1e-15)
    }
    expect(surface.cosine[0]! * 1000).toBeCloseTo(-P.cosine[0]!, 12)
  })

  it.each([false, true])('turns χ₁ into χ₂ when the load is turned by 90° of longitude, feedback %s', (feedback) => {
    const equation = seaLevelEquation(water, { degree, feedback })
    const total = (west: number) => totalLoad(equation, seaLevelChange(equation, load([box(west, 25, west + 30, 60), 100])))
    const a = total(-20)
    const b = total(70)
    const scale = 1e14
    expect(Math.abs(integralOf('yz', b) - integralOf('xz', a)) / scale).toBeLessThan(1e-12)
    expect(Math.abs(integralOf('xz', b) + integralOf('yz', a)) / scale).toBeLessThan(1e-12)
    expect(Math.abs(integralOf('p2', b) - integralOf('p2', a)) / scale).toBeLessThan(1e-12)
  })

  it('answers more strongly at degree 2 with feedback in order 1 and a little less in order 0', () => {
    const plain = loadResponse({ degree, feedback: false })
    const turned = loadResponse({ degree, feedback: true })
    const ratio = (l: number, m: number) => turned.cosine[coefficientIndex(degree, l, m)]! / plain.cosine[coefficientIndex(degree, l, m)]!
    expect(ratio(2, 1)).toBeGreaterThan(1.3)
    expect(ratio(2, 0)).toBeLessThan(1)
    expect(ratio(2, 0)).toBeGreaterThan(0.98)
    expect(ratio(2, 2)).toBe(1)
    expect(ratio(3, 1)).toBe(1)
  })
})

describe.each([false, true])('on the real ocean, feedback %s', (feedback) => {
  const equation = seaLevelEquation(cells, { degree, feedback })
  const sensitivities = functionals.map(functional => sensitivityOf(equation, functional))
  const loads = loadCases().slice(0, 10)

  it('forward equals adjoint to 1e-9 for ten loads and six functionals, and mass is conserved to 1e-12', () => {
    for (const c of loads) {
      const P = load(...c.loads.map((l): [Outline, number] => [l.geometry, l.mass_Gt]))
      const change = seaLevelChange(equation, P)
      const total = totalLoad(equation, change)
      const mass = c.loads.reduce((sum, l) => sum + Math.abs(l.mass_Gt), 0) * 1e12
      expect(Math.abs(sphereMean(equation.grid, change.seaLoad) / P.cosine[0]! + 1)).toBeLessThan(1e-12)
      expect(Math.abs(4 * Math.PI * R2 * total.cosine[0]!) / mass).toBeLessThan(1e-12)
      functionals.forEach((functional, i) => {
        const { smooth, constant } = sensitivities[i]!
        const adjoint = integralOf(functional, P) + 4 * Math.PI * R2 * (innerProduct(smooth, P) + constant * P.cosine[0]!)
        expect(Math.abs(integralOf(functional, total) - adjoint) / mass).toBeLessThan(1e-9)
      })
    }
  })

  it('meets the equation it solves: u = G(P + ρ_w O u) + c at every coefficient', () => {
    const P = load([box(-50, 62, -30, 80), -280])
    const change = seaLevelChange(equation, P)
    const total = totalLoad(equation, change)
    for (let k = 1; k < P.cosine.length; k++) {
      expect(Math.abs(change.surface.cosine[k]! - equation.response.cosine[k]! * total.cosine[k]!)).toBeLessThan(1e-15)
      expect(Math.abs(change.surface.sine[k]! - equation.response.sine[k]! * total.sine[k]!)).toBeLessThan(1e-15)
    }
    expect(change.solution.residual).toBeLessThan(1e-12)
    expect(change.solution.iterations).toBeLessThan(20)
  })

  it('is reciprocal: the sea that a makes at b is the sea that b makes at a', () => {
    const a = load([box(-50, 62, -30, 80), 1])
    const b = load([box(70, 20, 85, 30), 1])
    const ab = innerProduct(b, seaLevelChange(equation, a).surface)
    const ba = innerProduct(a, seaLevelChange(equation, b).surface)
    expect(Math.abs(ab / ba - 1)).toBeLessThan(1e-10)
  })

  it('is linear', () => {
    const a = load([box(-50, 62, -30, 80), 3])
    const b = load([box(70, 20, 85, 30), -7])
    const both = load([box(-50, 62, -30, 80), 3], [box(70, 20, 85, 30), -7])
    const [sa, sb, sab] = [a, b, both].map(P => seaLevelChange(equation, P).surface) as [Harmonics, Harmonics, Harmonics]
    const size = Math.max(...sab.cosine.map(Math.abs))
    for (let k = 0; k < sab.cosine.length; k++) expect(Math.abs(sa.cosine[k]! + sb.cosine[k]! - sab.cosine[k]!)).toBeLessThan(1e-11 * size)
  })
})

describe('functionals', () => {
  it('are the harmonics they are said to be', () => {
    const grid = harmonicGrid(6)
    const scratch = transformScratch(grid)
    for (const functional of functionals) {
      const field = new Float64Array(grid.rows * grid.columns)
      for (let i = 0; i < grid.rows; i++) {
        for (let j = 0; j < grid.columns; j++) field[i * grid.columns + j] = functionalAt(functional, Math.asin(grid.sines[i]!), -Math.PI + (j + 0.5) * 2 * Math.PI / grid.columns)
      }
      const found = emptyHarmonics(6)
      analyse(grid, field, found, scratch)
      const wanted = functionalHarmonics(functional, 6)
      for (let k = 0; k < wanted.cosine.length; k++) {
        expect(found.cosine[k]).toBeCloseTo(wanted.cosine[k]!, 13)
        expect(found.sine[k]).toBeCloseTo(wanted.sine[k]!, 13)
      }
    }
  })

  it('want a forcing of the degree of the grid', () => {
    expect(() => solveSeaLevel(seaLevelEquation(water, { degree: 8, feedback: false }), functionalHarmonics('xz', 9))).toThrow('forcing must have degree 8, got 9')
  })
})
