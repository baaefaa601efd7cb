import { withPattern, type CellPattern } from '#shared/earth/cellPattern'
import { contourOf } from '#shared/earth/contour'
import { derivedOf } from '#shared/earth/derived'
import { responseOf } from '#shared/earth/response'
import { fitTrend } from '#shared/earth/time/trend'
import { POLE_MM_PER_MAS } from '#shared/earth/constants'
import type { Measured, OceanMode, Outline, PhysicsSettings } from '#shared/types/domain'
import type { MassSeries } from '#shared/types/run'
import type { Context } from './context'

/** What lists and region pages are computed with. A scenario chooses its own. */
export function defaultSettings(context: Context): PhysicsSettings {
  return { ocean: context.earth.defaultOcean, coefficients: 'gross-2007', core: 'decoupled' }
}

export function perGigatonne(context: Context, geometry: Outline, settings: PhysicsSettings, pattern: CellPattern | null = null) {
  const { chi1Mas, chi2Mas, chi3, lodMicroseconds, barystaticMm, deltaJ2 } = responseOf(withPattern(contourOf(geometry), pattern), context.earth, settings)
  return { chi1Mas, chi2Mas, chi3, lodMicroseconds, barystaticMm, deltaJ2 }
}
export type PerGt = ReturnType<typeof perGigatonne>

/** Effect of a gigatonne with what derives from it, in each fingerprint mode; in the default mode where the Earth model holds no fields. */
export function effectsByOcean(context: Context, geometry: Outline, pattern: CellPattern | null = null) {
  const contour = withPattern(contourOf(geometry), pattern)
  const modes: OceanMode[] = context.earth.fields ? ['fingerprint', 'fingerprint-rotation'] : [context.earth.defaultOcean]
  return modes.map((ocean) => {
    const { chi1Mas, chi2Mas, chi3, lodMicroseconds, barystaticMm, deltaJ2 } = responseOf(contour, context.earth, { ...defaultSettings(context), ocean })
    const { deltaC21, deltaS21, geocentreMm } = derivedOf(contour, context.earth, ocean)
    return { ocean, chi1Mas, chi2Mas, chi3, lodMicroseconds, barystaticMm, deltaJ2, deltaC21, deltaS21, geocentreMm }
  })
}

const times = (m: Measured, factor: number): Measured => ({ value: m.value * factor, sigmaWhite: m.sigmaWhite * Math.abs(factor), sigma: m.sigma * Math.abs(factor) })

/** Trend of a series' mass and of what it does, systematic rates inside `sigma`; null for fewer than three epochs. */
export function trendOf(series: MassSeries, perGt: PerGt) {
  let fit
  try {
    fit = fitTrend({ mjd: series.mjd, value: series.massGt, sigma: series.sigmaGt })
  }
  catch (error) {
    if (error instanceof RangeError) return null
    throw error
  }
  const systematic = series.sharedRates.reduce((sum, { sigmaGtPerYear }) => sum + sigmaGtPerYear ** 2, 0)
  const mass: Measured = { value: fit.value, sigmaWhite: fit.sigmaWhite, sigma: Math.sqrt(fit.sigma ** 2 + systematic) }
  const pole = Math.hypot(perGt.chi1Mas, perGt.chi2Mas)
  const sign = Math.sign(mass.value)
  const direction = pole === 0 || sign === 0 ? null : Math.atan2(sign * perGt.chi2Mas, sign * perGt.chi1Mas) * 180 / Math.PI
  const drift = times(mass, pole * POLE_MM_PER_MAS / 10)
  return {
    massGtPerYear: mass,
    lodMicrosecondsPerYear: times(mass, perGt.lodMicroseconds),
    driftCmPerYear: { ...drift, value: Math.abs(drift.value) },
    directionDegEast: direction,
    fromMjd: series.mjd[0]!, toMjd: series.mjd.at(-1)!,
    warnings: fit.warnings,
    /** The parts of the mass trend's error: of this series alone, and shared with others by name. */
    ownSigma: fit.sigma, sharedRates: series.sharedRates,
  }
}

/** The trend as the API gives it. */
export function trendView(trend: ReturnType<typeof trendOf>) {
  if (!trend) return null
  const { massGtPerYear, lodMicrosecondsPerYear, driftCmPerYear, directionDegEast, fromMjd, toMjd } = trend
  return { massGtPerYear, lodMicrosecondsPerYear, driftCmPerYear, directionDegEast, fromMjd, toMjd }
}
