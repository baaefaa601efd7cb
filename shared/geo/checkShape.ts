import type { Outline, Position } from '../types/domain.ts'
import type { Issue } from '../types/issue.ts'
import { placeWords, stretchOf, type FaultPlace } from './faultPlace.ts'

export type JsonObject = Record<string, unknown>

/** Longitudes may run on past the antimeridian; two turns are more than any outline needs. */
const longitudeReachDeg = 720

/** Positions in nested coordinate lists, counted until `enough` is passed. */
export function countPositions(coordinates: unknown, enough: number): number {
  let count = 0
  const stack: unknown[] = [coordinates]
  while (stack.length > 0 && count <= enough) {
    const node = stack.pop()
    if (!Array.isArray(node)) continue
    if (node.length > 0 && !Array.isArray(node[0])) count++
    // One by one: a spread of a million items would exhaust the call stack.
    else for (const item of node) stack.push(item)
  }
  return count
}

/** A polygon or multipolygon as typed coordinates, heights left out, or what is wrong with its numbers and nesting, at most `most` faults. */
export function checkShape(geometry: unknown, prefix: string, most: number): { issues: Issue[], outline: Outline | null } {
  const issues: Issue[] = []
  const add: Add = (path, code, message, value, { lines, near } = { near: null }) => {
    const where = near ? ` It is near ${placeWords(near)}.` : ''
    if (issues.length < most) issues.push({ path, code, message: `${message}${where}`, ...(value === undefined ? {} : { value: shown(value) }), ...(lines ? { lines } : {}) })
    return null
  }
  const outline = readGeometry(geometry, prefix, add)
  return { issues, outline: issues.length === 0 ? outline : null }
}

type Add = (path: string, code: string, message: string, value?: unknown, place?: FaultPlace) => null

function readGeometry(geometry: unknown, prefix: string, add: Add): Outline | null {
  const at = (part: string): string => prefix === '' ? part : `${prefix}/${part}`
  if (typeof geometry !== 'object' || geometry === null) return add(prefix, 'not-geojson', 'A GeoJSON Polygon or MultiPolygon is wanted here.', geometry)
  const { type, coordinates } = geometry as JsonObject
  if (type !== 'Polygon' && type !== 'MultiPolygon') return add(at('type'), 'not-polygon', 'An outline is a Polygon or a MultiPolygon.', type)
  const path = at('coordinates')
  if (!Array.isArray(coordinates) || coordinates.length === 0) return add(path, 'empty', 'The outline is empty: it has no coordinates.')
  if (type === 'Polygon') return { type, coordinates: readPolygon(coordinates, path, add) }
  return { type, coordinates: coordinates.map((polygon, k) => readPolygon(polygon, `${path}/${k}`, add)) }
}

function readPolygon(polygon: unknown, path: string, add: Add): Position[][] {
  if (!Array.isArray(polygon) || polygon.length === 0) {
    add(path, 'empty', 'This part is empty: it needs a list of rings, the shell first.')
    return []
  }
  return polygon.map((ring, k) => readRing(ring, `${path}/${k}`, add))
}

function readRing(ring: unknown, path: string, add: Add): Position[] {
  if (!Array.isArray(ring)) {
    add(path, 'not-geojson', 'A ring is a list of positions.', ring)
    return []
  }
  const last = ring.length - 1
  const positions = ring.map((position, k) => readPosition(position, `${path}/${k}`, (...fault) => add(...fault, stretchOf(ring, Math.max(0, k - 1), Math.min(last, k + 1)))))
  if (ring.length < 4) {
    add(path, 'ring-short', `A ring needs at least 4 positions, the last the same as the first; this one has ${ring.length}.`, undefined, stretchOf(ring))
  }
  else if (!samePlace(positions[0]!, positions.at(-1)!)) {
    add(`${path}/${last}`, 'ring-open', 'The ring is not closed: its last position must be the same as its first.', ring.at(-1), stretchOf(ring, last, 0))
  }
  return positions
}

type AddHere = (path: string, code: string, message: string, value: unknown) => null

function readPosition(position: unknown, path: string, add: AddHere): Position {
  const [lon, lat] = Array.isArray(position) ? position as unknown[] : []
  if (typeof lon !== 'number' || typeof lat !== 'number' || !Number.isFinite(lon) || !Number.isFinite(lat)) {
    add(path, 'not-a-position', 'A position is two finite numbers: longitude, latitude.', position)
    return [0, 0]
  }
  if (Math.abs(lat) > 90) {
    const hint = Math.abs(lat) <= 180 && Math.abs(lon) <= 90 ? ' GeoJSON gives the longitude first.' : ''
    add(path, 'latitude', `Latitude ${readable(lat)}° is outside −90° to 90°.${hint}`, position)
  }
  else if (Math.abs(lon) > longitudeReachDeg) {
    add(path, 'longitude', `Longitude ${readable(lon)}° is more than two turns. Coordinates must be degrees, not metres.`, position)
  }
  return [lon, lat]
}

/** A ring may close a whole turn on: the place is the same. */
function samePlace(p: Position, q: Position): boolean {
  return p[1] === q[1] && (p[0] - q[0]) % 360 === 0
}

function readable(value: number): string {
  return String(value).replace('-', '\u2212')
}

function shown(value: unknown): string {
  const text = JSON.stringify(value) ?? String(value)
  return text.length > 60 ? `${text.slice(0, 57)}…` : text
}
