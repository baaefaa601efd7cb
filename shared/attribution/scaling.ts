import { InputError } from '../types/issue.ts'
import type { Ar1Noise } from './ar1.ts'
import { bandProjection, nuisanceColumns, residualNoise } from './bandProjection.ts'
import type { FitBand, NuisanceColumns } from './bandProjection.ts'
import { NotPositiveError, cholesky, dot, invertCholesky, singularValues, solveCholesky, zeros } from './linearAlgebra.ts'
import type { Matrix } from './linearAlgebra.ts'
import { scalingSentences } from './scalingTexts.ts'
import type { AttributionData, RotationQuantity } from './types.ts'

export interface ScalingOptions {
  band: FitBand
  /** Prior of every factor by the key of its group; default mean 1, one-sigma 0.5. */
  priors?: Record<string, { mean: number, sigma: number }>
  /** Whether a trend that belongs to no group is fitted beside the factors ('out') or the factors must carry it ('in', default). */
  trend?: 'in' | 'out'
  /** Noise of the observables; absent: estimated from the residual. */
  noise?: Partial<Record<RotationQuantity, Ar1Noise>>
}

export interface ScalingFactor {
  key: string
  name: string
  prior: { mean: number, sigma: number }
  /** With the prior: 1 means as reported. */
  posterior: { value: number, sigma: number }
  /** Without it; null where the data do not determine the factor. */
  dataOnly: { value: number, sigma: number } | null
  /** Part of the factor that the data decide, 0…1; the rest is the prior's. */
  resolution: number
  /** (posterior − prior)/√(σ²prior − σ²posterior): how far the data pull it, in sigmas. */
  pull: number
  /** Part of what the data say that each observable carries, summing to 1; by how much less precise the factor is without it. */
  carriedBy: Partial<Record<RotationQuantity, number>>
  /** One-sigma without each observable. */
  sigmaWithout: Partial<Record<RotationQuantity, number>>
}

export interface Scaling {
  band: FitBand
  trend: 'in' | 'out'
  factors: ScalingFactor[]
  /** Correlation of the posterior factors, by rows. */
  correlation: number[][]
  /** Largest over smallest singular value of the groups' signatures scaled to one length; Infinity where they are dependent. */
  condition: number
  noise: Partial<Record<RotationQuantity, Ar1Noise>>
  /** χ² of what is left, and the values it is made of. */
  chiSquare: number
  values: number
  sentences: string[]
}

export const DEFAULT_PRIOR = { mean: 1, sigma: 0.5 } as const
/** Times that noise and factors are estimated in turn, and movement in sigmas that ends it. */
const ROUNDS = 4
const SETTLED = 0.05

/**
 * One factor for each group by generalised least squares with normal priors: the most probable f of d = Σ f_g s_g + e, e AR(1) noise of
 * each observable plus the systematic errors that groups and background share (unknowns of unit variance, which is Woodbury's identity).
 * Seasons and trends are fitted apart (`band`). Tarantola (2005), Inverse Problem Theory, §3.2; resolution I − C_post C_prior⁻¹.
 *
 * @throws InputError without groups, or for a prior whose one-sigma is not positive
 */
export function estimateScaling(data: AttributionData, options: ScalingOptions): Scaling {
  const priors = priorsOf(data, options)
  const trend = options.trend ?? 'in'
  const unknowns = data.groups.length + data.sources.length
  let factors = Float64Array.from(priors, prior => prior.mean)
  let lost = 0
  let noise: Ar1Noise[] = []
  let problem: Problem | null = null
  const known = data.blocks.every(({ quantity }) => options.noise?.[quantity])
  const nuisance = data.blocks.map(({ mjd }) => nuisanceColumns(mjd))
  for (let round = 0; round < (known ? 1 : ROUNDS); round++) {
    noise = data.blocks.map((block, b) => options.noise?.[block.quantity] ?? residualNoise(block, residualOf(data, b, factors), data.stepDays, lost, nuisance[b]))
    problem = problemOf(data, priors, noise, options.band, trend, nuisance)
    const solved = solve(problem, data.groups.length, unknowns)
    const before = factors
    factors = Float64Array.from(priors, (prior, g) => prior.mean + prior.sigma * solved.factors[g]!)
    const moved = factors.reduce((most, f, g) => Math.max(most, Math.abs(f - before[g]!) / (priors[g]!.sigma * Math.sqrt(solved.posterior[g]![g]!))), 0)
    // Degrees of freedom that the groups take, an equal part from each observable.
    lost = solved.posterior.slice(0, data.groups.length).reduce((sum, row, g) => sum + 1 - row[g]!, 0) / data.blocks.length
    if (round > 0 && moved < SETTLED) break
  }
  return conclude(data, options.band, trend, priors, noise, problem!)
}

