import { geodeticFromGeocentricDeg } from './latitude.ts'

/**
 * The ocean function as fractional cells of equal width in GEOCENTRIC latitude and longitude: row by row from the south
 * pole, each row from 180° W eastward. A value is the part of the cell's area that is sea, 0 to 1 in steps of 1/255.
 */
export interface OceanCells { rows: number, columns: number, fraction: Float64Array }

export const OCEAN_CELL_ROWS = 720
export const OCEAN_CELL_COLUMNS = 1440

/** Geodetic bounds of the rows of a grid that is equal in geocentric latitude, degrees from −90 to 90. */
export function geocentricRowEdgesDeg(rows: number): Float64Array {
  return Float64Array.from({ length: rows + 1 }, (_, i) => i === 0 ? -90 : i === rows ? 90 : geodeticFromGeocentricDeg(-90 + 180 * i / rows))
}

/** Runs of whole land (0) and whole sea (255) are a byte and a varint; every other byte is a coastal cell. Base64. */
export function encodeOceanCells(fraction: Float64Array): string {
  const bytes: number[] = []
  let i = 0
  while (i < fraction.length) {
    const value = quantised(fraction[i]!)
    let length = 1
    if (value === 0 || value === 255) while (i + length < fraction.length && quantised(fraction[i + length]!) === value) length++
    bytes.push(value)
    if (value === 0 || value === 255) pushVarint(bytes, length)
    i += length
  }
  let binary = ''
  for (const byte of bytes) binary += String.fromCharCode(byte)
  return btoa(binary)
}

/** The cells that `encodeOceanCells` wrote. Throws RangeError when the count does not fit the grid. */
export function decodeOceanCells(base64: string, rows = OCEAN_CELL_ROWS, columns = OCEAN_CELL_COLUMNS): OceanCells {
  const binary = atob(base64)
  const fraction = new Float64Array(rows * columns)
  let at = 0
  let i = 0
  while (i < binary.length) {
    const value = binary.charCodeAt(i++)
    let length = 1
    if (value === 0 || value === 255) {
      length = 0
      for (let shift = 0; ; shift += 7) {
        const byte = binary.charCodeAt(i++)
        length += (byte & 127) * 2 ** shift
        if (byte < 128) break
      }
    }
    fraction.fill(value / 255, at, at + length)
    at += length
  }
  if (at !== fraction.length) throw new RangeError(`ocean cells must fill ${rows} × ${columns} = ${rows * columns} cells, got ${at}`)
  return { rows, columns, fraction }
}

function quantised(value: number): number {
  return Math.min(255, Math.max(0, Math.round(value * 255)))
}

function pushVarint(bytes: number[], value: number): void {
  while (value > 127) {
    bytes.push((value % 128) | 128)
    value = Math.floor(value / 128)
  }
  bytes.push(value)
}
