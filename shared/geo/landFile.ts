import type { Outline, Position } from '../types/domain.ts'
import { polygonsOf } from './parts.ts'

/** Steps of a degree in the file, eleven metres at most: the source's own grid is thirty times wider. */
const perDegree = 1e4

interface LandFile { source: string, perDegree: number, polygons: number[][][] }

/** Land as the browser fetches it: each ring as whole steps from vertex to vertex, the first from 0° E, 0° N. The land must be cut at ±180°. */
export function packLand(land: Outline, source: string): string {
  const file: LandFile = { source, perDegree, polygons: polygonsOf(land).map(rings => rings.map(packRing)) }
  return `${JSON.stringify(file)}\n`
}

function packRing(ring: readonly Position[]): number[] {
  const steps: number[] = []
  let [x, y] = [0, 0]
  for (const [lon, lat] of ring) {
    const [nextX, nextY] = [Math.round(lon * perDegree), Math.round(lat * perDegree)]
    if (steps.length > 0 && nextX === x && nextY === y) continue
    steps.push(nextX - x, nextY - y)
    x = nextX
    y = nextY
  }
  return steps
}

/** The land of a packed file; rings that shrank to nothing in its steps are left out. */
export function unpackLand(file: LandFile): Outline {
  const coordinates = file.polygons
    .map(rings => rings.map(steps => unpackRing(steps, file.perDegree)).filter(ring => ring.length >= 4))
    .filter(rings => rings.length > 0)
  return { type: 'MultiPolygon', coordinates }
}

function unpackRing(steps: readonly number[], scale: number): Position[] {
  const ring: Position[] = []
  let [x, y] = [0, 0]
  for (let k = 0; k + 1 < steps.length; k += 2) {
    x += steps[k]!
    y += steps[k + 1]!
    ring.push([x / scale, y / scale])
  }
  return ring
}
