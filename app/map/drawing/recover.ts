import { contourOf } from '#shared/earth/contour'
import { arcDeg } from '#shared/geo/greatCircle'
import { polygonsOf } from '#shared/geo/parts'
import type { Outline, Position } from '#shared/types/domain'
import { isSeam } from '../displayShape'
import type { Draft } from './draft'
import { draftOutline } from './draftShape'

/** Part of the area that taking an outline apart and putting it together again may change. */
const tolerance = 1e-6
/** A position this near to the great circle of its neighbours, degrees, was put there when the outline was stored. */
const onArcDeg = 5e-7

/**
 * An outline that is stored, as vertices to edit. Parts cut at the antimeridian are joined again. One that was drawn gets its few
 * vertices and great circles back; any other keeps every vertex, its edges straight in longitude and latitude.
 */
export function draftOf(outline: Outline): Draft {
  const joined = joinedRings(outline)
  const drawn: Draft = { rings: joined.map(corners).filter(ring => ring.length >= 3), edges: 'great-circle', open: false }
  const given = polygonsOf(outline).flat(2).length
  const kept = drawn.rings.reduce((sum, ring) => sum + ring.length, 0)
  if (kept * 2 < given && isSame(drawn, outline)) return drawn
  const straight: Draft = { rings: joined, edges: 'straight', open: false }
  if (isSame(straight, outline)) return straight
  return { rings: polygonsOf(outline).flat().map(ring => ring.slice(0, -1)), edges: 'straight', open: false }
}

function isSame(draft: Draft, outline: Outline): boolean {
  const made = draftOutline(draft)
  if (!made) return false
  const [a, b] = [contourOf(made), contourOf(outline)]
  return Math.abs(a.areaM2 / b.areaM2 - 1) < tolerance && arcDeg(a.centroid, b.centroid) < 1e-3
}

/** Rings, not closed, joined again where they were cut at ±180°; seams and the places on them left out. */
function joinedRings(outline: Outline): Position[][] {
  const chains: Position[][] = []
  const rings: Position[][] = []
  for (const ring of polygonsOf(outline).flat()) {
    const parts = partsWithoutSeams(ring)
    if (parts === null) rings.push(ring.slice(0, -1))
    else chains.push(...parts)
  }
  const waiting = new Set(chains)
  const next = (end: Position): Position[] | undefined =>
    [...waiting].find(([start]) => start![0] === -end[0] && Math.abs(start![1] - end[1]) < 1e-6)
  for (const chain of chains) {
    if (!waiting.delete(chain)) continue
    const joined = [...chain]
    let end = joined.pop()!
    for (let following = next(end); following; following = next(end)) {
      waiting.delete(following)
      joined.push(...following.slice(1))
      end = joined.pop()!
    }
    // The loop came back to its beginning, a place on the cut.
    rings.push(joined.slice(1))
  }
  return rings
}

/** Pieces of a ring between its seams; null where it has none. */
function partsWithoutSeams(ring: readonly Position[]): Position[][] | null {
  const open = ring.slice(0, -1)
  const n = open.length
  const seams = open.flatMap((from, k) => isSeam(from, open[(k + 1) % n]!) ? [k] : [])
  if (seams.length === 0) return null
  return seams.flatMap((seam, s) => {
    const start = seam + 1
    const end = (seams[(s + 1) % seams.length]! + n - start) % n + start
    if (end === start) return []
    return [Array.from({ length: end - start + 1 }, (_, k) => open[(start + k) % n]!)]
  })
}

/** The positions of a ring that do not lie on the great circle between their neighbours. */
function corners(ring: readonly Position[]): Position[] {
  const distinct = ring.filter((place, k) => arcDeg(place, ring[(k + 1) % ring.length]!) > 1e-9)
  const n = distinct.length
  return distinct.filter((place, k) => offArcDeg(place, distinct[(k + n - 1) % n]!, distinct[(k + 1) % n]!) > onArcDeg)
}

/** Distance of a place from the great circle through two others, degrees. */
function offArcDeg(place: Position, before: Position, after: Position): number {
  const [u, v, w] = [unit(before), unit(after), unit(place)]
  const normal = [u[1] * v[2] - u[2] * v[1], u[2] * v[0] - u[0] * v[2], u[0] * v[1] - u[1] * v[0]] as const
  const length = Math.hypot(...normal)
  if (length < 1e-14) return 180
  return Math.asin(Math.min(1, Math.abs(normal[0] * w[0] + normal[1] * w[1] + normal[2] * w[2]) / length)) * 180 / Math.PI
}

function unit([lon, lat]: Position): readonly [number, number, number] {
  const [l, p] = [lon * Math.PI / 180, lat * Math.PI / 180]
  return [Math.cos(p) * Math.cos(l), Math.cos(p) * Math.sin(l), Math.sin(p)]
}
