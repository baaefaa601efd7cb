import { geoArea } from 'd3-geo'
import type { MultiPolygon as GeoMultiPolygon } from 'geojson'
import type { Outline, Position } from '../../types/domain.ts'

const rad = Math.PI / 180
/** Longest stretch of an edge, degrees: edges are straight in longitude and latitude, the drawing joins by great circles. */
const stretch = 1

/** A step in longitude taken the short way, (−180, 180]; a full turn stays one. */
function longitudeStep(from: number, to: number): number {
  const plain = to - from
  if (Math.abs(plain) === 360) return plain
  return plain - 360 * Math.round(plain / 360)
}

/**
 * One point for a walk along a pole: its neighbours meet there by their meridians, or are the same meridian (a cap closed
 * along ±90°), and then the pole is no corner at all.
 */
function withoutPoleWalk(ring: readonly Position[]): { corners: Position[], closesOnMeridian: boolean } {
  const isPole = ([, lat]: Position) => Math.abs(lat) > 90 - 1e-9
  const open = samePlace(ring[0]!, ring.at(-1)!) ? ring.slice(0, -1) : [...ring]
  const start = open.findIndex(point => !isPole(point))
  if (start < 0) return { corners: [], closesOnMeridian: false }
  const turned = [...open.slice(start), ...open.slice(0, start)]
  const kept: Position[] = []
  turned.forEach((point, i) => {
    if (isPole(point) && isPole(turned[i - 1]!)) return
    kept.push(point)
  })
  const result: Position[] = []
  let meridian: number | null = null
  kept.forEach((point, i) => {
    const [before, after] = [kept[i - 1], kept[(i + 1) % kept.length]!]
    if (before && isPole(point) && Math.abs(longitudeStep(before[0], after[0]) % 360) < 1e-9) {
      meridian = before[0]
      return
    }
    const next: Position = meridian === null ? point : [meridian, point[1]]
    meridian = null
    if (!result.length || !samePlace(next, result.at(-1)!)) result.push(next)
  })
  return { corners: result, closesOnMeridian: meridian !== null }
}

function samePlace(a: Position, b: Position): boolean {
  return a[0] === b[0] && a[1] === b[1]
}

/** Edges cut into short stretches, longitudes unwrapped; with the turns round the pole and the area enclosed in the plane, sr. */
function densified(ring: readonly Position[]): { points: Position[], turns: number, area: number } {
  const { corners, closesOnMeridian } = withoutPoleWalk(ring)
  const points: Position[] = []
  let [lon, area] = [corners[0]?.[0] ?? 0, 0]
  const start = lon
  corners.forEach((from, i) => {
    const to = corners[(i + 1) % corners.length]!
    // A corner at the pole lies on every meridian: the edge from it runs down the next corner's.
    const leavesPole = Math.abs(from[1]) > 90 - 1e-9
    if (leavesPole) {
      const turn = longitudeStep(lon, to[0])
      area -= Math.sign(from[1]) * turn * rad
      lon += turn
    }
    const atPole = leavesPole || Math.abs(to[1]) > 90 - 1e-9
    const staysOnMeridian = atPole || (closesOnMeridian && i === corners.length - 1)
    const dLon = staysOnMeridian ? 0 : longitudeStep(from[0], to[0])
    const dLat = to[1] - from[1]
    const n = Math.max(1, Math.ceil(Math.max(Math.abs(dLon), Math.abs(dLat)) / stretch))
    for (let k = 0; k < n; k++) {
      const lat = from[1] + dLat * (k + 0.5) / n
      points.push([lon + dLon * k / n, from[1] + dLat * k / n])
      area -= Math.sin(lat * rad) * dLon / n * rad
    }
    lon += dLon
  })
  return { points, turns: Math.round((lon - start) / 360), area: Math.abs(area) }
}

/** A ring that d3-geo, which tells inside from outside by direction, fills on the side that is meant. */
function directed(ring: readonly Position[]): Position[] | null {
  const { points, turns, area } = densified(ring)
  if (points.length < 3) return null
  const closed = [...points, points[0]!]
  const enclosed = geoArea({ type: 'Polygon', coordinates: [closed] })
  const wanted = turns === 0 && area > 0 ? area : Math.min(enclosed, 4 * Math.PI - enclosed)
  const asDrawn = Math.abs(enclosed - wanted) <= Math.abs(4 * Math.PI - enclosed - wanted)
  return asDrawn ? closed : closed.reverse()
}

/** A region's outline (straight edges in longitude and latitude, either direction, over a pole or not) for d3-geo. */
export function outlineForDrawing(outline: Outline): GeoMultiPolygon {
  const polygons = outline.type === 'Polygon' ? [outline.coordinates] : outline.coordinates
  const coordinates = polygons.flatMap((rings) => {
    const [outer, ...holes] = rings.map(directed)
    if (!outer) return []
    return [[outer, ...holes.flatMap(hole => hole ? [hole.reverse()] : [])]]
  })
  return { type: 'MultiPolygon', coordinates }
}

/** Highest latitude north and south that an outline reaches, degrees. */
export function latitudeReach(outline: Outline): { north: number, south: number } {
  const rings = outline.type === 'Polygon' ? outline.coordinates : outline.coordinates.flat()
  return rings.flat().reduce(
    (reach, [, lat]) => ({ north: Math.max(reach.north, lat), south: Math.min(reach.south, lat) }),
    { north: -90, south: 90 },
  )
}
