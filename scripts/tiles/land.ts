import { createHash } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import { feature } from 'topojson-client'
import { ringIntegrals } from '../../shared/earth/ringIntegrals.ts'
import { ringPath } from '../../shared/earth/rings.ts'
import { cutRings } from '../../shared/geo/cut.ts'
import { polygonsOf } from '../../shared/geo/parts.ts'
import type { BoundedRing } from '../../shared/geo/pointInRing.ts'
import type { Outline, Position } from '../../shared/types/domain.ts'

/** Beyond this latitude the Mercator tiles end, and a coast line there would run along their border. */
const lastCoastDeg = 85

export interface LandShapes { land: Outline, coast: Position[][], version: string, sha256: string }

/**
 * Natural Earth 1:50m land (npm world-atlas) for the map, the Caspian cut out of it. The file's rings are stitched across ±180°: a
 * step of exactly 360° is none there. Cut anew, Antarctica reaches the pole and no line crosses the map.
 */
export function readLandShapes(): LandShapes {
  const require = createRequire(`${process.cwd()}/package.json`)
  const bytes = readFileSync(require.resolve('world-atlas/land-50m.json'))
  const { version } = JSON.parse(readFileSync(require.resolve('world-atlas/package.json'), 'utf8')) as { version: string }
  const topology = JSON.parse(bytes.toString('utf8'))
  const collection = feature(topology, topology.objects.land) as unknown as { features: { geometry: Outline }[] }
  const rings = collection.features.flatMap(({ geometry }) => polygonsOf(geometry).flat()).filter(isShore).map(boundedRing)
  const land = cutRings(rings)
  return { land, coast: polygonsOf(land).flat().flatMap(shoreLines), version, sha256: createHash('sha256').update(bytes).digest('hex') }
}

/** False for the seam at −89.999° that the file keeps as a hole of Antarctica. */
function isShore(ring: Position[]): boolean {
  return ring.some(([, lat]) => lat > -89)
}

function boundedRing(positions: Position[]): BoundedRing {
  const path = ringPath(positions, { fullTurns: false })
  if (path.winding === 0) return { ...path, pole: null }
  // Antarctica: a path that turns east with the smaller side on its right winds round the south pole.
  return { ...path, pole: (ringIntegrals(path).areaSr < 0) === (path.winding > 0) ? 'north' : 'south' }
}

/** A ring's line without the pieces along ±180° and beyond ±85°. */
function shoreLines(ring: Position[]): Position[][] {
  const lines: Position[][] = []
  let line: Position[] = []
  for (let k = 1; k < ring.length; k++) {
    const [from, to] = [ring[k - 1]!, ring[k]!]
    const seam = Math.abs(from[0]) === 180 && from[0] === to[0]
    if (!seam && Math.abs(from[1]) <= lastCoastDeg && Math.abs(to[1]) <= lastCoastDeg) {
      if (line.length === 0) line.push(from)
      line.push(to)
    }
    else if (line.length > 0) {
      lines.push(line)
      line = []
    }
  }
  if (line.length > 0) lines.push(line)
  return lines
}
