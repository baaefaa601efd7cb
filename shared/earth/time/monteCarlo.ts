import { allAtOnce, withPauses } from '../../series/steps.ts'
import type { PaceOptions, Steps } from '../../series/steps.ts'
import { DEGREE } from '../constants.ts'
import { covarianceOfFunctionals } from './covariance.ts'
import type { Covariance } from './covariance.ts'
import { seededNormals } from './monteCarloNormals.ts'
import type { Normals } from './monteCarloNormals.ts'

/** One region's series in a Monte Carlo: its fitted trend, how the trend draws on the epochs, and their errors. */
export interface MonteCarloSeries {
  key: string
  /** Fitted trend, Gt per year. */
  rate: number
  /** Weights of the epochs in the trend (`trendWeights`), per year. */
  weights: Float64Array
  /** Errors of the epochs, Gt². Sources of one name are one source in all series. */
  covariance: Covariance
  /** Effect of a gigatonne, the region's factor included. */
  perGt: { massGt: number, chi1Mas: number, chi2Mas: number, lodMicroseconds: number }
}

export interface MonteCarloInput { series: MonteCarloSeries[], members: number, seed: number }

/** Mean, standard deviation and quantiles of the members. */
export interface Distribution { mean: number, sigma: number, p2_5: number, p16: number, p50: number, p84: number, p97_5: number }

export interface MonteCarloResult {
  members: number
  seed: number
  /** Rates per year of the sum of all series. */
  total: Record<RateName, Distribution>
  /** Length of the pole's drift, mas per year; its direction, degrees east of the linear direction's mean. */
  drift: { length: Distribution, directionDegEast: number | null, direction: Distribution }
  series: { key: string, massGt: Distribution }[]
  /** One-sigmas of the totals by linear propagation, which the members check. */
  linear: Record<RateName, number>
}

export const rateNames = ['massGt', 'chi1Mas', 'chi2Mas', 'lodMicroseconds'] as const
export type RateName = typeof rateNames[number]

/** Members that are drawn between two pauses. */
const CHUNK = 100
/** Guards time and memory. */
export const monteCarloLimits = { members: 100_000, values: 4e9 }

/**
 * Draws members of all errors, epoch by epoch, refits each by its linear functional, and gives the distribution of the trends and of what is
 * not linear in them, the drift's length and direction. Checks the covariance algebra, of which it uses nothing but the covariance itself.
 *
 * @throws RangeError for sizes that do not fit or are too large
 */
export function monteCarlo(input: MonteCarloInput): MonteCarloResult {
  return allAtOnce(memberSteps(input))
}

/** As `monteCarlo`, with pauses and progress, and to be cancelled. */
export function monteCarloPaced(input: MonteCarloInput, pace: PaceOptions): Promise<MonteCarloResult> {
  return withPauses(memberSteps(input), pace)
}

/** A series made ready: what one standard normal number of each kind does to its trend, Gt per year. */
interface Ready { epochs: Float64Array, sources: { at: number, effect: number }[] }

function* memberSteps({ series, members, seed }: MonteCarloInput): Steps<MonteCarloResult> {
  check(series, members)
  const names = [...new Set(series.flatMap(s => s.covariance.factors.map(f => f.source)))]
  const ready = series.map(s => prepare(s, names))
  const normals = seededNormals(seed)
  const drawn: Drawn = {
    rates: series.map(() => new Float64Array(members)),
    totals: { massGt: new Float64Array(members), chi1Mas: new Float64Array(members), chi2Mas: new Float64Array(members), lodMicroseconds: new Float64Array(members) }
  }
  for (let from = 0; from < members; from += CHUNK) {
    if (from > 0) yield 0.95 * from / members
    drawMembers(series, ready, normals, new Float64Array(names.length), drawn, from, Math.min(members, from + CHUNK))
  }
  const { rates, totals } = drawn
  yield 0.95
  return {
    members,
    seed,
    total: { massGt: distribution(totals.massGt), chi1Mas: distribution(totals.chi1Mas), chi2Mas: distribution(totals.chi2Mas), lodMicroseconds: distribution(totals.lodMicroseconds) },
    drift: driftOf(series, totals.chi1Mas, totals.chi2Mas),
    series: series.map(({ key, perGt }, k) => ({ key, massGt: distribution(rates[k]!.map(rate => rate * perGt.massGt)) })),
    linear: linearSigmas(series)
  }
}

/** Trends of the members, Gt per year by series, and totals of each rate. */
interface Drawn { rates: Float64Array[], totals: Record<RateName, Float64Array> }

