import { boxesMeet, isFree, segmentMeets } from '../layout.ts'
import { textBox } from '../svg.ts'
import type { Obstacles } from '../layout.ts'
import type { Box, LabelBox, Point } from '../svg.ts'

export interface PlaceName {
  text: string
  /** Ground that the place covers on the drawing. */
  box: Box
  /** Drawing that it belongs to; the name stays inside. */
  frame: Box
}

export interface PlacedName { box: LabelBox, x: number, y: number, leader: [Point, Point] | null }

const size = 12

/**
 * Names of places: inside a place that is large enough, else beside, above or below it, else farther off with a thin line.
 * Names never meet; they stand on other places only where nothing else is free. Null where there is no room.
 */
export function placeNames(places: readonly PlaceName[], obstacles: readonly Box[] = []): (PlacedName | null)[] {
  const taken: Obstacles = { frame: { x: 0, y: 0, width: 0, height: 0 }, boxes: [...obstacles], segments: [] }
  const result = new Array<PlacedName | null>(places.length).fill(null)
  // Small places first: they have the fewest choices.
  const order = places.map((_, i) => i).sort((a, b) => area(places[a]!.box) - area(places[b]!.box))
  for (const avoidPlaces of [true, false]) {
    for (const i of order) {
      if (result[i]) continue
      const place = places[i]!
      const others = avoidPlaces ? places.filter((_, k) => k !== i).map(other => other.box) : []
      result[i] = firstFree(place, { ...taken, frame: place.frame }, others)
      const placed = result[i]
      if (!placed) continue
      taken.boxes.push(placed.box)
      if (placed.leader) taken.segments.push(placed.leader)
    }
  }
  return result
}

function area(box: Box): number {
  return box.width * box.height
}

function firstFree(place: PlaceName, taken: Obstacles, others: readonly Box[]): PlacedName | null {
  for (const { x, y, anchor, far } of candidates(place)) {
    const box = textBox(place.text, x, y, { size, anchor })
    if (!isFree(box, taken, 2) || others.some(other => boxesMeet(box, other))) continue
    const leader = far ? leaderTo(place.box, box) : null
    if (leader && taken.boxes.some(other => segmentMeets(...leader, other, 1))) continue
    return { box, x: box.x, y, leader }
  }
  return null
}

interface Candidate { x: number, y: number, anchor: 'start' | 'middle' | 'end', far: boolean }

function candidates({ text, box }: PlaceName): Candidate[] {
  const [midX, midY] = [box.x + box.width / 2, box.y + box.height / 2]
  const own = textBox(text, 0, 0, { size })
  const inside: Candidate[] = own.width < box.width * 0.8 && own.height < box.height * 0.7 ? [{ x: midX, y: midY + 4, anchor: 'middle', far: false }] : []
  const around = [4, 18, 34, 54, 80].flatMap((gap): Candidate[] => {
    const far = gap > 4
    const [left, right, above, below] = [box.x - gap, box.x + box.width + gap, box.y - gap, box.y + box.height + gap + size * 0.82]
    return [
      { x: right, y: midY + 4, anchor: 'start', far },
      { x: left, y: midY + 4, anchor: 'end', far },
      { x: midX, y: above, anchor: 'middle', far },
      { x: midX, y: below, anchor: 'middle', far },
      { x: box.x, y: above, anchor: 'start', far },
      { x: box.x, y: below, anchor: 'start', far },
      { x: box.x + box.width, y: above, anchor: 'end', far },
      { x: box.x + box.width, y: below, anchor: 'end', far },
    ]
  })
  return [...inside, ...around, { x: midX, y: midY + 4, anchor: 'middle', far: false }]
}

function leaderTo(place: Box, label: Box): [Point, Point] {
  const target: Point = [place.x + place.width / 2, place.y + place.height / 2]
  const clamp = (value: number, low: number, high: number) => Math.min(high, Math.max(low, value))
  return [[clamp(target[0], label.x, label.x + label.width), clamp(target[1], label.y, label.y + label.height)], target]
}
