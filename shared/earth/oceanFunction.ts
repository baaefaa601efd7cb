import type { DegreeTwoMeans, MeanVector } from './contour.ts'
import { cellAverages } from './cellAverages.ts'
import { gridStack, type GridStack } from './gridStack.ts'
import type { OceanCells } from './oceanCells.ts'

/** What the `uniform` ocean needs to know of the sea. */
export interface OceanFunction {
  /** Part of the sphere that is sea. */
  fraction: number
  /** Area of the sea on the sphere, m². */
  areaM2: number
  means: DegreeTwoMeans
  vector: MeanVector
  /** Means of the same functions times r²/R², r the distance of the ellipsoid's surface from the centre: what the sphere leaves out. */
  ellipsoidMeans: DegreeTwoMeans
  /** SHA-256 of the encoded cells. */
  sha256: string
}

/** Node spacing of the field that says how much of an outline is sea, degrees. */
const OCEAN_FIELD_STEP_DEG = 0.5

/** The ocean function as a field (1 sea, 0 land) whose mean over an outline is a contour sum. */
export function oceanField(cells: OceanCells): GridStack {
  return gridStack([oceanNodeValues(cells, OCEAN_FIELD_STEP_DEG)], OCEAN_FIELD_STEP_DEG)
}

/** Part of the sea round each node of a grid in geodetic latitude and longitude, both poles and both ends of the circle included. */
export function oceanNodeValues(cells: OceanCells, stepDeg: number): Float64Array {
  const rows = Math.round(180 / stepDeg) + 1
  const columns = Math.round(360 / stepDeg) + 1
  const latEdges = Float64Array.from({ length: rows + 1 }, (_, i) => Math.min(90, Math.max(-90, -90 + (i - 0.5) * stepDeg)))
  const boxes = cellAverages(cells, latEdges, columns - 1, -180 - stepDeg / 2)
  const values = new Float64Array(rows * columns)
  for (let row = 0; row < rows; row++) {
    for (let column = 0; column < columns; column++) {
      values[row * columns + column] = boxes[row * (columns - 1) + column % (columns - 1)]!
    }
  }
  return values
}
