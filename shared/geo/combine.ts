import { bboxClip, difference, feature, featureCollection, intersect } from '@turf/turf'
import type { Feature, FeatureCollection, MultiPolygon, Polygon } from 'geojson'
import type { Outline, Position } from '../types/domain.ts'
import { InputError } from '../types/issue.ts'
import { cutAtAntimeridian } from './cut.ts'
import { polygonsOf } from './parts.ts'

/** Seven decimals of a degree, one centimetre: what a stored position keeps. */
const rounded = ([lon, lat]: Position): Position => [Math.round(lon * 1e7) / 1e7, Math.round(lat * 1e7) / 1e7]
/** How far beyond an outline, degrees, the other side of a cut is still taken along: its own cut edges stay outside. */
const marginDeg = 1

/**
 * What of an outline lies inside another, and what lies outside it; null where nothing does. Edges are straight in longitude and
 * latitude, as GeoJSON's are, so the plane between ±180° and ±90° with both outlines cut at the antimeridian is exact, poles included.
 * Both must have passed `checkOutline`, or be land cut at ±180°. Throws InputError where lines run so close that they cannot be told apart.
 */
export function insideOf(outline: Outline, other: Outline): Outline | null {
  return combine(outline, other, intersect)
}

/** See `insideOf`. */
export function outsideOf(outline: Outline, other: Outline): Outline | null {
  return combine(outline, other, difference)
}

type Operation = (features: FeatureCollection<Polygon | MultiPolygon>) => Feature<Polygon | MultiPolygon> | null

function combine(outline: Outline, other: Outline, operation: Operation): Outline | null {
  const lands = polygonsOf(cutOnce(other))
  // Part by part: the two sides of the antimeridian have little near them each, and together the whole of a hemisphere.
  const found = polygonsOf(cutAtAntimeridian(outline)).flatMap((rings) => {
    const near = nearBy(lands, boxOf(rings))
    if (near === null) return operation === intersect ? [] : [rings]
    return combinePart({ type: 'Polygon', coordinates: rings }, near, operation)
  })
  if (found.length === 0) return null
  return found.length === 1 ? { type: 'Polygon', coordinates: found[0]! } : { type: 'MultiPolygon', coordinates: found }
}

function combinePart(part: Polygon, near: Feature<MultiPolygon>, operation: Operation): Position[][][] {
  try {
    const found = operation(featureCollection<Polygon | MultiPolygon>([feature(part), near]))
    return found ? tidy(polygonsOf(found.geometry as Outline)) : []
  }
  catch {
    throw new InputError('These lines run so close to one another that they cannot be cut here. Move a vertex a little, or simplify the outline, and try again.', [])
  }
}

type Box = [west: number, south: number, east: number, north: number]

function boxOf([shell]: readonly Position[][]): Box {
  const box: Box = [180, 90, -180, -90]
  for (const [lon, lat] of shell!) {
    box[0] = Math.min(box[0], lon)
    box[1] = Math.min(box[1], lat)
    box[2] = Math.max(box[2], lon)
    box[3] = Math.max(box[3], lat)
  }
  return box
}

/** The polygons near a box, cut to it: all land takes seconds, what is near takes milliseconds. */
function nearBy(polygons: readonly Position[][][], box: Box): Feature<MultiPolygon> | null {
  const wide: Box = [box[0] - marginDeg, box[1] - marginDeg, box[2] + marginDeg, box[3] + marginDeg]
  const parts = polygons.flatMap((rings) => {
    const own = boxOf(rings)
    if (own[0] > wide[2] || own[2] < wide[0] || own[1] > wide[3] || own[3] < wide[1]) return []
    if (own[0] >= wide[0] && own[2] <= wide[2] && own[1] >= wide[1] && own[3] <= wide[3]) return [rings]
    const clipped = bboxClip(feature<Polygon>({ type: 'Polygon', coordinates: rings }), wide).geometry
    const left = (clipped.type === 'Polygon' ? [clipped.coordinates] : clipped.coordinates) as Position[][][]
    return left.map(ring => ring.filter(line => line.length >= 4)).filter(ring => ring.length > 0)
  })
  return parts.length === 0 ? null : feature({ type: 'MultiPolygon', coordinates: parts })
}

/** Land comes cut, and cutting it again would take seconds. */
function cutOnce(outline: Outline): Outline {
  return polygonsOf(outline).every(rings => rings.every(isCut)) ? outline : cutAtAntimeridian(outline)
}

/** Whether a ring lies between ±180°, none of its edges runs over the antimeridian, and a pole it winds round has an edge along it. */
function isCut(ring: readonly Position[]): boolean {
  return ring[0]![0] === ring.at(-1)![0] && ring.every(([lon, lat], k) => {
    const before = ring[k - 1] ?? [lon, lat]
    return Math.abs(lon) <= 180 && (Math.abs(lon - before[0]) <= 180 || (Math.abs(lat) === 90 && before[1] === lat))
  })
}

/** To the centimetre, without the slivers that rounding leaves: rings of fewer than three places. */
function tidy(polygons: readonly Position[][][]): Position[][][] {
  return polygons.flatMap((rings) => {
    const [shell, ...holes] = rings.map(tidyRing)
    return shell!.length >= 4 ? [[shell!, ...holes.filter(hole => hole.length >= 4)]] : []
  })
}

function tidyRing(ring: readonly Position[]): Position[] {
  const places = ring.map(rounded)
  return places.filter((place, k) => k === 0 || place[0] !== places[k - 1]![0] || place[1] !== places[k - 1]![1])
}
