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
  const { scale, height, sure } = layers()
  const state = Int32Array.of(0, seed, 0x9E3779B9, 1)
  const uniform = (): number => (nextWord(state) >>> 0) / 2 ** 32 + 2 ** -33
  const fill = (out: Float64Array): void => {
    // The quick way keeps the state in variables of its own; every hundredth number or so goes the slow way, through the array.
    let a = state[0]!
    let b = state[1]!
    let c = state[2]!
    let counter = state[3]!
    for (let i = 0; i < out.length;) {
      const word = (a + b + counter) | 0
      counter = (counter + 1) | 0
      a = b ^ (b >>> 9)
      b = (c + (c << 3)) | 0
      c = (((c << 21) | (c >>> 11)) + word) | 0
      const layer = word & (LAYERS - 1)
      const place = word >> 7
      const x = place * scale[layer]!
      if ((place < 0 ? -place : place) < sure[layer]!) {
        out[i++] = x
        continue
      }
      state[0] = a
      state[1] = b
      state[2] = c
      state[3] = counter
      if (layer === 0) out[i++] = (place < 0 ? -1 : 1) * tail(uniform)
      else if (height[layer]! + uniform() * (height[layer + 1]! - height[layer]!) < Math.exp(-x * x / 2)) out[i++] = x
      a = state[0]!
      b = state[1]!
      c = state[2]!
      counter = state[3]!
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

/** One word of sfc32, 32 bits. */
function nextWord(state: Int32Array): number {
  const word = (state[0]! + state[1]! + state[3]!) | 0
  state[3] = state[3]! + 1
  state[0] = state[1]! ^ (state[1]! >>> 9)
  state[1] = state[2]! + (state[2]! << 3)
  state[2] = ((state[2]! << 21) | (state[2]! >>> 11)) + word
  return word
}

/** Places of a layer: 2²⁴ on each side. */
const PLACES = 2 ** 24

/** Distance of the places of each layer, heights of the curve at the layers, and the places below which a layer lies under the curve for certain. */
function layers(): { scale: Float64Array, height: Float64Array, sure: Int32Array } {
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
  return { scale: width.map(w => w / PLACES), height, sure: Int32Array.from({ length: LAYERS }, (_, i) => width[i + 1]! / width[i]! * PLACES) }
}

/** A number beyond the last layer. */
function tail(uniform: () => number): number {
  for (;;) {
    const x = -Math.log(uniform()) / TAIL
    if (-2 * Math.log(uniform()) >= x * x) return TAIL + x
  }
}
