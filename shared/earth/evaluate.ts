import { addShared, loadingOf, sigmaOf, type Loading, type QuantitySigma } from './errorLoadings.ts'
import { checkRequest } from './evaluateInput.ts'
import { fitRegion, regionTrend, totalTrend, type RegionWithResponse } from './evaluateTrend.ts'
import type { EvaluateAnswer, EvaluateQuantities, EvaluateRequest, EvaluateSigma } from './evaluateTypes.ts'
import { warningsOf } from './evaluateWarnings.ts'
import { poleDirectionDegEast, poleShiftMm } from './excitation.ts'
import type { EarthModel } from './earthModel.ts'
import { responseOf } from './response.ts'

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

interface Row {
  massGt: number
  chi1Mas: number
  chi2Mas: number
  chi3: number
  lodMicroseconds: number
  poleShiftMm: number
  poleDirectionDegEast: number | null
  barystaticMm: number
  deltaJ2: number
  sigma: QuantitySigma
}

/** Sums over the regions: one row for single masses, else one for each epoch. */
function quantitiesOf(regions: readonly RegionWithResponse[], single: boolean): EvaluateQuantities {
  const rows = Array.from({ length: regions[0]!.massGt.length }, (_, t) => rowOf(regions, t, single))
  const pick = <K extends keyof Row>(key: K): Row[K] | Row[K][] => single ? rows[0]![key] : rows.map(row => row[key])
  const pickSigma = (key: keyof EvaluateSigma): number | number[] => single ? rows[0]!.sigma[key] : rows.map(row => row.sigma[key])
  return {
    massGt: pick('massGt'),
    chi1Mas: pick('chi1Mas'),
    chi2Mas: pick('chi2Mas'),
    chi3: pick('chi3'),
    lodMicroseconds: pick('lodMicroseconds'),
    poleShiftMm: pick('poleShiftMm'),
    poleDirectionDegEast: pick('poleDirectionDegEast'),
    barystaticMm: pick('barystaticMm'),
    deltaJ2: pick('deltaJ2'),
    sigma: {
      massGt: pickSigma('massGt'),
      chi1Mas: pickSigma('chi1Mas'),
      chi2Mas: pickSigma('chi2Mas'),
      lodMicroseconds: pickSigma('lodMicroseconds'),
      poleShiftMm: pickSigma('poleShiftMm'),
      barystaticMm: pickSigma('barystaticMm')
    }
  }
}

function rowOf(regions: readonly RegionWithResponse[], t: number, single: boolean): Row {
  const row = { massGt: 0, chi1Mas: 0, chi2Mas: 0, chi3: 0, lodMicroseconds: 0, barystaticMm: 0, deltaJ2: 0 }
  const loadings: Loading[] = []
  const bySource = new Map<string, Loading>()
  for (const { massGt, sigmaGt, shared, response } of regions) {
    const mass = massGt[t]!
    row.massGt += mass
    row.chi1Mas += response.chi1Mas * mass
    row.chi2Mas += response.chi2Mas * mass
    row.chi3 += response.chi3 * mass
    row.lodMicroseconds += response.lodMicroseconds * mass
    row.barystaticMm += response.barystaticMm * mass
    row.deltaJ2 += response.deltaJ2 * mass
    if (sigmaGt) loadings.push(loadingOf(response, sigmaGt[t]!))
    // With a series, shared errors are rates: they belong to the trend alone.
    if (single) for (const { source, sigmaGt: s } of shared) addShared(bySource, source, loadingOf(response, s))
  }
  return {
    ...row,
    poleShiftMm: poleShiftMm(row.chi1Mas, row.chi2Mas),
    poleDirectionDegEast: poleDirectionDegEast(row.chi1Mas, row.chi2Mas),
    sigma: sigmaOf([...loadings, ...bySource.values()], row.chi1Mas, row.chi2Mas)
  }
}
