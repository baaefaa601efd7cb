import type { CalendarMonth } from './epochs.ts'
import { monthlyWeights } from './monthly.ts'
import { fitTrend } from './trend.ts'

export interface MonthlyMeans {
  /** On the months asked for, null where too little of a month is observed. */
  value: (number | null)[]
  /** Epochs that each mean is made of. */
  samples: number[]
  /** How many independent epochs they are worth: n / (1 + 2 Σ (1 − k/n) ρᵏ), ρ the lag-one correlation about trend and seasons. */
  effectiveSamples: number[]
}

/** Least part of a month that must be observed for a mean, by the usual step of the series. */
const LEAST_SHARE = 0.5
/** Series with longer steps than this, in days, are interpolated to the middles of months instead of averaged. */
const DENSE_STEP_DAYS = 5

/**
 * Monthly means of an observed quantity over calendar months; missing epochs (NaN) are left out. Coarse series are interpolated
 * linearly across no more than two of their steps.
 *
 * @param mjd epochs in increasing order, MJD
 * @param value quantity on them; the means have its unit
 */
export function monthlyMeans(mjd: ArrayLike<number>, value: ArrayLike<number>, months: readonly CalendarMonth[]): MonthlyMeans {
  const { epochs, values } = present(mjd, value)
  const step = medianStep(epochs)
  const dense = step <= DENSE_STEP_DAYS
  const rho = correlation(epochs, values)
  const result: MonthlyMeans = { value: [], samples: [], effectiveSamples: [] }
  const weights = dense ? null : monthlyWeights(epochs, months, 2.5 * step)
  let first = 0
  months.forEach(({ startMjd, endMjd }, j) => {
    while (first < epochs.length && epochs[first]! < startMjd) first++
    let next = first
    let sum = 0
    while (next < epochs.length && epochs[next]! < endMjd) sum += values[next++]!
    const count = next - first
    if (weights) {
      const w = weights[j]!
      result.value.push(w ? w.index.reduce((total, k, i) => total + w.weight[i]! * values[k]!, 0) : null)
    } else result.value.push(count > 0 && count * step >= LEAST_SHARE * (endMjd - startMjd) ? sum / count : null)
    result.samples.push(count)
    result.effectiveSamples.push(effective(count, rho))
  })
  return result
}

/** Epochs and values without those that are missing. */
export function present(mjd: ArrayLike<number>, value: ArrayLike<number>): { epochs: number[], values: number[] } {
  const epochs: number[] = []
  const values: number[] = []
  for (let i = 0; i < mjd.length; i++) {
    if (Number.isNaN(value[i]!)) continue
    epochs.push(mjd[i]!)
    values.push(value[i]!)
  }
  return { epochs, values }
}

/** Median distance between epochs, days; NaN for fewer than two. */
export function medianStep(mjd: ArrayLike<number>): number {
  const steps = new Float64Array(Math.max(0, mjd.length - 1))
  for (let i = 0; i < steps.length; i++) steps[i] = mjd[i + 1]! - mjd[i]!
  return steps.length > 0 ? steps.sort()[steps.length >> 1]! : Number.NaN
}

function correlation(epochs: number[], values: number[]): number {
  return epochs.length >= 10 ? Math.min(0.9999, Math.max(0, fitTrend({ mjd: epochs, value: values }).r1)) : 0
}

function effective(n: number, rho: number): number {
  if (n < 2) return n
  let sum = 0
  let power = 1
  for (let k = 1; k < n; k++) {
    power *= rho
    sum += (1 - k / n) * power
  }
  return n / (1 + 2 * sum)
}
