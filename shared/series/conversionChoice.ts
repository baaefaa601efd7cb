import { conversionRecipe } from './conversion.ts'
import type { Quantity } from './quantityKinds.ts'
import { understandUnit } from './quantities.ts'
import type { CorrectionKind, Material, Parameter, Recipe } from './recipe.ts'

/** What somebody said of the values of a file: the quantity, its unit as typed, and the numbers that its conversion takes. */
export interface ConversionChoice {
  quantity: Quantity
  unit: string
  /** kg/m³ */
  density?: Parameter & { material: Material } | null
  storage?: Parameter & { coefficient: 'specific-yield' | 'storativity' } | null
  /** One-sigma of the area over which heights become mass, km², and the source of that error. */
  area?: { sigmaKm2: number, source: string | null } | null
  /** Rates that are taken off, Gt per year, gain positive. */
  corrections?: { on: boolean, what: CorrectionKind, name: string, gtPerYear: Parameter }[]
}

/**
 * The recipe that a choice asks for.
 *
 * @param areaM2 ellipsoidal area of the region, m²
 * @param withdrawalPositive the file counts water taken out as positive
 * @throws InputError for a unit that is not understood or of another dimension, and for numbers that are missing or out of range
 */
export function recipeOfChoice(choice: ConversionChoice, areaM2: number, withdrawalPositive = false): Recipe {
  return conversionRecipe({
    unit: understandUnit(choice.unit, choice.quantity),
    area: { value: areaM2, sigma: (choice.area?.sigmaKm2 ?? 0) * 1e6, source: choice.area?.source ?? null },
    density: choice.density,
    storage: choice.storage,
    withdrawalPositive,
    corrections: choice.corrections?.map(correction => ({ kind: 'subtract-rate' as const, ...correction }))
  })
}
