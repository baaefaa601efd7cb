import { DEGREE } from './constants.ts'
import { geocentricFromGeodeticDeg } from './latitude.ts'
import type { OceanCells } from './oceanCells.ts'

/**
 * Averages of the cells over the boxes of another grid, weighted by area on the sphere.
 * `latEdgesDeg` are geodetic bounds from south to north (as many as rows plus one), columns are of equal width from `westDeg`.
 */
export function cellAverages(cells: OceanCells, latEdgesDeg: ArrayLike<number>, columns: number, westDeg: number): Float64Array {
  const sines = Array.from(latEdgesDeg, lat => Math.sin(geocentricFromGeodeticDeg(lat) * DEGREE))
  return cellAveragesBySine(cells, sines, columns, westDeg)
}

/** As `cellAverages`, with bounds given as sines of geocentric latitude, rising from −1 to 1. */
export function cellAveragesBySine(cells: OceanCells, sineEdges: ArrayLike<number>, columns: number, westDeg: number): Float64Array {
  const rows = sineEdges.length - 1
  const cellSines = Float64Array.from({ length: cells.rows + 1 }, (_, i) => Math.sin((-90 + 180 * i / cells.rows) * DEGREE))
  const out = new Float64Array(rows * columns)
  const band = new Float64Array(cells.columns)
  const running = new Float64Array(cells.columns + 1)
  for (let row = 0; row < rows; row++) {
    const bottom = sineEdges[row]!
    const top = sineEdges[row + 1]!
    bandAverage(cells, cellSines, bottom, top, band)
    for (let c = 0; c < cells.columns; c++) running[c + 1] = running[c]! + band[c]!
    for (let column = 0; column < columns; column++) {
      const from = (westDeg + 180 + 360 * column / columns) / 360 * cells.columns
      const to = (westDeg + 180 + 360 * (column + 1) / columns) / 360 * cells.columns
      out[row * columns + column] = (runningAt(running, cells.columns, to) - runningAt(running, cells.columns, from)) / (to - from)
    }
  }
  return out
}

function bandAverage(cells: OceanCells, cellSines: Float64Array, bottom: number, top: number, band: Float64Array): void {
  band.fill(0)
  const first = Math.max(0, Math.min(cells.rows - 1, Math.floor((Math.asin(Math.max(-1, bottom)) / DEGREE + 90) / 180 * cells.rows) - 1))
  for (let row = first; row < cells.rows && cellSines[row]! < top; row++) {
    const overlap = Math.min(top, cellSines[row + 1]!) - Math.max(bottom, cellSines[row]!)
    if (overlap <= 0) continue
    const share = overlap / (top - bottom)
    const offset = row * cells.columns
    for (let c = 0; c < cells.columns; c++) band[c] = band[c]! + share * cells.fraction[offset + c]!
  }
}

/** Integral of a periodic band of cells from its west end to position `x`, in cells. */
function runningAt(running: Float64Array, n: number, x: number): number {
  const turns = Math.floor(x / n)
  const inside = x - turns * n
  const i = Math.min(n - 1, Math.floor(inside))
  return turns * running[n]! + running[i]! + (inside - i) * (running[i + 1]! - running[i]!)
}
