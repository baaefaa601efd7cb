import type { CoefficientSet } from '../earth/coefficientSets.ts'
import { coefficientsOf } from '../earth/response.ts'
import { EARTH_RADIUS_M, LOAD_FACTOR, WGS84_A } from '../earth/constants.ts'
import { excitationOf } from '../earth/excitation.ts'
import { inertiaFromRigidStokes } from '../earth/inertia.ts'
import { formatNumber } from '../format/numbers.ts'
import type { PhysicsSettings } from '../types/domain.ts'
import { InputError } from '../types/issue.ts'
import type { ObservedSeries, RunWarning } from '../types/run.ts'
import { dealiasingStates, meanPoles, permanentTides, poleTideStates } from './gravityTypes.ts'
import type { GravityFields, GravitySeries } from './gravityTypes.ts'

/** Excitation that a series of gravity coefficients stands for: χ in mas, ΔLOD in ms, each with one-sigma; NaN where missing. */
export interface GravityExcitation {
  mjd: Float64Array
  chi1Mas: Float64Array
  chi2Mas: Float64Array
  lodMs: Float64Array
  sigmaChi1Mas: Float64Array
  sigmaChi2Mas: Float64Array
  sigmaLodMs: Float64Array
  /** What was done, in sentences. */
  stated: string[]
  warnings: RunWarning[]
}

/** mas and ms per unit of ΔC₂₁, ΔS₂₁ and ΔC₂₀. */
export interface GravityFactors { chi1PerC21: number, chi2PerS21: number, lodMsPerC20: number, netPole: number, netAxial: number }

/**
 * Factors from coefficients to excitation. The Earth's yielding is inside observed coefficients, so ΔI of the load is ΔI(observed)
 * over 1 + k′₂; then the usual coefficients. Net: a_xy/0.684 for the pole, 1.608 with Gross (2007); a_z/(1 + k′₂) for the day, 1 + k′₂
 * as chosen. Reference radius squared. Gross (2007)..
 */
export function gravityFactors(fields: Pick<GravityFields, 'radiusM' | 'axialLoadFactor'>, set: CoefficientSet): GravityFactors {
  const radius = (fields.radiusM / EARTH_RADIUS_M) ** 2
  const pole = excitationOf(inertiaFromRigidStokes({ c20: 0, c21: 1, s21: 1 }), set)
  const axial = excitationOf(inertiaFromRigidStokes({ c20: 1, c21: 0, s21: 0 }), set)
  return {
    chi1PerC21: pole.chi1Mas * radius / LOAD_FACTOR,
    chi2PerS21: pole.chi2Mas * radius / LOAD_FACTOR,
    lodMsPerC20: axial.lodMicroseconds * 1e-3 * radius / fields.axialLoadFactor,
    netPole: set.aXY / LOAD_FACTOR,
    netAxial: set.aZ / fields.axialLoadFactor
  }
}

/**
 * Excitation of the load behind observed changes of C₂₀, C₂₁ and S₂₁, without the motion of fluids, with the settings' coefficients.
 *
 * @throws InputError for fields that do not hold
 */
export function excitationFromGravity(series: GravitySeries, fields: GravityFields, settings: PhysicsSettings): GravityExcitation {
  checkFields(fields)
  const set = coefficientsOf(settings)
  const factors = gravityFactors(fields, set)
  const times = (column: Float64Array, factor: number): Float64Array => column.map(v => v * factor)
  return {
    mjd: series.mjd,
    chi1Mas: times(series.c21, factors.chi1PerC21),
    chi2Mas: times(series.s21, factors.chi2PerS21),
    lodMs: times(series.c20, factors.lodMsPerC20),
    sigmaChi1Mas: times(series.sigmaC21, Math.abs(factors.chi1PerC21)),
    sigmaChi2Mas: times(series.sigmaS21, Math.abs(factors.chi2PerS21)),
    sigmaLodMs: times(series.sigmaC20, Math.abs(factors.lodMsPerC20)),
    stated: [
      `The Earth’s yielding was taken out of the coefficients: 1 + k′₂ = ${LOAD_FACTOR} for the pole and ${fields.axialLoadFactor} for the day.`,
      `Net factors: ${formatNumber(factors.netPole, 4)} over C − A for the pole, ${formatNumber(factors.netAxial, 4)} over ${settings.core === 'coupled' ? 'the whole Earth’s C' : 'the mantle’s C'} for the day.`,
      `Reference radius ${formatNumber(fields.radiusM, 1)} m.`,
      'Winds and currents leave no mark in gravity: this is the mass term alone.',
      'What moves inside the Earth, as in isostatic adjustment, is no load: divided by 1 + k′₂ like one, it comes out larger than it is.'
    ],
    warnings: gravityWarnings(fields)
  }
}

