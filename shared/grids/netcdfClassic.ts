import { checkBlock } from './gridFile.ts'
import type { ByteSource, GridFile, GridVariable } from './gridFile.ts'
import { CLASSIC_CHAR, classicBytes, decodeClassic, readClassicHeader } from './netcdfHeader.ts'
import type { ClassicVariable } from './netcdfHeader.ts'

/** Whether bytes begin as a NetCDF file of a classic format does. */
export function isNetcdfClassic(bytes: Uint8Array): boolean {
  return bytes[0] === 0x43 && bytes[1] === 0x44 && bytes[2] === 0x46 && (bytes[3] === 1 || bytes[3] === 2 || bytes[3] === 5)
}

/**
 * Opens a NetCDF file of a classic format. Only the header is read; blocks are read where they are asked for, so that a file
 * larger than the memory can be used.
 *
 * @throws InputError for a file that is none, is cut off or damaged
 */
export function openNetcdfClassic(source: ByteSource): GridFile {
  const { attributes, variables, recordBytes } = readClassicHeader(source)
  return {
    format: 'netcdf-classic',
    attributes,
    variables: variables.map((variable): GridVariable => ({
      name: variable.name,
      dimensions: variable.dimensions,
      attributes: variable.attributes,
      numeric: variable.type !== CLASSIC_CHAR,
      chunks: null,
      read: (start, count) => decodeClassic(readBlock(source, variable, recordBytes, start, count), variable.type)
    }))
  }
}

function readBlock(source: ByteSource, variable: ClassicVariable, recordBytes: number, start: number[], count: number[]): Uint8Array {
  const sizes = variable.dimensions.map(d => d.size)
  checkBlock(variable.name, sizes, start, count)
  const n = sizes.length
  // Bytes of all that lies inside one place of each dimension, and from one place to the next.
  const inside = sizes.map((_, d) => sizes.slice(d + 1).reduce((bytes, size) => bytes * size, classicBytes[variable.type]))
  const strides = inside.map((bytes, d) => variable.record && d === 0 ? recordBytes : bytes)
  const whole = (d: number): boolean => sizes.slice(d + 1).every((size, k) => count[d + 1 + k] === size)
  const block = new Uint8Array(count.reduce((bytes, c) => bytes * c, classicBytes[variable.type]))
  let written = 0
  const take = (offset: number, bytes: number): void => {
    block.set(source.read(offset, bytes), written)
    written += bytes
  }
  const copy = (d: number, offset: number): void => {
    if (d === n) return take(offset, classicBytes[variable.type])
    const first = offset + start[d]! * strides[d]!
    if (whole(d) && strides[d] === inside[d]) return take(first, count[d]! * inside[d]!)
    for (let i = 0; i < count[d]!; i++) copy(d + 1, first + i * strides[d]!)
  }
  if (block.length > 0) copy(0, variable.begin)
  return block
}
