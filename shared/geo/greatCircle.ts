import type { Outline, Position } from '../types/domain.ts'
import { cutAtAntimeridian } from './cut.ts'

/** Drawn edges are stored with a position at least this often along the arc, degrees. */
export const drawnStepDeg = 0.25
/** Longest step in longitude: a line straight in longitude and latitude strays from the great circle where meridians meet. */
const mostTurnDeg = 4

type Vector = [number, number, number]
const radians = Math.PI / 180

function vectorOf([lon, lat]: Position): Vector {
  const [l, p] = [lon * radians, lat * radians]
  return [Math.cos(p) * Math.cos(l), Math.cos(p) * Math.sin(l), Math.sin(p)]
}

/** Angle between two places on the sphere, degrees. */
export function arcDeg(a: Position, b: Position): number {
  const [u, v] = [vectorOf(a), vectorOf(b)]
  const cross = Math.hypot(u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0])
  return Math.atan2(cross, u[0] * v[0] + u[1] * v[1] + u[2] * v[2]) / radians
}

/**
 * The turn of the sphere along the great circle that takes one place to another (Rodrigues 1840); null where they are one or opposite.
 * Latitudes are taken as they stand. Longitudes of what it gives lie within ±180°.
 */
export function turnOf(from: Position, to: Position): ((place: Position) => Position) | null {
  const [u, v] = [vectorOf(from), vectorOf(to)]
  const axis: Vector = [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]]
  const sin = Math.hypot(...axis)
  if (sin < 1e-12) return null
  const cos = u[0] * v[0] + u[1] * v[1] + u[2] * v[2]
  const [a, b, c] = axis.map(part => part / sin) as Vector
  return (place) => {
    const [x, y, z] = vectorOf(place)
    const along = (a * x + b * y + c * z) * (1 - cos)
    const turned: Vector = [
      x * cos + (b * z - c * y) * sin + a * along,
      y * cos + (c * x - a * z) * sin + b * along,
      z * cos + (a * y - b * x) * sin + c * along,
    ]
    return [Math.atan2(turned[1], turned[0]) / radians, Math.atan2(turned[2], Math.hypot(turned[0], turned[1])) / radians]
  }
}

/** The place at a part (0 to 1) of the shorter great circle between two places that are not opposite one another. */
export function alongArc(a: Position, b: Position, part: number): Position {
  const angle = arcDeg(a, b) * radians
  if (angle < 1e-12) return part < 0.5 ? a : b
  const [u, v] = [vectorOf(a), vectorOf(b)]
  const p = Math.sin((1 - part) * angle) / Math.sin(angle)
  const q = Math.sin(part * angle) / Math.sin(angle)
  const [x, y, z] = [p * u[0] + q * v[0], p * u[1] + q * v[1], p * u[2] + q * v[2]]
  return [Math.atan2(y, x) / radians, Math.atan2(z, Math.hypot(x, y)) / radians]
}

/**
 * The great circle from a to b, both ends in it, with a position at least every `stepDeg` of arc and longitudes that run on
 * continuously from a's. Latitudes are taken as they stand, as the globe on the screen does. Opposite places have no single
 * great circle: the way over the north pole is taken. So is the pole itself where the circle passes it.
 */
export function greatCircle(a: Position, b: Position, stepDeg = drawnStepDeg): Position[] {
  if (Math.abs(a[1]) === 90) return fromPole(a, b, stepDeg)
  const overPole = poleBetween(a, b)
  if (overPole !== null) return viaPole(a, b, overPole, stepDeg)
  if (Math.abs(b[1]) === 90) return viaPole(a, [a[0], b[1]], b[1] as 90 | -90, stepDeg)
  const pieces = Math.max(1, Math.ceil(arcDeg(a, b) / stepDeg - 1e-9))
  const path: Position[] = [a]
  for (let k = 1; k <= pieces; k++) refine(path, k === pieces ? b : alongArc(a, b, k / pieces))
  return path
}

