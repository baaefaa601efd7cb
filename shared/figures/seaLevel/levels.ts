/** A sea-level field on nodes, as the API gives it: rows from 90° S, each from 180° W to 180° E, both edges and both poles. */
export interface SeaLevelField {
  latitudesDeg: readonly number[]
  longitudesDeg: readonly number[]
  /** mm, or parts of the mean. */
  value: readonly number[]
  /** Part of the sea round each node, 0 to 1. */
  sea: readonly number[]
}

const rad = Math.PI / 180
/** A node counts as sea from here on. */
export const seaFrom = 0.5
const series = [1, 2, 5] as const

/** The smallest of 1, 2 or 5 times a power of ten that is not below `size`. */
export function roundUp(size: number): number {
  const power = 10 ** Math.floor(Math.log10(size) - 1e-9)
  const mantissa = [...series, 10].find(m => m * power >= size * (1 - 1e-9))!
  return rounded(mantissa * power)
}

/** Binary dust off a decimal: 0.30000000000000004 is 0.3. */
function rounded(value: number): number {
  return Number(value.toPrecision(12)) + 0
}

/** Values of the sea, each with its area, in order of value. */
function weightedValues({ latitudesDeg, longitudesDeg, value, sea }: SeaLevelField): { value: number, area: number }[] {
  const list: { value: number, area: number }[] = []
  latitudesDeg.forEach((lat, i) => {
    const area = Math.cos(lat * rad)
    // The last column is the first one again.
    for (let j = 0; j < longitudesDeg.length - 1; j++) {
      const at = i * longitudesDeg.length + j
      if (sea[at]! >= seaFrom) list.push({ value: value[at]!, area: area * sea[at]! })
    }
  })
  return list.sort((a, b) => a.value - b.value)
}

function quantile(list: readonly { value: number, area: number }[], part: number): number {
  const all = list.reduce((sum, { area }) => sum + area, 0)
  let sum = 0
  for (const { value, area } of list) {
    sum += area
    if (sum >= part * all) return value
  }
  return list.at(-1)!.value
}

/**
 * Round levels for contours of the sea: equal steps of 1, 2 or 5 × 10ⁿ where nearly all of the sea lies (95 % of its area), and
 * 1, 2, 5, 10, … beyond, where the field grows steeply beside what lost or gained mass. Zero is one of them where the field
 * changes sign. Empty where the field is the same everywhere.
 */
export function contourLevels(field: SeaLevelField, most = 8): number[] {
  const list = weightedValues(field)
  if (list.length === 0) return []
  const [lowest, highest] = [list[0]!.value, list.at(-1)!.value]
  const [low, high] = [quantile(list, 0.025), quantile(list, 0.975)]
  const size = Math.max(Math.abs(lowest), Math.abs(highest))
  if (!(highest - lowest > 1e-9 * size)) return []
  const step = roundUp(Math.max(high - low, 1e-6 * (highest - lowest)) / most)
  const levels: number[] = []
  for (let k = Math.ceil(low / step - 1e-9); k <= Math.floor(high / step + 1e-9); k++) levels.push(rounded(k * step))
  // Beyond the equal steps each level is at least twice as far from zero as the one before.
  for (const sign of [-1, 1] as const) {
    const outermost = sign * (sign < 0 ? Math.min(low, 0) : Math.max(high, 0))
    let next = roundUp(Math.max(outermost, step) * 1.0001)
    for (let n = 0; n < 12 && next < sign * (sign < 0 ? lowest : highest); n++) {
      levels.push(rounded(sign * next))
      next = roundUp(next * 1.5)
    }
  }
  if (lowest < 0 && highest > 0) levels.push(0)
  return [...new Set(levels)].filter(level => level > lowest && level < highest).sort((a, b) => a - b)
}
