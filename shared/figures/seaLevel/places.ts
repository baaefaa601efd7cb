import { isFree } from '../layout.ts'
import { circleOf } from '../map/ground.ts'
import { textBox } from '../svg.ts'
import type { MapView } from '../map/view.ts'
import type { Box, Canvas } from '../svg.ts'
import type { Position } from '../../types/domain.ts'

/** A place on the map, by the mark that it has in the table beside. */
export interface MapPlace { mark: string, position: Position }

const radius = 3.5
const size = 12

/** Draws places as dots with their marks, on the world and on insets that hold them; answers with the boxes they take. */
export function drawPlaces(canvas: Canvas, views: readonly MapView[], places: readonly MapPlace[]): Box[] {
  const { palette } = canvas
  const dots = views.flatMap(view => places.flatMap(({ mark, position }) => {
    const [x, y] = view.projection(position)!
    const { cx, cy, r } = circleOf(view)
    return view.kind === 'world' || Math.hypot(x - cx, y - cy) < r - radius ? [{ view, mark, x, y }] : []
  }))
  const boxes: Box[] = dots.map(({ x, y }) => ({ x: x - radius, y: y - radius, width: 2 * radius, height: 2 * radius }))
  for (const { x, y } of dots) canvas.add('circle', { 'cx': x, 'cy': y, 'r': radius, 'fill': palette.ink, 'stroke': palette.paper, 'stroke-width': 1.2 })
  for (const { view, mark, x, y } of dots) {
    const candidates = [
      [x + radius + 3, y + 4, 'start'], [x - radius - 3, y + 4, 'end'], [x, y - radius - 4, 'middle'], [x, y + radius + 12, 'middle'],
    ] as const
    for (const [tx, ty, anchor] of candidates) {
      const box = textBox(mark, tx, ty, { size, weight: 600, anchor })
      if (!isFree(box, { frame: view.box, boxes, segments: [] }, 0)) continue
      boxes.push(canvas.text(mark, tx, ty, { size, weight: 600, anchor, halo: palette.paper }))
      break
    }
  }
  return boxes
}
