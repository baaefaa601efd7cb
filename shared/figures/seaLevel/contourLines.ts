import { contours } from 'd3-contour'
import { seaFrom } from './levels.ts'
import type { SeaLevelField } from './levels.ts'
import type { Position } from '../../types/domain.ts'

export interface ContourLine {
  level: number
  /** Longitude and latitude, degrees. */
  points: Position[]
  /** Indices of points over open sea, where a label can stand. */
  open: number[]
}

/** Ground on one side of a level, as rings on the plane of longitude and latitude with corners of the map among them. */
export interface Zone { rings: Position[][] }

const hundredth = (value: number) => Math.round(value * 100) / 100 + 0
/** Points of a line that a label may be tried at: every so many. */
const labelStride = 3

/**
 * Lines of equal value. The rings of d3-contour are closed along the edge of the grid: there they are cut, so that no line
 * follows the antimeridian or a pole.
 */
export function contourLines(field: SeaLevelField, levels: readonly number[]): ContourLine[] {
  const grid = gridOf(field)
  return levels.flatMap((level) => {
    const rings = grid.contour(level).filter(ring => !isRipple(field, ring, level, gapAround(levels, level)))
    return rings.flatMap(ring => cutAtEdge(ring, grid)).flatMap((line): ContourLine[] => {
      const points: Position[] = []
      const open: number[] = []
      for (const at of line) {
        const position = grid.position(at)
        const last = points.at(-1)
        // Clipping on a sphere has no direction to follow between a point and itself.
        if (last && last[0] === position[0] && last[1] === position[1]) continue
        if (points.length % labelStride === 1 && grid.isOpen(at)) open.push(points.length)
        points.push(position)
      }
      return points.length > 1 ? [{ level, points, open }] : []
    })
  })
}

/** Where the field is above (or below) a level. */
export function zoneOf(field: SeaLevelField, level: number, side: 'above' | 'below'): Zone {
  const sign = side === 'above' ? 1 : -1
  const grid = gridOf({ ...field, value: side === 'above' ? field.value : field.value.map(value => -value) })
  const rings = grid.contour(sign * level).map(ring => ring.map(point => grid.position(point)))
  return { rings: rings.filter(ring => ring.length > 3) }
}

function gapAround(levels: readonly number[], level: number): number {
  return Math.min(...levels.filter(other => other !== level).map(other => Math.abs(other - level)))
}

/** Rings no wider than this are looked at, nodes. */
const rippleNodes = 6
/** A field that strays from the level by no more than this part of the step is flat: its little rings tell nothing. */
const rippleDepth = 0.1

/** A small ring on flat ground, where the field only ripples about the level. */
function isRipple({ value, longitudesDeg, latitudesDeg }: SeaLevelField, ring: readonly GridPoint[], level: number, gap: number): boolean {
  const [columns, rows] = [longitudesDeg.length, latitudesDeg.length]
  const [xs, ys] = [ring.map(([x]) => x), ring.map(([, y]) => y)]
  const [left, right, low, high] = [Math.min(...xs), Math.max(...xs), Math.min(...ys), Math.max(...ys)]
  if (right - left > rippleNodes || high - low > rippleNodes) return false
  for (let i = Math.max(0, Math.ceil(low - 0.5)); i <= Math.min(rows - 1, high - 0.5); i++) {
    for (let j = Math.max(0, Math.ceil(left - 0.5)); j <= Math.min(columns - 1, right - 0.5); j++) {
      if (Math.abs(value[i * columns + j]! - level) > rippleDepth * gap) return false
    }
  }
  return true
}

type GridPoint = readonly [number, number]

function gridOf({ latitudesDeg, longitudesDeg, value, sea }: SeaLevelField) {
  const [columns, rows] = [longitudesDeg.length, latitudesDeg.length]
  const generator = contours().size([columns, rows])
  const stepLon = longitudesDeg[1]! - longitudesDeg[0]!
  const stepLat = latitudesDeg[1]! - latitudesDeg[0]!
  const clamp = (at: number, last: number) => Math.min(last, Math.max(0, at))
  return {
    columns,
    rows,
    contour: (level: number) => generator.contour([...value], level).coordinates.flat() as [number, number][][],
    /** The nodes of d3-contour lie at halves; what it adds round the grid is held on the edge. */
    position: ([x, y]: GridPoint): Position => [
      hundredth(longitudesDeg[0]! + clamp(x - 0.5, columns - 1) * stepLon),
      hundredth(latitudesDeg[0]! + clamp(y - 0.5, rows - 1) * stepLat),
    ],
    /** All four nodes round a point are sea. */
    isOpen([x, y]: GridPoint): boolean {
      const [i, j] = [Math.floor(clamp(y - 0.5, rows - 1)), Math.floor(clamp(x - 0.5, columns - 1))]
      const [below, right] = [Math.min(i + 1, rows - 1), Math.min(j + 1, columns - 1)]
      return [[i, j], [i, right], [below, j], [below, right]].every(([a, b]) => sea[a! * columns + b!]! >= seaFrom)
    },
  }
}

/** The pieces of a ring that run inside the grid. */
function cutAtEdge(ring: readonly GridPoint[], { columns, rows }: { columns: number, rows: number }): GridPoint[][] {
  const outside = ([x, y]: GridPoint) => x < 0.5 || y < 0.5 || x > columns - 0.5 || y > rows - 0.5
  const along = ([x0, y0]: GridPoint, [x1, y1]: GridPoint) =>
    (x0 === x1 && (x0 === 0.5 || x0 === columns - 0.5)) || (y0 === y1 && (y0 === 0.5 || y0 === rows - 0.5))
  const open = ring.slice(0, -1)
  const start = open.findIndex((point, i) => outside(point) || along(open.at(i - 1)!, point))
  if (start < 0) return [[...ring]]
  const pieces: GridPoint[][] = []
  let piece: GridPoint[] = []
  const end = () => {
    if (piece.length > 1) pieces.push(piece)
    piece = []
  }
  for (let k = 0; k < open.length; k++) {
    const point = open[(start + k) % open.length]!
    if (outside(point)) {
      end()
      continue
    }
    if (piece.length && along(piece.at(-1)!, point)) end()
    piece.push(point)
  }
  end()
  return pieces
}
