/** Where the middle of a label may stand about its point, first choice first, in parts of its size and of the offset. */
const anchors: Readonly<Record<'centre' | 'around', readonly (readonly [x: number, y: number])[]>> = {
  centre: [[0, 0]],
  around: [[0, 0], [0, 1], [0, -1], [1, 0], [-1, 0], [1, 1], [-1, -1]],
}

export interface Room { x: number, y: number, width: number, height: number }

export interface Candidate {
  /** Remembers the place that it had. */
  key: string
  at: { x: number, y: number }
  width: number
  height: number
  padding: number
  anchors: keyof typeof anchors
  /** Distance from the point where it does not stand on it. */
  offset: number
}

export interface Bounds { width: number, height: number, /** Radius of the globe's edge about the middle; null for none. */ limb: number | null }

const cell = 96

/** Gives each label a place where it meets no other and does not run over the globe's edge, the first ones first. */
export class LabelPlaces {
  /** The anchor that each had, which it keeps while there is room. */
  private readonly had = new Map<string, number>()

  place<T extends Candidate>(candidates: readonly T[], bounds: Bounds): { candidate: T, x: number, y: number }[] {
    const taken = new Map<number, Room[]>()
    const placed: { candidate: T, x: number, y: number }[] = []
    for (const candidate of candidates) {
      const choices = anchors[candidate.anchors]
      const first = this.had.get(candidate.key) ?? 0
      for (let k = 0; k < choices.length; k++) {
        const at = k === 0 ? first : k <= first ? k - 1 : k
        const spot = standing(candidate, choices[at]!)
        const room = roomOf(candidate, spot)
        if (!isWithin(room, bounds) || !isFree(room, taken)) continue
        take(room, taken)
        this.had.set(candidate.key, at)
        placed.push({ candidate, ...spot })
        break
      }
    }
    return placed
  }
}

function standing({ at, width, height, offset }: Candidate, [dx, dy]: readonly [number, number]): { x: number, y: number } {
  const away = dx && dy ? offset / Math.SQRT2 : offset
  return { x: at.x + dx * (away + width / 2), y: at.y + dy * (away + height / 2) }
}

function roomOf({ width, height, padding }: Candidate, { x, y }: { x: number, y: number }): Room {
  return { x: x - width / 2 - padding, y: y - height / 2 - padding, width: width + 2 * padding, height: height + 2 * padding }
}

/** In sight at least in part, and wholly inside the globe's edge. */
export function isWithin({ x, y, width, height }: Room, { width: w, height: h, limb }: Bounds): boolean {
  if (x > w || y > h || x + width < 0 || y + height < 0) return false
  if (limb === null) return true
  return Math.hypot(Math.max(Math.abs(x - w / 2), Math.abs(x + width - w / 2)), Math.max(Math.abs(y - h / 2), Math.abs(y + height - h / 2))) < limb
}

function cellsOf({ x, y, width, height }: Room, visit: (key: number) => boolean): boolean {
  for (let i = Math.floor(x / cell); i <= Math.floor((x + width) / cell); i++) {
    for (let j = Math.floor(y / cell); j <= Math.floor((y + height) / cell); j++) {
      if (!visit(i * 4096 + j)) return false
    }
  }
  return true
}

function isFree(room: Room, taken: ReadonlyMap<number, readonly Room[]>): boolean {
  return cellsOf(room, key => !taken.get(key)?.some(other =>
    room.x < other.x + other.width && other.x < room.x + room.width && room.y < other.y + other.height && other.y < room.y + room.height))
}

function take(room: Room, taken: Map<number, Room[]>): void {
  cellsOf(room, (key) => {
    const there = taken.get(key)
    if (there) there.push(room)
    else taken.set(key, [room])
    return true
  })
}
