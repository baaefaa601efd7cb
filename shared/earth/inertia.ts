import { EARTH_MASS_KG, EARTH_RADIUS_M, ELASTIC_LOAD_FACTOR } from './constants.ts'
import type { DegreeTwoMeans } from './contour.ts'

/** Inertia increments of a surface load, kg m². */
export interface InertiaIncrement { i13: number, i23: number, i33: number }

/** Changes of fully normalised Stokes coefficients, reference radius 6 371 000 m. */
export interface StokesChange { c20: number, c21: number, s21: number }

/**
 * ΔI₁₃ = −R² ∫ sin ψ cos ψ cos λ dm, ΔI₂₃ = −R² ∫ sin ψ cos ψ sin λ dm, ΔI₃₃ = R² ∫ cos² ψ dm of a mass (kg, gained is
 * positive) spread with these means. Gross (2007), Treatise on Geophysics 3.
 */
export function inertiaOf(massKg: number, means: DegreeTwoMeans): InertiaIncrement {
  const r2 = EARTH_RADIUS_M * EARTH_RADIUS_M
  return { i13: -r2 * massKg * means.xz, i23: -r2 * massKg * means.yz, i33: r2 * massKg * means.cos2 }
}

/**
 * Stokes changes of the load alone (rigid Earth): ΔI₁₃ = −√(5/3) M R² ΔC₂₁, ΔI₂₃ = −√(5/3) M R² ΔS₂₁, and for a load of no
 * net mass ΔI₃₃ = −(2/3)√5 M R² ΔC₂₀. `netMassKg` takes the degree 0 out of ΔI₃₃ where the mass is not conserved.
 */
export function rigidStokesOf(inertia: InertiaIncrement, netMassKg = 0): StokesChange {
  const mr2 = EARTH_MASS_KG * EARTH_RADIUS_M * EARTH_RADIUS_M
  const degreeTwo = inertia.i33 - (2 / 3) * netMassKg * EARTH_RADIUS_M * EARTH_RADIUS_M
  return {
    c20: -degreeTwo / ((2 / 3) * Math.sqrt(5) * mr2),
    c21: -inertia.i13 / (Math.sqrt(5 / 3) * mr2),
    s21: -inertia.i23 / (Math.sqrt(5 / 3) * mr2)
  }
}

/** Inertia increments of Stokes changes of a rigid load without net mass: the inverse of `rigidStokesOf`. */
export function inertiaFromRigidStokes(stokes: StokesChange): InertiaIncrement {
  const mr2 = EARTH_MASS_KG * EARTH_RADIUS_M * EARTH_RADIUS_M
  return { i13: -Math.sqrt(5 / 3) * mr2 * stokes.c21, i23: -Math.sqrt(5 / 3) * mr2 * stokes.s21, i33: -(2 / 3) * Math.sqrt(5) * mr2 * stokes.c20 }
}

/** Stokes changes as gravimetry sees them: with the yielding of the Earth, factor 1 + k′₂ = 0.695. */
export function yieldedStokesOf(rigid: StokesChange): StokesChange {
  return { c20: ELASTIC_LOAD_FACTOR * rigid.c20, c21: ELASTIC_LOAD_FACTOR * rigid.c21, s21: ELASTIC_LOAD_FACTOR * rigid.s21 }
}

/** ΔJ₂ = −√5 ΔC₂₀ of yielded Stokes changes, for the radius 6 371 000 m (a_E makes it 0.22 % smaller). */
export function deltaJ2Of(yielded: StokesChange): number {
  return -Math.sqrt(5) * yielded.c20
}
