import type { Feature, FeatureCollection, Geometry } from 'geojson'
import { greatCircle } from '#shared/geo/greatCircle'
import type { Outline, Position } from '#shared/types/domain'
import { displayFill } from '../displayShape'
import { collection } from '../regionSources'
import { vertexCount, type Draft, type VertexPlace } from './draft'
import { edgeMiddles, ringLine, type DraftFault } from './draftShape'

interface Shown { active: boolean, draft: Draft, chosen: VertexPlace | null, pointer: Position | null, outline: Outline | null, fault: DraftFault | null }

/** With more vertices than this the middles are left out, and with many more all handles: the map would be all circles. */
const mostMiddles = 400
export const mostHandles = 4000

/** The draft's fill, lines and handles as sources of the map. */
export function draftFeatures(shown: Shown): Record<'draft-fill' | 'draft-lines' | 'draft-handles', FeatureCollection> {
  if (!shown.active) return { 'draft-fill': collection([]), 'draft-lines': collection([]), 'draft-handles': collection([]) }
  const { outline, fault } = shown
  return {
    'draft-fill': collection(outline && !fault ? [feature({}, displayFill(outline))] : []),
    'draft-lines': collection(lineFeatures(shown)),
    'draft-handles': collection(handleFeatures(shown))
  }
}

function lineFeatures({ draft, pointer, fault }: Shown): Feature[] {
  const features: Feature[] = []
  draft.rings.forEach((ring, k) => {
    if (ring.length === 0) return
    if (draft.open && k === draft.rings.length - 1) features.push(...openRing(ring, pointer))
    else features.push(line('edge', withDenseSteps(ringLine(draft, ring).positions)))
  })
  for (const wrong of fault?.lines ?? []) features.push(line('fault', withDenseSteps(wrong)))
  return features
}

function openRing(ring: readonly Position[], pointer: Position | null): Feature[] {
  const path = joined(ring)
  const last = ring.at(-1)!
  const ahead = pointer ? joined(ring.length > 1 ? [last, pointer, ring[0]!] : [last, pointer]) : ring.length > 2 ? joined([last, ring[0]!]) : []
  return [...(path.length > 1 ? [line('edge', path)] : []), ...(ahead.length > 1 ? [line('ahead', ahead)] : [])]
}

/** Great circles from place to place, longitudes running on. */
function joined(places: readonly Position[]): Position[] {
  const path: Position[] = []
  places.forEach((place, k) => {
    if (k === 0) path.push(place)
    else path.push(...greatCircle(path.at(-1)!, place, 1).slice(1))
  })
  return path
}

/** Straight edges cut into steps of a degree, so that the globe does not shorten them; dense ones stay as they are. */
export function withDenseSteps(positions: readonly Position[]): Position[] {
  const { lonDeg, latDeg } = pathOf(positions)
  const path: Position[] = [[lonDeg[0]!, latDeg[0]!]]
  for (let k = 1; k < lonDeg.length; k++) {
    const [fromLon, fromLat] = path.at(-1)!
    const [dLon, dLat] = [lonDeg[k]! - fromLon, latDeg[k]! - fromLat]
    const pieces = Math.max(1, Math.ceil(Math.max(Math.abs(dLon), Math.abs(dLat)) - 1e-9))
    for (let p = 1; p <= pieces; p++) path.push([fromLon + dLon * p / pieces, fromLat + dLat * p / pieces])
  }
  return path
}

/** Longitudes that run on from place to place, the short way unless an edge is a full turn. */
function pathOf(positions: readonly Position[]): { lonDeg: number[], latDeg: number[] } {
  const lonDeg = [positions[0]![0]]
  for (let k = 1; k < positions.length; k++) {
    const raw = positions[k]![0] - positions[k - 1]![0]
    const step = Math.abs(raw) <= 180 || Math.abs(raw) === 360 ? raw : raw - 360 * Math.round(raw / 360)
    lonDeg.push(lonDeg[k - 1]! + step)
  }
  return { lonDeg, latDeg: positions.map(([, lat]) => lat) }
}

function handleFeatures({ draft, chosen }: Shown): Feature[] {
  if (vertexCount(draft) > mostHandles) return []
  const middles = edgeMiddles(draft)
  const shown = draft.open || middles.length > mostMiddles ? [] : middles
  return [
    ...shown.map(({ place }) => feature({ kind: 'middle' }, { type: 'Point', coordinates: place })),
    ...draft.rings.flatMap((ring, r) => ring.map((place, v) =>
      feature({ kind: 'vertex', chosen: chosen?.ring === r && chosen.vertex === v }, { type: 'Point', coordinates: place })))
  ]
}

function line(kind: 'edge' | 'ahead' | 'fault', coordinates: Position[]): Feature {
  return feature({ kind }, { type: 'LineString', coordinates })
}

function feature(properties: Record<string, unknown>, geometry: Geometry): Feature {
  return { type: 'Feature', properties, geometry }
}
