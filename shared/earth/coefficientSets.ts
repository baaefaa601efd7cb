import type { CoefficientSetId, CoreChoice } from '../types/domain.ts'
import {
  AXIAL_LOAD_FACTOR, AXIAL_ROTATIONAL_FACTOR, DYNAMICAL_FLATTENING_MOMENT, ELASTIC_LOAD_FACTOR, LOAD_FACTOR, MANTLE_POLAR_MOMENT,
  POLAR_MOMENT, ROTATIONAL_FACTOR, ROTATIONAL_FACTOR_OCEAN_FREE
} from './constants.ts'

/**
 * How an inertia increment of a LOAD becomes excitation: χ₁ + iχ₂ = aXY (ΔI₁₃ + iΔI₂₃)/cMinusA, χ₃ = aZ ΔI₃₃/c.
 * The four numbers of a set come from one source and are never mixed; the yielding of the Earth is inside them.
 */
export interface CoefficientSet {
  id: CoefficientSetId
  name: string
  source: string
  aXY: number
  /** kg m² */
  cMinusA: number
  aZ: number
  /** kg m² */
  c: number
}

export const coefficientSets: Readonly<Record<CoefficientSetId, Readonly<CoefficientSet>>> = Object.freeze({
  'gross-2007': Object.freeze({
    id: 'gross-2007',
    name: 'Gross (2007)',
    source: 'Gross (2007), Treatise on Geophysics 3, 239–294',
    aXY: ROTATIONAL_FACTOR * LOAD_FACTOR,
    cMinusA: DYNAMICAL_FLATTENING_MOMENT,
    aZ: AXIAL_ROTATIONAL_FACTOR * AXIAL_LOAD_FACTOR,
    c: MANTLE_POLAR_MOMENT
  }),
  'eubanks-1993': Object.freeze({
    id: 'eubanks-1993',
    name: 'Eubanks (1993)',
    source: 'Eubanks (1993), AGU Geodynamics Series 24, 1–54; mantle moment from memory',
    aXY: 1.098,
    cMinusA: 2.610e35,
    aZ: 0.753,
    c: MANTLE_POLAR_MOMENT
  }),
  'barnes-1983': Object.freeze({
    id: 'barnes-1983',
    name: 'Barnes et al. (1983)',
    source: 'Barnes, Hide, White & Wilson (1983), Proc. R. Soc. A 387, 31–73; both moments of the mantle',
    aXY: 1.00,
    cMinusA: 2.344e35,
    aZ: 0.70,
    c: 7.04e37
  })
})

/** The set that `core` makes of `id`: `coupled` puts the whole Earth's (0.695, 8.0365e37) in place of (aZ, c) and leaves χ₁, χ₂ alone. */
export function coefficientsFor(id: CoefficientSetId, core: CoreChoice): CoefficientSet {
  const set = coefficientSets[id]
  return core === 'coupled' ? { ...set, aZ: ELASTIC_LOAD_FACTOR, c: POLAR_MOMENT } : { ...set }
}

/**
 * Factor on aXY when the sea-level equation holds the rotational feedback itself: 1.4869/1.608, so that the ocean pole
 * tide counts once.
 */
export const OCEAN_FREE_RATIO = ROTATIONAL_FACTOR_OCEAN_FREE / ROTATIONAL_FACTOR
