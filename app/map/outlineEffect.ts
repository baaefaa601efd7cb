import { contourOf } from '#shared/earth/contour'
import type { EarthModel } from '#shared/earth/earthModel'
import { responseOf } from '#shared/earth/response'
import type { Measured, OceanMode, Outline, Position } from '#shared/types/domain'

/** What an outline is and what a gigatonne LOST from it does. */
export interface OutlineEffect {
  areaKm2: number
  centroid: Position
  lodMicroseconds: number
  chi1Mas: number
  chi2Mas: number
  /** Mean sea level, mm, as if the gigatonne reached the sea. */
  seaLevelMm: number
  ocean: OceanMode
}

/** The engine's own answer for an outline that has passed `checkOutline`, in the model's default ocean. */
export function outlineEffect(outline: Outline, model: EarthModel): OutlineEffect {
  const contour = contourOf(outline)
  const settings = { ocean: model.defaultOcean, coefficients: 'gross-2007', core: 'decoupled' } as const
  const gained = responseOf(contour, model, settings)
  return {
    areaKm2: contour.areaM2 / 1e6,
    centroid: contour.centroid,
    lodMicroseconds: -gained.lodMicroseconds,
    chi1Mas: -gained.chi1Mas,
    chi2Mas: -gained.chi2Mas,
    seaLevelMm: -gained.barystaticMm,
    ocean: settings.ocean,
  }
}

/** East longitude that a shift of the pole points to, (−180, 180]; null for none. */
export function directionOf(chi1: number, chi2: number): number | null {
  if (chi1 === 0 && chi2 === 0) return null
  const degrees = Math.atan2(chi2, chi1) * 180 / Math.PI
  return degrees === -180 ? 180 : degrees
}

/** A per-gigatonne effect times a trend in Gt per year, with its errors. */
export function timesTrend(perGtLost: number, trend: Measured): Measured {
  return { value: -perGtLost * trend.value, sigmaWhite: Math.abs(perGtLost) * trend.sigmaWhite, sigma: Math.abs(perGtLost) * trend.sigma }
}
