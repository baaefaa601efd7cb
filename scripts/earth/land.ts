import { readFileSync } from 'node:fs'
import { createRequire } from 'node:module'
import { feature } from 'topojson-client'
import type { Outline, Position } from '../../shared/types/domain.ts'
import { ringIntegrals } from '../../shared/earth/ringIntegrals.ts'
import { ringPath } from '../../shared/earth/rings.ts'
import type { ContourRing } from '../../shared/earth/contour.ts'

/**
 * Land of Natural Earth 1:50m (npm world-atlas, land-50m.json) as rings of the engine. The file's rings are stitched across
 * ±180°, so a step of exactly 360° is no turn there. Holes are left out: one is the Caspian, which counts as land like any
 * lake, the other a seam of Antarctica at −89.999°. The file has no ice shelves: they are sea.
 */
export function readLand(): { rings: ContourRing[], version: string, bytes: Buffer } {
  const require = createRequire(`${process.cwd()}/package.json`)
  const bytes = readFileSync(require.resolve('world-atlas/land-50m.json'))
  const version = (JSON.parse(readFileSync(require.resolve('world-atlas/package.json'), 'utf8')) as { version: string }).version
  const topology = JSON.parse(bytes.toString('utf8'))
  const collection = feature(topology, topology.objects.land) as unknown as { features: { geometry: Outline }[] }
  const rings: ContourRing[] = []
  for (const { geometry } of collection.features) {
    const parts = geometry.type === 'Polygon' ? [geometry.coordinates] : geometry.coordinates
    for (const part of parts) rings.push(landRing(part[0]!))
  }
  return { rings, version, bytes }
}

function landRing(positions: Position[]): ContourRing {
  const path = ringPath(positions, { fullTurns: false })
  const { areaSr } = ringIntegrals(path)
  // A ring round the pole (Antarctica) encloses its smaller side; the sign of −∮ sin ψ dλ tells it, as it tells a ring's direction.
  const side = path.winding === 0 ? (areaSr >= 0 ? 1 : -1) : (areaSr < 0 ? 1 : -1)
  const pole = path.winding === 0 ? null : (side > 0) === (path.winding > 0) ? 'north' : 'south'
  return { ...path, sign: 1, side, pole }
}
