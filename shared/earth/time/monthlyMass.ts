import type { MassSeries } from '../../types/run.ts'
import { JULIAN_YEAR_DAYS, monthsBetween } from './epochs.ts'
import type { CalendarMonth } from './epochs.ts'
import { monthlyAnomalies, monthlyWeights } from './monthly.ts'
import { fitTrend } from './trend.ts'

/** Gaps in days that monthly values are interpolated across where nobody chose otherwise. */
export const DEFAULT_MAX_GAP_DAYS = 62

export interface MonthlyMass {
  /** The calendar months from the first epoch to the last. */
  months: CalendarMonth[]
  /** Mass less the mean of the months that have a value, Gt; null in a gap. */
  massGt: (number | null)[]
  /** One sigma, Gt: errors of the epochs, and named rates from the mean epoch on; null in a gap. */
  sigmaGt: (number | null)[]
}

/**
 * Monthly mass anomalies of one series over its whole length, by the rule of a run (`monthlyWeights`), Gt relative to its own mean.
 * A series without errors gets the scatter about its trend, 0 where it is too short for one. Epochs in increasing order, MJD.
 */
export function monthlyMass(series: MassSeries, maxGapDays = DEFAULT_MAX_GAP_DAYS): MonthlyMass {
  const { mjd, massGt, sigmaGt, sharedRates } = series
  if (mjd.length === 0) return { months: [], massGt: [], sigmaGt: [] }
  const months = monthsBetween(mjd[0]!, mjd.at(-1)!)
  const sigma = sigmaGt ?? scatter(series)
  const { value, variance, meanMjd } = monthlyAnomalies(monthlyWeights(mjd, months, maxGapDays), months, massGt, sigma)
  const rates = sharedRates.reduce((sum, { sigmaGtPerYear }) => sum + sigmaGtPerYear ** 2, 0)
  return {
    months,
    massGt: value,
    sigmaGt: variance.map((v, j) => v === null ? null : Math.sqrt(v + rates * ((months[j]!.middleMjd - meanMjd) / JULIAN_YEAR_DAYS) ** 2))
  }
}

/** Residual one-sigma about the trend for every epoch, Gt. */
function scatter({ mjd, massGt }: MassSeries): number[] {
  try {
    const { residualSigma } = fitTrend({ mjd, value: massGt, sigma: null })
    return massGt.map(() => residualSigma)
  }
  catch (error) {
    if (error instanceof RangeError) return massGt.map(() => 0)
    throw error
  }
}