/** Adds a place, and close to a pole others before it, so that no step turns through more than `mostTurnDeg` of longitude. */
function refine(path: Position[], place: Position): void {
  const from = path.at(-1)!
  const to = runOn(from, place)
  if (Math.abs(to[0] - from[0]) > mostTurnDeg && arcDeg(from, to) > 1e-5) {
    refine(path, alongArc(from, to, 0.5))
    refine(path, to)
  }
  else {
    path.push(to)
  }
}

/** 90 or −90 where the shorter way from a to b leads over that pole; null elsewhere. */
function poleBetween(a: Position, b: Position): 90 | -90 | null {
  if (Math.abs(b[1]) === 90) return null
  const apart = Math.abs(runOn(a, b)[0] - a[0])
  if (Math.abs(apart - 180) > 1e-9) return null
  return a[1] + b[1] >= 0 ? 90 : -90
}

function viaPole(a: Position, b: Position, pole: 90 | -90, stepDeg: number): Position[] {
  const up = meridian(a[1], pole, stepDeg).map((lat): Position => [a[0], lat])
  const far = runOn(a, b)[0]
  const down = meridian(pole, b[1], stepDeg).map((lat): Position => [far, lat])
  return far === a[0] ? up : [...up, ...down]
}

function fromPole(a: Position, b: Position, stepDeg: number): Position[] {
  if (Math.abs(b[1]) === 90) return b[1] === a[1] ? [a, a] : meridian(a[1], b[1], stepDeg).map(lat => [a[0], lat])
  const lon = runOn(a, b)[0]
  const down = meridian(a[1], b[1], stepDeg).map((lat): Position => [lon, lat])
  return lon === a[0] ? down : [a, ...down]
}

function meridian(from: number, to: number, stepDeg: number): number[] {
  const pieces = Math.max(1, Math.ceil(Math.abs(to - from) / stepDeg - 1e-9))
  return Array.from({ length: pieces + 1 }, (_, k) => k === pieces ? to : from + (to - from) * k / pieces)
}

/** The place with its longitude within half a turn of the one before; at a pole the longitude stays as it was. */
function runOn(before: Position, place: Position): Position {
  if (Math.abs(place[1]) === 90) return [before[0], place[1]]
  return [place[0] + 360 * Math.round((before[0] - place[0]) / 360), place[1]]
}

/** A drawn outline's line: closed, great-circle edges made dense, longitudes continuous. `edgeOf[k]` is the drawn edge of step k. */
export interface DrawnLine { positions: Position[], edgeOf: number[] }

/** Vertices as they were set, not closed. A single vertex or pair gives the line there is. */
export function drawnLine(vertices: readonly Position[], stepDeg = drawnStepDeg): DrawnLine {
  const positions: Position[] = []
  const edgeOf: number[] = []
  vertices.forEach((vertex, k) => {
    const from = positions.at(-1) ?? vertex
    const next = vertices[(k + 1) % vertices.length]!
    const path = greatCircle(from, next, stepDeg)
    if (positions.length === 0) positions.push(path[0]!)
    for (const place of path.slice(1)) {
      positions.push(place)
      edgeOf.push(k)
    }
  })
  return { positions, edgeOf }
}

/** Seven decimals of a degree, one centimetre: what a stored position keeps. */
function rounded([lon, lat]: Position): Position {
  return [Math.round(lon * 1e7) / 1e7, Math.round(lat * 1e7) / 1e7]
}

/**
 * What is stored for an outline drawn on the globe: great-circle edges with a position every 0.25°, cut at the antimeridian and
 * closed over a pole that it winds round. At least three vertices. Check the answer with `checkOutline`.
 */
export function drawnOutline(vertices: readonly Position[]): Outline {
  if (vertices.length < 3) throw new RangeError(`an outline needs at least 3 vertices, got ${vertices.length}`)
  const ring = drawnLine(vertices).positions.map(rounded)
  ring[ring.length - 1] = [ring[0]![0] + 360 * Math.round((ring.at(-1)![0] - ring[0]![0]) / 360), ring[0]![1]]
  return cutAtAntimeridian({ type: 'Polygon', coordinates: [ring] })
}
