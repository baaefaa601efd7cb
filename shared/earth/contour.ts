import type { Outline, Position } from '../types/domain.ts'
import { InputError } from '../types/issue.ts'
import { DEGREE, EARTH_RADIUS_M } from './constants.ts'
import { geodeticFromGeocentricDeg, zoneAreaM2 } from './latitude.ts'
import { ringIntegrals, type RingIntegrals } from './ringIntegrals.ts'
import { ringPath, type RingPath } from './rings.ts'

/** Means over a region, uniform per unit area of the sphere: sin ψ cos ψ cos λ, sin ψ cos ψ sin λ and cos² ψ. */
export interface DegreeTwoMeans { xz: number, yz: number, cos2: number }

/** Mean unit vector over a region: towards Greenwich, 90° E and the north pole. */
export interface MeanVector { x: number, y: number, z: number }

/** One ring of a contour, with the side that it bounds. */
export interface ContourRing extends RingPath {
  /** +1 for the outer ring of a part, −1 for a hole in it. */
  sign: 1 | -1
  /** +1 if what the ring encloses lies to the left of its direction, −1 if to the right. */
  side: 1 | -1
  /** The pole that a winding ring encloses; null for a ring that does not wind. */
  pole: 'north' | 'south' | null
}

/** A cell of a grid, and the mass in it beyond an even spread over the outline, per unit of the outline's mass. */
export interface CellExcess { contour: Contour, excess: number }

/** Everything that the engine needs to know of an outline. */
export interface Contour {
  /** Area on the WGS 84 ellipsoid, m²: the one that is shown, and that turns heights into mass. */
  areaM2: number
  /** Area on the sphere of radius 6 371 000 m that loads are mapped to, m². */
  areaSphereM2: number
  /** Solid angle of the mapped region, sr. */
  areaSr: number
  /** East longitude in (−180, 180] and geodetic latitude of the centre of area on the sphere, degrees; [0, 0] if there is none. */
  centroid: Position
  means: DegreeTwoMeans
  vector: MeanVector
  rings: readonly ContourRing[]
  vertexCount: number
  /** Where mass does not lie evenly (`withPattern`): already in `means` and `vector`; absent for an even spread. */
  cells?: readonly CellExcess[]
}

interface Enclosed { ring: ContourRing, areaSr: number, areaM2: number, integrals: RingIntegrals }

const HALF_ELLIPSOID_M2 = 2 * Math.PI * zoneAreaM2(1)
const TIE = 1e-12

/**
 * Area, centre and exact degree-2 means of a GeoJSON outline (physics: contour integrals of harmonics).
 *
 * Every ring encloses an area of its own, whatever its direction: the inside in the unwrapped plane of longitude and geodetic
 * latitude, or, if it winds round a pole, the pole on its smaller side (north for the equator itself; the hole's pole where
 * a hole winds round the other one). A part is its first ring less its holes; a MultiPolygon is the sum of its parts, so an
 * island in a hole, or the second half of an outline cut at ±180°, is a part. Rings are taken as not overlapping.
 * Throws InputError when coordinates are no positions or nothing is enclosed.
 */
