import { KG_PER_GT, WATER_DENSITY } from '../earth/constants.ts'
import { formatArea, formatSignificant } from '../format/numbers.ts'
import { InputError } from '../types/issue.ts'

export const massUnits = ['Gt', 'mm-we', 'cm-we'] as const
export type MassUnit = typeof massUnits[number]

export const massUnitTexts: Record<MassUnit, string> = {
  'Gt': 'gigatonnes',
  'mm-we': 'millimetres of water equivalent',
  'cm-we': 'centimetres of water equivalent'
}

/**
 * Gigatonnes per unit of the file, and the conversion in sentences. A water-equivalent height h over the ellipsoidal area A
 * is h · A · 1000 kg/m³.
 *
 * @param areaM2 ellipsoidal area of the region, m²; needed for heights
 * @throws InputError for a height without a positive area
 */
export function conversionOf(unit: MassUnit, areaM2: number | null, withdrawalPositive = false): { gtPerUnit: number, steps: string[] } {
  const steps: string[] = []
  let gtPerUnit = 1
  if (unit === 'Gt') steps.push('Values are gigatonnes; 1 Gt is 1 km³ of fresh water.')
  else {
    if (areaM2 === null || !(areaM2 > 0) || !Number.isFinite(areaM2)) {
      throw new InputError('A height needs the area of the region', [{
        path: 'areaM2', code: 'area-missing', message: `Values in ${massUnitTexts[unit]} become mass over the region’s area: give the region an outline first, or choose gigatonnes.`
      }])
    }
    const metres = unit === 'mm-we' ? 1e-3 : 1e-2
    gtPerUnit = metres * areaM2 * WATER_DENSITY / KG_PER_GT
    steps.push(`Values are ${massUnitTexts[unit]}, over ${formatArea(areaM2 / 1e6)} (area on the ellipsoid) at ${WATER_DENSITY} kg/m³: 1 ${unit.slice(0, 2)} is ${formatSignificant(gtPerUnit, 5)} Gt.`)
  }
  if (withdrawalPositive) steps.push('The file counts withdrawal as positive: the sign is turned, so that a gain of mass is positive.')
  return { gtPerUnit, steps }
}
