import type { Outline } from '../types/domain.ts'
import { InputError, type Issue } from '../types/issue.ts'
import { checkRings } from './checkRings.ts'
import { checkShape, countPositions, type JsonObject } from './checkShape.ts'
import { findJsonFault } from './jsonFault.ts'

/** What an outline may hold. The vertex and byte limits keep one request from holding the server for seconds. */
export const limits = { vertices: 200_000, bytes: 8 * 1024 * 1024, outlines: 500, issues: 50 } as const

/** One region's outline from a file, with the name its attributes give and what else they say. */
export interface NamedOutline { name?: string, attributes?: Record<string, string>, geometry: Outline }

/** An outline of a file that cannot be taken, and why. */
export interface FaultyOutline { name?: string, issues: Issue[] }

/** What a file holds: outlines, outlines with faults, and the number of features that are no areas. */
export interface OutlineFeatures { outlines: NamedOutline[], faulty: FaultyOutline[], leftOut: number }

/**
 * Faults of a polygon or multipolygon: shape, numbers, latitude and longitude range, rings too short, open, without area or
 * self-crossing, holes and parts that lie where they may not. Empty where it holds. Paths start with `prefix`.
 */
export function checkOutline(geometry: unknown, prefix = ''): Issue[] {
  const vertices = countPositions((geometry as JsonObject | null)?.coordinates, limits.vertices)
  if (vertices > limits.vertices) return [tooMany(prefix)]
  const { issues, outline } = checkShape(geometry, prefix, limits.issues)
  return outline && issues.length === 0 ? checkRings(outline, prefix, limits.issues) : issues
}

/** Throws what `checkOutline` finds: status 413 for size, else 422. Gives the outline without heights and foreign members. */
export function requireOutline(geometry: unknown, prefix = ''): Outline {
  const issues = checkOutline(geometry, prefix)
  if (issues.length > 0) throw refusal(issues)
  return checkShape(geometry, prefix, limits.issues).outline!
}

/** The one outline that a GeoJSON text or object holds: Polygon, MultiPolygon, Feature or FeatureCollection with one polygon feature. */
export function readOutline(input: unknown): Outline {
  const { outlines } = readOutlineFile(input)
  if (outlines.length > 1) {
    throw refusal([{
      code: 'several-outlines', message: `There are ${outlines.length} outlines here, and one is wanted. Choose one of them.`
    }])
  }
  return outlines[0]!.geometry
}

/** Every outline that a GeoJSON text or object holds, with names from the attributes where there are any. */
export function readOutlines(input: unknown): NamedOutline[] {
  return readOutlineFile(input).outlines
}

/** As `readOutlines`, and how many features were left out because they are not areas. */
export function readOutlineFile(input: unknown): { outlines: NamedOutline[], leftOut: number } {
  const { outlines, faulty, leftOut } = examine(input)
  const issues = faulty.flatMap(item => item.issues).slice(0, limits.issues)
  if (issues.length > 0) throw refusal(issues)
  return { outlines, leftOut }
}

/** Every outline of a GeoJSON text or object, those with faults apart. Throws where none is left, as `readOutlineFile` does. */
export function readOutlineFeatures(input: unknown): OutlineFeatures {
  const found = examine(input)
  if (found.outlines.length === 0) throw refusal(found.faulty.flatMap(item => item.issues).slice(0, limits.issues))
  return found
}

function examine(input: unknown): OutlineFeatures {
  const root = typeof input === 'string' ? parseText(input) : input
  const found = collect(root)
  const vertices = found.list.reduce((sum, item) => sum + countPositions((item.geometry as JsonObject).coordinates, limits.vertices), 0)
  if (vertices > limits.vertices) throw refusal([tooMany('')])
  if (found.list.length > limits.outlines) {
    throw refusal([{ code: 'too-many-outlines', message: `There are ${found.list.length} outlines here; at most ${limits.outlines} are read at once.` }])
  }
  const result: OutlineFeatures = { outlines: [], faulty: [], leftOut: found.leftOut }
  for (const { properties, geometry, path } of found.list) {
    const name = nameOf(properties)
    const named = name ? { name } : {}
    const issues = checkOutline(geometry, path)
    if (issues.length > 0) result.faulty.push({ ...named, issues })
    else result.outlines.push({ ...named, ...attributesOf(properties), geometry: checkShape(geometry, path, limits.issues).outline! })
  }
  return result
}

function parseText(text: string): unknown {
  if (text.length > limits.bytes) throw refusal([{ code: 'too-large', message: 'The text is over 8 MiB. Simplify the outline and try again.' }])
  const source = text.replace(/^\uFEFF/, '')
  if (source.trim() === '') throw refusal([{ code: 'empty', message: 'There is nothing in it.' }])
  try {
    return JSON.parse(source)
  }
  catch {
    const fault = findJsonFault(source)
    const where = fault ? ` Line ${fault.line}, column ${fault.column}: ${fault.found} was not expected there.` : ''
    throw refusal([{ code: 'not-json', message: `This is not JSON, so not GeoJSON.${where}` }])
  }
}

