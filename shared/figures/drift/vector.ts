import { POLE_MM_PER_MAS } from '../../earth/constants.ts'
import type { Measured } from '../../types/domain.ts'

/** Way of the pole over the ground, cm per mas. */
export const cmPerMas = POLE_MM_PER_MAS / 10

export interface DriftCovariance { c11: number, c12: number, c22: number }

export interface Drift {
  mas: Measured
  cm: Measured
  /** East longitude that the pole moves towards, degrees in (−180, 180], with one sigma; null for no drift. */
  direction: { value: number, sigma: number | null } | null
}

/**
 * Length and direction of a drift (χ̇₁, χ̇₂) in mas per year, errors propagated linearly. χ₁ points to 0°, χ₂ to 90° E.
 * Without a covariance the components count as independent.
 */
export function driftOf(chi1: Measured, chi2: Measured, covariance?: DriftCovariance | null): Drift {
  const [x, y] = [chi1.value, chi2.value]
  const length = Math.hypot(x, y)
  const quoted = covariance ?? { c11: chi1.sigma ** 2, c12: 0, c22: chi2.sigma ** 2 }
  const white = { c11: chi1.sigmaWhite ** 2, c12: 0, c22: chi2.sigmaWhite ** 2 }
  const along = (c: DriftCovariance) => length === 0
    ? Math.sqrt((c.c11 + c.c22) / 2)
    : Math.sqrt(Math.max(0, x * x * c.c11 + 2 * x * y * c.c12 + y * y * c.c22)) / length
  const mas: Measured = { value: length, sigmaWhite: along(white), sigma: along(quoted) }
  const cm: Measured = { value: mas.value * cmPerMas, sigmaWhite: mas.sigmaWhite * cmPerMas, sigma: mas.sigma * cmPerMas }
  if (length === 0) return { mas, cm, direction: null }
  const across = Math.sqrt(Math.max(0, y * y * quoted.c11 - 2 * x * y * quoted.c12 + x * x * quoted.c22)) / length
  const degrees = Math.atan2(y, x) * 180 / Math.PI
  return { mas, cm, direction: { value: degrees === -180 ? 180 : degrees, sigma: across / length * 180 / Math.PI } }
}
