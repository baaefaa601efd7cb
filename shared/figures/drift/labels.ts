import { isFree, segmentMeets } from '../layout.ts'
import { textBox } from '../svg.ts'
import type { Obstacles } from '../layout.ts'
import type { Box, LabelBox, Point } from '../svg.ts'
import type { Weight } from '../textWidth.ts'

export interface WantedLabel {
  text: string
  weight?: Weight
  /** The vector it names. */
  from: Point
  to: Point
  /** Near its tip rather than its middle. */
  atTip: boolean
}

export interface PlacedLabel {
  box: LabelBox
  /** Base line start. */
  x: number
  y: number
  /** Drawn where the label stands away from its vector. */
  leader: [Point, Point] | null
}

const size = 12
const directions: Point[] = [[1, 0], [0.7, -0.7], [0.7, 0.7], [-1, 0], [-0.7, -0.7], [-0.7, 0.7], [0, -1], [0, 1]]
const distances = [7, 14, 26, 42, 60]

/** Left end of the base line of a text that stands in a direction from a point. */
function standing(text: string, weight: Weight | undefined, [x, y]: Point, [dx, dy]: Point, distance: number): LabelBox {
  const anchor = dx > 0.3 ? 'start' : dx < -0.3 ? 'end' : 'middle'
  return textBox(text, x + dx * distance, y + dy * distance + size * (0.29 + dy * 0.29), { size, weight, anchor })
}

function nearest([x, y]: Point, box: Box): Point {
  return [Math.min(box.x + box.width, Math.max(box.x, x)), Math.min(box.y + box.height, Math.max(box.y, y))]
}

/**
 * Places labels one after another where they meet neither one another nor any vector; null where there is no room and
 * for a vector too short to be seen. Away from its vector a label has a thin line to it.
 */
export function placeDriftLabels(wanted: readonly WantedLabel[], obstacles: Obstacles): (PlacedLabel | null)[] {
  const taken: Obstacles = { frame: obstacles.frame, boxes: [...obstacles.boxes], segments: [...obstacles.segments] }
  return wanted.map((label) => {
    if (!label.atTip && Math.hypot(label.to[0] - label.from[0], label.to[1] - label.from[1]) < 2) return null
    const middle: Point = [(label.from[0] + label.to[0]) / 2, (label.from[1] + label.to[1]) / 2]
    const spots = label.atTip ? [label.to, middle] : [middle, label.to]
    for (const distance of distances) {
      for (const spot of spots) {
        for (const direction of directions) {
          const box = standing(label.text, label.weight, spot, direction, distance)
          if (!isFree(box, taken)) continue
          const leader: [Point, Point] | null = distance > 14 ? [nearest(spot, box), spot] : null
          if (leader && taken.boxes.some(other => segmentMeets(...leader, other, 1))) continue
          taken.boxes.push(box)
          if (leader) taken.segments.push(leader)
          return { box, x: box.x, y: box.y + size * 0.82, leader }
        }
      }
    }
    return null
  })
}
