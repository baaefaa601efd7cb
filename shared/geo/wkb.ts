import type { Outline, Position } from '../types/domain.ts'
import { InputError } from '../types/issue.ts'
import { polygonsOf } from './parts.ts'

const polygonType = 3
const multiPolygonType = 6

/**
 * The area that well-known binary holds (OGC 06-103r4, 8.2; heights and measures are dropped, and the flags of the extended form read);
 * null for what is no area or is empty. Coordinates in the units of the file. Throws InputError where the bytes end too early.
 */
export function readWkb(bytes: Uint8Array): Outline | null {
  const reader = new WkbReader(bytes)
  try {
    return reader.geometry()
  }
  catch (error) {
    if (error instanceof RangeError) throw new InputError('A geometry in the file is damaged or cut off.', [], 422)
    throw error
  }
}

class WkbReader {
  private readonly view: DataView
  private at = 0

  constructor(bytes: Uint8Array) {
    this.view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  }

  geometry(): Outline | null {
    const { type, little, size } = this.head()
    if (type === polygonType) {
      const coordinates = this.rings(little, size)
      return coordinates.length ? { type: 'Polygon', coordinates } : null
    }
    if (type !== multiPolygonType) return null
    const parts = this.list(little, 9, () => {
      const head = this.head()
      if (head.type !== polygonType) throw new RangeError('a part that is no polygon')
      return this.rings(head.little, head.size)
    })
    const coordinates = parts.filter(rings => rings.length > 0)
    return coordinates.length ? { type: 'MultiPolygon', coordinates } : null
  }

  /** Byte order, kind of geometry, and numbers a position. */
  private head(): { type: number, little: boolean, size: number } {
    const little = this.view.getUint8(this.at) === 1
    const code = this.view.getUint32(this.at + 1, little)
    this.at += 5
    const thousands = Math.floor((code & 0x0FFFFFFF) / 1000)
    const heights = (code & 0x80000000) !== 0 || thousands === 1 || thousands === 3
    const measures = (code & 0x40000000) !== 0 || thousands === 2 || thousands === 3
    if (code & 0x20000000) this.at += 4
    return { type: (code & 0x0FFFFFFF) % 1000, little, size: 2 + Number(heights) + Number(measures) }
  }

  private rings(little: boolean, size: number): Position[][] {
    return this.list(little, 4, () => this.list(little, 8 * size, () => {
      const position: Position = [this.view.getFloat64(this.at, little), this.view.getFloat64(this.at + 8, little)]
      this.at += 8 * size
      return position
    }))
  }

  /** A counted list; the count is held against the bytes that are left, of which each item takes at least so many. */
  private list<T>(little: boolean, least: number, item: () => T): T[] {
    const count = this.view.getUint32(this.at, little)
    this.at += 4
    if (count * least > this.view.byteLength - this.at) throw new RangeError('a count beyond the end')
    return Array.from({ length: count }, item)
  }
}

/** An outline as well-known binary, little-endian, always a multipolygon. Degrees. */
export function writeWkb(outline: Outline): Uint8Array {
  const polygons = polygonsOf(outline)
  const length = 9 + polygons.reduce((sum, rings) => sum + 9 + rings.reduce((bytes, ring) => bytes + 4 + 16 * ring.length, 0), 0)
  const view = new DataView(new ArrayBuffer(length))
  let at = 0
  const count = (n: number) => { view.setUint32(at, n, true); at += 4 }
  const head = (type: number, n: number) => {
    view.setUint8(at++, 1)
    count(type)
    count(n)
  }
  head(multiPolygonType, polygons.length)
  for (const rings of polygons) {
    head(polygonType, rings.length)
    for (const ring of rings) {
      count(ring.length)
      for (const value of ring.flat()) { view.setFloat64(at, value, true); at += 8 }
    }
  }
  return new Uint8Array(view.buffer)
}
