import type { Outline } from '#shared/types/domain'
import { polygonsOf } from '#shared/geo/parts'
import { displayFill, displayLines } from '../displayShape'
import { graticule } from '../graticule'
import { Path } from './path'
import { shapesOf } from './shapes'
import type { Rings } from './trace'

/** Land, coasts and graticule, ready to be traced. Land that goes on beyond ±180° is filled in one go, so that no seam shows. */
export interface Ground { land: Rings[][], coasts: Path[], graticule: Path[] }

export function groundOf(land: Outline | null): Ground {
  const fill = land && displayFill(land)
  const apart: Rings[][] = []
  const together: Rings[] = []
  for (const rings of fill ? polygonsOf(fill) : []) {
    const paths = rings.map(ring => new Path(ring))
    if (rings[0]!.some(([lon]) => Math.abs(lon) === 180)) together.push(paths)
    else apart.push([paths])
  }
  return {
    land: [together, ...apart],
    coasts: fill ? displayLines(fill).map(line => new Path(line)) : [],
    graticule: shapesOf(graticule()).flatMap(shape => shape.lines),
  }
}
