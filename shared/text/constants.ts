import { coefficientsFor } from '../earth/coefficientSets.ts'
import * as constants from '../earth/constants.ts'
import { formatNumber, formatScientific } from '../format/digits.ts'
import type { PhysicsSettings } from '../types/domain.ts'

export interface ConstantRow { name: string, value: string, source: string }

/** The constants that a run's figures rest on, with their digits and sources. */
export function constantRows(settings: PhysicsSettings, oceanAreaM2: number): ConstantRow[] {
  const set = coefficientsFor(settings.coefficients, settings.core)
  const wholeEarth = settings.core === 'coupled'
  const axial = wholeEarth ? 'Whole Earth: 1 + k′₂ of an elastic Earth (PREM) over C of Gross (2007)' : set.source
  return [
    { name: 'Coefficient of χ₁, χ₂', value: formatNumber(set.aXY, 6), source: set.source },
    { name: 'C − A, with it', value: `${formatScientific(set.cMinusA, 5)} kg m²`, source: set.source },
    { name: 'Coefficient of χ₃', value: formatNumber(set.aZ, 5), source: axial },
    { name: wholeEarth ? 'C of the whole Earth' : 'C of the mantle', value: `${formatScientific(set.c, 4)} kg m²`, source: axial },
    { name: 'Mean radius', value: `${formatNumber(constants.EARTH_RADIUS_M)} m`, source: 'Gross (2007), Treatise on Geophysics 3' },
    { name: 'Rotation rate', value: `${formatScientific(constants.ROTATION_RATE, 6)} rad/s`, source: 'IERS Conventions (2010)' },
    { name: 'Way of the pole', value: `${formatNumber(constants.POLE_MM_PER_MAS / 10, 4)} cm per mas`, source: 'arithmetic on the mean radius' },
    { name: 'Density of water', value: `${formatNumber(constants.WATER_DENSITY)} kg/m³`, source: 'fresh water: 1 Gt is 1 km³' },
    { name: 'Ellipsoid of areas', value: `${formatNumber(constants.WGS84_A)} m, 1/${formatNumber(1 / constants.WGS84_F, 9)}`, source: 'WGS 84, NIMA TR8350.2' },
    { name: 'Ocean area', value: `${formatScientific(oceanAreaM2, 3)} m²`, source: 'Natural Earth 1:50m land; lakes are land, ice shelves ocean' },
  ]
}
