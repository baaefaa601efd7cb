/** Fills an array with independent normal numbers of mean 0 and variance 1. */
export type Normals = (out: Float64Array) => void

const LAYERS = 128
/** Where the last layer begins, and the area of each. Marsaglia & Tsang (2000), The Ziggurat Method, J. Stat. Softw. 5(8). */
const TAIL = 3.442619855899
const AREA = 9.91256303526217e-3

/**
 * Normal numbers by the ziggurat of Marsaglia & Tsang (2000) from the generator sfc32 (C. Doty-Humphrey, PractRand). A word of 32 bits
 * gives the layer by seven of them and the place by the other 25, so that they are independent (Doornik 2005): numbers are whole
 * multiples of 2⁻²⁴ of their layer's width. The same seed gives the same numbers everywhere.
 *
 * @param seed any whole number from 0 to 2³² − 1
 * @throws RangeError for another seed
 */
export function seededNormals(seed: number): Normals {
  if (!Number.isInteger(seed) || seed < 0 || seed > 2 ** 32 - 1) throw new RangeError(`seed must be a whole number from 0 to 4294967295, got ${seed}`)
  const { width, height, sure } = layers()
  // State of sfc32 from here to there; `fill` keeps it in variables of its own, which is what makes it quick.
  const state = Int32Array.of(0, seed, 0x9E3779B9, 1)
  const fill = (out: Float64Array): void => {
    let [a, b, c, counter] = [state[0]!, state[1]!, state[2]!, state[3]!]
    const uniform = (): number => {
      const sum = (a + b + counter) | 0
      counter = (counter + 1) | 0
      a = b ^ (b >>> 9)
      b = (c + (c << 3)) | 0
      c = (((c << 21) | (c >>> 11)) + sum) | 0
      return ((sum >>> 0) + 0.5) / 2 ** 32
    }
    for (let i = 0; i < out.length;) {
      const word = (a + b + counter) | 0
      counter = (counter + 1) | 0
      a = b ^ (b >>> 9)
      b = (c + (c << 3)) | 0
      c = (((c << 21) | (c >>> 11)) + word) | 0
      const layer = word & (LAYERS - 1)
      const u = (word >> 7) / 2 ** 24
      const x = u * width[layer]!
      if (Math.abs(u) < sure[layer]!) out[i++] = x
      else if (layer === 0) out[i++] = (u < 0 ? -1 : 1) * tail(uniform)
      else if (height[layer]! + uniform() * (height[layer + 1]! - height[layer]!) < Math.exp(-x * x / 2)) out[i++] = x
    }
    state[0] = a
    state[1] = b
    state[2] = c
    state[3] = counter
  }
  // The seed reaches all of the state after a dozen words.
  fill(new Float64Array(20))
  return fill
}

/** Widths of the layers and heights of the curve at them, and the part of each layer that lies under the curve for certain. */
function layers(): { width: Float64Array, height: Float64Array, sure: Float64Array } {
  const width = new Float64Array(LAYERS + 1)
  const height = new Float64Array(LAYERS + 1)
  width[0] = AREA / Math.exp(-TAIL * TAIL / 2)
  width[1] = TAIL
  height[1] = Math.exp(-TAIL * TAIL / 2)
  for (let i = 2; i < LAYERS; i++) {
    height[i] = height[i - 1]! + AREA / width[i - 1]!
    width[i] = Math.sqrt(-2 * Math.log(height[i]!))
  }
  height[LAYERS] = 1
  return { width, height, sure: Float64Array.from({ length: LAYERS }, (_, i) => width[i + 1]! / width[i]!) }
}

/** A number beyond the last layer. */
function tail(uniform: () => number): number {
  for (;;) {
    const x = -Math.log(uniform()) / TAIL
    if (-2 * Math.log(uniform()) >= x * x) return TAIL + x
  }
}
