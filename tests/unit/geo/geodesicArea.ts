import geodesic from 'geographiclib-geodesic'
import type { Position } from '../../../shared/types/domain.ts'

/**
 * Area on WGS 84 by GeographicLib (C. F. F. Karney, Algorithms for geodesics, J. Geodesy 87, 2013), m². `stepDeg` densifies edges straight in
 * longitude and latitude first; without it edges are geodesics between the vertices as they stand.
 */
export function geographicLibAreaM2(ring: readonly Position[], stepDeg?: number): number {
  const polygon = geodesic.Geodesic.WGS84.Polygon(false)
  for (let k = 1; k < ring.length; k++) {
    const [lon0, lat0] = ring[k - 1]!
    const [lon1, lat1] = ring[k]!
    const pieces = stepDeg ? Math.max(1, Math.ceil(Math.hypot(lon1 - lon0, lat1 - lat0) / stepDeg)) : 1
    for (let p = 0; p < pieces; p++) {
      polygon.AddPoint(lat0 + (lat1 - lat0) * p / pieces, lon0 + (lon1 - lon0) * p / pieces)
    }
  }
  return Math.abs(polygon.Compute(false, true).area!)
}

/** A box that runs from west to east, closed, anticlockwise. */
export function box(west: number, south: number, east: number, north: number): Position[] {
  return [[west, south], [east, south], [east, north], [west, north], [west, south]]
}
