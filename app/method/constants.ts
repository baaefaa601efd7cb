import { coefficientsFor } from '#shared/earth/coefficientSets'
import {
  CHANDLER_PERIOD_DAYS, CHANDLER_Q, EARTH_MASS_KG, EARTH_RADIUS_M, GRAVITY, MANTLE_POLAR_MOMENT, POLAR_MOMENT, ROTATION_RATE, ROTATIONAL_FACTOR,
  ROTATIONAL_FACTOR_OCEAN_FREE, TIDAL_H2, TIDAL_K2, WATER_DENSITY, WGS84_A, WGS84_F, DYNAMICAL_FLATTENING_MOMENT, ELASTIC_LOAD_FACTOR,
} from '#shared/earth/constants'
import { loadEarthModel } from '#shared/earth/earthModel'
import { formatNumber, formatScientific } from '#shared/format/numbers'
import type { CoefficientSetId, CoreChoice } from '#shared/types/domain'

/** One line of the table of constants; `value` is written from the engine's own number. */
export interface Quantity { symbol: string, sub?: string, name: string, value: string, unit: string, source: string }

const gross = 'Gross (2007), Treatise on Geophysics 3'

/** The engine's constants as text, each with its source. */
export function constantRows(): Quantity[] {
  const { ocean } = loadEarthModel()
  return [
    { symbol: 'R', name: 'mean radius of the Earth', value: formatNumber(EARTH_RADIUS_M), unit: 'm', source: gross },
    { symbol: 'M', name: 'mass of the Earth', value: formatScientific(EARTH_MASS_KG, 4), unit: 'kg', source: gross },
    { symbol: 'Ω', name: 'mean rotation rate', value: formatScientific(ROTATION_RATE, 6), unit: 'rad s⁻¹', source: `${gross}; IERS Conventions (2010)` },
    { symbol: 'C', name: 'polar moment of inertia, whole Earth', value: formatScientific(POLAR_MOMENT, 4), unit: 'kg m²', source: gross },
    { symbol: 'C', sub: 'm', name: 'polar moment of inertia, mantle', value: formatScientific(MANTLE_POLAR_MOMENT, 4), unit: 'kg m²', source: gross },
    { symbol: 'C − A', name: 'difference of the moments, whole Earth, A the mean of both equatorial ones', value: formatScientific(DYNAMICAL_FLATTENING_MOMENT, 5), unit: 'kg m²', source: gross },
    { symbol: '1 + k′', sub: '2', name: 'yielding of the elastic Earth under a load', value: formatNumber(ELASTIC_LOAD_FACTOR, 3), unit: '1', source: 'load Love numbers, PREM' },
    { symbol: 'f', sub: 'rot', name: 'rotational response of the pole, ocean pole tide inside', value: formatNumber(ROTATIONAL_FACTOR, 3), unit: '1', source: gross },
    { symbol: 'f', sub: 'rot, ocean-free', name: 'the same without the ocean pole tide, used with rotational feedback', value: formatNumber(ROTATIONAL_FACTOR_OCEAN_FREE, 4), unit: '1', source: `from the factor above and the ocean’s Love numbers, ${gross}` },
    { symbol: 'k', sub: '2', name: 'tidal Love number, potential', value: formatNumber(TIDAL_K2, 3), unit: '1', source: 'Wahr (1981), PREM' },
    { symbol: 'h', sub: '2', name: 'tidal Love number, height', value: formatNumber(TIDAL_H2, 3), unit: '1', source: 'Wahr (1981), PREM' },
    { symbol: 'T', sub: 'c', name: 'period of the Chandler wobble', value: formatNumber(CHANDLER_PERIOD_DAYS, 1), unit: 'd', source: gross },
    { symbol: 'Q', name: 'quality factor of the Chandler wobble', value: formatNumber(CHANDLER_Q), unit: '1', source: gross },
    { symbol: 'g', name: 'standard gravity', value: formatNumber(GRAVITY, 5), unit: 'm s⁻²', source: 'CGPM (1901)' },
    { symbol: 'ρ', sub: 'w', name: 'density of the water that moves', value: formatNumber(WATER_DENSITY), unit: 'kg m⁻³', source: 'convention: 1 Gt is 1 km³' },
    { symbol: 'a', name: 'semi-major axis, WGS 84', value: formatNumber(WGS84_A), unit: 'm', source: 'NIMA TR8350.2' },
    { symbol: '1/f', name: 'inverse flattening, WGS 84', value: formatNumber(1 / WGS84_F, 9), unit: '1', source: 'NIMA TR8350.2' },
    { symbol: 'A', sub: 'o', name: 'area of the ocean on the sphere, shelf ice counted as ocean', value: formatScientific(ocean.areaM2, 4), unit: 'm²', source: 'Natural Earth 1:50m, fractional cells' },
  ]
}

export interface CoefficientRow { id: CoefficientSetId, aXY: string, cMinusA: string, aZ: string, c: string }

/** The coefficient sets as text, products unrounded in the engine and shown to six decimals. */
export function coefficientRows(ids: readonly CoefficientSetId[], core: CoreChoice = 'decoupled'): CoefficientRow[] {
  return ids.map((id) => {
    const set = coefficientsFor(id, core)
    const factor = (value: number) => String(Number(value.toFixed(6)))
    return { id, aXY: factor(set.aXY), cMinusA: formatScientific(set.cMinusA, 5), aZ: factor(set.aZ), c: formatScientific(set.c, 4) }
  })
}
