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

/** Variance of a series in a band of frequencies, in the unit of the series squared, by the Hann-tapered periodogram of its detrended stretches. */
export function bandVariance(stretches: readonly ArrayLike<number>[], low: number, high: number): number {
  let total = 0
  let count = 0
  for (const x of stretches) {
    const n = x.length
    const { re, im } = transformer(n)(tapered(x, 0, n, 'linear'))
    let sum = 0
    for (let k = 1; k < re.length; k++) {
      const f = k / n
      if (f >= low && f < high) sum += (2 * k === n ? 1 : 2) * (re[k]! ** 2 + im[k]! ** 2)
    }
    // Mean square of the Hann window is 3/8.
    total += sum / (n * 3 / 8)
    count += n
  }
  return count > 0 ? total / count : 0
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

/** Discrete Fourier transform of real series of one length, the half from 0 to the Nyquist frequency; any length, n²/2 operations. */
function transformer(n: number): (x: Float64Array) => { re: Float64Array, im: Float64Array } {
  const cosines = Float64Array.from({ length: n }, (_, i) => Math.cos(2 * Math.PI * i / n))
  const sines = Float64Array.from({ length: n }, (_, i) => Math.sin(2 * Math.PI * i / n))
  return (x) => {
    const bins = Math.floor(n / 2) + 1
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
