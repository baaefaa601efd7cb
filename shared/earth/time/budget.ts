import type { Measured } from '../../types/domain.ts'
import type { BackgroundRow, BudgetRow } from '../../types/run.ts'
import { DEGREE, POLE_MM_PER_MAS } from '../constants.ts'
import { poleDirectionDegEast } from '../excitation.ts'
import type { ResponsePerGt } from '../response.ts'
import { covarianceOfFunctionals, varianceOfFunctional } from './covariance.ts'
import type { Covariance } from './covariance.ts'

/** ms per century in one µs per year. */
export const MS_PER_CENTURY = 0.1

/** Mass rates of n regions, Gt per year, with their covariance as it is quoted and under white noise alone. */
export interface MassRates {
  value: ArrayLike<number>
  quoted: Covariance
  white: Covariance
}

/** What one gigatonne of a series does, and how much of it the row counts: less than 1 where water is kept on land. */
export interface EffectPerGt extends ResponsePerGt { massGt: number }

/** A linear functional of the mass rates with both errors. */
export function functional(rates: MassRates, weights: ArrayLike<number>): Measured {
  return {
    value: dot(weights, rates.value),
    sigmaWhite: Math.sqrt(varianceOfFunctional(rates.white, weights)),
    sigma: Math.sqrt(varianceOfFunctional(rates.quoted, weights))
  }
}

interface DriftCovariance { c11: number, c12: number, c22: number }

/**
 * Budget row of the sum of n regions: every quantity is a linear functional of the mass rates, its weights the responses per
 * gigatonne gained. Variances are exact: a region's χ₁ and χ₂ are fully correlated, a shared source adds with its sign.
 */
export function budgetRow(key: string, name: string, rates: MassRates, responses: readonly EffectPerGt[]): BudgetRow {
  const weightsOf = (pick: (response: EffectPerGt) => number): Float64Array => Float64Array.from(responses, pick)
  const measure = (weights: ArrayLike<number>): Measured => functional(rates, weights)
  const chi1 = weightsOf(r => r.chi1Mas)
  const chi2 = weightsOf(r => r.chi2Mas)
  const drift = (covariance: Covariance): DriftCovariance => ({
    c11: varianceOfFunctional(covariance, chi1),
    c12: covarianceOfFunctionals(covariance, chi1, chi2),
    c22: varianceOfFunctional(covariance, chi2)
  })
  const lod = measure(weightsOf(r => r.lodMicroseconds))
  const chi1Rate = measure(chi1)
  const chi2Rate = measure(chi2)
  return {
    key,
    name,
    massGtPerYear: measure(weightsOf(r => r.massGt)),
    lodMicrosecondsPerYear: lod,
    lodMsPerCentury: scaled(lod, MS_PER_CENTURY),
    chi1MasPerYear: chi1Rate,
    chi2MasPerYear: chi2Rate,
    ...driftOf(chi1Rate.value, chi2Rate.value, drift(rates.quoted), drift(rates.white)),
    barystaticMmPerYear: measure(weightsOf(r => r.barystaticMm)),
    deltaJ2PerYear: measure(weightsOf(r => r.deltaJ2)),
    shareOfModelLod: null,
    shareOfModelPole: null
  }
}

/** Budget row of a rate that was entered; its χ₁ and χ₂ are taken as independent of each other. */
export function enteredRow(row: BackgroundRow): BudgetRow {
  const { lodMsPerCentury, chi1MasPerYear, chi2MasPerYear } = row
  const chi1 = entered(chi1MasPerYear)
  const chi2 = entered(chi2MasPerYear)
  const lod = entered(lodMsPerCentury)
  const covariance = chi1 && chi2 ? { c11: chi1.sigma ** 2, c12: 0, c22: chi2.sigma ** 2 } : null
  return {
    ...emptyRow(row.key, row.name),
    lodMicrosecondsPerYear: lod && scaled(lod, 1 / MS_PER_CENTURY),
    lodMsPerCentury: lod,
    chi1MasPerYear: chi1,
    chi2MasPerYear: chi2,
    ...(covariance ? driftOf(chi1!.value, chi2!.value, covariance, covariance) : {})
  }
}

