import geodesic from 'geographiclib-geodesic'
import { expect, it } from 'vitest'
import { contourOf } from '../../../shared/earth/contour.ts'
import type { Position } from '../../../shared/types/domain.ts'
import { loadCases } from './loadCases.ts'

/** Area of a ring whose edges are straight in longitude and latitude, by GeographicLib on edges cut to 0.05° (Karney 2013, J. Geodesy 87). */
function geographicLibArea(ring: Position[]): number {
  const polygon = geodesic.Geodesic.WGS84.Polygon(false)
  for (let i = 0; i + 1 < ring.length; i++) {
    const [x0, y0] = ring[i]!
    const [x1, y1] = ring[i + 1]!
    const pieces = Math.ceil(Math.max(Math.abs(x1 - x0), Math.abs(y1 - y0)) / 0.05)
    for (let k = 0; k < pieces; k++) polygon.AddPoint(y0 + k / pieces * (y1 - y0), x0 + k / pieces * (x1 - x0))
  }
  return Math.abs((polygon.Compute(false, true) as { area: number }).area)
}

const rings = loadCases()
  .flatMap(({ id, loads }) => loads.flatMap(({ geometry }) => (geometry.type === 'Polygon' ? [geometry.coordinates] : geometry.coordinates).map((part, i): [string, Position[]] => [`${id} part ${i}`, part[0]!])))
  // A rectangle round the pole has edges of 360° and along the pole, which GeographicLib has no word for.
  .filter(([, ring]) => ring.every(p => Math.abs(p[1]) < 90))

it('covers eleven outlines of the reference cases', () => {
  expect(rings.length).toBeGreaterThanOrEqual(12)
})

it.each(rings)('%s', (_, ring) => {
  // Chords of 0.05° against the straight line: below 1e-6 of an area of some square degrees.
  expect(Math.abs(contourOf({ type: 'Polygon', coordinates: [ring] }).areaM2 / geographicLibArea(ring) - 1)).toBeLessThan(1e-6)
})
