import type { EvaluateRequest, EvaluateWarning } from './evaluateTypes.ts'
import type { PhysicsSettings } from '../types/domain.ts'
import { formatArea } from '../format/quantities.ts'
import { overlapsOf } from '../geo/overlap.ts'
import type { EarthModel } from './earthModel.ts'
import type { FittedRegion, RegionWithResponse } from './evaluateTrend.ts'
import { contourMeans } from './gridStack.ts'

/** Part of an outline that may be sea before it is said: crude outlines of coasts hold a few per cent. */
export const SEA_INSIDE_LIMIT = 0.05

/** Everything that a reader must know before using the sum: overlaps, a mode without mass conservation, sea inside, short series. */
export function warningsOf(request: EvaluateRequest, settings: PhysicsSettings, regions: readonly RegionWithResponse[], fitted: readonly FittedRegion[], model: EarthModel): EvaluateWarning[] {
  const warnings: EvaluateWarning[] = []
  if (settings.ocean === 'none') {
    warnings.push({
      code: 'mass-not-conserved',
      message: 'The ocean mode "none" does not conserve mass: the water comes from nowhere. It is a diagnostic, not a prediction.',
      regions: regions.map(({ id }) => id)
    })
  }
  for (const { a, b, areaKm2 } of overlapsOf(request.regions)) {
    warnings.push({
      code: 'overlap',
      message: `The outlines of ${a} and ${b} share ${formatArea(areaKm2)}: mass there may be counted twice in the total.`,
      regions: [a, b]
    })
  }
  if (model.oceanField) {
    for (const { id, contour } of regions) {
      const sea = contourMeans(model.oceanField, contour)[0]!
      if (sea <= SEA_INSIDE_LIMIT) continue
      warnings.push({
        code: 'ocean-inside',
        message: `${Math.round(100 * sea)} % of the outline of ${id} is sea in the ocean function: mass spread there is a load on the sea floor, not on land.`,
        regions: [id]
      })
    }
  }
  const byCode = new Map<string, EvaluateWarning>()
  for (const { id, fit } of fitted) {
    for (const { code, message } of fit.warnings) {
      const known = byCode.get(code)
      if (known) known.regions.push(id)
      else byCode.set(code, { code, message, regions: [id] })
    }
  }
  return [...warnings, ...byCode.values()]
}
