import { describe, expect, it } from 'vitest'
import { contourOf } from '../../../shared/earth/contour.ts'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { coefficientsFor } from '../../../shared/earth/coefficientSets.ts'
import { excitationScale } from '../../../shared/earth/excitation.ts'
import { inertiaOf, rigidStokesOf } from '../../../shared/earth/inertia.ts'
import { answerOf, loadCases } from './loadCases.ts'

const cases = loadCases()
const model = loadEarthModel()
const gross = { coefficients: 'gross-2007', core: 'decoupled' } as const

it('holds all twelve cases', () => {
  expect(cases.length).toBe(12)
})

describe.each(cases)('$id $title', ({ loads, expected }) => {
  it('has the reference area on the sphere and the reference means', () => {
    loads.forEach(({ geometry }, i) => {
      const contour = contourOf(geometry)
      const wanted = expected.regions[i]!
      // The reference densifies edges to 0.25° and joins them straight in ψ; the engine integrates the true edge: up to 7e-8.
      expect(contour.areaSphereM2 / 1e6 / wanted.area_km2).toBeCloseTo(1, 6)
      expect(contour.means.xz).toBeCloseTo(wanted.mean_sincos_cos, 7)
      expect(contour.means.yz).toBeCloseTo(wanted.mean_sincos_sin, 7)
      expect(contour.means.cos2).toBeCloseTo(wanted.mean_cos2, 7)
    })
  })

  // The tolerance of `none` is for edges joined otherwise; of `uniform` for another make of the ocean function.
  it.each([['none', 2e-5], ['uniform', 5e-4]] as const)('agrees in the mode %s', (mode, tolerance) => {
    const answer = answerOf(loads, model, { ocean: mode, ...gross })
    const wanted = expected.modes[mode]
    expect(Math.abs(answer.chi1Mas - wanted.chi1_mas)).toBeLessThan(tolerance * expected.scale_chi_mas)
    expect(Math.abs(answer.chi2Mas - wanted.chi2_mas)).toBeLessThan(tolerance * expected.scale_chi_mas)
    expect(Math.abs(answer.lodMicroseconds - wanted.dLOD_us)).toBeLessThan(tolerance * expected.scale_dLOD_us)
    expect(answer.lodMicroseconds).toBeCloseTo(86_400e6 * answer.chi3, 12)
    expect(answer.barystaticMm / expected.barystatic_mm).toBeCloseTo(1, 3)
  })

  it('agrees in Stokes changes and oblateness, which the reference gives with the yielding 0.684', () => {
    const answer = answerOf(loads, model, { ocean: 'none', ...gross })
    const wanted = expected.modes.none
    expect(Math.abs(answer.deltaJ2 * 0.684 / 0.695 / wanted.dJ2! - 1)).toBeLessThan(2e-5)
    const stokes = { c20: 0, c21: 0, s21: 0 }
    for (const { mass_Gt: massGt, geometry } of loads) {
      const rigid = rigidStokesOf(inertiaOf(massGt * 1e12, contourOf(geometry).means), massGt * 1e12)
      stokes.c20 += 0.684 * rigid.c20
      stokes.c21 += 0.684 * rigid.c21
      stokes.s21 += 0.684 * rigid.s21
    }
    const size = Math.hypot(wanted.dC20!, wanted.dC21!, wanted.dS21!)
    expect(Math.abs(stokes.c20 - wanted.dC20!)).toBeLessThan(2e-5 * size)
    expect(Math.abs(stokes.c21 - wanted.dC21!)).toBeLessThan(2e-5 * size)
    expect(Math.abs(stokes.s21 - wanted.dS21!)).toBeLessThan(2e-5 * size)
  })

  it('has the reference scale', () => {
    const scale = excitationScale(loads.reduce((sum, load) => sum + Math.abs(load.mass_Gt), 0), coefficientsFor('gross-2007', 'decoupled'))
    expect(scale.chiMas / expected.scale_chi_mas).toBeCloseTo(1, 9)
    expect(scale.lodMicroseconds / expected.scale_dLOD_us).toBeCloseTo(1, 9)
  })
})