/** Normal matrices of each block in units of the prior's sigmas, about the prior's means; groups first, then sources. */
interface Problem {
  blocks: { quantity: RotationQuantity, matrix: Matrix, right: Float64Array, square: number, values: number }[]
}

function priorsOf(data: AttributionData, options: ScalingOptions): { mean: number, sigma: number }[] {
  if (data.groups.length === 0) throw new InputError('There is no group to be scaled', [{ code: 'no-group', message: 'Switch at least one region on.' }])
  const priors = data.groups.map(({ key }) => options.priors?.[key] ?? { ...DEFAULT_PRIOR })
  const issues = priors.flatMap((prior, g) => prior.sigma > 0 && Number.isFinite(prior.sigma) && Number.isFinite(prior.mean)
    ? []
    : [{ path: `priors/${data.groups[g]!.key}`, code: 'prior', message: `${data.groups[g]!.name}: the prior needs a mean and a positive one-sigma.` }])
  if (issues.length > 0) throw new InputError('Some priors do not hold', issues)
  return priors
}

/** What a block has beyond the groups times their factors, in its unit. */
export function residualOf(data: AttributionData, b: number, factors: Float64Array): Float64Array {
  const rest = data.blocks[b]!.value.slice()
  data.groups.forEach(({ signatures }, g) => {
    const [signature, factor] = [signatures[b]!, factors[g]!]
    for (let k = 0; k < rest.length; k++) rest[k] = rest[k]! - factor * signature[k]!
  })
  return rest
}

function problemOf(data: AttributionData, priors: readonly { mean: number, sigma: number }[], noise: readonly Ar1Noise[], band: FitBand, trend: 'in' | 'out', nuisance: readonly NuisanceColumns[]): Problem {
  const means = Float64Array.from(priors, prior => prior.mean)
  return {
    blocks: data.blocks.map((block, b) => {
      const project = bandProjection(block, noise[b]!, data.stepDays, band, trend, nuisance[b])
      const columns = [
        ...data.groups.map(({ signatures }, g) => scaled(project(signatures[b]!), priors[g]!.sigma)),
        ...data.sources.map(({ loadings }) => project(loadings[b]!))
      ]
      const y = project(residualOf(data, b, means))
      const matrix = zeros(columns.length)
      columns.forEach((column, i) => {
        for (let j = 0; j <= i; j++) {
          matrix[i]![j] = dot(column, columns[j]!)
          matrix[j]![i] = matrix[i]![j]!
        }
      })
      return { quantity: block.quantity, matrix, right: Float64Array.from(columns, column => dot(column, y)), square: dot(y, y), values: y.length }
    })
  }
}

function scaled(x: Float64Array, factor: number): Float64Array {
  for (let i = 0; i < x.length; i++) x[i] = factor * x[i]!
  return x
}

interface Solved { factors: Float64Array, posterior: Matrix }

/** Most probable unknowns and their covariance, in units of the prior; `withPrior` groups keep theirs, the rest of the groups have none. */
function solve(problem: Problem, groups: number, unknowns: number, without: RotationQuantity | null = null, withPrior = true): Solved {
  const normal = zeros(unknowns)
  const right = new Float64Array(unknowns)
  for (let i = 0; i < unknowns; i++) normal[i]![i] = withPrior || i >= groups ? 1 : 0
  for (const block of problem.blocks) {
    if (block.quantity === without) continue
    block.matrix.forEach((row, i) => {
      right[i] = right[i]! + block.right[i]!
      row.forEach((v, j) => { normal[i]![j] = normal[i]![j]! + v })
    })
  }
  const factor = cholesky(normal)
  return { factors: solveCholesky(factor, right), posterior: invertCholesky(factor) }
}

