import { describe, expect, it } from 'vitest'
import { coefficientsFor } from '../../../shared/earth/coefficientSets.ts'
import { contourOf } from '../../../shared/earth/contour.ts'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { netMoments } from '../../../shared/earth/netMoments.ts'
import { inertiaOf, rigidStokesOf, yieldedStokesOf } from '../../../shared/earth/inertia.ts'
import { responseOf } from '../../../shared/earth/response.ts'
import { gravityFactors } from '../../../shared/observed/gravityExcitation.ts'
import { box } from '../../unit/time/runFixtures.ts'

const radiusM = 6371000

describe('factors from gravity coefficients to rotation', () => {
  it('are net 1.608 for the pole and 0.74775/0.695 or /0.684 for the day', () => {
    const gross = coefficientsFor('gross-2007', 'decoupled')
    expect(gravityFactors({ radiusM, axialLoadFactor: 0.695 }, gross).netPole).toBeCloseTo(1.608, 12)
    expect(gravityFactors({ radiusM, axialLoadFactor: 0.695 }, gross).netAxial).toBeCloseTo(0.74775 / 0.695, 12)
    expect(gravityFactors({ radiusM, axialLoadFactor: 0.684 }, gross).netAxial).toBeCloseTo(0.74775 / 0.684, 12)
  })

  it.each([['coupled', 0.174], ['decoupled', 0.211]] as const)('make 10⁻¹¹ of J₂ a year %s ms per century (%s), as recomputed from Gross (2007)', (core, msPerCentury) => {
    // ΔJ₂ = −√5 ΔC₂₀; 0.174 with the whole Earth's C, 0.211 with the mantle's (Nerem & Wahr 2011 give J₂ in these units).
    const perC20 = gravityFactors({ radiusM, axialLoadFactor: 0.695 }, coefficientsFor('gross-2007', core)).lodMsPerC20
    expect(-1e-11 / Math.sqrt(5) * perC20 * 100).toBeCloseTo(msPerCentury, 3)
  })

  it('grow with the square of the reference radius: 0.22 % from 6371 to 6378 km', () => {
    const gross = coefficientsFor('gross-2007', 'decoupled')
    const at = (metres: number): number => gravityFactors({ radiusM: metres, axialLoadFactor: 0.695 }, gross).chi1PerC21
    expect((at(6378137) / at(6371000) - 1) * 100).toBeCloseTo(0.224, 3)
  })

  it('bring a load back that was turned into yielded Stokes coefficients: the round trip to rounding for the day, 0.695/0.684 for the pole', () => {
    const model = loadEarthModel()
    const contour = contourOf(box(-50, 65, -40, 75))
    const response = responseOf(contour, model, { ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled' })
    const net = netMoments(contour, model, 'uniform')
    const stokes = yieldedStokesOf(rigidStokesOf(inertiaOf(1e12, { xz: net.xz, yz: net.yz, cos2: (2 / 3) * (net.mass - net.p2) })))
    const factors = gravityFactors({ radiusM, axialLoadFactor: 0.695 }, coefficientsFor('gross-2007', 'decoupled'))
    expect(stokes.c20 * factors.lodMsPerC20 * 1e3 / response.lodMicroseconds).toBeCloseTo(1, 9)
    expect(stokes.c21 * factors.chi1PerC21 / response.chi1Mas).toBeCloseTo(0.695 / 0.684, 9)
    expect(stokes.s21 * factors.chi2PerS21 / response.chi2Mas).toBeCloseTo(0.695 / 0.684, 9)
  })
})