/** A row that nothing is known of. */
export function emptyRow(key: string, name: string): BudgetRow {
  return {
    key,
    name,
    massGtPerYear: null,
    lodMicrosecondsPerYear: null,
    lodMsPerCentury: null,
    chi1MasPerYear: null,
    chi2MasPerYear: null,
    driftCovariance: null,
    driftMasPerYear: null,
    driftCmPerYear: null,
    directionDegEast: null,
    barystaticMmPerYear: null,
    deltaJ2PerYear: null,
    shareOfModelLod: null,
    shareOfModelPole: null
  }
}

/** Shares of one region in the total: ratio of the rates of the day; projection of the drift on the total's direction. */
export function sharesOf(row: BudgetRow, total: BudgetRow): Pick<BudgetRow, 'shareOfModelLod' | 'shareOfModelPole'> {
  const lod = total.lodMicrosecondsPerYear!.value
  const [x, y] = [total.chi1MasPerYear!.value, total.chi2MasPerYear!.value]
  const along = row.chi1MasPerYear!.value * x + row.chi2MasPerYear!.value * y
  const square = x * x + y * y
  return {
    shareOfModelLod: lod === 0 ? null : row.lodMicrosecondsPerYear!.value / lod,
    shareOfModelPole: square === 0 ? null : along / square
  }
}

type DriftPart = Pick<BudgetRow, 'driftCovariance' | 'driftMasPerYear' | 'driftCmPerYear' | 'directionDegEast'>

/**
 * Length and direction of a drift vector. The error of the length is the one along it, the error of the direction the one
 * across it over the length. It is left out (null) where the drift is shorter than twice the longest axis of its one-sigma
 * ellipse: then direction is not a small error about a value, and for one region it may be the opposite one.
 */
export function driftOf(chi1: number, chi2: number, quoted: DriftCovariance, white: DriftCovariance): DriftPart {
  const length = Math.hypot(chi1, chi2)
  const longest = Math.sqrt(largestEigenvalue(quoted))
  const u: [number, number] = length > 0 ? [chi1 / length, chi2 / length] : [1, 0]
  const along = (c: DriftCovariance): number => Math.sqrt(Math.max(0, quadratic(c, u)))
  const drift: Measured = length > 0
    ? { value: length, sigmaWhite: along(white), sigma: along(quoted) }
    : { value: 0, sigmaWhite: Math.sqrt(largestEigenvalue(white)), sigma: longest }
  const direction = poleDirectionDegEast(chi1, chi2)
  const across = Math.sqrt(Math.max(0, quadratic(quoted, [-u[1], u[0]])))
  return {
    driftCovariance: quoted,
    driftMasPerYear: drift,
    driftCmPerYear: scaled(drift, POLE_MM_PER_MAS / 10),
    directionDegEast: direction === null ? null : { value: direction, sigma: length >= 2 * longest ? across / length / DEGREE : null }
  }
}

function quadratic({ c11, c12, c22 }: DriftCovariance, [x, y]: readonly [number, number]): number {
  return c11 * x * x + 2 * c12 * x * y + c22 * y * y
}

function largestEigenvalue({ c11, c12, c22 }: DriftCovariance): number {
  return (c11 + c22) / 2 + Math.hypot((c11 - c22) / 2, c12)
}

function scaled(measured: Measured, factor: number): Measured {
  return { value: measured.value * factor, sigmaWhite: measured.sigmaWhite * factor, sigma: measured.sigma * factor }
}

function entered(rate: { value: number, sigma: number } | null): Measured | null {
  return rate && { value: rate.value, sigmaWhite: rate.sigma, sigma: rate.sigma }
}

function dot(x: ArrayLike<number>, y: ArrayLike<number>): number {
  let sum = 0
  for (let i = 0; i < x.length; i++) sum += x[i]! * y[i]!
  return sum
}
