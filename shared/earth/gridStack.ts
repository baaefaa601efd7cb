import { DEGREE, WGS84_E2 } from './constants.ts'
import type { Contour, ContourRing } from './contour.ts'

/**
 * Several fields on one grid of geodetic latitude and longitude nodes, bilinear between nodes, with their integrals
 * cumulated in longitude. Rows run from 90° S to 90° N, columns from 180° W to 180° E, both ends included.
 */
export interface GridStack {
  /** Fields in the stack. */
  count: number
  /** Distance of the nodes, degrees; divides 180. */
  stepDeg: number
  rows: number
  columns: number
  /** Node values, field index fastest, then column, then row. */
  values: Float32Array
  /** ∫ f dλ (radians) from 180° W to each node, in the same order. */
  cumulated: Float64Array
}

/** Stack from node values (`values[field][row × columns + column]`, the last column repeating the first). */
export function gridStack(fields: readonly ArrayLike<number>[], stepDeg: number): GridStack {
  const rows = Math.round(180 / stepDeg) + 1
  const columns = Math.round(360 / stepDeg) + 1
  const count = fields.length
  const values = new Float32Array(rows * columns * count)
  const cumulated = new Float64Array(rows * columns * count)
  const step = stepDeg * DEGREE
  fields.forEach((field, k) => {
    if (field.length !== rows * columns) throw new RangeError(`a field at ${stepDeg}° must have ${rows} × ${columns} values, got ${field.length}`)
    for (let row = 0; row < rows; row++) {
      let sum = 0
      for (let column = 0; column < columns; column++) {
        const node = row * columns + column
        const at = node * count + k
        values[at] = field[node]!
        if (column > 0) sum += (values[at]! + values[at - count]!) / 2 * step
        cumulated[at] = sum
      }
    }
  })
  return { count, stepDeg, rows, columns, values, cumulated }
}

/** Values of all fields at a place (geodetic latitude, east longitude, degrees), bilinear; written to `out`. */
export function valuesAt(stack: GridStack, lonDeg: number, latDeg: number, out = new Float64Array(stack.count)): Float64Array {
  const { count, columns, rows, stepDeg, values } = stack
  const x = (((lonDeg + 180) % 360) + 360) % 360 / stepDeg
  const y = (latDeg + 90) / stepDeg
  const j = Math.min(columns - 2, Math.floor(x))
  const i = Math.min(rows - 2, Math.max(0, Math.floor(y)))
  const u = x - j
  const v = y - i
  const south = (i * columns + j) * count
  const north = south + columns * count
  for (let k = 0; k < count; k++) {
    out[k] = (1 - v) * ((1 - u) * values[south + k]! + u * values[south + count + k]!)
      + v * ((1 - u) * values[north + k]! + u * values[north + count + k]!)
  }
  return out
}

/**
 * Mean of every field over a contour, by ∮ P dS with P = ∫ f dλ and S = sin ψ: the cost grows with the length of the edges
 * in cells, not with the area inside. Exact for the bilinear fields up to the Gauss rule: 1e-9 at nodes of 2°, 1e-11 at 0.5°.
 */
export function contourMeans(stack: GridStack, contour: Contour, out = new Float64Array(stack.count)): Float64Array {
  out.fill(0)
  const ringSum = new Float64Array(stack.count)
  for (const ring of contour.rings) {
    ringSum.fill(0)
    addRing(stack, ring, ringSum)
    const factor = ring.sign * ring.side
    for (let k = 0; k < stack.count; k++) out[k] = out[k]! + factor * ringSum[k]!
    if (ring.pole) addCap(stack, ring, out)
  }
  for (let k = 0; k < stack.count; k++) out[k] = out[k]! / contour.areaSr
  return out
}

const GAUSS_2 = 0.5 / Math.sqrt(3)

function addRing(stack: GridStack, ring: ContourRing, sum: Float64Array): void {
  const { lonDeg, latDeg } = ring
  const scale = 1 / stack.stepDeg
  for (let i = 1; i < lonDeg.length; i++) {
    const y0 = (latDeg[i - 1]! + 90) * scale
    const y1 = (latDeg[i]! + 90) * scale
    if (y0 !== y1) addEdge(stack, (lonDeg[i - 1]! + 180) * scale, y0, (lonDeg[i]! + 180) * scale, y1, sum)
  }
}

