import geodesic from 'geographiclib-geodesic'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { alongArc, arcDeg, drawnLine, drawnOutline, greatCircle } from '../../../shared/geo/greatCircle.ts'
import { checkOutline } from '../../../shared/geo/outline.ts'
import { polygonsOf } from '../../../shared/geo/parts.ts'
import { spreadOf } from '../../../shared/geo/spread.ts'
import type { Position } from '../../../shared/types/domain.ts'
import { geographicLibAreaM2 } from './geodesicArea.ts'

const anywhere = fc.tuple(
  fc.double({ min: -180, max: 180, noNaN: true }), fc.double({ min: -89, max: 89, noNaN: true })
).map(([lon, lat]): Position => [lon, lat])

/** GeographicLib on a sphere of the Earth's mean radius: great circles by another hand. */
const sphere = new geodesic.Geodesic.Geodesic(6_371_000, 0)

describe('greatCircle', () => {
  it('goes where GeographicLib goes on a sphere', () => {
    fc.assert(fc.property(anywhere, anywhere, fc.double({ min: 0, max: 1, noNaN: true }), (a, b, part) => {
      fc.pre(arcDeg(a, b) < 179)
      const line = sphere.InverseLine(a[1], a[0], b[1], b[0])
      const expected = line.Position(line.s13 * part)
      expect(arcDeg(alongArc(a, b, part), [expected.lon2!, expected.lat2!])).toBeLessThan(1e-9)
      expect(arcDeg(a, b)).toBeCloseTo(line.s13 / 6_371_000 * 180 / Math.PI, 9)
    }), { numRuns: 300, seed: 3 })
  })

  it('has a position at least every quarter of a degree, continuous longitudes and both ends', () => {
    fc.assert(fc.property(anywhere, anywhere, (a, b) => {
      // Near opposite places the circle is ill determined.
      fc.pre(arcDeg(a, b) < 179.9)
      const path = greatCircle(a, b)
      expect(path[0]).toEqual(a)
      expect(arcDeg(path.at(-1)!, b)).toBeLessThan(1e-9)
      for (let k = 1; k < path.length; k++) {
        expect(arcDeg(path[k - 1]!, path[k]!)).toBeLessThan(0.25 + 1e-9)
        expect(Math.abs(path[k]![0] - path[k - 1]![0])).toBeLessThanOrEqual(180)
      }
    }), { numRuns: 200, seed: 4 })
  })

  it('crosses the pole between opposite meridians, and the antimeridian the short way', () => {
    expect(greatCircle([20, 80], [-160, 85], 5)).toEqual([[20, 80], [20, 85], [20, 90], [200, 90], [200, 85]])
    const path = greatCircle([170, 10], [-170, 10])
    expect(path.at(-1)).toEqual([190, 10])
    expect(Math.max(...path.map(([, lat]) => lat))).toBeCloseTo(Math.atan(Math.tan(10 * Math.PI / 180) / Math.cos(10 * Math.PI / 180)) * 180 / Math.PI, 3)
  })

  it('leaves the pole along the meridian of the next place', () => {
    expect(greatCircle([10, 90], [100, 80], 5)).toEqual([[10, 90], [100, 90], [100, 85], [100, 80]])
    expect(greatCircle([10, 80], [55, 90], 5)).toEqual([[10, 80], [10, 85], [10, 90]])
  })
})

describe('drawnLine', () => {
  it('tells for every step which drawn edge it belongs to', () => {
    const { positions, edgeOf } = drawnLine([[0, 0], [10, 0], [10, 10]], 5)
    expect(positions.length).toBe(edgeOf.length + 1)
    // The first edge in four: no step turns through more than 4° of longitude.
    expect(edgeOf).toEqual([0, 0, 0, 0, 1, 1, 2, 2, 2])
  })
})

describe('drawnOutline', () => {
  const areaOf = (vertices: Position[]): number => spreadOf(drawnOutline(vertices)).areaM2

  it('has the area GeographicLib gives for its stored positions, at the equator, across the antimeridian and round a pole', () => {
    const cases: Record<string, Position[]> = {
      equator: [[-10, -5], [12, -8], [9, 11], [-4, 6]],
      antimeridian: [[165, -20], [-160, -25], [-170, 15], [172, 5]],
      north: [[0, 70], [90, 65], [180, 75], [-90, 68]],
      south: [[10, -62], [100, -70], [-150, -66], [-60, -75]],
      'through the pole': [[0, 75], [60, 75], [180, 80], [-120, 70]]
    }
    for (const [name, vertices] of Object.entries(cases)) {
      const outline = drawnOutline(vertices)
      expect(checkOutline(outline), name).toEqual([])
      const stored = geographicLibAreaM2(drawnLine(vertices).positions, 0.02)
      expect(Math.abs(spreadOf(outline).areaM2 / stored - 1), name).toBeLessThan(1e-6)
      // Great circles in geodetic latitude against geodesics of the ellipsoid between the drawn vertices: a few parts in a thousand.
      expect(Math.abs(spreadOf(outline).areaM2 / geographicLibAreaM2([...vertices, vertices[0]!]) - 1), name).toBeLessThan(6e-3)
    }
  })

  it('does not depend on the first vertex, the direction or the turn the longitudes are written in', () => {
    fc.assert(fc.property(
      fc.array(fc.double({ min: 3, max: 35, noNaN: true }), { minLength: 4, maxLength: 9 }),
      fc.integer({ min: -180, max: 179 }), fc.integer({ min: -88, max: 88 }), fc.nat(8),
      (radii, lon, lat, first) => {
        const vertices = radii.map((r, k) => destination([lon, lat], 360 * k / radii.length, r))
        const area = areaOf(vertices)
        const k = first % vertices.length
        expect(areaOf([...vertices.slice(k), ...vertices.slice(0, k)]) / area).toBeCloseTo(1, 6)
        expect(areaOf([...vertices].reverse()) / area).toBeCloseTo(1, 6)
        expect(areaOf(vertices.map(([x, y]) => [x + 360, y])) / area).toBeCloseTo(1, 6)
        expect(checkOutline(drawnOutline(vertices))).toEqual([])
      }
    ), { numRuns: 60, seed: 8 })
  })

  it('stores positions within ±180° to seven decimals', () => {
    const outline = drawnOutline([[165, -20], [-160, -25], [-170, 15], [172, 5]])
    for (const [lon, lat] of polygonsOf(outline).flat(2)) {
      expect(Math.abs(lon)).toBeLessThanOrEqual(180)
      if (Math.abs(lon) < 180) expect(Math.round(lat * 1e7) / 1e7).toBe(lat)
    }
  })

  it('refuses fewer than three vertices', () => {
    expect(() => drawnOutline([[0, 0], [1, 1]])).toThrow(/at least 3 vertices, got 2/)
  })
})

/** The place at a bearing and distance (degrees) on the sphere, by GeographicLib. */
function destination([lon, lat]: Position, bearing: number, distance: number): Position {
  const { lon2, lat2 } = sphere.Direct(lat, lon, bearing, distance * Math.PI / 180 * 6_371_000)
  return [lon2!, lat2!]
}
