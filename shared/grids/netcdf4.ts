import type { Dataset, File as Hdf5File, Group } from 'h5wasm'
import { InputError } from '../types/issue.ts'
import { checkBlock } from './gridFile.ts'
import type { AttributeValue, GridDimension, GridFile, GridVariable, RawArray } from './gridFile.ts'

/** Whether bytes begin as a file of HDF5, on which NetCDF-4 is built, does. */
export function isHdf5(bytes: Uint8Array): boolean {
  return [0x89, 0x48, 0x44, 0x46, 0x0d, 0x0a, 0x1a, 0x0a].every((byte, i) => bytes[i] === byte)
}

/** Attributes with which NetCDF-4 keeps its own house. */
const housekeeping = new Set(['DIMENSION_LIST', 'REFERENCE_LIST', 'CLASS', 'NAME', '_Netcdf4Dimid', '_Netcdf4Coordinates', '_nc3_strict', '_NCProperties'])
/** What NetCDF-4 names a dimension without a variable of its own. */
const bareDimension = 'This is a netCDF dimension but not a netCDF variable'

/**
 * A NetCDF-4 file through an HDF5 library that has opened it; the caller closes it. Variables of the root group are read, their
 * dimensions by the scales that are attached to them.
 *
 * @throws InputError for a file without variables
 */
export function openNetcdf4(file: Hdf5File): GridFile {
  const variables = datasetsOf(file).filter(dataset => !String(dataset.attrs.NAME?.value ?? '').startsWith(bareDimension)).map(gridVariable)
  if (variables.length === 0) {
    throw new InputError('The NetCDF file holds no variables', [{ path: 'bytes', code: 'not-a-grid', message: 'The root group of this HDF5 file holds no variables.' }])
  }
  return { format: 'netcdf-4', attributes: attributesOf(file), variables }
}

function datasetsOf(group: Group): Dataset[] {
  return group.keys().map(key => group.get(key)).filter((item): item is Dataset => item !== null && 'slice' in item && 'shape' in item)
}

function attributesOf(item: Dataset | Group): Record<string, AttributeValue> {
  const attributes: Record<string, AttributeValue> = {}
  for (const [name, { value }] of Object.entries(item.attrs)) {
    if (housekeeping.has(name)) continue
    const plain = plainValue(value)
    if (plain !== null) attributes[name] = plain
  }
  return attributes
}

function plainValue(value: unknown): AttributeValue | null {
  if (typeof value === 'string' || typeof value === 'number') return value
  if (typeof value === 'bigint') return Number(value)
  if (ArrayBuffer.isView(value) || Array.isArray(value)) {
    const items = Array.from(value as ArrayLike<unknown>)
    if (items.length === 1) return plainValue(items[0])
    if (items.every(item => typeof item === 'number' || typeof item === 'bigint')) return items.map(Number)
    return items.every(item => typeof item === 'string') ? items.join(' ') : null
  }
  return null
}

/** Classes of HDF5 types: whole numbers and floating-point numbers. */
const NUMBERS = [0, 1]

function gridVariable(dataset: Dataset): GridVariable {
  const name = dataset.path.replace(/^.*\//, '')
  const sizes = dataset.shape ?? []
  const { type, size, chunks } = dataset.metadata
  return {
    name,
    dimensions: sizes.map((length, d): GridDimension => ({ name: dimensionName(dataset, d, name), size: length })),
    attributes: attributesOf(dataset),
    numeric: NUMBERS.includes(type) && (type === 1 || size <= 8),
    chunks: chunks ?? null,
    read: (start, count) => {
      checkBlock(name, sizes, start, count)
      const values = sizes.length === 0 ? dataset.value : dataset.slice(start.map((from, d) => [from, from + count[d]!]))
      if (values instanceof BigInt64Array || values instanceof BigUint64Array) return Float64Array.from(values, Number)
      if (ArrayBuffer.isView(values) && !(values instanceof DataView)) return values as RawArray
      return Float64Array.from(Array.isArray(values) ? values as number[] : [Number(values)])
    }
  }
}

function dimensionName(dataset: Dataset, d: number, name: string): string {
  const scale = dataset.get_attached_scales(d)[0]
  if (scale) return scale.replace(/^.*\//, '')
  // A coordinate variable is the scale itself.
  return dataset.shape?.length === 1 ? name : `${name} ${d + 1}`
}
