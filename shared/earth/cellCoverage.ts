import { DEGREE, WGS84_E2 } from './constants.ts'
import type { ContourRing } from './contour.ts'
import { geocentricFromGeodeticDeg } from './latitude.ts'

/** Rows from south to north by their geodetic bounds (rows + 1 of them, −90 to 90), columns of equal width from −180°. */
export interface CellGrid { latEdgesDeg: Float64Array, columns: number }

/**
 * Fraction of every cell that a set of rings covers, row by row from the south, exact for edges straight in longitude and
 * geodetic latitude: each piece of edge inside a cell takes off what lies south of it, in equal area of the sphere.
 * Rings are summed with their sign; overlapping rings count twice.
 *
 * @param zoneArea area between the equator and a geodetic latitude (degrees), in any unit; default that of the sphere, sin ψ
 */
export function cellCoverage(rings: readonly ContourRing[], grid: CellGrid, zoneArea?: (latDeg: number) => number): Float64Array {
  const rows = grid.latEdgesDeg.length - 1
  const { columns } = grid
  const width = 360 / columns
  const zoneEdges = grid.latEdgesDeg.map(zoneArea ?? (lat => Math.sin(geocentricFromGeodeticDeg(lat) * DEGREE)))
  const zoneAt = zoneArea ?? sineAt
  /** Area inside the row of the edge, in the unit of the zones. */
  const area = new Float64Array(rows * columns)
  /** Longitude (rad) by which an edge of this row passes over every row south of it. */
  const over = new Float64Array(rows * columns)
  let everywhere = 0
  for (const ring of rings) {
    const factor = ring.sign * ring.side
    if (ring.pole) everywhere += ring.sign * (ring.pole === 'north' ? 1 : 0)
    for (let i = 1; i < ring.lonDeg.length; i++) {
      splitEdge(ring.lonDeg[i - 1]!, ring.latDeg[i - 1]!, ring.lonDeg[i]!, ring.latDeg[i]!, grid.latEdgesDeg, width, (lon0, lat0, lon1, lat1) => {
        const row = rowOf(grid.latEdgesDeg, (lat0 + lat1) / 2)
        const column = modulo(Math.floor(((lon0 + lon1) / 2 + 180) / width), columns)
        const dLon = (lon1 - lon0) * DEGREE
        area[row * columns + column]! -= factor * (meanZone(lat0, lat1, zoneAt) - zoneEdges[row]!) * dLon
        over[row * columns + column]! -= factor * dLon
      })
    }
  }
  const fraction = new Float64Array(rows * columns)
  for (let column = 0; column < columns; column++) {
    let passing = everywhere * width * DEGREE
    for (let row = rows - 1; row >= 0; row--) {
      const height = zoneEdges[row + 1]! - zoneEdges[row]!
      const k = row * columns + column
      fraction[k] = (area[k]! + passing * height) / (height * width * DEGREE)
      passing += over[k]!
    }
  }
  return fraction
}

type Piece = (lon0: number, lat0: number, lon1: number, lat1: number) => void

function splitEdge(lon0: number, lat0: number, lon1: number, lat1: number, latEdges: Float64Array, width: number, piece: Piece): void {
  if (lon0 === lon1) return
  const cuts: number[] = [0, 1]
  const west = Math.min(lon0, lon1)
  const east = Math.max(lon0, lon1)
  for (let m = Math.ceil((west + 180) / width); -180 + m * width < east; m++) cuts.push((-180 + m * width - lon0) / (lon1 - lon0))
  if (lat0 !== lat1) {
    const south = Math.min(lat0, lat1)
    const north = Math.max(lat0, lat1)
    for (let row = rowOf(latEdges, south); row < latEdges.length && latEdges[row]! < north; row++) {
      if (latEdges[row]! > south) cuts.push((latEdges[row]! - lat0) / (lat1 - lat0))
    }
  }
  cuts.sort((a, b) => a - b)
  for (let k = 1; k < cuts.length; k++) {
    const a = cuts[k - 1]!
    const b = cuts[k]!
    if (b > a) piece(lon0 + a * (lon1 - lon0), lat0 + a * (lat1 - lat0), lon0 + b * (lon1 - lon0), lat0 + b * (lat1 - lat0))
  }
}

/** Row whose bounds hold a latitude; the last row for the pole itself. */
export function rowOf(latEdges: Float64Array, lat: number): number {
  let low = 0
  let high = latEdges.length - 1
  while (high - low > 1) {
    const middle = (low + high) >> 1
    if (latEdges[middle]! <= lat) low = middle
    else high = middle
  }
  return low
}

/** Mean of a zone's area between two geodetic latitudes, three-point Gauss. */
function meanZone(lat0: number, lat1: number, zoneAt: (latDeg: number) => number): number {
  const middle = (lat0 + lat1) / 2
  const reach = (lat1 - lat0) / 2 * Math.sqrt(3 / 5)
  return (5 * zoneAt(middle - reach) + 8 * zoneAt(middle) + 5 * zoneAt(middle + reach)) / 18
}

function sineAt(latDeg: number): number {
  const s = (1 - WGS84_E2) * Math.sin(latDeg * DEGREE)
  const c = Math.cos(latDeg * DEGREE)
  return s / Math.sqrt(s * s + c * c)
}

function modulo(a: number, n: number): number {
  return ((a % n) + n) % n
}
