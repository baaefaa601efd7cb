import type { EarthModel } from '#shared/earth/earthModel'
import { responseAtPlace } from '#shared/earth/pointResponse'
import type { PhysicsSettings } from '#shared/types/domain'
import { effectOf, type Overlay } from './overlay'

/** Effect of a gigatonne gained on nodes: rows from 90° S, each from 180° W to 180° E, both edges and both poles. */
export interface SensitivityGrid {
  latitudesDeg: number[]
  longitudesDeg: number[]
  /** µs. */
  lodMicroseconds: Float64Array
  /** mas. */
  chi1Mas: Float64Array
  chi2Mas: Float64Array
}

/** The field is smooth: its lines are those of nodes half as far apart to less than a line's width on the whole globe. */
export const gridStepDeg = 2

/** The engine's settings on the map, the same as for an outline that is drawn. */
export function mapSettings(model: EarthModel): PhysicsSettings {
  return { ocean: model.defaultOcean, coefficients: 'gross-2007', core: 'decoupled' }
}

/** The grid, `rest` being awaited after every few rows so that a page goes on answering. */
export async function sensitivityGrid(model: EarthModel, rest: () => Promise<void>, settings = mapSettings(model), stepDeg = gridStepDeg): Promise<SensitivityGrid> {
  const latitudesDeg = nodes(90, stepDeg)
  const longitudesDeg = nodes(180, stepDeg)
  const columns = longitudesDeg.length
  const size = latitudesDeg.length * columns
  const grid = { latitudesDeg, longitudesDeg, lodMicroseconds: new Float64Array(size), chi1Mas: new Float64Array(size), chi2Mas: new Float64Array(size) }
  for (let i = 0; i < latitudesDeg.length; i++) {
    for (let j = 0; j < columns; j++) {
      const { lodMicroseconds, chi1Mas, chi2Mas } = responseAtPlace(longitudesDeg[j]!, latitudesDeg[i]!, model, settings)
      const at = i * columns + j
      grid.lodMicroseconds[at] = lodMicroseconds
      grid.chi1Mas[at] = chi1Mas
      grid.chi2Mas[at] = chi2Mas
    }
    if (i % 8 === 7) await rest()
  }
  return grid
}

/** Values of an overlay on the nodes, µs or µas. */
export function overlayValues(grid: SensitivityGrid, overlay: Overlay): number[] {
  return Array.from(grid.lodMicroseconds, (lodMicroseconds, at) => effectOf(overlay, { lodMicroseconds, chi1Mas: grid.chi1Mas[at]!, chi2Mas: grid.chi2Mas[at]! }))
}

function nodes(edgeDeg: number, stepDeg: number): number[] {
  return Array.from({ length: Math.round(2 * edgeDeg / stepDeg) + 1 }, (_, k) => k * stepDeg - edgeDeg)
}
