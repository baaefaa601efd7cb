import { contourOf } from '../earth/contour.ts'
import { ringPath } from '../earth/rings.ts'
import type { Outline, Position } from '../types/domain.ts'
import { InputError, type Issue } from '../types/issue.ts'
import { ringAreaM2 } from './authalic.ts'
import { findCrossings, type Crossing, type EdgePlace } from './crossings.ts'
import { capital, placeWords, ringWords, stretchOf } from './faultPlace.ts'
import { findNestingFaults, type NestingFault } from './nesting.ts'
import { polygonsOf } from './parts.ts'
import type { BoundedRing } from './pointInRing.ts'

/** Rings smaller than this, m², are lines and points. */
const leastAreaM2 = 1
/** Vertices nearer than this, a tenth of a millimetre, are one place. */
const samePlaceDeg = 1e-9

/** A ring of the outline: its place in the file, what it is called, and which of its positions are not where the one before is. */
interface Ring { path: string, words: string, positions: Position[], indices: number[] }

/** Faults between the edges of an outline whose numbers hold: no area, crossing lines, holes and parts in the wrong place. Each with its lines. */
export function checkRings(outline: Outline, prefix: string, most: number): Issue[] {
  const base = prefix === '' ? 'coordinates' : `${prefix}/coordinates`
  const single = outline.type === 'Polygon'
  const rings = polygonsOf(outline).map((polygon, p) => polygon.map((positions, r): Ring => ({
    positions, path: single ? `${base}/${r}` : `${base}/${p}/${r}`,
    words: single && polygon.length === 1 ? 'the outline' : ringWords(p, r, single),
    indices: distinctIndices(positions)
  })))
  try {
    return faultsOf(outline, rings, base).slice(0, most)
  }
  catch (error) {
    if (!(error instanceof InputError)) throw error
    return blame(error, rings.flat(), base).slice(0, most)
  }
}

function faultsOf(outline: Outline, polygons: readonly Ring[][], base: string): Issue[] {
  const rings = polygons.flat()
  const points = rings.filter(({ indices }) => indices.length < 4)
  if (points.length > 0) return points.map(noArea)

  const { crossings, complete, busiest } = findCrossings(rings.map(({ positions, indices }) => ringPath(indices.map(k => positions[k]!))))
  if (crossings.length > 0) return crossings.map(crossing => crossingIssue(crossing, rings))
  if (!complete) return [tooIntricate(rings, busiest, base)]

  const bounded: BoundedRing[] = [...contourOf(outline).rings]
  const flat = rings.filter((_, k) => ringAreaM2(bounded[k]!) < leastAreaM2)
  if (flat.length > 0) return flat.map(noArea)
  let next = 0
  const placed = polygons.map(polygon => polygon.map(() => bounded[next++]!))
  return findNestingFaults(placed).map(fault => nestingIssue(fault, polygons))
}

/** What the engine refuses, told of the rings that it refuses by themselves; of all where none is. */
function blame(refused: InputError, rings: readonly Ring[], base: string): Issue[] {
  const own = rings.flatMap((ring) => {
    try {
      contourOf({ type: 'Polygon', coordinates: [ring.positions] })
      return []
    }
    catch (error) {
      if (!(error instanceof InputError)) throw error
      return error.issues.map((issue): Issue => issue.code === 'no-area' ? noArea(ring) : shown(ring, { path: ring.path, code: issue.code, message: issue.message }))
    }
  })
  if (own.length > 0) return own
  return refused.issues.map(({ code, message }) => ({ path: base, code, message, lines: rings.flatMap(ring => stretchOf(ring.positions).lines ?? []) }))
}

/** An issue of a whole ring, with its line and a place on it. */
function shown(ring: Ring, issue: Issue): Issue {
  const { lines, near } = stretchOf(ring.positions)
  const message = near ? `${issue.message} It is near ${placeWords(near)}.` : issue.message
  return { ...issue, message, ...(lines ? { lines } : {}) }
}

function noArea(ring: Ring): Issue {
  return shown(ring, { path: ring.path, code: 'no-area', message: `${capital(ring.words)} encloses no area: its positions lie on one line or in one place.` })
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

/** The position that an edge begins at, as written. Of several in one place the last begins it. */
function startOf({ ring, edge }: EdgePlace, rings: readonly Ring[]): number {
  return rings[ring]!.indices[edge + 1]! - 1
}

function edgeLines(places: readonly EdgePlace[], rings: readonly Ring[]): Position[][] {
  return places.flatMap(place => stretchOf(rings[place.ring]!.positions, startOf(place, rings), startOf(place, rings) + 1).lines ?? [])
}

function crossingIssue({ lonDeg, latDeg, first, second }: Crossing, rings: readonly Ring[]): Issue {
  const edgeName = (at: EdgePlace): string => `${startOf(at, rings)}–${startOf(at, rings) + 1}`
  const place = placeWords([lonDeg, latDeg])
  const [a, b] = [rings[first.ring]!, rings[second.ring]!]
  const message = first.ring === second.ring
    ? `The outline crosses itself at ${place}: edge ${edgeName(first)} and edge ${edgeName(second)}${rings.length > 1 ? ` of ${a.words}` : ''}.`
    : `Two lines of the outline cross at ${place}: edge ${edgeName(first)} of ${a.words} and edge ${edgeName(second)} of ${b.words}.`
  return {
    path: `${a.path}/${startOf(first, rings)}`, code: 'self-crossing', message, value: `[${lonDeg.toFixed(6)}, ${latDeg.toFixed(6)}]`,
    lines: edgeLines([first, second], rings)
  }
}

function tooIntricate(rings: readonly Ring[], busiest: EdgePlace | null, base: string): Issue {
  const start = busiest && rings[busiest.ring]!.positions[startOf(busiest, rings)]!
  const where = start ? `, most of all near ${placeWords(start)},` : ''
  return {
    path: busiest ? `${rings[busiest.ring]!.path}/${startOf(busiest, rings)}` : base, code: 'too-intricate',
    message: `The outline’s lines lie so close together${where} that they cannot be checked for crossings. Simplify it.`,
    ...(busiest ? { lines: edgeLines([busiest], rings) } : {})
  }
}

function nestingIssue({ code, polygon, ring, other }: NestingFault, polygons: readonly Ring[][]): Issue {
  const at = polygons[polygon]![ring]!
  const where = polygons[other.polygon]![other.ring]!.words
  const message = {
    'hole-outside': `${capital(at.words)} lies outside ${where}, which it should be cut from.`,
    'hole-in-hole': `${capital(at.words)} lies inside ${where}.`,
    'parts-overlap': `${capital(at.words)} lies inside ${where}, so its ground would count twice.`
  }[code]
  return shown(at, { path: at.path, code, message })
}
