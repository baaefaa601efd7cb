import type { Feature, FeatureCollection } from 'geojson'
import { contourLines } from '#shared/figures/seaLevel/contourLines'
import { roundUp } from '#shared/figures/seaLevel/levels'
import { formatSigned } from '#shared/format/numbers'
import type { Position } from '#shared/types/domain'
import type { Overlay } from './overlay'
import { overlayValues, type SensitivityGrid } from './sensitivityGrid'

/** A contour, or a piece of one; its sign makes it solid (1), dashed (−1) or heavy (0). */
export interface SensitivityLine { level: number, sign: -1 | 0 | 1, text: string, points: Position[] }

export interface SensitivityLines {
  /** Distance of the levels, in the overlay's unit; zero where the field is the same everywhere. */
  step: number
  /** Between 85° S and 85° N, where the tiles of a map end. */
  middle: SensitivityLine[]
  /** Beyond. */
  caps: SensitivityLine[]
  highest: { value: number, position: Position }
  lowest: { value: number, position: Position }
}

/** Where the map's own projection ends. */
export const capFromDeg = 85
const mostLines = 10

/** Lines of equal effect at equal steps of 1, 2 or 5 × 10ⁿ, zero among them where the effect changes sign. */
export function sensitivityLines(grid: SensitivityGrid, overlay: Overlay): SensitivityLines {
  const { latitudesDeg, longitudesDeg } = grid
  const value = overlayValues(grid, overlay)
  const at = (index: number) => ({
    value: value[index]!,
    position: [longitudesDeg[index % longitudesDeg.length]!, latitudesDeg[Math.floor(index / longitudesDeg.length)]!] as Position,
  })
  let [high, low] = [0, 0]
  value.forEach((v, k) => {
    if (v > value[high]!) high = k
    if (v < value[low]!) low = k
  })
  const [highest, lowest] = [at(high), at(low)]
  const range = highest.value - lowest.value
  const step = range > 0 ? roundUp(range / mostLines) : 0
  const levels: number[] = []
  for (let k = Math.ceil(lowest.value / step); k <= Math.floor(highest.value / step); k++) levels.push(Number((k * step).toPrecision(12)) + 0)
  const decimals = step > 0 ? Math.max(0, -Math.floor(Math.log10(step) + 1e-9)) : 0
  const field = { latitudesDeg, longitudesDeg, value, sea: value.map(() => 1) }
  const middle: SensitivityLine[] = []
  const caps: SensitivityLine[] = []
  for (const { level, points } of contourLines(field, levels)) {
    const line = { level, sign: Math.sign(level) as -1 | 0 | 1, text: level === 0 ? '0' : formatSigned(level, decimals) }
    for (const piece of splitAtCaps(points)) (piece.inCap ? caps : middle).push({ ...line, points: piece.points })
  }
  return { step, middle, caps, highest, lowest }
}

/** The pieces of a line on either side of ±85°, cut there. */
export function splitAtCaps(points: readonly Position[]): { inCap: boolean, points: Position[] }[] {
  const pieces: { inCap: boolean, points: Position[] }[] = []
  const inCap = ([, lat]: Position) => Math.abs(lat) > capFromDeg
  let piece: Position[] = []
  const end = (where: boolean) => {
    if (piece.length > 1) pieces.push({ inCap: where, points: piece })
  }
  points.forEach((point, k) => {
    const last = points[k - 1]
    if (last && inCap(last) !== inCap(point)) {
      const edge = Math.sign(inCap(last) ? last[1] : point[1]) * capFromDeg
      const part = (edge - last[1]) / (point[1] - last[1])
      const cut: Position = [last[0] + part * (point[0] - last[0]), edge]
      piece.push(cut)
      end(inCap(last))
      piece = [cut]
    }
    piece.push(point)
  })
  if (points.length) end(inCap(points.at(-1)!))
  return pieces
}

/** The lines as the map's source holds them. */
export function lineFeatures(lines: readonly SensitivityLine[]): FeatureCollection {
  return {
    type: 'FeatureCollection',
    features: lines.map(({ sign, text, points }): Feature => ({ type: 'Feature', properties: { sign, text }, geometry: { type: 'LineString', coordinates: points } })),
  }
}
