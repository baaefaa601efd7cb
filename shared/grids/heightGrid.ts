import { normaliseUnit } from '../series/unitText.ts'
import { InputError } from '../types/issue.ts'
import { axisKind, coordinate, latitudeAxis, longitudeAxis, timeAxis } from './axes.ts'
import type { LatitudeAxis, LongitudeAxis, TimeAxis } from './axes.ts'
import { numberAttribute, textAttribute } from './gridFile.ts'
import type { GridFile, GridVariable } from './gridFile.ts'

/** A variable that could be a grid: what a person chooses from. */
export interface GridCandidate {
  name: string
  longName: string | null
  units: string | null
  /** Metres of water per unit; null where the unit is not one of water-equivalent height. */
  metresPerUnit: number | null
  epochs: number
  rows: number
  columns: number
}

/** A grid of a file with its axes, ready to be read block by block. */
export interface OpenGrid {
  variable: GridVariable
  candidate: GridCandidate
  latitude: LatitudeAxis
  longitude: LongitudeAxis
  /** Null for a grid without time, as masks are. */
  time: TimeAxis | null
  /** Places of time, latitude and longitude among the dimensions of the variable; −1 for no time. */
  dimension: { time: number, latitude: number, longitude: number }
  /** A raw value in the unit of the grid; NaN where it is missing. */
  unpack: (raw: number) => number
}

/** Metres of water per unit, for the units that a grid of heights is in. */
const heights: Record<string, number> = { 'm': 1, 'cm': 1e-2, 'mm': 1e-3, 'in': 0.0254, 'kg m^-2': 1e-3, 'kg / m^2': 1e-3 }

/** Metres of water per unit of a text like “cm”, “mm w.e.” or “kg m-2”; null for anything else. */
export function metresPerUnit(units: string | null): number | null {
  if (units === null) return null
  try {
    const { expression, multiplier, of } = normaliseUnit(units.replace(/\*\*/g, '^'))
    return of === 'ice' || !(expression in heights) ? null : multiplier * heights[expression]!
  } catch (error) {
    if (error instanceof RangeError) return null
    throw error
  }
}

/** Variables over latitude and longitude, those of water-equivalent height first. */
export function gridCandidates(file: GridFile): GridCandidate[] {
  return file.variables.flatMap((variable) => {
    const kinds = variable.dimensions.map(d => axisKind(file, d.name))
    if (!variable.numeric || !kinds.includes('latitude') || !kinds.includes('longitude')) return []
    const size = (kind: typeof kinds[number]): number => variable.dimensions[kinds.indexOf(kind)]?.size ?? 0
    const units = textAttribute(variable, 'units')
    return [{
      name: variable.name, longName: textAttribute(variable, 'long_name') ?? textAttribute(variable, 'standard_name'), units,
      metresPerUnit: metresPerUnit(units), epochs: size('time'), rows: size('latitude'), columns: size('longitude')
    }]
  }).sort((a, b) => Number(b.epochs > 0) - Number(a.epochs > 0) || Number(b.metresPerUnit !== null) - Number(a.metresPerUnit !== null))
}

/**
 * Opens a variable as a grid by the CF conventions.
 *
 * @param name of the variable; absent: the first that is a height over time
 * @throws InputError where there is no such grid, an axis does not hold, or a further dimension has more than one place
 */
