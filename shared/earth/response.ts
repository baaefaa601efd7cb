import type { PhysicsSettings } from '../types/domain.ts'
import { coefficientsFor, OCEAN_FREE_RATIO } from './coefficientSets.ts'
import { EARTH_MASS_KG, ELASTIC_LOAD_FACTOR, KG_PER_GT, WATER_DENSITY } from './constants.ts'
import type { Contour, DegreeTwoMeans } from './contour.ts'
import { ModeNotAvailableError, type EarthModel } from './earthModel.ts'
import { excitationOf } from './excitation.ts'
import { contourMeans } from './gridStack.ts'
import { inertiaOf } from './inertia.ts'

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
 * Response of an outline per gigatonne gained: the region's own means less the sea's, which pays for the mass.
 * Throws ModeNotAvailableError for a fingerprint mode whose fields the model does not hold.
 */
export function responseOf(contour: Contour, model: EarthModel, settings: PhysicsSettings): ResponsePerGt {
  const net = netMeansOf(contour, model, settings)
  const set = coefficientsFor(settings.coefficients, settings.core)
  // The feedback in the sea-level equation is the ocean pole tide that 1.608 holds already: it counts once.
  if (settings.ocean === 'fingerprint-rotation') set.aXY *= OCEAN_FREE_RATIO
  const excitation = excitationOf(inertiaOf(KG_PER_GT, net.means), set)
  // cos² ψ = 2/3 − 2/3 P₂, so ∫P₂ dm = net mass − 3/2 ∫cos² ψ dm, and ΔJ₂ = −(1 + k′₂) ∫P₂ dm / M.
  const p2 = net.massFraction - 1.5 * net.means.cos2
  return {
    ...excitation,
    barystaticMm: -KG_PER_GT / (WATER_DENSITY * model.ocean.areaM2) * 1000,
    deltaJ2: -ELASTIC_LOAD_FACTOR * KG_PER_GT * p2 / EARTH_MASS_KG
  }
}

/** Degree-2 means of region plus sea for one unit of mass, and the mass that is left in total (1 for `none`, else 0). */
function netMeansOf(contour: Contour, model: EarthModel, settings: PhysicsSettings): { means: DegreeTwoMeans, massFraction: number } {
  const own = contour.means
  switch (settings.ocean) {
    case 'none':
      return { means: own, massFraction: 1 }
    case 'uniform': {
      const sea = model.ocean.means
      return { means: { xz: own.xz - sea.xz, yz: own.yz - sea.yz, cos2: own.cos2 - sea.cos2 }, massFraction: 0 }
    }
    default: {
      const stack = model.fields?.stacks[settings.ocean]
      if (!stack) throw new ModeNotAvailableError(settings.ocean)
      // Region and sea together: the mean of K, exact for g and a contour sum for K − g, in the order of `functionals`.
      const extra = contourMeans(stack, contour)
      return { means: { xz: own.xz + extra[0]!, yz: own.yz + extra[1]!, cos2: own.cos2 - 2 / 3 - (2 / 3) * extra[2]! }, massFraction: 0 }
    }
  }
}
