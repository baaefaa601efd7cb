import { arcDeg, greatCircle } from '../../geo/greatCircle.ts'
import { EARTH_RADIUS_M } from '../../earth/constants.ts'
import { seaFrom } from './levels.ts'
import type { Outline, Position } from '../../types/domain.ts'
import type { SeaLevelField } from './levels.ts'

export interface PlacedValue { value: number, position: Position }

/** What a map of the change of sea level says, in the unit of the field. */
export interface SeaLevelFacts {
  /** Mean over the sea; null where it is nothing beside the changes themselves. */
  mean: number | null
  highest: PlacedValue
  lowest: PlacedValue
  /** Part of the sea's area, 0 to 1, where it changes against the mean: falls while the mean rises, or the other way. */
  againstShare: number
  /** Regions beside which it does, by area, with the distance from their outline at which the last such ground lies. */
  against: { name: string, reachKm: number }[]
}

interface LoadedRegion { name: string, geometry: Outline, mass: number | null }

const rad = Math.PI / 180
/** A mean of less than this part of the largest change is no mean to speak of. */
export const leastMean = 1e-3
const kmPerDegree = EARTH_RADIUS_M / 1000 * rad

/** Facts of a field (mm) over the sea, for the mean that the loads give. Null for a field without sea. */
export function seaLevelFacts(field: SeaLevelField, mean: number, regions: readonly LoadedRegion[]): SeaLevelFacts | null {
  const nodes = seaNodes(field)
  if (nodes.length === 0) return null
  const highest = nodes.reduce((a, b) => b.value > a.value ? b : a)
  const lowest = nodes.reduce((a, b) => b.value < a.value ? b : a)
  const size = Math.max(Math.abs(highest.value), Math.abs(lowest.value))
  const known = Math.abs(mean) > leastMean * size ? mean : null
  const total = nodes.reduce((sum, { area }) => sum + area, 0)
  const opposed = known === null ? [] : nodes.filter(({ value }) => value * known < 0)
  return {
    mean: known,
    highest: { value: highest.value, position: highest.position },
    lowest: { value: lowest.value, position: lowest.position },
    againstShare: opposed.reduce((sum, { area }) => sum + area, 0) / total,
    against: known === null ? [] : besideRegions(opposed, regions.filter(({ mass }) => mass !== null && mass * known < 0)),
  }
}

interface Node extends PlacedValue { area: number }

function seaNodes({ latitudesDeg, longitudesDeg, value, sea }: SeaLevelField): Node[] {
  const nodes: Node[] = []
  latitudesDeg.forEach((lat, i) => {
    for (let j = 0; j < longitudesDeg.length - 1; j++) {
      const at = i * longitudesDeg.length + j
      if (sea[at]! >= seaFrom) nodes.push({ value: value[at]!, position: [longitudesDeg[j]!, lat], area: Math.cos(lat * rad) * sea[at]! })
    }
  })
  return nodes
}

/** Each node goes to the region whose outline is nearest. */
function besideRegions(nodes: readonly Node[], regions: readonly LoadedRegion[]): { name: string, reachKm: number }[] {
  const outlines = regions.map(({ name, geometry }) => ({ name, points: outlinePoints(geometry), reach: 0, area: 0 }))
  for (const { position, area } of nodes) {
    let nearest: (typeof outlines)[number] | null = null
    let least = Infinity
    for (const outline of outlines) {
      const distance = Math.min(...outline.points.map(point => arcDeg(position, point)))
      if (distance < least) [nearest, least] = [outline, distance]
    }
    if (!nearest) continue
    nearest.reach = Math.max(nearest.reach, least)
    nearest.area += area
  }
  return outlines.filter(({ area }) => area > 0).sort((a, b) => b.area - a.area).map(({ name, reach }) => ({ name, reachKm: reach * kmPerDegree }))
}

/** Points of an outline at most two degrees apart, no more than some hundreds. */
function outlinePoints(geometry: Outline): Position[] {
  const rings = geometry.type === 'Polygon' ? [geometry.coordinates[0]!] : geometry.coordinates.map(rings => rings[0]!)
  const points = rings.flatMap(ring => ring.slice(1).flatMap((to, i) => greatCircle(ring[i]!, to, 2).slice(0, -1)))
  const every = Math.ceil(points.length / 400)
  return points.filter((_, i) => i % every === 0)
}