export function openGrid(file: GridFile, name?: string): OpenGrid {
  const candidates = gridCandidates(file)
  const candidate = name === undefined ? candidates.find(c => c.epochs > 0) : candidates.find(c => c.name === name)
  if (!candidate) {
    const known = candidates.map(c => c.name).join(', ')
    throw problem('no-grid', name === undefined
      ? `No variable over time, latitude and longitude was found${known ? `; without time there ${candidates.length === 1 ? 'is' : 'are'} ${known}` : ''}.`
      : `The file holds no grid “${name}”${known ? `; it holds ${known}` : ''}.`)
  }
  const variable = file.variables.find(v => v.name === candidate.name)!
  const kinds = variable.dimensions.map(d => axisKind(file, d.name))
  const extra = variable.dimensions.find((d, i) => kinds[i] === 'other' && d.size !== 1)
  if (extra) throw problem('extra-dimension', `“${variable.name}” runs over “${extra.name}” as well, of ${extra.size} places: a grid has time, latitude and longitude only.`)
  const axis = (kind: 'latitude' | 'longitude' | 'time'): GridVariable => {
    const dimension = variable.dimensions[kinds.indexOf(kind)]!
    const found = coordinate(file, dimension.name)
    if (!found) throw problem('no-coordinate', `The dimension “${dimension.name}” has no coordinate variable.`)
    return found
  }
  const hasTime = kinds.includes('time')
  return {
    variable,
    candidate,
    latitude: latitudeAxis(file, axis('latitude')),
    longitude: longitudeAxis(file, axis('longitude')),
    time: hasTime ? timeAxis(file, axis('time')) : null,
    dimension: { time: kinds.indexOf('time'), latitude: kinds.indexOf('latitude'), longitude: kinds.indexOf('longitude') },
    unpack: unpacker(variable)
  }
}

/** What NetCDF fills with where a file says nothing: NC_FILL_FLOAT and NC_FILL_DOUBLE, NC_FILL_INT, NC_FILL_SHORT. */
const defaultFills = [9.969209968386869e36, -2_147_483_647, -32_767]

/**
 * From raw values to the unit of the variable, by `scale_factor` and `add_offset`; NaN for `_FillValue`, `missing_value` and what lies
 * outside `valid_min`, `valid_max` or `valid_range`, all of which are given packed (CF 1.11, §2.5.1 and §8.1).
 */
export function unpacker(variable: Pick<GridVariable, 'attributes'>): (raw: number) => number {
  const scale = numberAttribute(variable, 'scale_factor')[0] ?? 1
  const offset = numberAttribute(variable, 'add_offset')[0] ?? 0
  const stated = [...numberAttribute(variable, '_FillValue'), ...numberAttribute(variable, 'missing_value')]
  const missing = stated.length > 0 ? stated : defaultFills
  // A mark that was written in single precision is met by values in double precision, and the other way round.
  const single = missing.map(Math.fround)
  const range = numberAttribute(variable, 'valid_range')
  const low = numberAttribute(variable, 'valid_min')[0] ?? range[0] ?? -Infinity
  const high = numberAttribute(variable, 'valid_max')[0] ?? range[1] ?? Infinity
  return (raw) => {
    if (!(raw >= low && raw <= high)) return Number.NaN
    for (const mark of missing) if (raw === mark) return Number.NaN
    const rough = Math.fround(raw)
    for (const mark of single) if (rough === mark && Math.abs(mark) > 2 ** 24) return Number.NaN
    return raw * scale + offset
  }
}

/** All values of a grid without time, in the file's order of rows and columns, NaN where missing. */
export function staticValues(grid: OpenGrid): Float64Array {
  return valuesAtEpoch(grid, 0)
}

/** Values of one epoch, row by row in the order of the file, in the unit of the grid; NaN where missing. Throws RangeError for no such epoch. */
export function valuesAtEpoch(grid: OpenGrid, epoch: number): Float64Array {
  const { dimensions } = grid.variable
  const { time, latitude, longitude } = grid.dimension
  const start = dimensions.map((_, d) => d === time ? epoch : 0)
  const count = dimensions.map((dim, d) => d === time ? 1 : dim.size)
  const raw = grid.variable.read(start, count)
  const [rows, columns] = [dimensions[latitude]!.size, dimensions[longitude]!.size]
  const out = new Float64Array(rows * columns)
  const byRow = latitude < longitude
  for (let i = 0; i < rows; i++) for (let j = 0; j < columns; j++) out[i * columns + j] = grid.unpack(raw[byRow ? i * columns + j : j * rows + i]!)
  return out
}

function problem(code: string, message: string): InputError {
  return new InputError('The grid cannot be read', [{ path: 'variable', code, message }])
}