interface Found { list: { properties?: unknown, geometry: unknown, path: string }[], leftOut: number }

function collect(root: unknown): Found {
  const found: Found = { list: [], leftOut: 0 }
  if (!isObject(root) || typeof root.type !== 'string') {
    throw refusal([{ code: 'not-geojson', message: 'This is JSON but not GeoJSON: a “type” is missing (Polygon, MultiPolygon, Feature or FeatureCollection).' }])
  }
  refuseOtherSystem(root)
  take(root, '', undefined, found)
  if (found.list.length === 0) {
    throw refusal([{ code: 'no-polygon', message: 'There is no polygon here. An outline is a Polygon or a MultiPolygon.' }])
  }
  return found
}

function take(node: unknown, path: string, properties: unknown, found: Found): void {
  const at = (part: string): string => path === '' ? part : `${path}/${part}`
  const type = isObject(node) ? node.type : undefined
  if (!isObject(node) || typeof type !== 'string') {
    if (node !== null) throw refusal([{ path, code: 'not-geojson', message: 'A GeoJSON object with a “type” is wanted here.' }])
    found.leftOut++
  }
  else if (type === 'FeatureCollection') {
    if (!Array.isArray(node.features)) throw refusal([{ path: at('features'), code: 'not-geojson', message: 'A FeatureCollection needs a list of “features”.' }])
    node.features.forEach((feature, k) => take(feature, at(`features/${k}`), undefined, found))
  }
  else if (type === 'Feature') {
    take(node.geometry ?? null, at('geometry'), node.properties, found)
  }
  else if (type === 'Polygon' || type === 'MultiPolygon') {
    found.list.push({ properties, geometry: node, path })
  }
  else if (['Point', 'MultiPoint', 'LineString', 'MultiLineString', 'GeometryCollection'].includes(type)) {
    found.leftOut++
  }
  else {
    throw refusal([{ path: at('type'), value: type.slice(0, 60), code: 'not-geojson', message: `“${type.slice(0, 60)}” is not a GeoJSON type.` }])
  }
}

function nameOf(properties: unknown): string | undefined {
  if (!isObject(properties)) return undefined
  const written = Object.keys(properties).filter(name => String(properties[name] ?? '').trim() !== '')
  const key = written.find(name => /^(name|title|label|region|basin|id)$/i.test(name)) ?? written.find(name => /(?:^|_)name(?:_|$)/i.test(name))
  return key === undefined ? undefined : String(properties[key]).trim().slice(0, 120)
}

/** Attributes that can be shown: texts and numbers, so many as a list to choose from may hold. */
function attributesOf(properties: unknown): { attributes?: Record<string, string> } {
  if (!isObject(properties)) return {}
  const entries = Object.entries(properties)
    .filter(([, value]) => (typeof value === 'string' && value.trim() !== '') || typeof value === 'number')
    .slice(0, 50).map(([key, value]) => [key.slice(0, 60), String(value).trim().slice(0, 120)])
  return entries.length > 0 ? { attributes: Object.fromEntries(entries) as Record<string, string> } : {}
}

/** GeoJSON is WGS 84 longitude and latitude; files of before 2016 may name another system. */
function refuseOtherSystem(root: JsonObject): void {
  const properties = isObject(root.crs) ? root.crs.properties : undefined
  const name = isObject(properties) ? String(properties.name ?? '') : ''
  if (name === '' || /CRS84$|EPSG:{1,2}4326$|WGS\s?84$/i.test(name)) return
  throw refusal([{
    path: 'crs', value: name.slice(0, 80), code: 'other-crs',
    message: `The file is in ${name.slice(0, 80)}. Outlines are read in WGS 84 longitude and latitude; convert it first.`
  }])
}

function isObject(value: unknown): value is JsonObject {
  return typeof value === 'object' && value !== null && !Array.isArray(value)
}

function tooMany(path: string): Issue {
  return {
    ...(path ? { path } : {}), code: 'too-many-vertices',
    message: 'The outline has over 200 000 vertices. Simplify it and try again: a vertex every kilometre is enough for this purpose.'
  }
}

function refusal(issues: Issue[]): InputError {
  const tooLarge = issues.some(issue => issue.code === 'too-many-vertices' || issue.code === 'too-large')
  const [first, ...rest] = issues
  const more = rest.length === 0 ? '' : ` And ${rest.length} more.`
  return new InputError(`${first!.message}${more}`, issues, tooLarge ? 413 : 422)
}
