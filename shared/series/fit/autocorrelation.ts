export interface Lag {
  /** Steps of the grid. */
  lag: number
  /** Correlation at that lag; null where no two epochs are that far apart. */
  value: number | null
  pairs: number
}

export interface Correlogram {
  /** Days of one step. */
  stepDays: number
  lags: Lag[]
  /** Half width of the band that holds 95 % of the values of white noise, 1.96/√n (Bartlett 1946). */
  band: number
}

/**
 * Autocorrelation of residuals on the grid of their usual step. Only pairs of epochs that both exist count, so nothing is interpolated:
 * the mean product over the pairs, times (N − k)/N for N grid epochs (Box & Jenkins 1976, §2.1.5; without gaps exactly
 * Σ rᵢrᵢ₊ₖ / Σ rᵢ²). Of two epochs in one step the later counts.
 *
 * @param mjd epochs, MJD, in increasing order
 * @param residual residuals about zero, any unit
 * @param stepDays usual distance of epochs, days
 * @param most largest lag, steps
 */
export function autocorrelation(mjd: ArrayLike<number>, residual: ArrayLike<number>, stepDays: number, most: number): Correlogram {
  const slots = Array.from(mjd, t => Math.round((t - mjd[0]!) / stepDays))
  const count = slots.at(-1)! + 1
  const onGrid = new Float64Array(count).fill(Number.NaN)
  slots.forEach((slot, i) => { onGrid[slot] = residual[i]! })
  const variance = meanProduct(onGrid, 0).mean
  const lags = Array.from({ length: Math.min(most, count - 1) + 1 }, (_, lag): Lag => {
    const { mean, pairs } = meanProduct(onGrid, lag)
    return { lag, value: pairs > 0 && variance > 0 ? mean / variance * (count - lag) / count : null, pairs }
  })
  return { stepDays, lags, band: 1.96 / Math.sqrt(mjd.length) }
}

function meanProduct(x: Float64Array, lag: number): { mean: number, pairs: number } {
  let sum = 0
  let pairs = 0
  for (let i = lag; i < x.length; i++) {
    const product = x[i]! * x[i - lag]!
    if (Number.isNaN(product)) continue
    sum += product
    pairs++
  }
  return { mean: pairs > 0 ? sum / pairs : 0, pairs }
}
