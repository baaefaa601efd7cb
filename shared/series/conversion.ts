import { InputError } from '../types/issue.ts'
import type { Issue } from '../types/issue.ts'
import { quantityKinds } from './quantityKinds.ts'
import type { UnderstoodUnit } from './quantityKinds.ts'
import type { Material, Parameter, Recipe, RecipeStep } from './recipe.ts'

/** What it takes to turn the values of a file into gigatonnes. */
export interface ConversionSpec {
  unit: UnderstoodUnit
  /** Ellipsoidal area, m², with its one-sigma. */
  area?: Parameter | null
  /** For volumes and ice thickness, kg/m³. */
  density?: Parameter & { material: Material } | null
  /** For groundwater heads: specific yield of an unconfined aquifer, storativity of a confined one. */
  storage?: Parameter & { coefficient: 'specific-yield' | 'storativity' } | null
  /** The file counts water taken out as positive: the sign is turned. */
  withdrawalPositive?: boolean
  /** Corrections, carried out last and in this order. */
  corrections?: Extract<RecipeStep, { kind: 'subtract-rate' | 'subtract-series' }>[]
}

/**
 * The steps from a unit to gigatonnes. `replayRecipe` carries them out.
 *
 * @throws InputError for a parameter that the quantity needs and that is missing or out of range
 */
export function conversionRecipe(spec: ConversionSpec): Recipe {
  const { unit, area, density, storage } = spec
  const { name, needs } = quantityKinds[unit.quantity]
  const issues: Issue[] = []
  const steps: RecipeStep[] = [{ kind: 'unit', unit }]
  if (spec.withdrawalPositive) steps.push({ kind: 'sign' })
  if (needs.includes('storage')) {
    if (!storage) issues.push({ path: 'storage', code: 'storage-missing', message: 'A head change becomes water through the specific yield or the storativity of the aquifer: give one of them.' })
    else {
      check(storage, 'storage', storage.coefficient === 'specific-yield' ? 'The specific yield' : 'The storativity', issues, 1)
      steps.push({ kind: 'storage', coefficient: storage.coefficient, parameter: parameterOf(storage) })
    }
  }
  if (needs.includes('density')) {
    if (!density) issues.push({ path: 'density', code: 'density-missing', message: `A ${name} becomes mass through a density: give one.` })
    else {
      check(density, 'density', 'The density', issues, 3000)
      steps.push({ kind: 'density', material: density.material, parameter: parameterOf(density) })
    }
  }
  if (needs.includes('area')) {
    if (!area) issues.push({ path: 'area', code: 'area-missing', message: `A ${name} becomes mass over the region’s area: give the region an outline first.` })
    else {
      check(area, 'area', 'The area', issues, 6e14)
      steps.push({ kind: 'area', parameter: parameterOf(area) })
    }
  }
  if (needs.includes('periods')) steps.push({ kind: 'integrate', perPeriod: unit.perPeriod })
  if (issues.length > 0) throw new InputError('The conversion to gigatonnes is not complete', issues)
  return { version: 1, steps: [...steps, ...spec.corrections ?? []] }
}

function parameterOf({ value, sigma, source }: Parameter): Parameter {
  return { value, sigma, source }
}

function check({ value, sigma }: Parameter, path: string, what: string, issues: Issue[], most: number): void {
  if (!(value > 0) || !(value <= most)) {
    issues.push({ path: `${path}/value`, code: 'out-of-range', value: String(value), message: `${what} must be above 0 and at most ${most}, got ${value}.` })
  }
  if (!(sigma >= 0) || !Number.isFinite(sigma)) {
    issues.push({ path: `${path}/sigma`, code: 'sigma-negative', value: String(sigma), message: `${what} needs a one-sigma that is not negative, got ${sigma}.` })
  }
}
