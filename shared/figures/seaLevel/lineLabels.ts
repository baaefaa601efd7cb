import { boxesMeet, isInside } from '../layout.ts'
import { textBox } from '../svg.ts'
import type { Box, LabelBox, Point } from '../svg.ts'

/** A contour line on a drawing. */
export interface DrawnLine {
  text: string
  level: number
  /** px; null where a point lies outside the view. */
  points: (Point | null)[]
  /** Indices of points where a label may stand. */
  open: readonly number[]
}

export interface LineLabel { text: string, level: number, box: LabelBox, x: number, y: number }

/** A line gets another label for every so many points. */
const pointsPerLabel = 70

interface Options {
  size: number
  /** Where labels may stand. */
  inside: (box: Box) => boolean
  /** Levels whose labels matter most, in order. */
  first: readonly number[]
  /** Least distance between two labels of one level, px. */
  apart: number
}

/** Raster of what lines run where, so that a label of one line does not hide another. */
class LineRaster {
  private readonly cells = new Map<string, Set<number>>()
  private readonly pitch = 6

  add(line: DrawnLine, index: number): void {
    let last: Point | null = null
    for (const point of line.points) {
      if (point && last) {
        const steps = Math.min(200, Math.ceil(Math.hypot(point[0] - last[0], point[1] - last[1]) / this.pitch) + 1)
        for (let k = 0; k <= steps; k++) this.mark(last[0] + (point[0] - last[0]) * k / steps, last[1] + (point[1] - last[1]) * k / steps, index)
      }
      last = point
    }
  }

  /** True where another line runs through a box. */
  hides({ x, y, width, height }: Box, index: number): boolean {
    for (let i = Math.floor(x / this.pitch); i <= Math.floor((x + width) / this.pitch); i++) {
      for (let j = Math.floor(y / this.pitch); j <= Math.floor((y + height) / this.pitch); j++) {
        const found = this.cells.get(`${i} ${j}`)
        if (found && (found.size > 1 || !found.has(index))) return true
      }
    }
    return false
  }

  private mark(x: number, y: number, index: number): void {
    const key = `${Math.floor(x / this.pitch)} ${Math.floor(y / this.pitch)}`
    const found = this.cells.get(key)
    if (found) found.add(index)
    else this.cells.set(key, new Set([index]))
  }
}

/**
 * Labels on contour lines, upright, off `taken` and off one another: the longest lines of a level first, in the middle of their
 * longest open stretch, never over another line unless the level would go without any label.
 */
export function labelLines(lines: readonly DrawnLine[], taken: readonly Box[], { size, inside, first, apart }: Options): LineLabel[] {
  const raster = new LineRaster()
  lines.forEach((line, i) => raster.add(line, i))
  const rank = (level: number) => {
    const place = first.indexOf(level)
    return place < 0 ? first.length : place
  }
  const order = lines.map((_, i) => i)
    .sort((a, b) => rank(lines[a]!.level) - rank(lines[b]!.level) || lines[b]!.points.length - lines[a]!.points.length)
  const boxes: Box[] = [...taken]
  const labels: LineLabel[] = []
  const place = (i: number, mayHide: boolean) => {
    const line = lines[i]!
    let room = mayHide ? 1 : 1 + Math.floor(line.points.length / pointsPerLabel)
    for (const k of fromTheMiddle(line.open)) {
      const point = line.points[k]
      if (!point) continue
      const y = point[1] + size * 0.36
      const box = textBox(line.text, point[0], y, { size, anchor: 'middle' })
      const near = labels.some(({ level, x, y: other }) => level === line.level && Math.hypot(x - point[0], other - y) < apart)
      if (near || !inside(box) || boxes.some(other => boxesMeet(box, other, 2)) || (!mayHide && raster.hides(box, i))) continue
      labels.push({ text: line.text, level: line.level, box, x: point[0], y })
      boxes.push(box)
      if (--room === 0) return
    }
  }
  for (const i of order) place(i, false)
  for (const i of order) {
    if (!labels.some(({ level }) => level === lines[i]!.level)) place(i, true)
  }
  return labels
}

/** Indices from the middle outwards. */
function fromTheMiddle(indices: readonly number[]): number[] {
  const middle = (indices.length - 1) / 2
  return indices.map((value, at) => ({ value, at })).sort((a, b) => Math.abs(a.at - middle) - Math.abs(b.at - middle)).map(({ value }) => value)
}

export function insideBox(frame: Box): (box: Box) => boolean {
  return box => isInside(box, frame)
}

/** Boxes that lie in a disc with all their corners. */
export function insideCircle({ cx, cy, r }: { cx: number, cy: number, r: number }): (box: Box) => boolean {
  return ({ x, y, width, height }) =>
    [[x, y], [x + width, y], [x, y + height], [x + width, y + height]].every(([a, b]) => Math.hypot(a! - cx, b! - cy) <= r)
}
