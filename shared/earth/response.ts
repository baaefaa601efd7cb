import type { PhysicsSettings } from '../types/domain.ts'
import { coefficientsFor, OCEAN_FREE_RATIO, type CoefficientSet } from './coefficientSets.ts'
import { EARTH_MASS_KG, ELASTIC_LOAD_FACTOR, KG_PER_GT, WATER_DENSITY } from './constants.ts'
import type { Contour } from './contour.ts'
import type { EarthModel } from './earthModel.ts'
import { excitationOf } from './excitation.ts'
import { inertiaOf } from './inertia.ts'
import { netMoments, type NetMoments } from './netMoments.ts'

/** Effect of one gigatonne GAINED by a region, the sea's part included as the ocean mode says. */
export interface ResponsePerGt {
  chi1Mas: number
  chi2Mas: number
  chi3: number
  lodMicroseconds: number
  /** −1 Gt over the sea in every mode, `none` too, mm. */
  barystaticMm: number
  /** With the yielding of the Earth (0.695), radius 6 371 000 m, degree 0 left out. */
  deltaJ2: number
}

/**
 * Response of an outline per gigatonne gained: the region's own means and the sea's, which pays for the mass.
 * Throws ModeNotAvailableError for a fingerprint mode whose fields the model does not hold.
 */
export function responseOf(contour: Contour, model: EarthModel, settings: PhysicsSettings): ResponsePerGt {
  return responseToMoments(netMoments(contour, model, settings.ocean), model, coefficientsOf(settings))
}

/** The coefficient set of the settings; with rotational feedback in the sea-level equation, χ₁ and χ₂ take the ocean-free factor. */
export function coefficientsOf(settings: PhysicsSettings): CoefficientSet {
  const set = coefficientsFor(settings.coefficients, settings.core)
  // The feedback is the ocean pole tide that 1.608 holds already: it counts once.
  return settings.ocean === 'fingerprint-rotation' ? { ...set, aXY: set.aXY * OCEAN_FREE_RATIO } : set
}

/** Response per gigatonne to the moments of region and sea together. */
export function responseToMoments(net: NetMoments, model: EarthModel, set: CoefficientSet): ResponsePerGt {
  const cos2 = (2 / 3) * (net.mass - net.p2)
  return {
    ...excitationOf(inertiaOf(KG_PER_GT, { xz: net.xz, yz: net.yz, cos2 }), set),
    barystaticMm: -KG_PER_GT / (WATER_DENSITY * model.ocean.areaM2) * 1000,
    deltaJ2: -ELASTIC_LOAD_FACTOR * KG_PER_GT * net.p2 / EARTH_MASS_KG
  }
}