/** The same as an observed series without a pole, marked as gravity, so that no tide of rotation is taken off it. */
export function observedFromGravity(excitation: GravityExcitation, series: GravitySeries): ObservedSeries {
  const missing = excitation.mjd.map(() => Number.NaN)
  return {
    format: 'csv', from: 'gravity', mjd: excitation.mjd, xMas: missing, yMas: missing, sigmaXMas: missing, sigmaYMas: missing,
    lodMs: excitation.lodMs, sigmaLodMs: excitation.sigmaLodMs, chi1Mas: excitation.chi1Mas, chi2Mas: excitation.chi2Mas,
    predicted: new Uint8Array(excitation.mjd.length), emptyRows: series.emptyRows, rowsRead: series.rowsRead
  }
}

/** What the answers mean for a comparison. */
export function gravityWarnings(fields: GravityFields): RunWarning[] {
  const warn = (code: string, message: string): RunWarning => ({ code, message, regions: [] })
  const list: RunWarning[] = []
  if (fields.solidPoleTide === 'in') list.push(warn('solid-pole-tide', 'The pole tide of the solid Earth is still in: C₂₁ and S₂₁ follow the pole itself, and its Chandler wobble, not only the load.'))
  if (fields.oceanPoleTide === 'in') list.push(warn('ocean-pole-tide', 'The pole tide of the ocean is still in, and the factor 1.608 holds it too: it counts twice.'))
  if (fields.solidPoleTide === 'unknown' || fields.oceanPoleTide === 'unknown') list.push(warn('pole-tide-unknown', 'Whether the pole tide was removed is not known: part of C₂₁ and S₂₁ may be the pole itself.'))
  if (fields.meanPole !== 'secular-2018' && fields.solidPoleTide !== 'in') list.push(warn('mean-pole', fields.meanPole === 'unknown'
    ? 'The mean pole of the pole-tide model is not known: the trends of C₂₁ and S₂₁ may be off by some 10⁻¹² a year.'
    : 'The pole tide was not taken off about the secular pole of the 2018 Conventions: the trends of C₂₁ and S₂₁ hold the difference of the two mean poles.'))
  if (fields.permanentTide === 'unknown') list.push(warn('permanent-tide', 'The permanent-tide convention is not known: a mix of two makes a step of 4 × 10⁻⁹ in C₂₀.'))
  if (fields.dealiasing === 'not-restored') list.push(warn('dealiasing-out', 'Atmosphere and ocean of the dealiasing product are not inside: do not take them off again.'))
  if (fields.dealiasing === 'unknown') list.push(warn('dealiasing-unknown', 'Whether atmosphere and ocean were put back is not known: the comparison with rotation is off by them, or not.'))
  return list
}

function checkFields(fields: GravityFields): void {
  const issues = [
    ...unknown('solidPoleTide', fields.solidPoleTide, poleTideStates), ...unknown('oceanPoleTide', fields.oceanPoleTide, poleTideStates),
    ...unknown('permanentTide', fields.permanentTide, permanentTides), ...unknown('meanPole', fields.meanPole, meanPoles),
    ...unknown('dealiasing', fields.dealiasing, dealiasingStates), ...unknown('axialLoadFactor', fields.axialLoadFactor, [0.695, 0.684]),
    ...(fields.radiusM >= 6.35e6 && fields.radiusM <= 6.4e6 ? [] : [{ path: 'radiusM', code: 'out-of-range', message: `The reference radius must be in metres, like ${WGS84_A}.` }])
  ]
  if (issues.length > 0) throw new InputError('Some answers about the gravity coefficients do not hold', issues)
}

function unknown<T>(path: string, value: T, known: readonly T[]): { path: string, code: string, message: string }[] {
  return known.includes(value) ? [] : [{ path, code: 'unknown-setting', message: `“${path}” must be one of ${known.join(', ')}.` }]
}
