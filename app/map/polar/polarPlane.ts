import type { Outline, Position } from '#shared/types/domain'
import { polygonsOf } from '#shared/geo/parts'

export type Pole = 'north' | 'south'

/**
 * The plane about a pole, seen from outside the Earth: distance from the pole is true (azimuthal equidistant in latitude), 0° points
 * right, and 90° E points up at the north pole, down at the south pole. The other pole is the outermost circle.
 */
export interface PolarPlane { pole: Pole, width: number, height: number, /** Pixels for a degree of latitude. */ scale: number }

/** Degrees from the pole to the nearer edge of the view, from whole to closest. */
export const polarReaches = [40, 30, 20, 12, 8, 5, 3, 2, 1, 0.5] as const

export function polarPlane(pole: Pole, width: number, height: number, reachDeg: number): PolarPlane {
  return { pole, width, height, scale: Math.max(1, Math.min(width, height)) / 2 / reachDeg }
}

export function toPlane({ pole, width, height, scale }: PolarPlane, [lon, lat]: Position): { x: number, y: number } {
  const radius = scale * (pole === 'north' ? 90 - lat : 90 + lat)
  const angle = lon * Math.PI / 180
  return { x: width / 2 + radius * Math.cos(angle), y: height / 2 + (pole === 'north' ? -1 : 1) * radius * Math.sin(angle) }
}

/** Null beyond the other pole. At the pole itself the longitude is 0. */
export function fromPlane({ pole, width, height, scale }: PolarPlane, { x, y }: { x: number, y: number }): Position | null {
  const [dx, dy] = [x - width / 2, (y - height / 2) * (pole === 'north' ? -1 : 1)]
  const away = Math.hypot(dx, dy) / scale
  if (away > 180) return null
  const lon = Math.atan2(dy, dx) * 180 / Math.PI
  return [away === 0 ? 0 : lon === 180 ? -180 : lon, pole === 'north' ? 90 - away : away - 90]
}

/** A line of places as a path; steps are those of the line, so dense lines stay exact. */
export function linePath(plane: PolarPlane, places: readonly Position[]): string {
  return places.map((place, k) => {
    const { x, y } = toPlane(plane, place)
    return `${k === 0 ? 'M' : 'L'}${x.toFixed(2)} ${y.toFixed(2)}`
  }).join('')
}

/** Rings cut at ±180° and closed along a pole, for filling by the even-odd rule: edges along a latitude are made round. */
export function fillPath(plane: PolarPlane, outline: Outline): string {
  return polygonsOf(outline).flat().map(ring => `${linePath(plane, denseSteps(ring))}Z`).join('')
}

/** A line straight in longitude and latitude is a curve about a pole: steps of at most a degree of longitude. */
export function denseSteps(line: readonly Position[]): Position[] {
  return line.flatMap((place, k): Position[] => {
    const before = line[k - 1]
    if (!before) return [place]
    const pieces = Math.max(1, Math.ceil(Math.abs(place[0] - before[0]) - 1e-9))
    return Array.from({ length: pieces }, (_, p) => {
      const t = (p + 1) / pieces
      return [before[0] + (place[0] - before[0]) * t, before[1] + (place[1] - before[1]) * t]
    })
  })
}
