import type { ObservedSeries } from '../../types/run.ts'
import { medianStep } from './monthlyMeans.ts'
import { excitationFromPole } from './polarMotion.ts'
import type { ChandlerSettings } from './polarMotion.ts'

export interface ObservedExcitation { mjd: Float64Array, chi1Mas: Float64Array, chi2Mas: Float64Array }

/** Steps of the pole beyond which the two-point filter no longer gives monthly excitation, days. */
export const COARSE_POLE_DAYS = 2.5

/**
 * Geodetic excitation of an observed series, mas: the file's own where it holds excitation, else from the pole by the two-point
 * filter, at the midpoints between epochs that follow each other. Null where the series has neither.
 */
export function excitationOfSeries(series: ObservedSeries, chandler: ChandlerSettings): ObservedExcitation | null {
  if (series.chi1Mas && series.chi2Mas) {
    return { mjd: series.mjd, chi1Mas: series.chi1Mas, chi2Mas: series.chi2Mas }
  }
  const observed = series.xMas.some((x, i) => !Number.isNaN(x) && !Number.isNaN(series.yMas[i]!))
  if (!observed || series.mjd.length < 2) return null
  const excitation = excitationFromPole(series.mjd, series.xMas, series.yMas, chandler, 1.5 * medianStep(series.mjd))
  return excitation.mjd.length > 0 ? excitation : null
}

/** The rows of a series that `keep` holds true for, all columns alike. */
export function rowsWhere<T extends ObservedSeries>(series: T, keep: (index: number) => boolean): T {
  const kept: number[] = []
  for (let i = 0; i < series.mjd.length; i++) if (keep(i)) kept.push(i)
  if (kept.length === series.mjd.length) return series
  const columns = Object.entries(series).flatMap(([name, column]): [string, Float64Array | Uint8Array][] =>
    column instanceof Float64Array
      ? [[name, Float64Array.from(kept, i => column[i]!)]]
      : column instanceof Uint8Array ? [[name, Uint8Array.from(kept, i => column[i]!)]] : [])
  return { ...series, ...Object.fromEntries(columns) }
}
