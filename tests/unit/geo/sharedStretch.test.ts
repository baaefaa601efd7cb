import { area, booleanEqual, difference, featureCollection, intersect, polygon as turfPolygon } from '@turf/turf'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { checkOutline } from '../../../shared/geo/outline.ts'
import type { Position } from '../../../shared/types/domain.ts'
import { box } from './geodesicArea.ts'

// Outlines on a grid of whole degrees share parts of their lines all the time. Whether they share ground is turf's answer.

/** A box, with one corner cut out where `notch` says so, from any vertex on, either way round. */
const shape = fc.record({
  west: fc.integer({ min: 0, max: 5 }), south: fc.integer({ min: 0, max: 5 }), width: fc.integer({ min: 1, max: 5 }), height: fc.integer({ min: 1, max: 5 }),
  notch: fc.boolean(), from: fc.nat(5), reversed: fc.boolean()
}).map(({ west: w, south: s, width, height, notch, from, reversed }): Position[] => {
  const [e, n] = [w + width, s + height]
  const corners: Position[] = notch && width > 1 && height > 1
    ? [[w, s], [e, s], [e, n - 1], [e - 1, n - 1], [e - 1, n], [w, n]]
    : [[w, s], [e, s], [e, n], [w, n]]
  const turned = corners.map((_, k) => corners[(k + from) % corners.length]!)
  if (reversed) turned.reverse()
  return [...turned, turned[0]!]
})
const squareMetres = (found: ReturnType<typeof intersect>) => found ? area(found) : 0

describe('lines that run along one another', () => {
  it('are a fault of two parts exactly where these share ground', () => {
    fc.assert(fc.property(shape, shape, (a, b) => {
      const shared = squareMetres(intersect(featureCollection([turfPolygon([a]), turfPolygon([b])])))
      expect(checkOutline({ type: 'MultiPolygon', coordinates: [[a], [b]] }).length > 0).toBe(shared > 1)
    }), { numRuns: 400, seed: 11 })
  })

  it('are a fault of a hole exactly where it leaves its shell', () => {
    fc.assert(fc.property(shape, shape, (shell, hole) => {
      if (booleanEqual(turfPolygon([shell]), turfPolygon([hole]))) return
      const outside = squareMetres(difference(featureCollection([turfPolygon([hole]), turfPolygon([shell])])))
      expect(checkOutline({ type: 'Polygon', coordinates: [shell, hole] }).length > 0).toBe(outside > 1)
    }), { numRuns: 400, seed: 12 })
  })

  it('are told with their place, across the antimeridian too', () => {
    for (const shift of [0, 172]) {
      const moved = (ring: Position[]) => ring.map(([lon, lat]): Position => [lon + shift > 180 ? lon + shift - 360 : lon + shift, lat])
      const issues = checkOutline({ type: 'MultiPolygon', coordinates: [[moved(box(0, 0, 10, 10))], [moved(box(5, 0, 15, 10))]] })
      expect(issues[0]).toMatchObject({ code: 'self-crossing', lines: [expect.anything(), expect.anything()] })
      expect(issues[0]!.message).toMatch(/^Two lines of the outline cross at .* of part 1 and edge .* of part 2\.$/)
    }
  })

  it('are no fault of a spike, a keyhole and parts side by side', () => {
    for (const geometry of [
      { type: 'Polygon', coordinates: [[[0, 0], [10, 0], [10, 5], [15, 5], [10, 5], [10, 10], [0, 10], [0, 0]]] },
      { type: 'Polygon', coordinates: [[[0, 0], [10, 0], [10, 5], [6, 5], [6, 3], [4, 3], [4, 6], [6, 6], [6, 5], [10, 5], [10, 10], [0, 10], [0, 0]]] },
      { type: 'MultiPolygon', coordinates: [[box(0, 0, 10, 10)], [box(10, 2, 15, 8)], [box(10, 8, 15, 12)]] }
    ]) expect(checkOutline(geometry)).toEqual([])
  })
})
