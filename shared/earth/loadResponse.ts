import { coefficientSets } from './coefficientSets.ts'
import {
  DYNAMICAL_FLATTENING_MOMENT, EARTH_MASS_KG, EARTH_RADIUS_M, GRAVITY, LOAD_FACTOR, ROTATION_RATE, ROTATIONAL_FACTOR_OCEAN_FREE,
  TIDAL_H2, TIDAL_K2
} from './constants.ts'
import { coefficientCount, coefficientIndex } from './legendre.ts'
import { seaLevelFactors, type LoveTable } from './loadLoveNumbers.ts'

export interface LoadResponseOptions { degree: number, feedback: boolean, love?: LoveTable }

/**
 * Sea surface above ground (m) per load (kg/m²), coefficient by coefficient; all are ≥ 0, and the operator is self-adjoint.
 *
 * G_l = (3/ρ_e)(1 + k′_l − h′_l)/(2l + 1), ρ_e = 3M/(4πR³). With feedback, the three coefficients of degree 2 that turn the Earth get
 * (1 + k₂ − h₂) ΔΦ₂/g besides, ΔΦ = Ω²R² [m₃ cos²ψ − sin ψ cos ψ (m₁ cos λ + m₂ sin λ)], (m₁, m₂, m₃) = (χ₁, χ₂, −χ₃) of
 * Gross (2007), decoupled, with the ocean-free factor in χ₁, χ₂. The load must have no net mass.
 */
export function loadResponse({ degree, feedback, love }: LoadResponseOptions): { cosine: Float64Array, sine: Float64Array } {
  const factors = seaLevelFactors(degree, love)
  const density = 3 * EARTH_MASS_KG / (4 * Math.PI * EARTH_RADIUS_M ** 3)
  const cosine = new Float64Array(coefficientCount(degree))
  const sine = new Float64Array(coefficientCount(degree))
  for (let m = 0; m <= degree; m++) {
    for (let l = m; l <= degree; l++) {
      const value = 3 / density * factors[l]! / (2 * l + 1)
      cosine[coefficientIndex(degree, l, m)] = value
      if (m > 0) sine[coefficientIndex(degree, l, m)] = value
    }
  }
  if (feedback) {
    const common = (1 + TIDAL_K2 - TIDAL_H2) * ROTATION_RATE ** 2 * EARTH_RADIUS_M ** 6 * 4 * Math.PI / GRAVITY
    // sin ψ cos ψ cos λ is P̄₂₁ cos λ/√15 and cos² ψ is 2/3 − (2/3) P̄₂₀/√5, once in the excitation and once in the potential.
    const wobble = common * ROTATIONAL_FACTOR_OCEAN_FREE * LOAD_FACTOR / (15 * DYNAMICAL_FLATTENING_MOMENT)
    const axial = coefficientSets['gross-2007']
    const spin = -common * 4 * axial.aZ / (45 * axial.c)
    const order0 = coefficientIndex(degree, 2, 0)
    const order1 = coefficientIndex(degree, 2, 1)
    cosine[order0] = cosine[order0]! + spin
    cosine[order1] = cosine[order1]! + wobble
    sine[order1] = sine[order1]! + wobble
  }
  return { cosine, sine }
}
