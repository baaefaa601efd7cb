import { addShared, loadingOf, sigmaOf, type Loading } from './errorLoadings.ts'
import { checkRequest } from './evaluateInput.ts'
import { fitRegion, regionTrend, totalTrend, type RegionWithResponse } from './evaluateTrend.ts'
import type { EvaluateAnswer, EvaluateQuantities, EvaluateRequest, EvaluateSigma } from './evaluateTypes.ts'
import { warningsOf } from './evaluateWarnings.ts'
import { poleDirectionDegEast, poleShiftMm } from './excitation.ts'
import type { EarthModel } from './earthModel.ts'
import { responseOf, type ResponsePerGt } from './response.ts'

/**
 * What masses in regions do to the day and the pole: the stateless question of the API.
 *
 * A mass gained is positive (Gt). χ in mas towards Greenwich and 90° E, ΔLOD in µs (positive: a longer day), shift of the
 * pole in mm, sea level in mm. Regions carry one mass each, or series on the same epochs; then quantities are arrays and
 * `trend` is per Julian year. Errors propagate linearly; a named shared source is fully correlated between regions.
 *
 * Throws InputError with the path of each fault, and ModeNotAvailableError for a mode whose fields the model lacks.
 */
export function evaluate(request: EvaluateRequest, model: EarthModel): EvaluateAnswer {
  const { settings, regions: checked, mjd } = checkRequest(request, model)
  const regions: RegionWithResponse[] = checked.map(region => ({ ...region, response: responseOf(region.contour, model, settings) }))
  const fitted = mjd ? regions.map((region, i) => fitRegion(region, mjd, i)) : []
  const single = !mjd
  const answer: EvaluateAnswer = {
    settings: { ...settings, engineVersion: model.engineVersion, oceanAreaM2: model.ocean.areaM2 },
    ...(mjd ? { epochs: request.regions[0]!.series!.epochs } : {}),
    warnings: warningsOf(request, settings, regions, fitted, model),
    regions: regions.map((region, i) => ({
      id: region.id,
      areaKm2: region.contour.areaM2 / 1e6,
      centroid: region.contour.centroid,
      ...quantitiesOf([region], single),
      ...(mjd ? { trend: regionTrend(fitted[i]!) } : {})
    })),
    total: { ...quantitiesOf(regions, single), ...(mjd ? { trend: totalTrend(fitted, mjd) } : {}) }
  }
  return answer
}

/** Sums over the regions for each epoch; with single masses there is one, and its figures stand alone. */
function quantitiesOf(regions: readonly RegionWithResponse[], single: boolean): EvaluateQuantities {
  const n = regions[0]!.massGt.length
  const summed = (factor: (response: ResponsePerGt) => number): Float64Array => {
    const out = new Float64Array(n)
    for (const { massGt, response } of regions) {
      const f = factor(response)
      for (let t = 0; t < n; t++) out[t] = out[t]! + f * massGt[t]!
    }
    return out
  }
  const figure = <T>(column: ArrayLike<T>): T | T[] => single ? column[0]! : Array.from(column)
  const chi1 = summed(r => r.chi1Mas)
  const chi2 = summed(r => r.chi2Mas)
  return {
    massGt: figure(summed(() => 1)),
    chi1Mas: figure(chi1),
    chi2Mas: figure(chi2),
    chi3: figure(summed(r => r.chi3)),
    lodMicroseconds: figure(summed(r => r.lodMicroseconds)),
    poleShiftMm: figure(chi1.map((c, t) => poleShiftMm(c, chi2[t]!))),
    poleDirectionDegEast: figure(Array.from(chi1, (c, t) => poleDirectionDegEast(c, chi2[t]!))),
    barystaticMm: figure(summed(r => r.barystaticMm)),
    deltaJ2: figure(summed(r => r.deltaJ2)),
    sigma: sigmasOf(regions, chi1, chi2, single)
  }
}

function sigmasOf(regions: readonly RegionWithResponse[], chi1: Float64Array, chi2: Float64Array, single: boolean): EvaluateSigma {
  const rows = Array.from(chi1, (_, t) => {
    const loadings: Loading[] = []
    const bySource = new Map<string, Loading>()
    for (const { sigmaGt, shared, response } of regions) {
      if (sigmaGt) loadings.push(loadingOf(response, sigmaGt[t]!))
      // With a series, shared errors are rates: they belong to the trend alone.
      if (single) for (const { source, sigmaGt: s } of shared) addShared(bySource, source, loadingOf(response, s))
    }
    return sigmaOf([...loadings, ...bySource.values()], chi1[t]!, chi2[t]!)
  })
  const figure = (key: keyof EvaluateSigma): number | number[] => single ? rows[0]![key] : rows.map(row => row[key])
  return {
    massGt: figure('massGt'),
    chi1Mas: figure('chi1Mas'),
    chi2Mas: figure('chi2Mas'),
    lodMicroseconds: figure('lodMicroseconds'),
    poleShiftMm: figure('poleShiftMm'),
    barystaticMm: figure('barystaticMm')
  }
}
