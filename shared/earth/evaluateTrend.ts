import type { Measured } from '../types/domain.ts'
import { InputError } from '../types/issue.ts'
import { DEGREE, POLE_MM_PER_MAS } from './constants.ts'
import { addShared, directionSigmaDeg, loadingOf, sigmaOf, type Loading } from './errorLoadings.ts'
import type { EvaluateTrend } from './evaluateTypes.ts'
import type { CheckedRegion } from './evaluateInput.ts'
import { poleDirectionDegEast, poleShiftMm } from './excitation.ts'
import type { ResponsePerGt } from './response.ts'
import { fitTrend, type TrendFit } from './time/trend.ts'

export interface RegionWithResponse extends CheckedRegion { response: ResponsePerGt }
export interface FittedRegion extends RegionWithResponse { fit: TrendFit }

/** Fits a region's mass. Throws InputError where the fit cannot be made. */
export function fitRegion(region: RegionWithResponse, mjd: Float64Array, index: number): FittedRegion {
  return { ...region, fit: fit(mjd, region.massGt, weights(region.sigmaGt), `regions/${index}/series`) }
}

/** Trend of one region: every quantity is the mass times a number, so one fit gives them all. */
export function regionTrend({ response, shared, fit }: FittedRegion): EvaluateTrend {
  const value = fit.value
  const sharedLoadings = shared.map(({ sigmaGt }) => loadingOf(response, sigmaGt))
  const white = sigmaOf([loadingOf(response, fit.sigmaWhite)], response.chi1Mas * value, response.chi2Mas * value)
  const total = sigmaOf([loadingOf(response, fit.sigma), ...sharedLoadings], response.chi1Mas * value, response.chi2Mas * value)
  const measured = (perGt: number, key: keyof Loading): Measured => ({ value: perGt * value, sigmaWhite: white[key], sigma: total[key] })
  const chi1 = response.chi1Mas * value
  const chi2 = response.chi2Mas * value
  const direction = poleDirectionDegEast(chi1, chi2)
  return {
    massGt: measured(1, 'massGt'),
    chi1Mas: measured(response.chi1Mas, 'chi1Mas'),
    chi2Mas: measured(response.chi2Mas, 'chi2Mas'),
    lodMicroseconds: measured(response.lodMicroseconds, 'lodMicroseconds'),
    barystaticMm: measured(response.barystaticMm, 'barystaticMm'),
    poleShiftMm: { value: poleShiftMm(chi1, chi2), sigmaWhite: white.poleShiftMm, sigma: total.poleShiftMm },
    poleDirectionDegEast: direction === null ? null : { value: direction, sigmaWhite: 0, sigma: 0 }
  }
}

/**
 * Trend of the sum. Values are the sums of the regions' trends; white and quoted errors come from a fit to the summed series of
 * each quantity, so that residuals common to several regions count as they are; shared rates add linearly over regions.
 */
export function totalTrend(regions: readonly FittedRegion[], mjd: Float64Array): EvaluateTrend {
  if (regions.length === 1) return regionTrend(regions[0]!)
  const bySource = new Map<string, Loading>()
  for (const { shared, response } of regions) {
    for (const { source, sigmaGt } of shared) addShared(bySource, source, loadingOf(response, sigmaGt))
  }
  const sources = [...bySource.values()]
  const sum = (factor: (r: ResponsePerGt) => number): number => regions.reduce((total, { response, fit }) => total + factor(response) * fit.value, 0)
  const chi1 = sum(r => r.chi1Mas)
  const chi2 = sum(r => r.chi2Mas)
  const sharedSigma = sigmaOf(sources, chi1, chi2)
  const measured = (factor: (r: ResponsePerGt) => number, shared: number): Measured => {
    const { sigmaWhite, sigma } = summedFit(regions, mjd, factor)
    return { value: sum(factor), sigmaWhite, sigma: Math.hypot(sigma, shared) }
  }
  const direction = poleDirectionDegEast(chi1, chi2)
  const length = Math.hypot(chi1, chi2)
  const [u1, u2] = length > 0 ? [chi1 / length, chi2 / length] : [1, 0]
  const along = summedFit(regions, mjd, r => u1 * r.chi1Mas + u2 * r.chi2Mas)
  const across = summedFit(regions, mjd, r => u1 * r.chi2Mas - u2 * r.chi1Mas)
  return {
    massGt: measured(() => 1, sharedSigma.massGt),
    chi1Mas: measured(r => r.chi1Mas, sharedSigma.chi1Mas),
    chi2Mas: measured(r => r.chi2Mas, sharedSigma.chi2Mas),
    lodMicroseconds: measured(r => r.lodMicroseconds, sharedSigma.lodMicroseconds),
    barystaticMm: measured(r => r.barystaticMm, sharedSigma.barystaticMm),
    poleShiftMm: {
      value: poleShiftMm(chi1, chi2),
      sigmaWhite: along.sigmaWhite * POLE_MM_PER_MAS,
      sigma: Math.hypot(along.sigma * POLE_MM_PER_MAS, sharedSigma.poleShiftMm)
    },
    poleDirectionDegEast: direction === null
      ? null
      : {
          value: direction,
          sigmaWhite: across.sigmaWhite / length / DEGREE,
          sigma: Math.hypot(across.sigma / length / DEGREE, directionSigmaDeg(sources, chi1, chi2))
        }
  }
}

/** Fit to Σ factor × mass, weighted where every region has errors. */
function summedFit(regions: readonly FittedRegion[], mjd: Float64Array, factor: (r: ResponsePerGt) => number): { sigmaWhite: number, sigma: number } {
  const value = new Float64Array(mjd.length)
  const variance = new Float64Array(mjd.length)
  let weighted = true
  let largest = 0
  for (const { response, massGt, sigmaGt } of regions) {
    const f = factor(response)
    largest = Math.max(largest, Math.abs(f))
    const errors = weights(sigmaGt)
    if (!errors) weighted = false
    for (let t = 0; t < mjd.length; t++) {
      value[t] = value[t]! + f * massGt[t]!
      if (errors) variance[t] = variance[t]! + (f * errors[t]!) ** 2
    }
  }
  if (largest === 0) return { sigmaWhite: 0, sigma: 0 }
  return fit(mjd, value, weighted ? variance.map(Math.sqrt) : null, 'regions')
}

function weights(sigmaGt: Float64Array | null): Float64Array | null {
  return sigmaGt && sigmaGt.every(s => s > 0) ? sigmaGt : null
}

function fit(mjd: Float64Array, value: Float64Array, sigma: Float64Array | null, path: string): TrendFit {
  try {
    return fitTrend({ mjd, value, sigma })
  }
  catch (error) {
    if (!(error instanceof RangeError)) throw error
    throw new InputError('No trend can be fitted.', [{ path, code: 'no-trend', message: `No trend can be fitted: ${error.message}.` }])
  }
}
