import { conversionRecipe } from './conversion.ts'
import type { Quantity } from './quantityKinds.ts'
import { understandUnit } from './quantities.ts'
import { InputError } from '../types/issue.ts'
import type { CorrectionKind, Material, Parameter, Recipe, SubtractedSeries, SubtractedVersion } from './recipe.ts'

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
  /** Stored versions of other series that are taken off at the epochs of this one. */
  subtract?: { on: boolean, what: CorrectionKind, versionId: string, maxGapDays: number }[]
}

/** A stored version with its values, as a step takes it. */
export interface StoredSeries extends SubtractedVersion { name: string, series: SubtractedSeries }

/**
 * The recipe that a choice asks for.
 *
 * @param areaM2 ellipsoidal area of the region, m²
 * @param withdrawalPositive the file counts water taken out as positive
 * @param stored the versions that `subtract` names
 * @throws InputError for a version that is not among them, for a unit that is not understood or of another dimension, and for numbers that are missing or out of range
 */
export function recipeOfChoice(choice: ConversionChoice, areaM2: number, withdrawalPositive = false, stored: readonly StoredSeries[] = []): Recipe {
  return conversionRecipe({
    unit: understandUnit(choice.unit, choice.quantity),
    area: { value: areaM2, sigma: (choice.area?.sigmaKm2 ?? 0) * 1e6, source: choice.area?.source ?? null },
    density: choice.density,
    storage: choice.storage,
    withdrawalPositive,
    corrections: [
      ...choice.corrections?.map(correction => ({ kind: 'subtract-rate' as const, ...correction })) ?? [],
      ...choice.subtract?.map((step, i) => subtractStep(step, i, stored)) ?? []
    ]
  })
}

function subtractStep({ on, what, versionId, maxGapDays }: NonNullable<ConversionChoice['subtract']>[number], i: number, stored: readonly StoredSeries[]) {
  const other = stored.find(version => version.versionId === versionId)
  if (!other) throw new InputError('A series that is to be taken off is not there', [{ path: `subtract/${i}`, code: 'unknown', message: 'Choose a stored version of a mass series of this account.' }])
  const { name, series, dataSha256 } = other
  return { kind: 'subtract-series' as const, on, what, name, series, maxGapDays, of: { versionId, dataSha256 } }
}
