import type { Outline, Position } from '#shared/types/domain'
import { cutAtAntimeridian } from '#shared/geo/cut'
import { polygonsOf } from '#shared/geo/parts'

/** An outline as the map draws it: filled polygons, and its line without the seams that the cut at ±180° leaves. */
export interface DisplayShape { fill: Outline, lines: Position[][] }

/** Edges are straight in longitude and latitude; the map would join their ends by its own rule. */
const stepDeg = 1

/** The outline must have passed `checkOutline`. */
export function displayShape(outline: Outline): DisplayShape {
  const fill = displayFill(cutAtAntimeridian(outline))
  return { fill, lines: displayLines(fill) }
}

/** The line alone, of an outline that is cut at the antimeridian already. */
export function displayLines(cut: Outline): Position[][] {
  return polygonsOf(cut).flat().flatMap(withoutSeams)
}

/** The fill alone, of an outline that is cut at the antimeridian already. */
export function displayFill(cut: Outline): Outline {
  return { type: 'MultiPolygon', coordinates: polygonsOf(cut).map(rings => rings.map(dense)) }
}

function dense(ring: readonly Position[]): Position[] {
  const out: Position[] = [ring[0]!]
  for (let k = 1; k < ring.length; k++) {
    const [x0, y0] = ring[k - 1]!
    const [x1, y1] = ring[k]!
    const pieces = Math.max(1, Math.ceil(Math.max(Math.abs(x1 - x0), Math.abs(y1 - y0)) / stepDeg - 1e-9))
    for (let p = 1; p <= pieces; p++) out.push(p === pieces ? [x1, y1] : [x0 + (x1 - x0) * p / pieces, y0 + (y1 - y0) * p / pieces])
  }
  return out
}

function withoutSeams(ring: readonly Position[]): Position[][] {
  const lines: Position[][] = []
  let line: Position[] = []
  const finish = (): void => {
    if (line.length > 1) lines.push(line)
    line = []
  }
  for (let k = 1; k < ring.length; k++) {
    const [from, to] = [ring[k - 1]!, ring[k]!]
    if (isSeam(from, to)) {
      finish()
      continue
    }
    if (line.length === 0) line.push(from)
    line.push(to)
  }
  finish()
  return lines
}

/** An edge along ±180° or along a pole, where the region goes on. */
export function isSeam(from: Position, to: Position): boolean {
  return (Math.abs(from[0]) === 180 && from[0] === to[0]) || (Math.abs(from[1]) === 90 && from[1] === to[1])
}