/** Walks an edge from cell to cell (grid units) and adds two Gauss points of each piece. */
function addEdge(stack: GridStack, x0: number, y0: number, x1: number, y1: number, sum: Float64Array): void {
  const dx = x1 - x0
  const dy = y1 - y0
  const stepX = dx > 0 ? 1 : -1
  const stepY = dy > 0 ? 1 : -1
  let nextX = dx > 0 ? Math.floor(x0) + 1 : Math.ceil(x0) - 1
  let nextY = dy > 0 ? Math.floor(y0) + 1 : Math.ceil(y0) - 1
  let t = 0
  while (t < 1) {
    const tX = dx === 0 ? 1 : (nextX - x0) / dx
    const tY = (nextY - y0) / dy
    const end = Math.min(tX, tY, 1)
    if (end > t) {
      const middle = (t + end) / 2
      const reach = (end - t) * GAUSS_2
      const column = Math.floor(x0 + middle * dx)
      const row = Math.min(stack.rows - 2, Math.max(0, Math.floor(y0 + middle * dy)))
      const weight = (end - t) / 2 * dy * stack.stepDeg * DEGREE
      addPoint(stack, row, column, x0 + (middle - reach) * dx, y0 + (middle - reach) * dy, weight, sum)
      addPoint(stack, row, column, x0 + (middle + reach) * dx, y0 + (middle + reach) * dy, weight, sum)
      t = end
    }
    if (tX <= t) nextX += stepX
    if (tY <= t) nextY += stepY
  }
}

function addPoint(stack: GridStack, row: number, column: number, x: number, y: number, weight: number, sum: Float64Array): void {
  const { count, columns, values, cumulated, stepDeg } = stack
  const cells = columns - 1
  const turns = Math.floor(column / cells)
  const j = column - turns * cells
  const u = x - column
  const v = y - row
  const south = (row * columns + j) * count
  const north = south + columns * count
  const southTurn = (row * columns + cells) * count
  const northTurn = southTurn + columns * count
  const w = weight * sineSlope((y * stepDeg - 90) * DEGREE)
  const wSouth = w * (1 - v)
  const wNorth = w * v
  const step = stepDeg * DEGREE
  const quadratic = step * u * u / 2
  const linear = step * u - quadratic
  for (let k = 0; k < count; k++) {
    let pSouth = cumulated[south + k]! + linear * values[south + k]! + quadratic * values[south + count + k]!
    let pNorth = cumulated[north + k]! + linear * values[north + k]! + quadratic * values[north + count + k]!
    if (turns !== 0) {
      pSouth += turns * cumulated[southTurn + k]!
      pNorth += turns * cumulated[northTurn + k]!
    }
    sum[k] = sum[k]! + wSouth * pSouth + wNorth * pNorth
  }
}

/** What a ring round a pole encloses beyond its own contour: whole circles of latitude from its first vertex to the pole. */
function addCap(stack: GridStack, ring: ContourRing, out: Float64Array): void {
  const y0 = (ring.latDeg[0]! + 90) / stack.stepDeg
  const y1 = ring.pole === 'north' ? stack.rows - 1 : 0
  if (y0 === y1) return
  const right = new Float64Array(stack.count)
  addEdge(stack, stack.columns - 1, y0, stack.columns - 1, y1, right)
  const factor = ring.pole === 'north' ? ring.sign : -ring.sign
  for (let k = 0; k < stack.count; k++) out[k] = out[k]! + factor * right[k]!
}

/** d sin ψ / dφ at a geodetic latitude (radians). */
function sineSlope(phi: number): number {
  const squeeze = 1 - WGS84_E2
  const s = squeeze * Math.sin(phi)
  const c = Math.cos(phi)
  const norm2 = c * c + s * s
  return squeeze * c / (norm2 * Math.sqrt(norm2))
}