export function contourOf(geometry: Outline): Contour {
  const parts = geometry.type === 'Polygon' ? [geometry.coordinates] : geometry.coordinates
  const sum = { areaSr: 0, areaM2: 0, xz: 0, yz: 0, p2: 0, x: 0, y: 0, z: 0 }
  const rings: ContourRing[] = []
  let vertexCount = 0
  parts.forEach((part, p) => {
    const place = geometry.type === 'Polygon' ? 'coordinates' : `coordinates/${p}`
    for (const { ring, areaSr, areaM2, integrals } of partOf(part, place)) {
      rings.push(ring)
      vertexCount += ring.lonDeg.length - 1
      sum.areaSr += ring.sign * areaSr
      sum.areaM2 += ring.sign * areaM2
      const factor = ring.sign * ring.side
      sum.xz += factor * integrals.xz
      sum.yz += factor * integrals.yz
      sum.p2 += factor * integrals.p2
      sum.x += factor * integrals.x
      sum.y += factor * integrals.y
      sum.z += factor * integrals.z
    }
  })
  if (!(sum.areaSr > 0) || !(sum.areaM2 > 0)) throw noArea('coordinates')
  return {
    areaM2: sum.areaM2,
    areaSphereM2: sum.areaSr * EARTH_RADIUS_M * EARTH_RADIUS_M,
    areaSr: sum.areaSr,
    centroid: centroidOf(sum),
    means: { xz: sum.xz / sum.areaSr, yz: sum.yz / sum.areaSr, cos2: 2 / 3 - (2 / 3) * sum.p2 / sum.areaSr },
    vector: { x: sum.x / sum.areaSr, y: sum.y / sum.areaSr, z: sum.z / sum.areaSr },
    rings,
    vertexCount
  }
}

function partOf(part: readonly Position[][], place: string): Enclosed[] {
  if (part.length === 0) throw noArea(place)
  const enclosed = part.map((ring, i) => enclosedBy(ring, i === 0 ? 1 : -1, `${place}/${i}`))
  const shell = enclosed[0]!
  const holePole = enclosed.slice(1).find(hole => hole.ring.pole)?.ring.pole
  if (holePole && shell.ring.pole && shell.ring.pole !== holePole) enclosed[0] = otherSide(shell)
  return enclosed
}

function enclosedBy(positions: readonly Position[], sign: 1 | -1, place: string): Enclosed {
  const path = ringPath(positions, {}, place)
  const literal = enclose(path, sign)
  if (literal.areaSr > 1e-15) return literal
  // A ring round a pole that closes with a step from 180° to −180° at one latitude retraces itself if read as a full turn.
  const turned = ringPath(positions, { fullTurns: false }, place)
  if (turned.winding !== 0) return enclose(turned, sign)
  if (literal.areaSr > 0) return literal
  throw noArea(place)
}

function enclose(path: RingPath, sign: 1 | -1): Enclosed {
  const integrals = ringIntegrals(path)
  if (path.winding === 0) {
    const side = integrals.areaSr >= 0 ? 1 : -1
    return { ring: { ...path, sign, side, pole: null }, areaSr: Math.abs(integrals.areaSr), areaM2: Math.abs(integrals.areaM2), integrals }
  }
  const left = path.winding > 0 ? 'north' : 'south'
  const excess = integrals.areaSr
  const side = excess < -TIE || (excess <= TIE && left === 'north') ? 1 : -1
  const pole = (side > 0) === (left === 'north') ? 'north' : 'south'
  return { ring: { ...path, sign, side, pole }, ...capArea(integrals, side), integrals }
}

function otherSide({ ring, integrals }: Enclosed): Enclosed {
  const side = ring.side > 0 ? -1 : 1
  return { ring: { ...ring, side, pole: ring.pole === 'north' ? 'south' : 'north' }, ...capArea(integrals, side), integrals }
}

function capArea(integrals: RingIntegrals, side: 1 | -1) {
  return { areaSr: 2 * Math.PI + side * integrals.areaSr, areaM2: HALF_ELLIPSOID_M2 + side * integrals.areaM2 }
}

function centroidOf(sum: { areaSr: number, x: number, y: number, z: number }): Position {
  const least = TIE * sum.areaSr
  const length = Math.hypot(sum.x, sum.y)
  const horizontal = length < least ? 0 : length
  if (Math.hypot(horizontal, sum.z) < least) return [0, 0]
  const lon = horizontal === 0 ? 0 : Math.atan2(sum.y, sum.x) / DEGREE
  return [lon === -180 ? 180 : lon, geodeticFromGeocentricDeg(Math.atan2(sum.z, horizontal) / DEGREE)]
}

function noArea(path: string): InputError {
  return new InputError('The outline encloses no area.', [{ path, code: 'no-area', message: 'The outline encloses no area.' }])
}
