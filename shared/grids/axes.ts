import { InputError } from '../types/issue.ts'
import { cfTimeUnits, mjdFromCf } from './cfTime.ts'
import { numberAttribute, textAttribute } from './gridFile.ts'
import type { GridFile, GridVariable } from './gridFile.ts'

/** What a dimension is, by the CF conventions (1.11, chapter 4). */
export type AxisKind = 'latitude' | 'longitude' | 'time' | 'other'

/** Rows of a grid in the order of the file. */
export interface LatitudeAxis {
  centresDeg: Float64Array
  /** Bounds of all rows from south to north, rows + 1 of them, geodetic, within ±90. */
  edgesDeg: Float64Array
  /** Whether the file runs from south to north. */
  rising: boolean
}

/** Columns of a grid: equal steps of a full circle, of which the file holds some or all. */
export interface LongitudeAxis {
  centresDeg: Float64Array
  /** West bound of column 0 of the full circle. */
  westDeg: number
  stepDeg: number
  /** Columns of the full circle, and the column of the circle that each one of the file is; −1 for one that repeats another. */
  circle: number
  column: Int32Array
}

export interface TimeAxis { mjd: Float64Array, startMjd: Float64Array | null, endMjd: Float64Array | null, calendar: string }

/** Kind of a dimension by its coordinate variable: units first, then standard name, axis and name. */
export function axisKind(file: GridFile, dimension: string): AxisKind {
  const variable = coordinate(file, dimension)
  const units = variable ? textAttribute(variable, 'units') ?? '' : ''
  if (/^degrees?_?(?:north|n)$/i.test(units)) return 'latitude'
  if (/^degrees?_?(?:east|e)$/i.test(units)) return 'longitude'
  if (/\bsince\b/i.test(units)) return 'time'
  const said = [variable && textAttribute(variable, 'standard_name'), dimension].map(name => name?.toLowerCase() ?? '')
  const axis = variable ? textAttribute(variable, 'axis') : null
  if (said.includes('latitude') || said.includes('lat') || axis === 'Y') return 'latitude'
  if (said.includes('longitude') || said.includes('lon') || axis === 'X') return 'longitude'
  return said.includes('time') || axis === 'T' ? 'time' : 'other'
}

/** The coordinate variable of a dimension; null where it has none. */
export function coordinate(file: GridFile, dimension: string): GridVariable | null {
  return file.variables.find(v => v.name === dimension && v.dimensions.length === 1 && v.dimensions[0]!.name === dimension && v.numeric) ?? null
}

/** All values of a coordinate or of its bounds, unpacked. */
export function allValues(variable: GridVariable): Float64Array {
  const sizes = variable.dimensions.map(d => d.size)
  const scale = numberAttribute(variable, 'scale_factor')[0] ?? 1
  const offset = numberAttribute(variable, 'add_offset')[0] ?? 0
  return Float64Array.from(variable.read(sizes.map(() => 0), sizes), v => v * scale + offset)
}

/** Lower and upper bounds of each cell of a coordinate, one after the other; null where the file gives none. */
function boundsOf(file: GridFile, variable: GridVariable): Float64Array | null {
  const name = textAttribute(variable, 'bounds')
  const bounds = name === null ? undefined : file.variables.find(v => v.name === name && v.numeric)
  const n = variable.dimensions[0]!.size
  return bounds && bounds.dimensions.length === 2 && bounds.dimensions[0]!.size === n && bounds.dimensions[1]!.size === 2 ? allValues(bounds) : null
}

/**
 * Rows of a grid, from bounds or from half-way between centres; the outermost rows are as wide as their neighbours, up to the poles.
 *
 * @throws InputError for latitudes that do not rise or fall, leave ±90°, or have bounds with gaps
 */
