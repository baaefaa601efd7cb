import type { Outline, Position } from '../types/domain.ts'
import { InputError } from '../types/issue.ts'
import { limits, readOutlineFeatures, type OutlineFeatures } from './outline.ts'

/** Whether a text begins as well-known text of an area does. */
export function looksLikeWkt(text: string): boolean {
  return /^\uFEFF?\s*(?:SRID\s*=\s*\d+\s*;)?\s*(?:MULTI)?POLYGON\b/i.test(text)
}

/** Geographic systems that differ from WGS 84 by no more than a metre or two. */
const likeWgs84 = new Set(['4326', '4979', '4258', '4269', '4283', '7844'])

/**
 * Outlines of well-known text (OGC 06-103r4, 7.2): POLYGON and MULTIPOLYGON with or without Z and M, one after another, SRID before
 * them as in EWKT. Longitude first, WGS 84. Throws InputError with the place of the fault, and for another SRID by its number.
 */
export function readWkt(text: string): OutlineFeatures {
  if (text.length > limits.bytes) throw new InputError('The text is over 8 MiB. Simplify the outline and try again.', [], 413)
  const reader = new WktReader(text.replace(/^\uFEFF/, ''))
  const geometries: Outline[] = []
  do geometries.push(reader.geometry())
  while (!reader.atEnd())
  return readOutlineFeatures({ type: 'FeatureCollection', features: geometries.map(geometry => ({ type: 'Feature', properties: null, geometry })) })
}

class WktReader {
  private readonly text: string
  private at = 0

  constructor(text: string) {
    this.text = text
  }

  atEnd(): boolean {
    this.match(/[\s;]*/y)
    return this.at >= this.text.length
  }

  geometry(): Outline {
    const srid = this.match(/\s*SRID\s*=\s*(\d+)\s*;/iy)?.[1]
    if (srid && !likeWgs84.has(srid)) {
      throw new InputError(`The text is in EPSG:${srid}. Well-known text is read in WGS 84 longitude and latitude; convert it first.`, [], 422)
    }
    const type = this.match(/\s*(MULTIPOLYGON|POLYGON)\b\s*(?:ZM|Z|M)?\s*/iy)?.[1]?.toUpperCase()
    if (!type) throw this.fault('POLYGON or MULTIPOLYGON')
    if (this.match(/EMPTY\b/iy)) throw new InputError('The outline is empty.', [], 422)
    const polygon = () => this.list(() => this.list(() => this.position()))
    return type === 'POLYGON' ? { type: 'Polygon', coordinates: polygon() } : { type: 'MultiPolygon', coordinates: this.list(polygon) }
  }

  private list<T>(item: () => T): T[] {
    if (!this.match(/\s*\(/y)) throw this.fault('“(”')
    const items: T[] = []
    do items.push(item())
    while (this.match(/\s*,/y))
    if (!this.match(/\s*\)/y)) throw this.fault('“,” or “)”')
    return items
  }

  private position(): Position {
    const numbers: number[] = []
    for (let found = this.number(); found !== null; found = this.number()) numbers.push(found)
    if (numbers.length < 2 || numbers.length > 4) throw this.fault('longitude and latitude')
    return [numbers[0]!, numbers[1]!]
  }

  private number(): number | null {
    const found = this.match(/\s*([+-]?(?:\d+\.?\d*|\.\d+)(?:e[+-]?\d+)?)(?=[\s,)])/iy)
    return found ? Number(found[1]) : null
  }

  private match(pattern: RegExp): RegExpExecArray | null {
    pattern.lastIndex = this.at
    const found = pattern.exec(this.text)
    if (found) this.at = pattern.lastIndex
    return found
  }

  private fault(wanted: string): InputError {
    this.match(/\s*/y)
    const before = this.text.slice(0, this.at).split('\n')
    const found = this.at < this.text.length ? `“${this.text.slice(this.at, this.at + 12)}”` : 'the end'
    return new InputError(`Line ${before.length}, column ${before.at(-1)!.length + 1}: ${wanted} is wanted, and ${found} stands there.`, [], 422)
  }
}
