import { calendarFromMjd, calendarMonth } from '../earth/time/epochs.ts'
import { present } from '../earth/time/monthlyMeans.ts'
import { trendNoise } from '../earth/time/trendNoise.ts'
import type { TrendNoiseReport } from '../earth/time/trendNoise.ts'
import type { ChainResult, Track } from '../observed/chainTypes.ts'
import { monthsOf } from '../observed/steps.ts'
import type { ObservedMonths } from './assemble.ts'
import type { ObservedRates } from './budget.ts'
import { quantityNames, rotationQuantities } from './types.ts'
import type { RotationQuantity } from './types.ts'

export interface ReducedMonths extends ObservedMonths {
  mjd: number[]
  lodMs: (number | null)[] | null
  chi1Mas: (number | null)[] | null
  chi2Mas: (number | null)[] | null
  /** Quantities that are not among them, and why. */
  leftOut: { quantity: RotationQuantity, reason: string }[]
}

/**
 * What a reduction left, on the months of a run: ΔLOD in ms, χ in mas, null where too little of a month is there. Quantities whose
 * trend must not be quoted (short tides only, or detrended) are left out, unless trends do not matter ('out').
 */
export function observedMonths(reduced: ChainResult, epochsMjd: readonly number[], trend: 'in' | 'out' = 'in'): ReducedMonths {
  const months = epochsMjd.map((t) => {
    const { year, month } = calendarFromMjd(t)
    return calendarMonth(year, month)
  })
  const leftOut: ReducedMonths['leftOut'] = []
  const column = (quantity: RotationQuantity): (number | null)[] | null => {
    const track = reduced.after[quantity]
    const barred = trend === 'in' ? reduced.noTrend.find(entry => entry.quantity === quantity) : undefined
    if (!track || barred) {
      leftOut.push({ quantity, reason: barred?.reason ?? `The series holds nothing of ${quantityNames[quantity]}.` })
      return null
    }
    if (reduced.months) return onMonths(track, epochsMjd)
    return Array.from(monthsOf(track.mjd, track.value, months).value, v => Number.isNaN(v) ? null : v)
  }
  return { mjd: [...epochsMjd], lodMs: column('lod'), chi1Mas: column('chi1'), chi2Mas: column('chi2'), leftOut }
}

/** Monthly means that are there already, by their epochs. */
function onMonths({ mjd, value }: Track, epochsMjd: readonly number[]): (number | null)[] {
  const byEpoch = new Map(Array.from(mjd, (t, i) => [t, value[i]!]))
  return epochsMjd.map((t) => {
    const v = byEpoch.get(t)
    return v === undefined || Number.isNaN(v) ? null : v
  })
}

export interface ObservedTrends {
  /** µs and mas per Julian year, with the error that is to be quoted; null where there are fewer than 24 months. */
  rates: ObservedRates
  /** The same under white, AR(1) and power-law noise, in ms and mas, with the sentence on which to quote. */
  noise: Partial<Record<RotationQuantity, TrendNoiseReport>>
}

const LEAST_MONTHS = 24

/** Observed trends over the months of a run, each with the error of the noise model that its residuals ask for. */
export function observedTrends(months: ReducedMonths): ObservedTrends {
  const columns: Record<RotationQuantity, (number | null)[] | null> = { lod: months.lodMs, chi1: months.chi1Mas, chi2: months.chi2Mas }
  const result: ObservedTrends = { rates: {}, noise: {} }
  for (const quantity of rotationQuantities) {
    const column = columns[quantity]
    const { epochs, values } = column ? present(months.mjd, column.map(v => v ?? Number.NaN)) : { epochs: [], values: [] }
    result.rates[quantity] = null
    if (!column || epochs.length < LEAST_MONTHS) continue
    const report = trendNoise({ mjd: epochs, value: values })
    const quoted = report.models.find(({ model }) => model === report.quote) ?? report.simple
    const unit = quantity === 'lod' ? 1000 : 1
    result.noise[quantity] = report
    result.rates[quantity] = { value: quoted.value * unit, sigma: quoted.sigma * unit }
  }
  return result
}
