import { distribution } from '../earth/time/monteCarlo.ts'
import type { Distribution } from '../earth/time/monteCarlo.ts'
import { trendSigma, trendWeights } from '../earth/time/covarianceTrend.ts'
import { seededNormals } from '../earth/time/monteCarloNormals.ts'
import { carryOutRecipe } from './replay.ts'
import type { Parameter, Recipe, RecipeStep, SeriesTable } from './recipe.ts'
import { allAtOnce } from './steps.ts'
import type { Steps } from './steps.ts'
import { seriesCovariance } from './uncertainty.ts'

export interface RecipeMonteCarlo {
  members: number
  seed: number
  /** Trends of the members, Gt per year. */
  trend: Distribution
  /** One-sigma of the trend by linear propagation, from the covariance of the series. */
  linearSigma: number
}

/**
 * Draws values and parameters of a conversion within their errors and carries the recipe out on each: products of uncertain numbers are
 * taken as they are, so that this shows how far the linear propagation, which everything else uses, can be trusted.
 * Parameters that would turn negative are taken at a thousandth of their value.
 *
 * @throws as `replayRecipe`; RangeError for fewer than three epochs or two members
 */
export function monteCarloRecipe(recipe: Recipe, table: SeriesTable, options: { members: number, seed: number }): RecipeMonteCarlo {
  return allAtOnce(monteCarloRecipeSteps(recipe, table, options))
}

/** As `monteCarloRecipe`, in steps for `withPauses`. */
export function* monteCarloRecipeSteps(recipe: Recipe, table: SeriesTable, { members, seed }: { members: number, seed: number }): Steps<RecipeMonteCarlo> {
  const plain = carryOutRecipe(recipe, table)
  if (plain.mjd.length < 3) throw new RangeError(`a trend needs at least 3 epochs, got ${plain.mjd.length}`)
  if (!Number.isInteger(members) || members < 2) throw new RangeError(`members must be 2 at least, got ${members}`)
  const weights = trendWeights(plain.mjd, plain.sigmaGt)
  const normals = seededNormals(seed)
  const sources = [...new Set(recipe.steps.flatMap((step, i) => parameterOf(step) ? [nameOf(step, i)] : []))]
  const shared = new Float64Array(sources.length)
  const own = new Float64Array(table.value.length)
  const subtracted = recipe.steps.map(step => step.kind === 'subtract-series' && step.on ? new Float64Array(step.series.mjd.length) : null)
  const trends = new Float64Array(members)
  for (let m = 0; m < members; m++) {
    if (m > 0 && m % 50 === 0) yield m / members
    normals(shared)
    normals(own)
    const steps = recipe.steps.map((step, i): RecipeStep => {
      const others = subtracted[i]
      if (others && step.kind === 'subtract-series') {
        normals(others)
        const { series } = step
        return { ...step, series: { ...series, massGt: series.massGt.map((v, k) => v + (series.sigmaGt?.[k] ?? 0) * others[k]!) } }
      }
      return withParameter(step, shared[sources.indexOf(nameOf(step, i))] ?? 0)
    })
    const value = table.sigma ? table.value.map((v, i) => v + table.sigma![i]! * own[i]!) : table.value
    const { massGt } = carryOutRecipe({ version: 1, steps }, { ...table, value })
    trends[m] = massGt.reduce((sum, v, i) => sum + weights[i]! * v, 0)
  }
  return { members, seed, trend: distribution(trends), linearSigma: trendSigma(seriesCovariance(plain, 'this series'), plain.mjd, plain.sigmaGt) }
}

function parameterOf(step: RecipeStep): Parameter | null {
  if (step.kind === 'storage' || step.kind === 'density' || step.kind === 'area') return step.parameter
  return step.kind === 'subtract-rate' && step.on ? step.gtPerYear : null
}

/** Steps of one named source share their number; a step without one has its own. */
function nameOf(step: RecipeStep, i: number): string {
  return parameterOf(step)?.source ?? `step ${i}`
}

function withParameter(step: RecipeStep, z: number): RecipeStep {
  if (step.kind === 'subtract-rate') return { ...step, gtPerYear: { ...step.gtPerYear, value: step.gtPerYear.value + step.gtPerYear.sigma * z } }
  if (step.kind !== 'storage' && step.kind !== 'density' && step.kind !== 'area') return step
  const { value, sigma } = step.parameter
  return { ...step, parameter: { ...step.parameter, value: Math.max(value / 1000, value + sigma * z) } }
}
