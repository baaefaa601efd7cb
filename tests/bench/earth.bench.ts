import { contourOf } from '../../shared/earth/contour.ts'
import type { Outline, Position } from '../../shared/types/domain.ts'
import { fastest, type Figure } from './measure.ts'

/** A wavy outline round 30° N 20° E. */
export function wavyOutline(vertices: number): Outline {
  const ring: Position[] = Array.from({ length: vertices }, (_, i) => {
    const angle = 2 * Math.PI * i / vertices
    const radius = 10 + Math.sin(37 * angle)
    return [20 + radius * Math.cos(angle), 30 + radius * Math.sin(angle)]
  })
  return { type: 'Polygon', coordinates: [[...ring, ring[0]!]] }
}

/** Speed of the numerical core. */
export function run(): Figure[] {
  const large = wavyOutline(10_000)
  return [
    { name: 'means of a 10 000-vertex outline', value: fastest(() => contourOf(large)), unit: 'ms', note: 'target 5 ms' }
  ]
}
