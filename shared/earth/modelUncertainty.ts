import type { PhysicsSettings } from '../types/domain.ts'
import { coefficientSetIds } from '../types/domain.ts'
import type { EarthModel } from './earthModel.ts'
import { excitationScale } from './excitation.ts'
import { squaredRadiusRatio } from './latitude.ts'
import { netMoments, type NetMoments } from './netMoments.ts'
import { coefficientsOf, responseToMoments } from './response.ts'
import type { RegionLoad } from './surfaceLoad.ts'

/** One choice of the model and what another choice would change, as sizes ≥ 0 in the units of the result. Never added to data errors. */
export interface ModelUncertaintyLine {
  id: 'coefficients' | 'love-numbers' | 'truncation' | 'ellipsoid' | 'frequency'
  name: string
  /** What the line is and where its size comes from. */
  text: string
  chi1Mas: number
  chi2Mas: number
  lodMicroseconds: number
}

/** Older tables of load Love numbers against Wang et al. (2012), of scale. Independent reference, worst of its cases. */
const LOVE_NUMBERS_OF_SCALE = 1.4e-3
/** Degree 256 and nodes of 0.5° against finer ones, of scale: 8e-5 measured, doubled for outlines along a coast. */
const TRUNCATION_OF_SCALE = 2e-4
/** Anelasticity raises the secular response of the pole by 1 to 2 %; the larger. Physics: Gross (2007), section 3.09.3. */
const FREQUENCY_OF_CHI = 0.02

/**
 * Named lines of model uncertainty for masses in regions (Gt, or Gt per year for a rate: sizes are then per year).
 * Lines that a mode does not have (no Love numbers with a uniform ocean) are left out. Throws as `responseOf`.
 */
export function modelUncertainty(loads: readonly RegionLoad[], settings: PhysicsSettings, model: EarthModel): ModelUncertaintyLine[] {
  const nets = loads.map(({ contour }) => netMoments(contour, model, settings.ocean))
  const sumWith = (moments: readonly NetMoments[], chosen: PhysicsSettings): { chi1Mas: number, chi2Mas: number, lodMicroseconds: number } => {
    const set = coefficientsOf(chosen)
    const sum = { chi1Mas: 0, chi2Mas: 0, lodMicroseconds: 0 }
    moments.forEach((net, i) => {
      const response = responseToMoments(net, model, set)
      sum.chi1Mas += loads[i]!.massGt * response.chi1Mas
      sum.chi2Mas += loads[i]!.massGt * response.chi2Mas
      sum.lodMicroseconds += loads[i]!.massGt * response.lodMicroseconds
    })
    return sum
  }
  const result = sumWith(nets, settings)
  const distance = (other: typeof result): typeof result => ({
    chi1Mas: Math.abs(other.chi1Mas - result.chi1Mas),
    chi2Mas: Math.abs(other.chi2Mas - result.chi2Mas),
    lodMicroseconds: Math.abs(other.lodMicroseconds - result.lodMicroseconds)
  })
  const sets = coefficientSetIds.map(coefficients => distance(sumWith(nets, { ...settings, coefficients })))
  const largest = (key: keyof typeof result): number => Math.max(...sets.map(line => line[key]))
  const scale = excitationScale(loads.reduce((sum, load) => sum + Math.abs(load.massGt), 0), coefficientsOf(settings))
  const ofScale = (part: number): typeof result => ({ chi1Mas: part * scale.chiMas, chi2Mas: part * scale.chiMas, lodMicroseconds: part * scale.lodMicroseconds })
  const lines: ModelUncertaintyLine[] = [{
    id: 'coefficients',
    name: 'Coefficient set',
    text: 'Largest difference between the sets of Gross (2007), Eubanks (1993) and Barnes et al. (1983) for this result.',
    chi1Mas: largest('chi1Mas'), chi2Mas: largest('chi2Mas'), lodMicroseconds: largest('lodMicroseconds')
  }]
  if (settings.ocean === 'fingerprint' || settings.ocean === 'fingerprint-rotation') {
    lines.push({
      id: 'love-numbers',
      name: 'Load Love numbers',
      text: 'Older tables differ from Wang et al. (2012) by up to 1.4 × 10⁻³ of the scale of these masses.',
      ...ofScale(LOVE_NUMBERS_OF_SCALE)
    }, {
      id: 'truncation',
      name: 'Truncation and grid',
      text: 'Fields of degree 256 on nodes of 0.5° leave up to 2 × 10⁻⁴ of the scale of these masses.',
      ...ofScale(TRUNCATION_OF_SCALE)
    })
  }
  lines.push({
    id: 'ellipsoid',
    name: 'Sphere for the ellipsoid',
    text: 'Loads lie on a sphere of 6371 km; on the ellipsoid the moments of this result change by this much.',
    ...distance(sumWith(nets.map((net, i) => onEllipsoid(net, loads[i]!, settings, model)), settings))
  }, {
    id: 'frequency',
    name: 'Frequency dependence',
    text: 'The factor 1.608 belongs to the Chandler band; anelasticity raises the secular response of the pole by 1 to 2 %. The size is 2 %.',
    chi1Mas: FREQUENCY_OF_CHI * Math.abs(result.chi1Mas), chi2Mas: FREQUENCY_OF_CHI * Math.abs(result.chi2Mas), lodMicroseconds: 0
  })
  return lines
}

/** Moments with r² of the ellipsoid's surface in place of R²: at the region's centre, and over the sea (uniform, to first order). */
function onEllipsoid(net: NetMoments, { contour }: RegionLoad, settings: PhysicsSettings, model: EarthModel): NetMoments {
  const excess = squaredRadiusRatio(contour.centroid[1]) - 1
  const own = contour.means
  const { means, ellipsoidMeans } = model.ocean
  const sea = settings.ocean === 'none' ? 0 : 1
  // ∫cos² ψ dm = 2/3 (mass − ∫P₂ dm): a change of the first is −2/3 that of the second.
  const cos2 = excess * own.cos2 - sea * (ellipsoidMeans.cos2 - means.cos2)
  return {
    ...net,
    xz: net.xz + excess * own.xz - sea * (ellipsoidMeans.xz - means.xz),
    yz: net.yz + excess * own.yz - sea * (ellipsoidMeans.yz - means.yz),
    p2: net.p2 - 1.5 * cos2
  }
}
