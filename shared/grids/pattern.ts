import type { CellPattern } from '../earth/cellPattern.ts'
import { trendWeights } from '../earth/time/covarianceTrend.ts'
import type { LatitudeAxis, LongitudeAxis } from './axes.ts'
import { cellBounds } from './cellWeights.ts'
import type { CellWeights } from './cellWeights.ts'

/** Values of a region's cells: `values[i * epochs + t]`, height × area, in one unit; 0 where a cell has none. */
export interface CellVolumes { values: Float32Array, epochs: number }

/** A pattern with what it was made from. */
export interface FoundPattern {
  pattern: CellPattern
  /** Trend of the whole over the sum of the sizes of the cells' trends, 0 to 1: 1 where all cells go one way. */
  agreement: number
}

/**
 * Trends of the cells are the pattern where they go one way by and large. Where they nearly cancel (|Σ| under a quarter of Σ|·|), a share
 * of their sum means nothing: the pattern is then how the cells vary with the region's mass, which always adds up to one.
 */
const LEAST_AGREEMENT = 0.25

/**
 * Pattern of a region's mass over its cells, of epochs `kept`. Shares p of the cells add up to one exactly: `trend`: pᵢ = bᵢ/Σb, b the
 * trends as `trendWeights` gives them; `variation`: pᵢ = Σₜ vᵢ(t)(M(t) − M̄)/Σₜ (M(t) − M̄)², the regression of the cells on the whole. An
 * even spread has pᵢ = aᵢ/Σa with the areas a; the pattern holds the differences.
 *
 * @returns null where the region's mass does not change, or for fewer than three epochs: then there is no pattern but the even one
 */
export function patternOf({ values, epochs }: CellVolumes, weights: CellWeights, axes: { latitude: LatitudeAxis, longitude: LongitudeAxis }, mjd: ArrayLike<number>, kept: readonly number[], gridSha256: string): FoundPattern | null {
  if (kept.length < 3) return null
  const n = weights.row.length
  const project = (weight: ArrayLike<number>): Float64Array => {
    const out = new Float64Array(n)
    for (let i = 0; i < n; i++) {
      let sum = 0
      for (let k = 0; k < kept.length; k++) sum += weight[k]! * values[i * epochs + kept[k]!]!
      out[i] = sum
    }
    return out
  }
  const change = deviations(values, epochs, n, kept)
  if (!change) return null
  const trends = project(trendWeights(kept.map(t => mjd[t]!)))
  const [sum, sizes] = [total(trends), total(trends.map(Math.abs))]
  const agreement = sizes > 0 ? Math.abs(sum) / sizes : 0
  const basis = agreement >= LEAST_AGREEMENT ? 'trend' : 'variation'
  const shares = basis === 'trend' ? trends : project(change)
  const whole = total(shares)
  const area = total(weights.areaM2)
  const pattern: CellPattern = { basis, gridSha256, stepDeg: axes.longitude.stepDeg, westDeg: [], southDeg: [], northDeg: [], excess: [] }
  for (let i = 0; i < n; i++) {
    const { west, south, north } = cellBounds(axes.latitude, axes.longitude, weights.row[i]!, weights.column[i]!)
    pattern.westDeg.push(west)
    pattern.southDeg.push(south)
    pattern.northDeg.push(north)
    pattern.excess.push(shares[i]! / whole - weights.areaM2[i]! / area)
  }
  return { pattern, agreement }
}

/** Volumes are kept in single precision: what changes by less than this of its size does not change. */
const SINGLE = 1e-6

/** The region's whole at the epochs that are kept, less its mean; null where it does not change. */
function deviations(values: Float32Array, epochs: number, n: number, kept: readonly number[]): Float64Array | null {
  const whole = Float64Array.from(kept, (t) => {
    let sum = 0
    for (let i = 0; i < n; i++) sum += values[i * epochs + t]!
    return sum
  })
  const mean = total(whole) / whole.length
  const change = whole.map(m => m - mean)
  return change.some(d => Math.abs(d) > SINGLE * Math.abs(mean)) ? change : null
}

function total(values: Float64Array): number {
  return values.reduce((sum, v) => sum + v, 0)
}
