/** Median of numbers; NaN for none. The input stays as it is. */
export function median(x: ArrayLike<number>): number {
  const sorted = Float64Array.from(x).sort()
  const half = sorted.length >> 1
  if (sorted.length === 0) return Number.NaN
  return sorted.length % 2 === 1 ? sorted[half]! : (sorted[half - 1]! + sorted[half]!) / 2
}

/** 1 over the quartile of the normal distribution: makes a median of absolute deviations a standard deviation. */
const NORMAL_MAD = 1.4826022185056018

/** Spread of numbers about their median, as the standard deviation of normal ones that have the same median absolute deviation. */
export function robustSigma(x: ArrayLike<number>): number {
  const centre = median(x)
  return NORMAL_MAD * median(Float64Array.from(x, v => Math.abs(v - centre)))
}

/** Median of the numbers up to `reach` places away on both sides, for each of them. */
export function runningMedian(x: ArrayLike<number>, reach: number): Float64Array {
  const out = new Float64Array(x.length)
  for (let i = 0; i < x.length; i++) {
    const window: number[] = []
    for (let k = Math.max(0, i - reach); k <= Math.min(x.length - 1, i + reach); k++) window.push(x[k]!)
    window.sort((a, b) => a - b)
    const half = window.length >> 1
    out[i] = window.length % 2 === 1 ? window[half]! : (window[half - 1]! + window[half]!) / 2
  }
  return out
}
