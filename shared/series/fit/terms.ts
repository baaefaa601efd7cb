import { JULIAN_YEAR_DAYS } from '../../earth/time/epochs.ts'
import type { NoiseModelName } from '../../earth/time/noiseModels.ts'
import type { TrendFit } from '../../earth/time/trend.ts'
import type { TrendNoiseReport } from '../../earth/time/trendNoise.ts'
import type { FitSettings } from './fitSeries.ts'

export type FitTermKind = 'trend' | 'acceleration' | 'annual' | 'semiannual' | 'alias' | 'step'

/** A term of the fit under each noise model: its value, for a periodic one its amplitude. */
export interface FitTerm {
  kind: FitTermKind
  unit: 'Gt/yr' | 'Gt/yr²' | 'Gt'
  /** MJD of a step, days of an alias period; null otherwise. */
  at: number | null
  /** Of a season: days after 1 January at which it is highest (J2000.0 counts as 1 January 2000, 12 h); null otherwise. */
  highestDay: number | null
  under: { model: NoiseModelName | 'inflated', value: number, sigma: number }[]
}

/** What was fitted, in order: the white fit inflated for lag-one correlation where no other noise could be told, else each model. */
export function termsOf(fit: TrendFit, noise: TrendNoiseReport, { aliasDays, stepsMjd }: FitSettings): FitTerm[] {
  const fits: { model: FitTerm['under'][number]['model'], coefficients: ArrayLike<number>, sigmas: ArrayLike<number> }[] = noise.models.map(({ model, coefficients, sigmas }) => ({ model, coefficients, sigmas }))
  if (fits.length === 1) fits.push({ model: 'inflated', coefficients: fit.coefficients, sigmas: fit.sigmaCoefficients })
  const single = (kind: FitTermKind, unit: FitTerm['unit'], name: string, at: number | null = null): FitTerm[] => {
    const j = fit.names.indexOf(name)
    return j < 0 ? [] : [{ kind, unit, at, highestDay: null, under: fits.map(({ model, coefficients, sigmas }) => ({ model, value: coefficients[j]!, sigma: sigmas[j]! })) }]
  }
  const periodic = (kind: FitTermKind, name: string, cyclesPerYear: number, at: number | null = null): FitTerm[] => {
    const j = fit.names.indexOf(`${name} cos`)
    if (j < 0) return []
    const turns = Math.atan2(fit.coefficients[j + 1]!, fit.coefficients[j]!) / (2 * Math.PI)
    const period = JULIAN_YEAR_DAYS / cyclesPerYear
    return [{
      kind, unit: 'Gt', at,
      highestDay: kind === 'alias' ? null : ((turns * period + 0.5) % period + period) % period,
      under: fits.map(({ model, coefficients, sigmas }) => ({ model, ...amplitudeOf([coefficients[j]!, coefficients[j + 1]!], [sigmas[j]!, sigmas[j + 1]!]) }))
    }]
  }
  return [
    ...single('trend', 'Gt/yr', 'trend'),
    ...single('acceleration', 'Gt/yr²', 'acceleration'),
    ...periodic('annual', 'annual', 1),
    ...periodic('semiannual', 'semiannual', 2),
    ...(aliasDays === null ? [] : periodic('alias', `${aliasDays} d`, JULIAN_YEAR_DAYS / aliasDays, aliasDays)),
    ...stepsMjd.flatMap(step => single('step', 'Gt', `step ${step}`, step))
  ]
}

/** Amplitude of a cosine and a sine with its one-sigma to first order, the two taken as independent. */
function amplitudeOf([c, s]: [number, number], [sigmaC, sigmaS]: [number, number]): { value: number, sigma: number } {
  const value = Math.hypot(c, s)
  return { value, sigma: value > 0 ? Math.hypot(c * sigmaC, s * sigmaS) / value : Math.max(sigmaC, sigmaS) }
}
