import type { Box, Point } from './svg.ts'

/** True where two boxes share ground or come nearer than `gap`. */
export function boxesMeet(a: Box, b: Box, gap = 0): boolean {
  return a.x < b.x + b.width + gap && b.x < a.x + a.width + gap && a.y < b.y + b.height + gap && b.y < a.y + a.height + gap
}

export function isInside(box: Box, frame: Box): boolean {
  return box.x >= frame.x && box.y >= frame.y && box.x + box.width <= frame.x + frame.width && box.y + box.height <= frame.y + frame.height
}

/** True where a stretch of line runs through a box (Liang–Barsky clipping). */
export function segmentMeets([x1, y1]: Point, [x2, y2]: Point, box: Box, gap = 0): boolean {
  let [enter, leave] = [0, 1]
  const [dx, dy] = [x2 - x1, y2 - y1]
  const edges: [number, number][] = [
    [-dx, x1 - (box.x - gap)], [dx, box.x + box.width + gap - x1],
    [-dy, y1 - (box.y - gap)], [dy, box.y + box.height + gap - y1],
  ]
  for (const [p, q] of edges) {
    if (p === 0) {
      if (q < 0) return false
      continue
    }
    const r = q / p
    if (p < 0) enter = Math.max(enter, r)
    else leave = Math.min(leave, r)
    if (enter > leave) return false
  }
  return true
}

export interface Obstacles {
  frame: Box
  boxes: Box[]
  segments: [Point, Point][]
}

/** True where a box keeps within the frame and off everything already there. */
export function isFree(box: Box, { frame, boxes, segments }: Obstacles, gap = 2): boolean {
  return isInside(box, frame)
    && !boxes.some(other => boxesMeet(box, other, gap))
    && !segments.some(([from, to]) => segmentMeets(from, to, box, gap / 2))
}

/**
 * Moves centres of equal rows apart until none are nearer than `step`, keeping their order and staying in [low, high];
 * the sum of shifts is small but not least. Where they cannot all fit they are spread evenly.
 */
export function spread(centres: readonly number[], step: number, low: number, high: number): number[] {
  const order = centres.map((centre, index) => ({ centre, index })).sort((a, b) => a.centre - b.centre)
  const room = high - low
  const pitch = order.length > 1 ? Math.min(step, room / (order.length - 1)) : step
  const placed = order.map(({ centre }) => Math.min(high, Math.max(low, centre)))
  for (let i = 1; i < placed.length; i++) placed[i] = Math.max(placed[i]!, placed[i - 1]! + pitch)
  const over = placed.length ? placed.at(-1)! - high : 0
  if (over > 0) {
    placed[placed.length - 1] = high
    for (let i = placed.length - 2; i >= 0; i--) placed[i] = Math.min(placed[i]!, placed[i + 1]! - pitch)
  }
  const result = new Array<number>(centres.length)
  order.forEach(({ index }, i) => { result[index] = placed[i]! })
  return result
}

/** Breaks text into lines no wider than `width`, by words; a word that is wider stands alone. */
export function wrapped(text: string, width: number, measure: (line: string) => number): string[] {
  const lines: string[] = []
  for (const word of text.split(' ')) {
    const last = lines.at(-1)
    if (last !== undefined && measure(`${last} ${word}`) <= width) lines[lines.length - 1] = `${last} ${word}`
    else lines.push(word)
  }
  return lines
}
