import type { PhysicsSettings } from '../types/domain.ts'
import { DEGREE } from './constants.ts'
import { ModeNotAvailableError, type EarthModel } from './earthModel.ts'
import { valuesAt } from './gridStack.ts'
import { geodeticFromGeocentricDeg } from './latitude.ts'
import type { NetMoments } from './netMoments.ts'
import { coefficientsOf, responseToMoments, type ResponsePerGt } from './response.ts'

const STEP_DEG = 1

/**
 * Moments of one gigatonne spread evenly over all land (the sea's part included as the mode says): where water goes that
 * is kept “elsewhere on land”. Land's own means follow from the ocean's, ⟨g⟩ₗ = (⟨g⟩ₛ − f⟨g⟩ₒ)/(1 − f); the sea's answer is the
 * mean of the fields over land, by midpoints of 1°. Throws ModeNotAvailableError as `responseOf`.
 */
export function landMoments(model: EarthModel, ocean: PhysicsSettings['ocean']): NetMoments {
  const { fraction, means, vector } = model.ocean
  const dry = 1 - fraction
  const own = {
    xz: -fraction * means.xz / dry, yz: -fraction * means.yz / dry, p2: -fraction * (1 - 1.5 * means.cos2) / dry,
    x: -fraction * vector.x / dry, y: -fraction * vector.y / dry, z: -fraction * vector.z / dry,
  }
  if (ocean === 'none') return { ...own, mass: 1 }
  const sea = ocean === 'uniform'
    ? [-means.xz, -means.yz, 1.5 * means.cos2 - 1, -vector.x, -vector.y, -vector.z]
    : meanOverLand(model, ocean)
  return {
    xz: own.xz + sea[0]!, yz: own.yz + sea[1]!, p2: own.p2 + sea[2]!, x: own.x + sea[3]!, y: own.y + sea[4]!, z: own.z + sea[5]!, mass: 0,
  }
}

/** Effect of one gigatonne gained by all land evenly. */
export function landResponse(model: EarthModel, settings: PhysicsSettings): ResponsePerGt {
  return responseToMoments(landMoments(model, settings.ocean), model, coefficientsOf(settings))
}

function meanOverLand(model: EarthModel, ocean: 'fingerprint' | 'fingerprint-rotation'): number[] {
  const stack = model.fields?.stacks[ocean]
  if (!stack || !model.oceanField) throw new ModeNotAvailableError(ocean)
  const sums = [0, 0, 0, 0, 0, 0]
  let area = 0
  for (let psi = -90 + STEP_DEG / 2; psi < 90; psi += STEP_DEG) {
    const lat = geodeticFromGeocentricDeg(psi)
    for (let lon = -180 + STEP_DEG / 2; lon < 180; lon += STEP_DEG) {
      const land = 1 - Math.min(1, Math.max(0, valuesAt(model.oceanField, lon, lat)[0]!))
      if (land <= 0) continue
      const weight = land * Math.cos(psi * DEGREE)
      const values = valuesAt(stack, lon, lat)
      for (let k = 0; k < 6; k++) sums[k] = sums[k]! + weight * values[k]!
      area += weight
    }
  }
  return sums.map(sum => sum / area)
}
