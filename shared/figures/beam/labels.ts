import { boxesMeet } from '../layout.ts'
import { textBox } from '../svg.ts'
import { textWidth } from '../textWidth.ts'
import type { LabelBox } from '../svg.ts'
import type { BeamSegment } from './data.ts'

export interface BeamFrame {
  width: number
  x: (value: number) => number
  /** x of the sum's line, which runs through all rows above the bar. */
  sumX: number
  /** x of the pivot, which takes room below the bar. */
  pivotX: number
}

/** A segment wide enough for its own name above and figure below. */
export interface InPlace { segment: BeamSegment, nameX: number, figureX: number }
/** A narrow segment, named in a row above with a line down to it. Row 1 is the lowest. */
export interface Led { segment: BeamSegment, row: number, x: number, anchorX: number, text: string, box: LabelBox }

export interface BeamLabels { inPlace: InPlace[], led: Led[], listed: BeamSegment[], rows: number }

const rowHeight = 17
const mostRows = 3
const gap = 6

function place(segment: BeamSegment, frame: BeamFrame): InPlace | null {
  const [a, b] = [frame.x(segment.from), frame.x(segment.to)].sort((p, q) => p - q) as [number, number]
  const nameWidth = textWidth(segment.name, 12)
  const figureWidth = textWidth(segment.figure, 12)
  const [left, right] = [Math.max(2, a + 1), Math.min(frame.width - 2, b - 4)]
  const nameX = firstFree(left, right, nameWidth, frame.sumX, 4)
  const figureX = firstFree(left, right, figureWidth, frame.pivotX, 10)
  return nameX === null || figureX === null ? null : { segment, nameX, figureX }
}

/** The leftmost start of a text of this width between left and right that keeps `margin` off x = obstacle. */
function firstFree(left: number, right: number, width: number, obstacle: number, margin: number): number | null {
  const starts = [left, obstacle + margin].filter(start => start >= left)
  return starts.find(start => start + width <= right && (start + width <= obstacle - margin || start >= obstacle + margin)) ?? null
}

/** Names every segment: in place, with a line from above, or in the list below. Texts never meet one another or a line. */
export function beamLabels(segments: readonly BeamSegment[], frame: BeamFrame): BeamLabels {
  const inPlace: InPlace[] = []
  const led: Led[] = []
  const listed: BeamSegment[] = []
  for (const segment of segments) {
    const own = place(segment, frame)
    if (own) {
      inPlace.push(own)
      continue
    }
    const above = lead(segment, frame, led, inPlace)
    if (above) led.push(above)
    else listed.push(segment)
  }
  return { inPlace, led, listed, rows: led.reduce((most, { row }) => Math.max(most, row), 0) }
}

/** Base line of a row above the bar, counted upwards from the row of names in place (row 0). */
export function rowBase(row: number): number {
  return -6 - row * rowHeight
}

function lead(segment: BeamSegment, frame: BeamFrame, led: readonly Led[], inPlace: readonly InPlace[]): Led | null {
  const [a, b] = [frame.x(segment.from), frame.x(segment.to)]
  if (Math.abs(b - a) < 2.5) return null
  const anchorX = (a + b) / 2
  const text = `${segment.name} ${segment.figure}`
  const width = textWidth(text, 12)
  const cutsName = inPlace.some(other => anchorX > other.nameX - 3 && anchorX < other.nameX + textWidth(other.segment.name, 12) + 3)
  if (width > frame.width - 4 || cutsName || Math.abs(anchorX - frame.sumX) < 3) return null
  const starts = [anchorX - 3, anchorX - width + 3, anchorX - width / 2]
    .map(start => Math.min(frame.width - 2 - width, Math.max(2, start)))
  for (let row = 1; row <= mostRows; row++) {
    for (const x of starts) {
      const box = textBox(text, x, rowBase(row))
      const meetsText = led.some(other => boxesMeet(box, other.box, gap))
      const cutByLine = led.some(other => other.row > row && other.anchorX > x - 3 && other.anchorX < x + width + 3)
      const cutsLower = led.some(other => other.row < row && anchorX > other.x - 3 && anchorX < other.x + textWidth(other.text, 12) + 3)
      const cutBySum = frame.sumX > x - 4 && frame.sumX < x + width + 4
      if (!meetsText && !cutByLine && !cutsLower && !cutBySum) return { segment, row, x, anchorX, text, box }
    }
  }
  return null
}