function drawMembers(series: readonly MonteCarloSeries[], ready: readonly Ready[], normals: Normals, shared: Float64Array, { rates, totals }: Drawn, from: number, to: number): void {
  // One stretch of memory for all series: it stays in the nearest cache.
  const scratch = new Float64Array(ready.reduce((most, r) => Math.max(most, r.epochs.length), 0))
  const own = ready.map(r => scratch.subarray(0, r.epochs.length))
  for (let m = from; m < to; m++) {
    normals(shared)
    for (let k = 0; k < series.length; k++) {
      const z = own[k]!
      normals(z)
      let rate = series[k]!.rate + dot(ready[k]!.epochs, z)
      for (const { at, effect } of ready[k]!.sources) rate += effect * shared[at]!
      rates[k]![m] = rate
      const { perGt } = series[k]!
      for (const name of rateNames) totals[name][m] = totals[name][m]! + perGt[name] * rate
    }
  }
}

function dot(x: Float64Array, y: Float64Array): number {
  let sum = 0
  for (let i = 0; i < x.length; i++) sum += x[i]! * y[i]!
  return sum
}

function check(series: readonly MonteCarloSeries[], members: number): void {
  if (!Number.isInteger(members) || members < 2 || members > monteCarloLimits.members) throw new RangeError(`members must be from 2 to ${monteCarloLimits.members}, got ${members}`)
  for (const { key, weights, covariance } of series) {
    if (weights.length !== covariance.diagonal.length) throw new RangeError(`weights of “${key}” must be ${covariance.diagonal.length} numbers, one per epoch, got ${weights.length}`)
  }
  const values = members * series.reduce((sum, s) => sum + s.weights.length, 0)
  if (values > monteCarloLimits.values) throw new RangeError(`a Monte Carlo may draw ${monteCarloLimits.values} numbers, got ${values}: take fewer members`)
}

function prepare({ weights, covariance }: MonteCarloSeries, names: string[]): Ready {
  const { diagonal, walk, factors } = covariance
  const n = weights.length
  const steps: number[] = []
  let later = 0
  if (walk) {
    for (let i = n - 1; i >= 0; i--) {
      later += weights[i]!
      if (walk[i]! > 0) steps.push(later * Math.sqrt(walk[i]!))
    }
  }
  // Epochs without an error of their own need no number.
  const own = Array.from(diagonal, (d, i) => weights[i]! * Math.sqrt(d)).filter(effect => effect !== 0)
  return {
    epochs: Float64Array.from([...own, ...steps]),
    sources: factors.map(({ source, loading }) => ({ at: names.indexOf(source), effect: loading.reduce((sum, l, i) => sum + l * weights[i]!, 0) }))
  }
}

function linearSigmas(series: readonly MonteCarloSeries[]): Record<RateName, number> {
  const sigma = (name: RateName): number => {
    let variance = 0
    const bySource = new Map<string, number>()
    for (const { weights, covariance, perGt } of series) {
      variance += perGt[name] ** 2 * covarianceOfFunctionals({ ...covariance, factors: [] }, weights, weights)
      for (const { source, loading } of covariance.factors) {
        bySource.set(source, (bySource.get(source) ?? 0) + perGt[name] * loading.reduce((sum, l, i) => sum + l * weights[i]!, 0))
      }
    }
    for (const effect of bySource.values()) variance += effect ** 2
    return Math.sqrt(variance)
  }
  return { massGt: sigma('massGt'), chi1Mas: sigma('chi1Mas'), chi2Mas: sigma('chi2Mas'), lodMicroseconds: sigma('lodMicroseconds') }
}

function driftOf(series: readonly MonteCarloSeries[], chi1: Float64Array, chi2: Float64Array): MonteCarloResult['drift'] {
  const x = series.reduce((sum, s) => sum + s.rate * s.perGt.chi1Mas, 0)
  const y = series.reduce((sum, s) => sum + s.rate * s.perGt.chi2Mas, 0)
  const centre = x === 0 && y === 0 ? null : Math.atan2(y, x) / DEGREE
  const turn = chi1.map((a, m) => {
    const difference = Math.atan2(chi2[m]!, a) / DEGREE - (centre ?? 0)
    return difference - 360 * Math.round(difference / 360)
  })
  return { length: distribution(chi1.map((a, m) => Math.hypot(a, chi2[m]!))), directionDegEast: centre, direction: distribution(turn) }
}

/** Mean, standard deviation (n − 1) and quantiles (linear between members) of numbers; two at least. */
export function distribution(values: Float64Array): Distribution {
  const n = values.length
  let mean = 0
  for (const v of values) mean += v / n
  let squares = 0
  for (const v of values) squares += (v - mean) ** 2
  const sorted = values.slice().sort()
  const quantile = (p: number): number => {
    const place = p * (n - 1)
    const low = Math.floor(place)
    return sorted[low]! + (place - low) * ((sorted[low + 1] ?? sorted[low]!) - sorted[low]!)
  }
  return { mean, sigma: Math.sqrt(squares / (n - 1)), p2_5: quantile(0.025), p16: quantile(0.158655), p50: quantile(0.5), p84: quantile(0.841345), p97_5: quantile(0.975) }
}
