import type { Polygon, Position } from '../../shared/types/domain.ts'

/** A wavy outline round a place, its radius going in and out by a tenth seven times. */
export function wavyOutline(vertices: number, lon = 20, lat = 30, radiusDeg = 10): Polygon {
  const ring: Position[] = Array.from({ length: vertices }, (_, i) => {
    const angle = 2 * Math.PI * i / vertices
    const radius = radiusDeg * (1 + 0.1 * Math.sin(7 * angle))
    return [lon + radius * Math.cos(angle), lat + radius * Math.sin(angle)]
  })
  return { type: 'Polygon', coordinates: [[...ring, ring[0]!]] }
}