function conclude(data: AttributionData, band: FitBand, trend: 'in' | 'out', priors: readonly { mean: number, sigma: number }[], noise: readonly Ar1Noise[], problem: Problem): Scaling {
  const groups = data.groups.length
  const unknowns = groups + data.sources.length
  const { factors, posterior } = solve(problem, groups, unknowns)
  const free = attempt(() => solve(problem, groups, unknowns, null, false))
  const quantities = data.blocks.map(({ quantity }) => quantity)
  const reduced = new Map(quantities.map(quantity => [quantity, solve(problem, groups, unknowns, quantity).posterior]))
  const list = data.groups.map(({ key, name }, g): ScalingFactor => {
    const { mean, sigma } = priors[g]!
    const variance = posterior[g]![g]!
    const lost = quantities.map(quantity => Math.max(0, 1 / variance - 1 / reduced.get(quantity)![g]![g]!))
    const total = lost.reduce((sum, v) => sum + v, 0)
    const own = free && free.posterior[g]![g]! > 0 ? { value: mean + sigma * free.factors[g]!, sigma: sigma * Math.sqrt(free.posterior[g]![g]!) } : null
    return {
      key, name, prior: { mean, sigma },
      posterior: { value: mean + sigma * factors[g]!, sigma: sigma * Math.sqrt(variance) },
      dataOnly: own,
      resolution: Math.max(0, 1 - variance),
      pull: variance < 1 - 1e-12 ? factors[g]! / Math.sqrt(1 - variance) : 0,
      carriedBy: Object.fromEntries(quantities.map((quantity, q) => [quantity, total > 0 ? lost[q]! / total : 0])),
      sigmaWithout: Object.fromEntries(quantities.map(quantity => [quantity, sigma * Math.sqrt(reduced.get(quantity)![g]![g]!)]))
    }
  })
  const square = problem.blocks.reduce((sum, block) => sum + block.square - 2 * dot(block.right, factors) + factors.reduce((s, u, i) => s + u * dot(block.matrix[i]!, factors), 0), 0)
  const summary = {
    band, trend, factors: list,
    correlation: data.groups.map((_, i) => data.groups.map((__, j) => posterior[i]![j]! / Math.sqrt(posterior[i]![i]! * posterior[j]![j]!))),
    condition: conditionOf(problem, groups, unknowns),
    noise: Object.fromEntries(quantities.map((quantity, b) => [quantity, noise[b]!])),
    chiSquare: square,
    values: problem.blocks.reduce((sum, block) => sum + block.values, 0)
  }
  return { ...summary, sentences: scalingSentences(summary) }
}

/** Condition of the groups' signatures scaled to one length, in the metric of noise and sources. */
function conditionOf(problem: Problem, groups: number, unknowns: number): number {
  const sum = zeros(unknowns)
  for (const { matrix } of problem.blocks) matrix.forEach((row, i) => row.forEach((v, j) => { sum[i]![j] = sum[i]![j]! + v }))
  // Sources out: N_gg − N_gs (1 + N_ss)⁻¹ N_sg.
  const inner = Array.from({ length: unknowns - groups }, (_, i) => Float64Array.from({ length: unknowns - groups }, (__, j) => sum[groups + i]![groups + j]! + (i === j ? 1 : 0)))
  const factor = inner.length > 0 ? cholesky(inner) : null
  const eliminated = Array.from({ length: groups }, (_, g) => factor ? solveCholesky(factor, sum[g]!.slice(groups)) : new Float64Array(0))
  const metric = Array.from({ length: groups }, (_, i) => Float64Array.from({ length: groups }, (__, j) => sum[i]![j]! - dot(sum[i]!.slice(groups), eliminated[j]!)))
  const size = metric.map((row, i) => Math.sqrt(Math.max(0, row[i]!)))
  const { values } = singularValues(metric.map((row, i) => row.map((v, j) => size[i]! > 0 && size[j]! > 0 ? v / (size[i]! * size[j]!) : 0)))
  const [largest, smallest] = [values[0]!, values.at(-1)!]
  return smallest > 1e-13 * largest ? Math.sqrt(largest / smallest) : Infinity
}

function attempt<T>(fn: () => T): T | null {
  try {
    return fn()
  } catch (error) {
    if (error instanceof NotPositiveError) return null
    throw error
  }
}
