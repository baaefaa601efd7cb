import type { CalendarMonth } from './epochs.ts'

/** One monthly value as a linear combination of epochs: Σ weight[i] · x[index[i]]; null where the data give none. */
export type MonthlyWeights = ({ index: number[], weight: number[] } | null)[]

/**
 * How each calendar month draws on the epochs of a series. Three epochs or more inside the month: their mean. Fewer: linear
 * interpolation at the middle between its neighbours, where these are at most `maxGapDays` apart, so that epochs at the
 * start of a month are not taken for its middle; else the mean of the one or two epochs inside it. Otherwise there is none:
 * gaps stay, and nothing is carried beyond the first or last epoch.
 *
 * @param mjd epochs in increasing order, MJD
 */
export function monthlyWeights(mjd: ArrayLike<number>, months: readonly CalendarMonth[], maxGapDays: number): MonthlyWeights {
  let first = 0
  return months.map(({ startMjd, middleMjd, endMjd }) => {
    while (first < mjd.length && mjd[first]! < startMjd) first++
    const inside: number[] = []
    for (let i = first; i < mjd.length && mjd[i]! < endMjd; i++) inside.push(i)
    if (inside.length >= 3) return meanOf(inside)
    let after = Math.max(0, first - 1)
    while (after < mjd.length && mjd[after]! < middleMjd) after++
    if (after < mjd.length && mjd[after] === middleMjd) return { index: [after], weight: [1] }
    if (after > 0 && after < mjd.length) {
      const gap = mjd[after]! - mjd[after - 1]!
      if (gap <= maxGapDays) {
        const share = (middleMjd - mjd[after - 1]!) / gap
        return { index: [after - 1, after], weight: [1 - share, share] }
      }
    }
    return inside.length > 0 ? meanOf(inside) : null
  })
}

function meanOf(index: number[]): { index: number[], weight: number[] } {
  return { index, weight: index.map(() => 1 / index.length) }
}

export interface MonthlyAnomalies {
  /** Monthly values less their mean, in the unit of the series; null in a gap. */
  value: (number | null)[]
  /** Variance of each from independent errors of the epochs, the error of the mean included. */
  variance: (number | null)[]
  /** Mean epoch of the months that have a value, MJD. */
  meanMjd: number
  /** Months with a value over all months. */
  coverage: number
}

/**
 * Monthly values of a series relative to their own mean, with exact variances under independent errors per epoch.
 *
 * @param values and sigma of the epochs that `weights` were made for
 */
export function monthlyAnomalies(
  weights: MonthlyWeights, months: readonly CalendarMonth[], values: ArrayLike<number>, sigma: ArrayLike<number>
): MonthlyAnomalies {
  const used = weights.reduce((count, w) => count + (w ? 1 : 0), 0)
  const meanWeight = new Float64Array(values.length)
  let meanMjd = 0
  weights.forEach((w, j) => {
    if (!w) return
    meanMjd += months[j]!.middleMjd / used
    w.index.forEach((k, i) => { meanWeight[k] = meanWeight[k]! + w.weight[i]! / used })
  })
  let mean = 0
  let meanVariance = 0
  for (let k = 0; k < values.length; k++) {
    mean += meanWeight[k]! * values[k]!
    meanVariance += (meanWeight[k]! * sigma[k]!) ** 2
  }
  const value: (number | null)[] = []
  const variance: (number | null)[] = []
  for (const w of weights) {
    if (!w) {
      value.push(null)
      variance.push(null)
      continue
    }
    let sum = -mean
    let spread = meanVariance
    w.index.forEach((k, i) => {
      sum += w.weight[i]! * values[k]!
      spread += w.weight[i]! * (w.weight[i]! - 2 * meanWeight[k]!) * sigma[k]! ** 2
    })
    value.push(sum)
    // A month that is the only one has no error against itself; rounding must not make it negative.
    variance.push(Math.max(0, spread))
  }
  return { value, variance, meanMjd, coverage: weights.length > 0 ? used / weights.length : 0 }
}
