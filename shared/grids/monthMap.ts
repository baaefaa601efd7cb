import type { Outline } from '../types/domain.ts'

/** Heights of one epoch, rows from the south, columns of the full circle from `westDeg` on; NaN where there is none. */
interface Epoch { latEdgesDeg: ArrayLike<number>, westDeg: number, stepDeg: number, columns: number, values: ArrayLike<number> }

/** A part of it for a map; `merged` cells along each side are one, with their mean. */
export interface MonthMap { latEdgesDeg: number[], westDeg: number, stepDeg: number, columns: number, values: (number | null)[], merged: number }

/** Ground that is shown around regions, degrees. */
const MARGIN_DEG = 4

/**
 * Cells about the outlines, all where none are given, with as many merged as it takes for no more than `most`. Means of merged cells are
 * plain ones, for the eye; series are never taken from them.
 */
export function monthMap(epoch: Epoch, outlines: readonly Outline[], most: number): MonthMap {
  const rows = epoch.latEdgesDeg.length - 1
  const { row, rowCount, column, columnCount } = cutOf(epoch, outlines, rows)
  let merged = 1
  while (Math.ceil(rowCount / merged) * Math.ceil(columnCount / merged) > most) merged++
  const [outRows, columns] = [Math.ceil(rowCount / merged), Math.ceil(columnCount / merged)]
  const values: (number | null)[] = []
  for (let i = 0; i < outRows; i++) {
    for (let j = 0; j < columns; j++) {
      let [sum, n] = [0, 0]
      for (let y = row + i * merged; y < Math.min(row + (i + 1) * merged, row + rowCount); y++) {
        for (let x = column + j * merged; x < Math.min(column + (j + 1) * merged, column + columnCount); x++) {
          const value = epoch.values[y * epoch.columns + x % epoch.columns]!
          if (!Number.isNaN(value)) [sum, n] = [sum + value, n + 1]
        }
      }
      values.push(n > 0 ? Number((sum / n).toPrecision(5)) : null)
    }
  }
  const edge = (i: number): number => epoch.latEdgesDeg[Math.min(row + i * merged, row + rowCount)]!
  return { latEdgesDeg: Array.from({ length: outRows + 1 }, (_, i) => edge(i)), westDeg: epoch.westDeg + column * epoch.stepDeg, stepDeg: epoch.stepDeg * merged, columns, values, merged }
}

function cutOf(epoch: Epoch, outlines: readonly Outline[], rows: number): { row: number, rowCount: number, column: number, columnCount: number } {
  const whole = { row: 0, rowCount: rows, column: 0, columnCount: epoch.columns }
  if (outlines.length === 0) return whole
  const places = outlines.flatMap(outline => outline.type === 'Polygon' ? outline.coordinates.flat() : outline.coordinates.flat(2))
  const [south, north] = [Math.min(...places.map(p => p[1])) - MARGIN_DEG, Math.max(...places.map(p => p[1])) + MARGIN_DEG]
  const lats = Array.from({ length: rows }, (_, i) => i).filter(i => epoch.latEdgesDeg[i + 1]! > south && epoch.latEdgesDeg[i]! < north)
  if (lats.length === 0) return whole
  const { column, columnCount } = columnsAround(epoch, places.map(p => p[0]), Math.max(Math.abs(south), Math.abs(north)))
  return { row: lats[0]!, rowCount: lats.length, column, columnCount }
}

/** The shortest run of columns that holds all longitudes: the largest gap between them is left out. */
function columnsAround(epoch: Epoch, lons: number[], mostPoleward: number): { column: number, columnCount: number } {
  const turned = lons.map(lon => (((lon - epoch.westDeg) % 360) + 360) % 360).sort((a, b) => a - b)
  let [gap, from] = [turned[0]! + 360 - turned.at(-1)!, turned[0]!]
  for (let i = 1; i < turned.length; i++) {
    if (turned[i]! - turned[i - 1]! > gap) [gap, from] = [turned[i]! - turned[i - 1]!, turned[i]!]
  }
  // Maps are wider than high, and meridians run together towards a pole: a margin in degrees grows there.
  const margin = 1.7 * MARGIN_DEG / Math.max(0.1, Math.cos(Math.min(89, mostPoleward) * Math.PI / 180))
  if (gap < 2 * margin + 20) return { column: 0, columnCount: epoch.columns }
  const first = Math.floor((from - margin) / epoch.stepDeg)
  const count = Math.min(epoch.columns, Math.ceil((360 - gap + 2 * margin) / epoch.stepDeg) + 1)
  return { column: (first % epoch.columns + epoch.columns) % epoch.columns, columnCount: count }
}
