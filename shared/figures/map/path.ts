import { geoPath } from 'd3-geo'
import type { GeoPermissibleObjects, GeoProjection } from 'd3-geo'
import type { Box } from '../svg.ts'

/** Path data of a shape on a projection, to a tenth of a pixel, without the points that the eye cannot tell apart. */
export function pathOf(projection: GeoProjection, shape: GeoPermissibleObjects, tolerance = 0.45): string {
  const parts: string[] = []
  let ring: [number, number][] = []
  const flush = (closed: boolean) => {
    if (ring.length > 1 && (!closed || isVisible(ring, tolerance))) {
      parts.push(relative(ring) + (closed ? 'z' : ''))
    }
    ring = []
  }
  const add = (x: number, y: number) => {
    const last = ring.at(-1)
    if (!last || Math.hypot(x - last[0], y - last[1]) >= tolerance) ring.push([round(x), round(y)])
  }
  geoPath(projection, {
    moveTo(x, y) {
      flush(false)
      add(x, y)
    },
    lineTo: add,
    closePath() {
      flush(true)
    },
    arc() { /* points are drawn as marks of their own, never by d3 */ },
    beginPath() { /* one path only */ },
  })(shape)
  flush(false)
  return parts.join('')
}

/** Path data in steps from point to point, half as long as with whole coordinates. */
function relative(ring: readonly [number, number][]): string {
  const steps = ring.slice(1).map(([x, y], i) => `${round(x - ring[i]![0])},${round(y - ring[i]![1])}`)
  return `M${ring[0]![0]},${ring[0]![1]}l${steps.join(' ')}`
}

function round(value: number): number {
  return Math.round(value * 10) / 10 + 0
}

/** The parts of a shape as they stand on a projection, one box each. */
export function partsOf(projection: GeoProjection, shape: GeoPermissibleObjects): Box[] {
  const boxes: { x0: number, y0: number, x1: number, y1: number }[] = []
  const grow = (x: number, y: number) => {
    const box = boxes.at(-1)!
    Object.assign(box, { x0: Math.min(box.x0, x), y0: Math.min(box.y0, y), x1: Math.max(box.x1, x), y1: Math.max(box.y1, y) })
  }
  geoPath(projection, {
    moveTo(x, y) {
      boxes.push({ x0: x, y0: y, x1: x, y1: y })
    },
    lineTo: grow,
    closePath() { /* closing adds no ground */ },
    arc() { /* see above */ },
    beginPath() { /* one path only */ },
  })(shape)
  return boxes
    .filter(({ x0, y0, x1, y1 }) => [x0, y0, x1, y1].every(Number.isFinite))
    .map(({ x0, y0, x1, y1 }) => ({ x: x0, y: y0, width: x1 - x0, height: y1 - y0 }))
}

function isVisible(ring: readonly [number, number][], tolerance: number): boolean {
  const xs = ring.map(([x]) => x)
  const ys = ring.map(([, y]) => y)
  return Math.max(...xs) - Math.min(...xs) + Math.max(...ys) - Math.min(...ys) > 2 * tolerance
}
