import type { OceanMode } from '../types/domain.ts'
import type { Contour } from './contour.ts'
import { ModeNotAvailableError, type EarthModel } from './earthModel.ts'
import { contourMeans } from './gridStack.ts'

/**
 * Integrals over region and sea together for one unit of mass gained by the region: of sin ψ cos ψ cos λ, sin ψ cos ψ sin λ,
 * P₂(sin ψ), the unit vector, and of 1 (`mass`: what is left in total, 1 for `none` and 0 where the sea pays).
 */
export interface NetMoments { xz: number, yz: number, p2: number, x: number, y: number, z: number, mass: 0 | 1 }

/** Throws ModeNotAvailableError for a fingerprint mode whose fields the model does not hold. */
export function netMoments(contour: Contour, model: EarthModel, mode: OceanMode): NetMoments {
  const { means, vector } = contour
  const own = { xz: means.xz, yz: means.yz, p2: 1 - 1.5 * means.cos2, ...vector }
  if (mode === 'none') return { ...own, mass: 1 }
  if (mode === 'uniform') {
    const { means: sea, vector: centre } = model.ocean
    return {
      xz: own.xz - sea.xz, yz: own.yz - sea.yz, p2: own.p2 - (1 - 1.5 * sea.cos2),
      x: own.x - centre.x, y: own.y - centre.y, z: own.z - centre.z, mass: 0
    }
  }
  const stack = model.fields?.stacks[mode]
  if (!stack) throw new ModeNotAvailableError(mode)
  // The mean of the sensitivity K: exact for g, a contour sum for K − g, in the order of `functionals`.
  const extra = Float64Array.from(contourMeans(stack, contour))
  for (const { contour: cell, excess } of contour.cells ?? []) contourMeans(stack, cell).forEach((mean, k) => { extra[k] = extra[k]! + excess * mean })
  return {
    xz: own.xz + extra[0]!, yz: own.yz + extra[1]!, p2: own.p2 + extra[2]!,
    x: own.x + extra[3]!, y: own.y + extra[4]!, z: own.z + extra[5]!, mass: 0
  }
}
