import type { Feature } from 'geojson'
import { cutAtAntimeridian } from '#shared/geo/cut'
import { overlapsOf, type OutlineOverlap } from '#shared/geo/overlap'
import { polygonsOf } from '#shared/geo/parts'
import type { Outline, Position } from '#shared/types/domain'
import { displayFill } from './displayShape'

export interface SharedGround extends OutlineOverlap {
  /** The common ground as the map fills it; null where it is too thin to be drawn. */
  shape: Feature | null
}

/** Pairs of regions that share ground: the area on the ellipsoid, and the shape on the plane of longitude and latitude. */
export async function sharedGrounds(items: readonly { id: string, geometry: Outline }[]): Promise<SharedGround[]> {
  const pairs = overlapsOf(items)
  // Most accounts have none, and need nothing more for it.
  if (!pairs.length) return []
  const { featureCollection, intersect, multiPolygon } = await import('@turf/turf')
  const plane = (outline: Outline) => multiPolygon(polygonsOf(cutAtAntimeridian(outline)) as Position[][][])
  const outlines = new Map(items.map(item => [item.id, item.geometry]))
  return pairs.map((pair) => {
    const common = intersect(featureCollection([plane(outlines.get(pair.a)!), plane(outlines.get(pair.b)!)]))
    const geometry = common && displayFill(common.geometry as Outline)
    return { ...pair, shape: geometry && { type: 'Feature', properties: { a: pair.a, b: pair.b }, geometry } }
  })
}