export function latitudeAxis(file: GridFile, variable: GridVariable): LatitudeAxis {
  const centresDeg = allValues(variable)
  const n = centresDeg.length
  if (n === 0 || centresDeg.some(lat => !(Math.abs(lat) <= 90 + 1e-6))) throw badAxis(variable.name, 'latitudes must lie within ±90°')
  const rising = n === 1 || centresDeg[1]! > centresDeg[0]!
  const sorted = rising ? centresDeg : Float64Array.from(centresDeg).reverse()
  if (sorted.some((lat, i) => i > 0 && !(lat > sorted[i - 1]!))) throw badAxis(variable.name, 'latitudes must rise or fall all the way')
  const edges = new Float64Array(n + 1)
  const bounds = boundsOf(file, variable)
  if (bounds) {
    for (let i = 0; i < n; i++) {
      const at = rising ? i : n - 1 - i
      const low = Math.min(bounds[2 * at]!, bounds[2 * at + 1]!)
      if (i > 0 && Math.abs(low - edges[i]!) > 1e-4) throw badAxis(variable.name, `the bounds leave a gap at ${low}°`)
      edges[i] = low
      edges[i + 1] = Math.max(bounds[2 * at]!, bounds[2 * at + 1]!)
    }
  } else {
    if (n === 1) throw badAxis(variable.name, 'one row alone has no width: it needs bounds')
    for (let i = 1; i < n; i++) edges[i] = (sorted[i - 1]! + sorted[i]!) / 2
    edges[0] = sorted[0]! - (edges[1]! - sorted[0]!)
    edges[n] = sorted[n - 1]! + (sorted[n - 1]! - edges[n - 1]!)
  }
  return { centresDeg, rising, edgesDeg: edges.map(lat => Math.abs(Math.abs(lat) - 90) < 1e-4 ? 90 * Math.sign(lat) : Math.max(-90, Math.min(90, lat))) }
}

/**
 * Columns of a grid: 0 to 360° or −180° to 180°, rising or falling, all of the circle or a part of it.
 *
 * @throws InputError for columns that are not equally wide or do not fit a circle a whole number of times
 */
export function longitudeAxis(file: GridFile, variable: GridVariable): LongitudeAxis {
  const centresDeg = allValues(variable)
  const n = centresDeg.length
  const bounds = boundsOf(file, variable)
  if (n === 0 || centresDeg.some(lon => !Number.isFinite(lon))) throw badAxis(variable.name, 'longitudes must be numbers')
  if (n === 1 && !bounds) throw badAxis(variable.name, 'one column alone has no width: it needs bounds')
  const turned = (difference: number): number => difference - 360 * Math.round(difference / 360)
  const step = bounds ? Math.abs(turned(bounds[1]! - bounds[0]!)) : Math.abs(turned(centresDeg[1]! - centresDeg[0]!))
  const circle = Math.round(360 / step)
  if (!(step > 0) || Math.abs(circle * step - 360) > 0.01 * step) throw badAxis(variable.name, `columns of ${step}° do not fit a circle a whole number of times`)
  const stepDeg = 360 / circle
  // The first column's place is known to the digits of the file; single precision is a hundredth of a millionth of a circle.
  const westDeg = rounded((bounds ? Math.min(bounds[0]!, bounds[1]!) : centresDeg[0]! - stepDeg / 2), stepDeg)
  const column = new Int32Array(n)
  const seen = new Set<number>()
  for (let j = 0; j < n; j++) {
    const place = (centresDeg[j]! - westDeg) / stepDeg - 0.5
    const k = Math.round(place)
    if (Math.abs(place - k) > 0.02) throw badAxis(variable.name, `columns must be equally wide, ${stepDeg}° here; the column at ${centresDeg[j]}° is not`)
    const inCircle = ((k % circle) + circle) % circle
    column[j] = seen.has(inCircle) ? -1 : inCircle
    seen.add(inCircle)
  }
  return { centresDeg, westDeg, stepDeg, circle, column }
}

/** A bound to the nearest thousandth of a step: what single precision took from it is given back. */
function rounded(lon: number, step: number): number {
  return Math.round(lon / step * 1000) / 1000 * step
}

/**
 * Epochs of a time coordinate as MJD, the middle of their bounds where they have some.
 *
 * @throws InputError for units or a calendar that are not understood
 */
export function timeAxis(file: GridFile, variable: GridVariable): TimeAxis {
  let units: ReturnType<typeof cfTimeUnits>
  try {
    units = cfTimeUnits(textAttribute(variable, 'units') ?? '', textAttribute(variable, 'calendar'))
  } catch (error) {
    if (!(error instanceof RangeError)) throw error
    throw badAxis(variable.name, error.message)
  }
  const { calendar } = units
  const bounds = boundsOf(file, variable)
  if (!bounds) return { mjd: allValues(variable).map(t => mjdFromCf(t, units)), startMjd: null, endMjd: null, calendar }
  const at = (side: 0 | 1): Float64Array => Float64Array.from({ length: bounds.length / 2 }, (_, i) => mjdFromCf(bounds[2 * i + side]!, units))
  const [startMjd, endMjd] = [at(0), at(1)]
  return { mjd: startMjd.map((t, i) => (t + endMjd[i]!) / 2), startMjd, endMjd, calendar }
}

function badAxis(name: string, why: string): InputError {
  return new InputError('The grid cannot be read', [{ path: name, code: 'bad-axis', message: `The coordinate “${name}” does not hold: ${why}.` }])
}
