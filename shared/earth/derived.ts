import type { OceanMode } from '../types/domain.ts'
import { EARTH_MASS_KG, EARTH_RADIUS_M, KG_PER_GT } from './constants.ts'
import type { Contour } from './contour.ts'
import type { EarthModel } from './earthModel.ts'
import { deltaJ2Of, inertiaOf, rigidStokesOf, yieldedStokesOf } from './inertia.ts'
import { loveNumbersAt } from './loadLoveNumbers.ts'
import { netMoments, type NetMoments } from './netMoments.ts'

/** What one gigatonne gained by a region does to the gravity field and to the centre of mass. */
export interface DerivedPerGt {
  /** Fully normalised, radius 6 371 000 m, with the yielding of the Earth (0.695). */
  deltaC20: number
  deltaC21: number
  deltaS21: number
  /** −√5 ΔC₂₀. */
  deltaJ2: number
  /**
   * Centre of mass of Earth and load relative to the centre of figure of the ground (CM − CF), mm, towards Greenwich, 90° E and the
   * north pole. Null in the mode `none`: without the sea's part it means nothing.
   */
  geocentreMm: { x: number, y: number, z: number } | null
}

/** Name of the frame that the geocentre shift is given in. */
export const GEOCENTRE_FRAME = 'centre of mass relative to the centre of figure (CM − CF)'

/** CM − CF for a load's first moment: 1 − (h′₁ + 2 l′₁)/3, h′₁ and l′₁ in the frame of the solid Earth's centre. Blewitt (2003), J. Geophys. Res. 108(B2), 2103. */
export function geocentreFactor(): number {
  const { h, l } = loveNumbersAt(1)
  return 1 - (h + 2 * l) / 3
}

/** Derived quantities of an outline per gigatonne gained. Throws as `responseOf`. */
export function derivedOf(contour: Contour, model: EarthModel, mode: OceanMode): DerivedPerGt {
  return derivedOfMoments(netMoments(contour, model, mode), mode)
}

/** The same from moments of region and sea together, per gigatonne. */
export function derivedOfMoments(net: NetMoments, mode: OceanMode): DerivedPerGt {
  const cos2 = (2 / 3) * (net.mass - net.p2)
  const stokes = yieldedStokesOf(rigidStokesOf(inertiaOf(KG_PER_GT, { xz: net.xz, yz: net.yz, cos2 }), net.mass * KG_PER_GT))
  const shift = geocentreFactor() * EARTH_RADIUS_M * 1000 * KG_PER_GT / EARTH_MASS_KG
  return {
    deltaC20: stokes.c20,
    deltaC21: stokes.c21,
    deltaS21: stokes.s21,
    deltaJ2: deltaJ2Of(stokes),
    geocentreMm: mode === 'none' ? null : { x: shift * net.x, y: shift * net.y, z: shift * net.z }
  }
}
