import { InputError } from '../types/issue.ts'
import { conversionRecipe } from './conversion.ts'
import { plainUnits } from './quantityKinds.ts'
import type { Recipe } from './recipe.ts'

export const massUnits = ['Gt', 'mm-we', 'cm-we'] as const
export type MassUnit = typeof massUnits[number]

export const massUnitTexts: Record<MassUnit, string> = {
  'Gt': 'gigatonnes',
  'mm-we': 'millimetres of water equivalent',
  'cm-we': 'centimetres of water equivalent'
}

/**
 * The conversion from a unit that the column's name tells. A water-equivalent height h over the ellipsoidal area A
 * is h · A · 1000 kg/m³.
 *
 * @param areaM2 ellipsoidal area of the region, m²; needed for heights
 * @throws InputError for a height without a positive area
 */
export function recipeOf(unit: MassUnit, areaM2: number | null, withdrawalPositive = false): Recipe {
  if (unit !== 'Gt' && (areaM2 === null || !(areaM2 > 0) || !Number.isFinite(areaM2))) {
    throw new InputError('A height needs the area of the region', [{
      path: 'areaM2', code: 'area-missing', message: `Values in ${massUnitTexts[unit]} become mass over the region’s area: give the region an outline first, or choose gigatonnes.`
    }])
  }
  return conversionRecipe({ unit: plainUnits[unit], area: unit === 'Gt' ? null : { value: areaM2!, sigma: 0, source: null }, withdrawalPositive })
}
