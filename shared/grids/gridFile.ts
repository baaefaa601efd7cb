/** Raw values of a variable as the file stores them: packed integers stay packed. */
export type RawArray = Float64Array | Float32Array | Int32Array | Int16Array | Int8Array | Uint8Array | Uint16Array | Uint32Array

export type AttributeValue = string | number | number[]

export interface GridDimension { name: string, size: number }

/** A variable of a file of gridded data. */
export interface GridVariable {
  name: string
  dimensions: GridDimension[]
  attributes: Record<string, AttributeValue>
  /** Whether the values are numbers; text cannot be read. */
  numeric: boolean
  /** Length along each dimension of the pieces that are stored together; null where the values lie in one row. */
  chunks: number[] | null
  /** A block of raw values, the last dimension fastest. Throws RangeError for a block outside the variable. */
  read: (start: number[], count: number[]) => RawArray
}

/** A file of gridded data, whatever its format. */
export interface GridFile {
  format: 'netcdf-classic' | 'netcdf-4' | 'csv'
  attributes: Record<string, AttributeValue>
  variables: GridVariable[]
}

/** Bytes that are read where they are needed: a buffer, or a file on disk. */
export interface ByteSource {
  size: number
  /** Exactly `length` bytes from `offset`; throws RangeError beyond the end. */
  read: (offset: number, length: number) => Uint8Array
}

/** Bytes in memory as a source. */
export function sourceOf(bytes: Uint8Array): ByteSource {
  return {
    size: bytes.length,
    read: (offset, length) => {
      if (offset < 0 || offset + length > bytes.length) throw new RangeError(`bytes ${offset} to ${offset + length} must lie in ${bytes.length} bytes`)
      return bytes.subarray(offset, offset + length)
    }
  }
}

/** A text attribute; null where it is absent or a number. */
export function textAttribute(variable: { attributes: GridVariable['attributes'] }, name: string): string | null {
  const value = variable.attributes[name]
  return typeof value === 'string' ? value.trim() : null
}

/** Numbers of an attribute; empty where it is absent or text. */
export function numberAttribute(variable: { attributes: GridVariable['attributes'] }, name: string): number[] {
  const value = variable.attributes[name]
  return typeof value === 'number' ? [value] : Array.isArray(value) ? value : []
}

/** Throws RangeError for a block that does not lie in a variable of these sizes. */
export function checkBlock(name: string, sizes: number[], start: number[], count: number[]): void {
  const fits = start.length === sizes.length && count.length === sizes.length
    && sizes.every((size, d) => Number.isInteger(start[d]) && Number.isInteger(count[d]) && start[d]! >= 0 && count[d]! >= 0 && start[d]! + count[d]! <= size)
  if (!fits) throw new RangeError(`a block of ${name} must lie in ${sizes.join(' × ')} values, got ${count.join(' × ')} from ${start.join(', ')}`)
}
