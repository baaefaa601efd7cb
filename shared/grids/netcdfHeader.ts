import { InputError } from '../types/issue.ts'
import type { AttributeValue, ByteSource, GridDimension, RawArray } from './gridFile.ts'

/** Bytes of each type of the classic formats, by the type's number: byte, char, short, int, float, double, ubyte, ushort, uint. */
export const classicBytes: Record<1 | 2 | 3 | 4 | 5 | 6 | 7 | 8 | 9, number> = { 1: 1, 2: 1, 3: 2, 4: 4, 5: 4, 6: 8, 7: 1, 8: 2, 9: 4 }
export type ClassicType = keyof typeof classicBytes
/** The type of text. */
export const CLASSIC_CHAR = 2

export interface ClassicVariable {
  name: string
  dimensions: GridDimension[]
  /** The first dimension is the record dimension: its parts lie `recordBytes` of the file apart. */
  record: boolean
  attributes: Record<string, AttributeValue>
  type: ClassicType
  begin: number
}

export interface ClassicHeader {
  attributes: Record<string, AttributeValue>
  variables: ClassicVariable[]
  /** Bytes from one record to the next. */
  recordBytes: number
}

/** Largest header that is read; one of a thousand variables has some 100 kB. */
const HEADER_LIMIT = 8 * 1024 * 1024
const [DIMENSION, VARIABLE, ATTRIBUTE] = [10, 11, 12]

/**
 * Header of a NetCDF file in one of the classic formats: CDF-1, CDF-2 (64-bit offsets) and CDF-5 (64-bit data).
 * Source: The NetCDF Classic Format Specification (Unidata, NetCDF 4.9 documentation, appendix B).
 *
 * @throws InputError for other bytes, for headers that do not hold, and for a file that is cut off
 */
export function readClassicHeader(source: ByteSource): ClassicHeader {
  const cursor = new Cursor(source.read(0, Math.min(source.size, HEADER_LIMIT)))
  const magic = cursor.bytes(4)
  const version = magic[3]!
  if (magic[0] !== 0x43 || magic[1] !== 0x44 || magic[2] !== 0x46 || ![1, 2, 5].includes(version)) throw damaged('it does not begin as one')
  cursor.wide = version === 5
  const recordCount = cursor.count()
  const dimensions = cursor.list(DIMENSION, (): GridDimension => ({ name: cursor.name(), size: cursor.count() }))
  const attributes = attributesAt(cursor)
  const variables = cursor.list(VARIABLE, (): ClassicVariable => {
    const name = cursor.name()
    const ids = Array.from({ length: Math.min(cursor.count(), 1024) }, () => cursor.count())
    if (ids.some(id => id >= dimensions.length)) throw damaged(`the variable ${name} has a dimension that is not declared`)
    const own = attributesAt(cursor)
    const type = typeOf(cursor.int())
    cursor.count()
    const begin = version === 1 ? cursor.int() : cursor.long()
    return { name, dimensions: ids.map(id => dimensions[id]!), record: ids.length > 0 && dimensions[ids[0]!]!.size === 0, attributes: own, type, begin }
  })
  return { attributes, ...withLengths(variables, recordCount, source.size) }
}

/** Variables with the record dimension's length, and the bytes of a record; every variable must end within the file. */
function withLengths(variables: ClassicVariable[], recordCount: number, size: number): Pick<ClassicHeader, 'variables' | 'recordBytes'> {
  const records = variables.filter(v => v.record)
  const slab = (v: ClassicVariable): number => v.dimensions.slice(v.record ? 1 : 0).reduce((n, d) => n * d.size, classicBytes[v.type])
  // One record variable alone is not padded to four bytes.
  const recordBytes = records.length === 1 ? slab(records[0]!) : records.reduce((sum, v) => sum + 4 * Math.ceil(slab(v) / 4), 0)
  // A count of all ones says that the file was being written: what lies in the file counts.
  const begin = records.reduce((least, v) => Math.min(least, v.begin), Infinity)
  const length = recordCount < 2 ** 32 - 1 ? recordCount : recordBytes > 0 ? Math.floor((size - begin) / recordBytes) : 0
  for (const variable of variables) {
    const end = variable.begin + (variable.record ? (length > 0 ? (length - 1) * recordBytes + slab(variable) : 0) : slab(variable))
    if (end > size) throw damaged(`it is cut off: the variable ${variable.name} ends at byte ${end} of ${size}`)
  }
  return { recordBytes, variables: variables.map(v => ({ ...v, dimensions: v.dimensions.map(d => d.size === 0 ? { name: d.name, size: length } : d) })) }
}

