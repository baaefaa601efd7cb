import { cellCoverage } from '../earth/cellCoverage.ts'
import { DEGREE } from '../earth/constants.ts'
import type { Contour } from '../earth/contour.ts'
import { zoneAreaM2 } from '../earth/latitude.ts'
import type { LatitudeAxis, LongitudeAxis } from './axes.ts'

/** Cells of a grid that an outline cuts, each with the ellipsoidal area of the part inside, m². Rows and columns are those of the file. */
export interface CellWeights {
  row: Int32Array
  column: Int32Array
  areaM2: Float64Array
  /** Area of the outline that no cell of the file covers, m². */
  outsideM2: number
}

/** Fractions below this are rounding along the edges of cells. */
const LEAST_FRACTION = 1e-12

/**
 * Exact area weights: the fraction of each cell that the outline covers (edges straight in longitude and geodetic latitude) times the
 * cell's area on the ellipsoid. They sum to the outline's area where the grid covers it.
 */
export function cellWeights(contour: Contour, latitude: LatitudeAxis, longitude: LongitudeAxis): CellWeights {
  const { edgesDeg } = latitude
  const rows = edgesDeg.length - 1
  const [south, north] = [edgesDeg[0]!, edgesDeg[rows]!]
  // Rows beyond the grid are needed, since what passes north of a cell is counted from the pole.
  const padded = Float64Array.from([...(south > -90 ? [-90] : []), ...edgesDeg, ...(north < 90 ? [90] : [])])
  const first = south > -90 ? 1 : 0
  // Columns of the coverage begin at −180°: the outline is turned so that the grid's first column does.
  const turn = -180 - longitude.westDeg
  const rings = contour.rings.map(ring => ({ ...ring, lonDeg: ring.lonDeg.map(lon => lon + turn) }))
  const zoneArea = (lat: number): number => zoneAreaM2(Math.sin(lat * DEGREE))
  const fraction = cellCoverage(rings, { latEdgesDeg: padded, columns: longitude.circle }, zoneArea)

  const inFile = new Int32Array(longitude.circle).fill(-1)
  longitude.column.forEach((k, j) => { if (k >= 0) inFile[k] = j })
  const found = { row: [] as number[], column: [] as number[], areaM2: [] as number[] }
  let outsideM2 = 0
  for (let band = 0; band < padded.length - 1; band++) {
    const cellM2 = (zoneArea(padded[band + 1]!) - zoneArea(padded[band]!)) * longitude.stepDeg * DEGREE
    const row = band - first
    const inside = row >= 0 && row < rows
    for (let k = 0; k < longitude.circle; k++) {
      const part = fraction[band * longitude.circle + k]!
      if (Math.abs(part) < LEAST_FRACTION) continue
      const column = inFile[k]!
      if (!inside || column < 0) {
        outsideM2 += part * cellM2
        continue
      }
      found.row.push(latitude.rising ? row : rows - 1 - row)
      found.column.push(column)
      found.areaM2.push(part * cellM2)
    }
  }
  return { row: Int32Array.from(found.row), column: Int32Array.from(found.column), areaM2: Float64Array.from(found.areaM2), outsideM2 }
}

/** Bounds of a cell of the file: degrees, geodetic. */
export function cellBounds(latitude: LatitudeAxis, longitude: LongitudeAxis, row: number, column: number): { west: number, east: number, south: number, north: number } {
  const rows = latitude.edgesDeg.length - 1
  const band = latitude.rising ? row : rows - 1 - row
  const west = longitude.westDeg + longitude.column[column]! * longitude.stepDeg
  return { west, east: west + longitude.stepDeg, south: latitude.edgesDeg[band]!, north: latitude.edgesDeg[band + 1]! }
}
