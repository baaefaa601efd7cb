import { cellAverages } from '../earth/cellAverages.ts'
import type { OceanCells } from '../earth/oceanCells.ts'
import { InputError } from '../types/issue.ts'
import { staticValues } from './heightGrid.ts'
import type { OpenGrid } from './heightGrid.ts'

/** Part of every cell of a grid that is sea by the engine's own ocean, in the file's order of rows and columns. */
export function seaOfCells(cells: OceanCells, { latitude, longitude }: Pick<OpenGrid, 'latitude' | 'longitude'>): Float64Array {
  const rows = latitude.edgesDeg.length - 1
  const columns = longitude.column.length
  // Rows run from pole to pole for the averages; those of the grid are among them.
  const [south, north] = [latitude.edgesDeg[0]! > -90, latitude.edgesDeg[rows]! < 90]
  const edges = [...(south ? [-90] : []), ...latitude.edgesDeg, ...(north ? [90] : [])]
  const circle = cellAverages(cells, edges, longitude.circle, longitude.westDeg)
  const out = new Float64Array(rows * columns)
  for (let row = 0; row < rows; row++) {
    const band = (latitude.rising ? row : rows - 1 - row) + (south ? 1 : 0)
    for (let column = 0; column < columns; column++) {
      const k = longitude.column[column]!
      out[row * columns + column] = k < 0 ? 1 : circle[band * longitude.circle + k]!
    }
  }
  return out
}

/**
 * Part of every cell that is sea by a mask in a file, whose values say how much of a cell is land (1 land, 0 sea; `of: 'sea'` the other way).
 *
 * @throws InputError for a mask on another grid, and for one whose values leave 0 to 1
 */
export function seaOfMask(mask: OpenGrid, grid: OpenGrid, of: 'land' | 'sea' = 'land'): Float64Array {
  const values = onSameGrid(mask, grid)
  // Without a value a cell is not land.
  const sea = values.map(v => Number.isNaN(v) ? 1 : of === 'land' ? 1 - v : v)
  if (sea.some(v => v < 0 || v > 1)) {
    throw new InputError('The mask does not fit', [{ path: mask.variable.name, code: 'bad-mask', message: 'A land mask has values from 0 to 1.' }])
  }
  return sea
}

/**
 * Scale factors from a file, in the order of the grid's cells; NaN where there are none.
 *
 * @throws InputError for factors on another grid
 */
export function scaleFactors(factors: OpenGrid, grid: OpenGrid): Float64Array {
  return onSameGrid(factors, grid)
}

/** Values of a grid without time, or of its first epoch, in the order of another grid's cells. */
function onSameGrid(other: OpenGrid, grid: OpenGrid): Float64Array {
  const values = staticValues(other)
  const [rows, columns] = [grid.latitude.centresDeg.length, grid.longitude.centresDeg.length]
  const otherColumns = other.longitude.centresDeg.length
  const place = (lon: number): number => Math.round((((lon % 360) + 360) % 360) * 1e4) % 3_600_000
  const rowOf = new Map(Array.from(other.latitude.centresDeg, (lat, i) => [Math.round(lat * 1e4), i]))
  const columnOf = new Map(Array.from(other.longitude.centresDeg, (lon, j) => [place(lon), j]))
  const out = new Float64Array(rows * columns)
  for (let i = 0; i < rows; i++) {
    const row = rowOf.get(Math.round(grid.latitude.centresDeg[i]! * 1e4))
    for (let j = 0; j < columns; j++) {
      const column = columnOf.get(place(grid.longitude.centresDeg[j]!))
      if (row === undefined || column === undefined) {
        throw new InputError('The grids do not fit', [{ path: other.variable.name, code: 'other-grid', message: `“${other.variable.name}” has no cell at ${grid.latitude.centresDeg[i]}°, ${grid.longitude.centresDeg[j]}°: it must have the cells of “${grid.variable.name}”.` }])
      }
      out[i * columns + j] = values[row * otherColumns + column]!
    }
  }
  return out
}
