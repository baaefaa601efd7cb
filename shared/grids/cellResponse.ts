import { contourOf } from '../earth/contour.ts'
import type { Contour } from '../earth/contour.ts'
import type { EarthModel } from '../earth/earthModel.ts'
import { responseOf } from '../earth/response.ts'
import type { PhysicsSettings } from '../types/domain.ts'
import type { LatitudeAxis, LongitudeAxis } from './axes.ts'
import { cellBounds } from './cellWeights.ts'
import type { CellWeights } from './cellWeights.ts'

/** Effects that are summed over the cells of a grid, as names of `ResponsePerGt`. */
export const effectNames = ['chi1Mas', 'chi2Mas', 'lodMicroseconds', 'deltaJ2'] as const
export type EffectName = typeof effectNames[number]
export type Effects<T> = Record<EffectName, T>

export interface EffectOptions { model: EarthModel, settings: PhysicsSettings }

/** Responses of a region's cells per gigatonne in each, and that of the region with its mass spread evenly. */
export interface CellResponses { cells: Effects<Float64Array>, even: Effects<number> }

/**
 * Response of every cell per gigatonne, by the contour of the whole cell and the Earth model's fields. A common shift makes the cells' mean
 * over the outline that of the outline itself, so that a pattern without structure has the effect of an even spread, to the last digit.
 *
 * @param known responses by row and column that were found for other regions; new ones are added
 * @throws ModeNotAvailableError as `responseOf`
 */
export function cellResponses(contour: Contour, weights: CellWeights, axes: { latitude: LatitudeAxis, longitude: LongitudeAxis }, { model, settings }: EffectOptions, known: Map<number, Effects<number>>): CellResponses {
  const even = pick(responseOf(contour, model, settings))
  const n = weights.row.length
  const cells: Effects<Float64Array> = { chi1Mas: new Float64Array(n), chi2Mas: new Float64Array(n), lodMicroseconds: new Float64Array(n), deltaJ2: new Float64Array(n) }
  for (let i = 0; i < n; i++) {
    const [row, column] = [weights.row[i]!, weights.column[i]!]
    const key = row * axes.longitude.column.length + column
    let effects = known.get(key)
    if (!effects) {
      const { west, east, south, north } = cellBounds(axes.latitude, axes.longitude, row, column)
      effects = pick(responseOf(contourOf({ type: 'Polygon', coordinates: [[[west, south], [east, south], [east, north], [west, north], [west, south]]] }), model, settings))
      known.set(key, effects)
    }
    for (const name of effectNames) cells[name][i] = effects[name]
  }
  for (const name of effectNames) {
    let sum = 0
    let area = 0
    for (let i = 0; i < n; i++) {
      sum += weights.areaM2[i]! * cells[name][i]!
      area += weights.areaM2[i]!
    }
    const shift = area > 0 ? even[name] - sum / area : 0
    for (let i = 0; i < n; i++) cells[name][i] = cells[name][i]! + shift
  }
  return { cells, even }
}

function pick(response: Effects<number>): Effects<number> {
  return { chi1Mas: response.chi1Mas, chi2Mas: response.chi2Mas, lodMicroseconds: response.lodMicroseconds, deltaJ2: response.deltaJ2 }
}
