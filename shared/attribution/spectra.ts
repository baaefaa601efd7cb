/** Cross spectrum of two series at frequencies 0 … ½ cycles per step, up to a factor that the three powers share. */
export interface CrossSpectrum {
  /** Cycles per step. */
  frequency: Float64Array
  powerX: Float64Array
  powerY: Float64Array
  /** conj(X)·Y: real and imaginary part. */
  crossRe: Float64Array
  crossIm: Float64Array
  /** Segments that were averaged, and how many independent ones they are worth. */
  segments: number
  effectiveSegments: number
}

export type Detrend = 'constant' | 'linear'

/** Share of the power that two Hann segments overlapping by half have in common: (1/6)², Welch (1967). */
const HALF_OVERLAP = 1 / 36

/**
 * Welch's cross spectrum: segments of `length` overlapping by half, each detrended and tapered by a periodic Hann window, averaged
 * over all stretches. Welch (1967), IEEE Trans. Audio Electroacoust. 15, 70. The convention is that of scipy.signal.csd.
 *
 * @param stretches pairs of equally long series without gaps, at equal steps
 * @throws RangeError where no stretch holds a segment
 */
export function crossSpectrum(stretches: readonly { x: ArrayLike<number>, y: ArrayLike<number> }[], length: number, detrend: Detrend = 'constant'): CrossSpectrum {
  if (!(Number.isInteger(length) && length >= 4)) throw new RangeError(`length must be a whole number of at least 4, got ${length}`)
  const bins = Math.floor(length / 2) + 1
  const sums = { powerX: new Float64Array(bins), powerY: new Float64Array(bins), crossRe: new Float64Array(bins), crossIm: new Float64Array(bins) }
  const transform = transformer(length)
  const step = length - Math.floor(length / 2)
  let segments = 0
  let overlapping = 0
  for (const { x, y } of stretches) {
    for (let start = 0; start + length <= x.length; start += step) {
      const a = transform(tapered(x, start, length, detrend))
      const b = transform(tapered(y, start, length, detrend))
      for (let k = 0; k < bins; k++) {
        sums.powerX[k] = sums.powerX[k]! + a.re[k]! ** 2 + a.im[k]! ** 2
        sums.powerY[k] = sums.powerY[k]! + b.re[k]! ** 2 + b.im[k]! ** 2
        sums.crossRe[k] = sums.crossRe[k]! + a.re[k]! * b.re[k]! + a.im[k]! * b.im[k]!
        sums.crossIm[k] = sums.crossIm[k]! + a.re[k]! * b.im[k]! - a.im[k]! * b.re[k]!
      }
      segments++
      if (start > 0) overlapping++
    }
  }
  if (segments === 0) throw new RangeError(`no stretch holds a segment of ${length} values`)
  return {
    frequency: Float64Array.from({ length: bins }, (_, k) => k / length),
    ...sums,
    segments,
    effectiveSegments: segments / (1 + 2 * HALF_OVERLAP * overlapping / segments)
  }
}

/** Magnitude-squared coherence |S_xy|²/(S_xx S_yy) at each frequency, 0 where a power vanishes. */
export function coherenceOf({ powerX, powerY, crossRe, crossIm }: CrossSpectrum): Float64Array {
  return powerX.map((p, k) => p > 0 && powerY[k]! > 0 ? (crossRe[k]! ** 2 + crossIm[k]! ** 2) / (p * powerY[k]!) : 0)
}

/** Coherence of a band: powers and cross power summed over its frequencies; null where it has too few independent values. */
export function bandCoherence(spectrum: CrossSpectrum, low: number, high: number): { value: number, independent: number, threshold95: number } | null {
  let [x, y, re, im, bins] = [0, 0, 0, 0, 0]
  spectrum.frequency.forEach((f, k) => {
    if (f === 0 || f < low || f >= high) return
    x += spectrum.powerX[k]!
    y += spectrum.powerY[k]!
    re += spectrum.crossRe[k]!
    im += spectrum.crossIm[k]!
    bins++
  })
  // Neighbouring frequencies under a Hann window share (2/3)² of their power, the next but one (1/6)².
  const shared = bins > 0 ? 1 + 2 * (4 / 9) * (bins - 1) / bins + 2 * HALF_OVERLAP * Math.max(0, bins - 2) / bins : 1
  const independent = spectrum.effectiveSegments * bins / shared
  if (independent < 1.8 || !(x > 0) || !(y > 0)) return null
  // Of two series without relation, 95 % of coherences lie below 1 − 0.05^{1/(n − 1)} (Thompson 1979, J. Atmos. Sci. 36, 2020).
  return { value: (re * re + im * im) / (x * y), independent, threshold95: 1 - 0.05 ** (1 / (independent - 1)) }
}

/** Variance by frequency: how much of the variance of some stretches stands at each of their frequencies, cycles per step. */
export type Periodogram = readonly { frequency: number, variance: number }[]

/** Hann-tapered periodogram of stretches without their straight lines, up to a frequency; its sum is their variance. */
export function periodogramOf(stretches: readonly ArrayLike<number>[], highest = 0.5): Periodogram {
  const count = stretches.reduce((sum, x) => sum + x.length, 0)
  return stretches.flatMap((x) => {
    const n = x.length
    const { re, im } = transformer(n, Math.min(Math.floor(n / 2), Math.floor(highest * n)))(tapered(x, 0, n, 'linear'))
    // Mean square of the Hann window is 3/8.
    return Array.from(re, (a, k) => ({ frequency: k / n, variance: k === 0 ? 0 : (2 * k === n ? 1 : 2) * (a * a + im[k]! ** 2) / (n * count * 3 / 8) }))
  })
}

/** Variance in a band of frequencies, low included and high not, in the unit of the series squared. */
export function bandVariance(periodogram: Periodogram, low: number, high: number): number {
  return periodogram.reduce((sum, { frequency, variance }) => frequency >= low && frequency < high ? sum + variance : sum, 0)
}

function tapered(x: ArrayLike<number>, start: number, length: number, detrend: Detrend): Float64Array {
  const middle = (length - 1) / 2
  let mean = 0
  let slope = 0
  let square = 0
  for (let i = 0; i < length; i++) mean += x[start + i]! / length
  if (detrend === 'linear') {
    for (let i = 0; i < length; i++) {
      slope += (i - middle) * (x[start + i]! - mean)
      square += (i - middle) ** 2
    }
    slope /= square
  }
  return Float64Array.from({ length }, (_, i) => (0.5 - 0.5 * Math.cos(2 * Math.PI * i / length)) * (x[start + i]! - mean - slope * (i - middle)))
}

/** Discrete Fourier transform of real series of one length, from 0 to the last of n/2 frequencies asked for; any length. */
function transformer(n: number, last = Math.floor(n / 2)): (x: Float64Array) => { re: Float64Array, im: Float64Array } {
  const cosines = Float64Array.from({ length: n }, (_, i) => Math.cos(2 * Math.PI * i / n))
  const sines = Float64Array.from({ length: n }, (_, i) => Math.sin(2 * Math.PI * i / n))
  return (x) => {
    const bins = last + 1
    const re = new Float64Array(bins)
    const im = new Float64Array(bins)
    for (let k = 0; k < bins; k++) {
      let [a, b, at] = [0, 0, 0]
      for (let i = 0; i < n; i++) {
        a += x[i]! * cosines[at]!
        b -= x[i]! * sines[at]!
        at += k
        if (at >= n) at -= n
      }
      re[k] = a
      im[k] = b
    }
    return { re, im }
  }
}
