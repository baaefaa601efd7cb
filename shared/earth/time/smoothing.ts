/**
 * Running mean of a series with missing values (NaN), by boxcar or Gaussian. The kernel is cut at the ends and at missing
 * epochs and its weights made to sum to one; a value stays missing where less than half of the full kernel's weight is there.
 *
 * @param mjd epochs in increasing order, MJD
 * @param widthDays full width of the boxcar; full width at half maximum of the Gaussian (cut at 1.5 widths on either side)
 */
export function smooth(mjd: ArrayLike<number>, value: ArrayLike<number>, kind: 'gaussian' | 'boxcar', widthDays: number): Float64Array {
  if (!(widthDays > 0)) throw new RangeError(`widthDays must be positive, got ${widthDays}`)
  const n = mjd.length
  const reach = kind === 'boxcar' ? widthDays / 2 : 1.5 * widthDays
  const weightOf = (distance: number): number => kind === 'boxcar' ? 1 : Math.exp(-4 * Math.LN2 * (distance / widthDays) ** 2)
  const step = n > 1 ? (mjd[n - 1]! - mjd[0]!) / (n - 1) : 1
  // Distances of a regular series are whole steps: their weights are worked out once.
  const byStep = Float64Array.from({ length: Math.floor(reach / step) + 2 }, (_, k) => weightOf(k * step))
  const weightAt = (distance: number): number => {
    const steps = Math.round(distance / step)
    return distance === steps * step ? byStep[steps]! : weightOf(distance)
  }
  let full = 1
  for (let d = step; d <= reach; d += step) full += 2 * weightOf(d)
  const out = new Float64Array(n)
  let from = 0
  for (let i = 0; i < n; i++) {
    while (mjd[from]! < mjd[i]! - reach) from++
    let sum = 0
    let weights = 0
    for (let k = from; k < n && mjd[k]! <= mjd[i]! + reach; k++) {
      if (Number.isNaN(value[k]!)) continue
      const weight = weightAt(Math.abs(mjd[k]! - mjd[i]!))
      sum += weight * value[k]!
      weights += weight
    }
    out[i] = weights >= full / 2 ? sum / weights : Number.NaN
  }
  return out
}
