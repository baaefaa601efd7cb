/** Tables of a complex Fourier transform of a power of two. */
export interface FourierPlan { size: number, reversed: Uint32Array, cosines: Float64Array, sines: Float64Array }

/** Plan for `size` points, a power of two. */
export function fourierPlan(size: number): FourierPlan {
  const bits = Math.log2(size)
  if (!Number.isInteger(bits)) throw new RangeError(`size must be a power of two, got ${size}`)
  const reversed = new Uint32Array(size)
  for (let i = 0; i < size; i++) reversed[i] = bits === 0 ? 0 : (reversed[i >> 1]! >> 1) | ((i & 1) << (bits - 1))
  const cosines = Float64Array.from({ length: size / 2 }, (_, k) => Math.cos(2 * Math.PI * k / size))
  const sines = Float64Array.from({ length: size / 2 }, (_, k) => Math.sin(2 * Math.PI * k / size))
  return { size, reversed, cosines, sines }
}

/**
 * In place: Z_k = Σ z_j e^{∓2πi jk/n}, minus for `forward`, no factor either way. Cooley & Tukey (1965), radix 2.
 */
export function fourierTransform({ size, reversed, cosines, sines }: FourierPlan, re: Float64Array, im: Float64Array, forward: boolean): void {
  for (let i = 0; i < size; i++) {
    const j = reversed[i]!
    if (j <= i) continue
    const r = re[i]!
    re[i] = re[j]!
    re[j] = r
    const s = im[i]!
    im[i] = im[j]!
    im[j] = s
  }
  const sign = forward ? -1 : 1
  for (let half = 1; half < size; half *= 2) {
    const stride = size / (2 * half)
    for (let k = 0; k < half; k++) {
      const c = cosines[k * stride]!
      const s = sign * sines[k * stride]!
      for (let i = k; i < size; i += 2 * half) {
        const j = i + half
        const xr = c * re[j]! - s * im[j]!
        const xi = c * im[j]! + s * re[j]!
        re[j] = re[i]! - xr
        im[j] = im[i]! - xi
        re[i] = re[i]! + xr
        im[i] = im[i]! + xi
      }
    }
  }
}
