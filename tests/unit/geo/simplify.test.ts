import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import geodesic from 'geographiclib-geodesic'
import { simplifyRing } from '../../../shared/geo/simplify.ts'
import type { Position } from '../../../shared/types/domain.ts'

/** Distance in km from a place to a line of short steps, by geodesics of geographiclib. */
function distanceKm(place: Position, line: readonly Position[]): number {
  const { WGS84 } = geodesic.Geodesic
  let least = Infinity
  for (let k = 0; k < line.length; k++) {
    const [from, to] = [line[k]!, line[(k + 1) % line.length]!]
    for (let t = 0; t < 1; t += 1 / 24) {
      least = Math.min(least, WGS84.Inverse(place[1], place[0], from[1] + t * (to[1] - from[1]), from[0] + t * (to[0] - from[0])).s12! / 1000)
    }
  }
  return least
}

const wavy = (n: number, lon: number, lat: number, radius: number, roughness: number): Position[] => Array.from({ length: n }, (_, k) => {
  const angle = 2 * Math.PI * k / n
  const r = radius * (1 + roughness * Math.sin(7 * angle) * Math.cos(31 * angle))
  return [lon + r * Math.cos(angle) / Math.cos(lat * Math.PI / 180), lat + r * Math.sin(angle)]
})

describe('a simplified ring', () => {
  it('keeps corners, drops what lies on the lines between them, moves nothing', () => {
    const square: Position[] = []
    for (let k = 0; k < 20; k++) square.push([k / 10, 10])
    for (let k = 0; k < 20; k++) square.push([2, 10 + k / 10])
    for (let k = 0; k < 20; k++) square.push([2 - k / 10, 12])
    for (let k = 0; k < 20; k++) square.push([0, 12 - k / 10])
    const left = simplifyRing(square, 1)
    expect(left).toEqual([[0, 10], [2, 10], [2, 12], [0, 12]])
  })

  it('strays no further than the tolerance, by geodesic distances, and needs fewer vertices the more it may', () => {
    fc.assert(fc.property(fc.integer({ min: -75, max: 75 }), fc.integer({ min: -170, max: 170 }), fc.integer({ min: 5, max: 40 }), (lat, lon, toleranceKm) => {
      const ring = wavy(90, lon, lat, 3, 0.1)
      const left = simplifyRing(ring, toleranceKm)
      expect(left.every(place => ring.includes(place))).toBe(true)
      // A sixteenth more: edges straight in longitude and latitude, and the steps of the ruler.
      for (const place of ring) expect(distanceKm(place, left)).toBeLessThan(1.0625 * toleranceKm + 3)
      expect(simplifyRing(ring, 2 * toleranceKm).length).toBeLessThanOrEqual(left.length)
    }), { numRuns: 3, seed: 3 })
  })

  it('keeps places on the antimeridian, and a ring that would vanish', () => {
    const ring: Position[] = [[179, 0], [180, 0.001], [180, 0.5], [180, 1], [179, 1], [178.9, 0.5]]
    expect(simplifyRing(ring, 50)).toEqual(expect.arrayContaining([[180, 0.001], [180, 0.5], [180, 1]]))
    const tiny: Position[] = [[0, 0], [0.01, 0], [0.012, 0.005], [0.01, 0.01], [0, 0.01]]
    expect(simplifyRing(tiny, 500).length).toBeGreaterThanOrEqual(3)
  })
})
