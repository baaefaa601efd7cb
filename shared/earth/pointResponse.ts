import type { PhysicsSettings } from '../types/domain.ts'
import { DEGREE } from './constants.ts'
import { ModeNotAvailableError, type EarthModel } from './earthModel.ts'
import { valuesAt } from './gridStack.ts'
import { geocentricFromGeodeticDeg } from './latitude.ts'
import type { NetMoments } from './netMoments.ts'
import { coefficientsOf, responseToMoments, type ResponsePerGt } from './response.ts'
import { functionalAt, type Functional } from './sensitivity.ts'

/**
 * Response to one gigatonne gained at a place (east longitude, geodetic latitude, degrees): the sensitivity K itself, bilinear between
 * nodes. In the fingerprint modes it is smoother than the truth within a degree of a coast. Throws as `responseOf`.
 */
export function responseAtPlace(lonDeg: number, latDeg: number, model: EarthModel, settings: PhysicsSettings): ResponsePerGt {
  return responseToMoments(momentsAtPlace(lonDeg, latDeg, model, settings), model, coefficientsOf(settings))
}

function momentsAtPlace(lonDeg: number, latDeg: number, model: EarthModel, { ocean }: PhysicsSettings): NetMoments {
  const psi = geocentricFromGeodeticDeg(latDeg) * DEGREE
  const own = (functional: Functional): number => functionalAt(functional, psi, lonDeg * DEGREE)
  const moments = { xz: own('xz'), yz: own('yz'), p2: own('p2'), x: own('x'), y: own('y'), z: own('z') }
  if (ocean === 'none') return { ...moments, mass: 1 }
  const { means, vector } = model.ocean
  const sea = ocean === 'uniform' ? [-means.xz, -means.yz, 1.5 * means.cos2 - 1, -vector.x, -vector.y, -vector.z] : null
  const stack = sea ? null : model.fields?.stacks[ocean as 'fingerprint' | 'fingerprint-rotation']
  if (!sea && !stack) throw new ModeNotAvailableError(ocean)
  const extra = sea ?? valuesAt(stack!, lonDeg, latDeg)
  return {
    xz: moments.xz + extra[0]!, yz: moments.yz + extra[1]!, p2: moments.p2 + extra[2]!,
    x: moments.x + extra[3]!, y: moments.y + extra[4]!, z: moments.z + extra[5]!, mass: 0
  }
}
