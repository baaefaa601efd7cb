import type { Outline, Position } from '../types/domain.ts'

/** A closed ring as a continuous path in longitude: the last point is the first, `turns` whole turns further on. */
export interface UnwrappedRing {
  /** Degrees east, continuous, not reduced to one turn. */
  lon: Float64Array
  /** Geodetic latitude, degrees. */
  lat: Float64Array
  /** Whole turns about the axis: 0 for an ordinary ring, ±1 for one that winds round a pole. */
  turns: number
}

/**
 * Signed step in longitude of an edge, degrees. Up to 180° it is taken as it stands, exactly 360° is a full turn,
 * anything else goes the short way.
 */
export function longitudeStep(fromDeg: number, toDeg: number): number {
  const step = toDeg - fromDeg
  if (Math.abs(step) <= 180 || Math.abs(step) === 360) return step
  return step - 360 * Math.round(step / 360)
}

/** A ring with repeated vertices taken out and longitudes made continuous. An open ring is closed. */
export function unwrapRing(ring: readonly Position[]): UnwrappedRing {
  const lon: number[] = []
  const lat: number[] = []
  const first = ring[0]
  if (!first) return { lon: new Float64Array(), lat: new Float64Array(), turns: 0 }
  let x = first[0]
  let previous = first
  lon.push(x)
  lat.push(first[1])
  const visit = (position: Position): void => {
    const step = longitudeStep(previous[0], position[0])
    if (step !== 0 || position[1] !== previous[1]) {
      x += step
      lon.push(x)
      lat.push(position[1])
    }
    previous = position
  }
  for (let k = 1; k < ring.length; k++) visit(ring[k]!)
  visit(first)
  return { lon: Float64Array.from(lon), lat: Float64Array.from(lat), turns: Math.round((x - first[0]) / 360) }
}

/** The outline as a list of polygons, each a list of rings with the shell first. */
export function polygonsOf(outline: Outline): Position[][][] {
  return outline.type === 'Polygon' ? [outline.coordinates] : outline.coordinates
}
