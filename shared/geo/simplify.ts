import { geoAzimuthalEqualArea } from 'd3-geo'
import { lineString, simplify } from '@turf/turf'
import { EARTH_RADIUS_M } from '../earth/constants.ts'
import type { Position } from '../types/domain.ts'

/**
 * A ring with fewer vertices, none of them moved: what is left strays from what was by no more than `toleranceKm` (Douglas and Peucker,
 * 1973, in an equal-area plane about each stretch of the ring). Places on the antimeridian and at a pole stay. `ring` is not closed;
 * one that would shrink below three vertices stays as it is.
 */
export function simplifyRing(ring: readonly Position[], toleranceKm: number): Position[] {
  if (ring.length <= 4 || !(toleranceKm > 0)) return [...ring]
  const anchors = anchorsOf(ring)
  const kept = anchors.flatMap((start, a) => {
    const end = anchors[(a + 1) % anchors.length]!
    const steps = (end - start + ring.length) % ring.length || ring.length
    const stretch = Array.from({ length: steps + 1 }, (_, k) => ring[(start + k) % ring.length]!)
    return simplifyLine(stretch, toleranceKm).slice(0, -1)
  })
  return kept.length < 3 ? [...ring] : kept
}

/** Vertices that stay: on a seam, and, so that there are two ends to measure between, the first and the one farthest from it. */
function anchorsOf(ring: readonly Position[]): number[] {
  const seams = ring.flatMap(([lon, lat], k) => Math.abs(lon) === 180 || Math.abs(lat) === 90 ? [k] : [])
  const away = (k: number): number => {
    const [dx, dy] = [ring[k]![0] - ring[0]![0], ring[k]![1] - ring[0]![1]]
    return Math.hypot((dx - 360 * Math.round(dx / 360)) * Math.cos(ring[0]![1] * Math.PI / 180), dy)
  }
  const farthest = ring.reduce((best, _, k) => away(k) > away(best) ? k : best, 0)
  return [...new Set([0, farthest, ...seams])].sort((a, b) => a - b)
}

function simplifyLine(line: readonly Position[], toleranceKm: number): Position[] {
  if (line.length < 3) return [...line]
  const [lon, lat] = line[Math.floor(line.length / 2)]!
  const plane = geoAzimuthalEqualArea().rotate([-lon, -lat]).scale(EARTH_RADIUS_M / 1000).translate([0, 0])
  const flat = line.map(place => plane(place)!)
  const indexOf = new Map(flat.map(([x, y], k) => [`${x} ${y}`, k]))
  const left = simplify(lineString(flat), { tolerance: toleranceKm, highQuality: true }).geometry.coordinates
  return left.map(([x, y]) => line[indexOf.get(`${x} ${y}`)!]!)
}
