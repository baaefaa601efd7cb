import type { CoefficientSet } from './coefficientSets.ts'
import { DAY_SECONDS, DEGREE, EARTH_RADIUS_M, KG_PER_GT, MAS, POLE_MM_PER_MAS } from './constants.ts'
import type { InertiaIncrement } from './inertia.ts'

/** Mass excitation: χ₁ towards Greenwich and χ₂ towards 90° E in mas, χ₃ dimensionless, ΔLOD > 0 a longer day. */
export interface Excitation { chi1Mas: number, chi2Mas: number, chi3: number, lodMicroseconds: number }

/** χ₁ + iχ₂ = aXY (ΔI₁₃ + iΔI₂₃)/(C − A), χ₃ = aZ ΔI₃₃/C, ΔLOD = 86 400 s · χ₃. Gross (2007), mass term. */
export function excitationOf(inertia: InertiaIncrement, set: CoefficientSet): Excitation {
  const pole = set.aXY / set.cMinusA / MAS
  const chi3 = set.aZ / set.c * inertia.i33
  return { chi1Mas: pole * inertia.i13, chi2Mas: pole * inertia.i23, chi3, lodMicroseconds: DAY_SECONDS * 1e6 * chi3 }
}

/**
 * The largest excitation that a mass (Gt) could give, wherever it lies: |M| aXY R²/2/(C − A) in mas and |M| aZ R²/C in µs.
 * Errors are held against this scale, never against a component that may vanish.
 */
export function excitationScale(massGt: number, set: CoefficientSet): { chiMas: number, lodMicroseconds: number } {
  const m = Math.abs(massGt) * KG_PER_GT * EARTH_RADIUS_M * EARTH_RADIUS_M
  return { chiMas: set.aXY * m / 2 / set.cMinusA / MAS, lodMicroseconds: DAY_SECONDS * 1e6 * set.aZ * m / set.c }
}

/** Movement of the pole over the ground, mm: |χ| · R, 30.887 mm per mas. */
export function poleShiftMm(chi1Mas: number, chi2Mas: number): number {
  return Math.hypot(chi1Mas, chi2Mas) * POLE_MM_PER_MAS
}

/** East longitude that the pole moves towards, degrees in (−180, 180]; null for no movement. */
export function poleDirectionDegEast(chi1Mas: number, chi2Mas: number): number | null {
  if (chi1Mas === 0 && chi2Mas === 0) return null
  const direction = Math.atan2(chi2Mas, chi1Mas) / DEGREE
  return direction === -180 ? 180 : direction
}

/** Steady reported pole of an excitation: x_p = χ₁ towards Greenwich, y_p = −χ₂ towards 90° W, mas. */
export function reportedPoleOf(chi1Mas: number, chi2Mas: number): { xMas: number, yMas: number } {
  return { xMas: chi1Mas, yMas: 0 - chi2Mas }
}