function attributesAt(cursor: Cursor): Record<string, AttributeValue> {
  const pairs = cursor.list(ATTRIBUTE, (): [string, AttributeValue] => {
    const name = cursor.name()
    const type = typeOf(cursor.int())
    const count = cursor.count()
    const bytes = cursor.padded(count * classicBytes[type])
    if (type === CLASSIC_CHAR) return [name, new TextDecoder().decode(bytes).replace(/\0+$/, '')]
    const values = decodeClassic(bytes, type)
    return [name, count === 1 ? values[0]! : Array.from(values)]
  })
  return Object.fromEntries(pairs)
}

function typeOf(number: number): ClassicType {
  if (number === 10 || number === 11) throw damaged('it holds integers of 64 bits, which are not read')
  if (!(number in classicBytes)) throw damaged(`it has a type of number ${number}`)
  return number as ClassicType
}

/** Big-endian values of the file as an array of their type. */
export function decodeClassic(bytes: Uint8Array, type: ClassicType): RawArray {
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  const n = bytes.length / classicBytes[type]
  switch (type) {
    case 1: return new Int8Array(bytes.slice().buffer)
    case 2: case 7: return bytes.slice()
    case 3: return filled(new Int16Array(n), i => view.getInt16(2 * i))
    case 4: return filled(new Int32Array(n), i => view.getInt32(4 * i))
    case 5: return filled(new Float32Array(n), i => view.getFloat32(4 * i))
    case 6: return filled(new Float64Array(n), i => view.getFloat64(8 * i))
    case 8: return filled(new Uint16Array(n), i => view.getUint16(2 * i))
    case 9: return filled(new Uint32Array(n), i => view.getUint32(4 * i))
  }
}

function filled<T extends { readonly length: number, [i: number]: number }>(out: T, at: (i: number) => number): T {
  for (let i = 0; i < out.length; i++) out[i] = at(i)
  return out
}

function damaged(why: string): InputError {
  return new InputError('The NetCDF file cannot be read', [{ path: 'bytes', code: 'not-a-grid', message: `This is not a NetCDF file that can be read: ${why}.` }])
}

/** Reads the header from front to back; anything beyond its end is a damaged file. */
class Cursor {
  /** Counts have 64 bits. */
  wide = false
  private at = 0
  private readonly view: DataView

  constructor(private readonly data: Uint8Array) {
    this.view = new DataView(data.buffer, data.byteOffset, data.byteLength)
  }

  bytes(length: number): Uint8Array {
    if (!(length >= 0) || this.at + length > this.data.length) throw damaged('its header is cut off')
    this.at += length
    return this.data.subarray(this.at - length, this.at)
  }

  /** Bytes and those behind them up to a whole number of four. */
  padded(length: number): Uint8Array {
    const bytes = this.bytes(length)
    this.bytes((4 - length % 4) % 4)
    return bytes
  }

  int(): number {
    this.bytes(4)
    return this.view.getUint32(this.at - 4)
  }

  long(): number {
    this.bytes(8)
    const value = this.view.getBigUint64(this.at - 8)
    if (value === 2n ** 64n - 1n) return 2 ** 32 - 1
    if (value > 2n ** 52n) throw damaged('a length in its header is beyond reason')
    return Number(value)
  }

  count(): number {
    return this.wide ? this.long() : this.int()
  }

  name(): string {
    return new TextDecoder().decode(this.padded(this.count()))
  }

  list<T>(tag: number, item: () => T): T[] {
    const found = this.int()
    const count = this.count()
    if (found !== tag && !(found === 0 && count === 0)) throw damaged('its header is out of order')
    if (count > 100_000) throw damaged('a length in its header is beyond reason')
    return Array.from({ length: count }, item)
  }
}
