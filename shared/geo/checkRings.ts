import { contourOf } from '../earth/contour.ts'
import { ringPath, type RingPath } from '../earth/rings.ts'
import type { Outline, Position } from '../types/domain.ts'
import { InputError, type Issue } from '../types/issue.ts'
import { ringAreaM2 } from './authalic.ts'
import { findCrossings, type Crossing } from './crossings.ts'
import { findNestingFaults, type NestingFault } from './nesting.ts'
import { polygonsOf } from './parts.ts'
import type { BoundedRing } from './pointInRing.ts'

/** Rings smaller than this, m², are lines and points. */
const leastAreaM2 = 1
/** Vertices nearer than this, a tenth of a millimetre, are one place. */
const samePlaceDeg = 1e-9

/** A ring of the outline: its place in the file, its line without repeated vertices and where each of those stands in the file. */
interface Ring { path: string, line: RingPath, indices: number[] }

/** Faults between the edges of an outline whose numbers hold: no area, crossing lines, holes and parts in the wrong place. */
export function checkRings(outline: Outline, prefix: string, most: number): Issue[] {
  try {
    return faultsOf(outline, prefix, most)
  }
  catch (error) {
    if (!(error instanceof InputError)) throw error
    const within = (path = ''): string => prefix === '' ? path : `${prefix}/${path}`
    return error.issues.slice(0, most).map(issue => ({ ...issue, path: within(issue.path) }))
  }
}

function faultsOf(outline: Outline, prefix: string, most: number): Issue[] {
  const base = prefix === '' ? 'coordinates' : `${prefix}/coordinates`
  const pathOf = (polygon: number, ring: number): string => outline.type === 'Polygon' ? `${base}/${ring}` : `${base}/${polygon}/${ring}`
  const listed = polygonsOf(outline).flatMap((polygon, p) => polygon.map((positions, r) =>
    ({ positions, path: pathOf(p, r), indices: distinctIndices(positions) })))
  const points = listed.filter(({ indices }) => indices.length < 4)
  if (points.length > 0) return points.slice(0, most).map(({ path }) => noArea(path))

  const rings = listed.map(({ positions, path, indices }): Ring => ({ path, indices, line: ringPath(indices.map(k => positions[k]!)) }))
  const { crossings, complete } = findCrossings(rings.map(ring => ring.line))
  if (crossings.length > 0) return crossings.slice(0, most).map(crossing => crossingIssue(crossing, rings))
  if (!complete) {
    return [{ path: base, code: 'too-intricate', message: 'The outline’s lines lie so close together that they cannot be checked for crossings. Simplify it.' }]
  }

  const bounded: BoundedRing[] = [...contourOf(outline).rings]
  const flat = rings.filter((_, k) => ringAreaM2(bounded[k]!) < leastAreaM2)
  if (flat.length > 0) return flat.slice(0, most).map(({ path }) => noArea(path))
  let next = 0
  const polygons = polygonsOf(outline).map(polygon => polygon.map(() => bounded[next++]!))
  return findNestingFaults(polygons).slice(0, most).map(fault => nestingIssue(fault, pathOf))
}

function noArea(path: string): Issue {
  return { path, code: 'no-area', message: 'The ring encloses no area: its positions lie on one line or in one place.' }
}

/** Index in the ring as written of each vertex that is not in the same place as the one before; the last closes the ring. */
function distinctIndices(positions: readonly Position[]): number[] {
  const kept = [0]
  const apart = (p: Position, q: Position): boolean => {
    const step = Math.abs(q[0] - p[0])
    const turned = Math.abs(step - 360 * Math.round(step / 360))
    return Math.abs(q[1] - p[1]) > samePlaceDeg || turned > samePlaceDeg || step === 360
  }
  for (let k = 1; k < positions.length - 1; k++) {
    if (apart(positions[kept.at(-1)!]!, positions[k]!)) kept.push(k)
  }
  while (kept.length > 1 && !apart(positions[kept.at(-1)!]!, positions.at(-1)!)) kept.pop()
  kept.push(positions.length - 1)
  return kept
}

function crossingIssue({ lonDeg, latDeg, first, second }: Crossing, rings: readonly Ring[]): Issue {
  // Of several positions in one place the last begins the edge.
  const startOf = ({ ring, edge }: Crossing['first']): number => rings[ring]!.indices[edge + 1]! - 1
  const edgeName = (at: Crossing['first']): string => `${startOf(at)}–${startOf(at) + 1}`
  const place = `${degrees(latDeg, 'N', 'S')}, ${degrees(lonDeg, 'E', 'W')}`
  const a = rings[first.ring]!
  const b = rings[second.ring]!
  const path = `${a.path}/${startOf(first)}`
  const message = first.ring === second.ring
    ? `The outline crosses itself at ${place}: edge ${edgeName(first)} and edge ${edgeName(second)}.`
    : `Two lines of the outline cross at ${place}: edge ${edgeName(first)} of ${a.path} and edge ${edgeName(second)} of ${b.path}.`
  return { path, code: 'self-crossing', message, value: `[${lonDeg.toFixed(6)}, ${latDeg.toFixed(6)}]` }
}

function nestingIssue({ code, polygon, ring, other }: NestingFault, pathOf: (polygon: number, ring: number) => string): Issue {
  const where = pathOf(other.polygon, other.ring)
  const message = {
    'hole-outside': `This hole lies outside its shell (${where}).`,
    'hole-in-hole': `This hole lies inside another hole (${where}).`,
    'parts-overlap': `This part lies inside another part (${where}), so its ground would count twice.`
  }[code]
  return { path: pathOf(polygon, ring), code, message }
}

function degrees(value: number, positive: string, negative: string): string {
  return `${Math.abs(value).toFixed(4)}° ${value < 0 ? negative : positive}`
}
