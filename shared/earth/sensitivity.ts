import { coefficientIndex } from './legendre.ts'
import { solveSeaLevel, type SeaLevelEquation, type SeaLevelSolution } from './seaLevelEquation.ts'
import { emptyHarmonics, type Harmonics } from './sphericalHarmonics.ts'

/**
 * Linear functionals ∫ g dm of a load that the engine needs: sin ψ cos ψ cos λ (χ₁), sin ψ cos ψ sin λ (χ₂), P₂(sin ψ) (χ₃ and J₂, since
 * the mass is conserved: ∫cos² ψ dm = −2/3 ∫P₂ dm), and the unit vector's components (geocentre).
 */
export const functionals = ['xz', 'yz', 'p2', 'x', 'y', 'z'] as const
export type Functional = typeof functionals[number]

/** g of a functional as normalised harmonics. */
export function functionalHarmonics(functional: Functional, degree: number): Harmonics {
  const g = emptyHarmonics(degree)
  switch (functional) {
    case 'xz':
      g.cosine[coefficientIndex(degree, 2, 1)] = 1 / Math.sqrt(15)
      break
    case 'yz':
      g.sine[coefficientIndex(degree, 2, 1)] = 1 / Math.sqrt(15)
      break
    case 'p2':
      g.cosine[coefficientIndex(degree, 2, 0)] = 1 / Math.sqrt(5)
      break
    case 'x':
      g.cosine[coefficientIndex(degree, 1, 1)] = 1 / Math.sqrt(3)
      break
    case 'y':
      g.sine[coefficientIndex(degree, 1, 1)] = 1 / Math.sqrt(3)
      break
    case 'z':
      g.cosine[coefficientIndex(degree, 1, 0)] = 1 / Math.sqrt(3)
  }
  return g
}

/** g of a functional at geocentric latitude and longitude, radians. */
export function functionalAt(functional: Functional, psi: number, lambda: number): number {
  const s = Math.sin(psi)
  const c = Math.cos(psi)
  switch (functional) {
    case 'xz': return s * c * Math.cos(lambda)
    case 'yz': return s * c * Math.sin(lambda)
    case 'p2': return (3 * s * s - 1) / 2
    case 'x': return c * Math.cos(lambda)
    case 'y': return c * Math.sin(lambda)
    case 'z': return s
  }
}

/**
 * Sensitivity of a functional: K = g + G T + κ with T = O ρ_w (g + G T + κ), ∫T = 0. Then ∫ g (P + ρ_w S) = ∫ K P for every load P, by the
 * self-adjointness of the sea-level equation. Returned is K − g: `constant` + `smooth`.
 */
export function sensitivityOf(equation: SeaLevelEquation, functional: Functional): SeaLevelSolution {
  return solveSeaLevel(equation, functionalHarmonics(functional, equation.grid.degree))
}
