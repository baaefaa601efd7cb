import { isInsideRing, type BoundedRing } from '#shared/geo/pointInRing'
import type { Camera, FlatCamera, GlobeCamera } from './camera'
import type { Path } from './path'

/** What a line is traced on: a canvas, or anything that takes the same calls. */
export type Pen = Pick<CanvasRenderingContext2D, 'moveTo' | 'lineTo' | 'closePath' | 'arc'>

/** Longest step along the globe's edge, radians. */
const limbStep = 0.07

/** One polygon of a fill: its shell first, then holes. */
export type Rings = readonly Path[]

/**
 * Traces polygons to be filled by the even-odd rule; false where nothing of them is in sight. On the globe, what lies behind is drawn on its
 * edge: as a map of the sphere without the point opposite to the eye that is continuous, so what is in sight is filled rightly, and
 * turned inside out just where that point lies inside.
 */
export function traceFill(pen: Pen, polygons: readonly Rings[], camera: Camera): boolean {
  let traced = false
  for (const rings of polygons) traced = (camera.kind === 'globe' ? globeFill(pen, rings, camera) : flatFill(pen, rings, camera)) || traced
  return traced
}

/** Traces a line as far as it is in sight. */
export function traceLine(pen: Pen, path: Path, camera: Camera): boolean {
  if (camera.kind === 'globe') {
    if (!reaches(path, camera)) return false
    globeLine(pen, path.vectors(camera.grain / camera.radius), camera)
    return true
  }
  const squares = path.squares(camera.grain / camera.world)
  const copies = copiesOf(path, camera)
  for (const copy of copies) flatLine(pen, squares, camera, copy)
  return copies.length > 0
}

/** Whether any of a path's cap is in sight. */
function reaches(path: Path, camera: GlobeCamera): boolean {
  const { x, y, z, reach } = path.cap
  const up = camera.turn[6]! * x + camera.turn[7]! * y + camera.turn[8]! * z
  return Math.acos(Math.max(-1, Math.min(1, up))) <= Math.acos(camera.horizon) + reach
}

function globeFill(pen: Pen, rings: Rings, camera: GlobeCamera): boolean {
  const [shell] = rings
  if (!shell || !reaches(shell, camera)) return false
  for (const ring of rings) globeRing(pen, ring.vectors(camera.grain / camera.radius), camera)
  if (holdsAntipode(rings, camera)) {
    pen.moveTo(camera.width / 2 + camera.limb, camera.height / 2)
    pen.arc(camera.width / 2, camera.height / 2, camera.limb, 0, 2 * Math.PI)
  }
  return true
}

function holdsAntipode(rings: Rings, { turn }: GlobeCamera): boolean {
  const [x, y, z] = [-turn[6]!, -turn[7]!, -turn[8]!]
  const { cap } = rings[0]!
  if (Math.acos(Math.max(-1, Math.min(1, cap.x * x + cap.y * y + cap.z * z))) > cap.reach) return false
  const [lon, lat] = [Math.atan2(y, x) * 180 / Math.PI, Math.asin(z) * 180 / Math.PI]
  return rings.filter(ring => isInsideRing(lon, lat, planeRing(ring))).length % 2 === 1
}

const planeRings = new WeakMap<Path, BoundedRing>()

/** Rings come cut at ±180° and closed along a pole, so none winds round one. */
export function planeRing(path: Path): BoundedRing {
  let ring = planeRings.get(path)
  if (!ring) planeRings.set(path, ring = { lonDeg: Float64Array.from(path.places, ([lon]) => lon), latDeg: Float64Array.from(path.places, ([, lat]) => lat), winding: 0, pole: null })
  return ring
}

const along = { east: 0, north: 0, up: 0 }

/** A vector along the camera's axes. The same object is given each time: this is called for every vertex of every frame. */
function turned(turn: readonly number[], vectors: Float64Array, k: number): Readonly<typeof along> {
  const [x, y, z] = [vectors[k]!, vectors[k + 1]!, vectors[k + 2]!]
  along.east = turn[0]! * x + turn[1]! * y
  along.north = turn[3]! * x + turn[4]! * y + turn[5]! * z
  along.up = turn[6]! * x + turn[7]! * y + turn[8]! * z
  return along
}

function globeRing(pen: Pen, vectors: Float64Array, { turn, radius, eye, horizon, limb, width, height }: GlobeCamera): void {
  const [cx, cy] = [width / 2, height / 2]
  let before = Number.NaN
  for (let k = 0; k < vectors.length; k += 3) {
    const { east, north, up } = turned(turn, vectors, k)
    if (up > horizon) {
      const scale = eye * radius / (eye + radius * (1 - up))
      put(pen, k, cx + scale * east, cy - scale * north)
      before = Number.NaN
      continue
    }
    const angle = Math.atan2(north, east)
    const swing = Number.isNaN(before) ? 0 : angle - before - 2 * Math.PI * Math.round((angle - before) / (2 * Math.PI))
    for (let steps = Math.ceil(Math.abs(swing) / limbStep), s = 1; s < steps; s++) {
      const between = before + swing * s / steps
      pen.lineTo(cx + limb * Math.cos(between), cy - limb * Math.sin(between))
    }
    put(pen, k, cx + limb * Math.cos(angle), cy - limb * Math.sin(angle))
    before = angle
  }
  pen.closePath()
}

function put(pen: Pen, k: number, x: number, y: number): void {
  if (k === 0) pen.moveTo(x, y)
  else pen.lineTo(x, y)
}

function globeLine(pen: Pen, vectors: Float64Array, { turn, radius, eye, horizon, limb, width, height }: GlobeCamera): void {
  const [cx, cy] = [width / 2, height / 2]
  let inSight = false
  let hidden: { x: number, y: number } | null = null
  for (let k = 0; k < vectors.length; k += 3) {
    const { east, north, up } = turned(turn, vectors, k)
    if (up > horizon) {
      const scale = eye * radius / (eye + radius * (1 - up))
      if (!inSight && hidden) pen.moveTo(hidden.x, hidden.y)
      if (inSight || hidden) pen.lineTo(cx + scale * east, cy - scale * north)
      else pen.moveTo(cx + scale * east, cy - scale * north)
      inSight = true
      continue
    }
    const out = limb / Math.hypot(east, north)
    hidden = { x: cx + out * east, y: cy - out * north }
    if (inSight) pen.lineTo(hidden.x, hidden.y)
    inSight = false
  }
}

/** Which copies of the world, side by side, a path is in sight on. */
function copiesOf(path: Path, { world, left, width }: FlatCamera): number[] {
  const { west, east } = path.span
  const copies: number[] = []
  for (let copy = Math.ceil(-left / world - east - 0.01); copy <= Math.floor((width - left) / world - west + 0.01); copy++) copies.push(copy)
  return copies
}

function flatFill(pen: Pen, rings: Rings, camera: FlatCamera): boolean {
  const copies = rings[0] ? copiesOf(rings[0], camera) : []
  for (const copy of copies) {
    for (const ring of rings) {
      flatLine(pen, ring.squares(camera.grain / camera.world), camera, copy)
      pen.closePath()
    }
  }
  return copies.length > 0
}

function flatLine(pen: Pen, squares: Float64Array, { world, left, top }: FlatCamera, copy: number): void {
  for (let k = 0; k < squares.length; k += 2) put(pen, k, left + (squares[k]! + copy) * world, top + squares[k + 1]! * world)
}

/** Where the first place of a path stands, on each copy of the world in sight; none behind the globe. */
export function standsAt(path: Path, camera: Camera): { x: number, y: number }[] {
  if (camera.kind === 'flat') {
    const [x, y] = path.squares(0) as unknown as [number, number]
    return copiesOf(path, camera).map(copy => ({ x: camera.left + (x + copy) * camera.world, y: camera.top + y * camera.world }))
  }
  const { turn, radius, eye, horizon, width, height } = camera
  const { east, north, up } = turned(turn, path.vectors(0), 0)
  if (up <= horizon) return []
  const scale = eye * radius / (eye + radius * (1 - up))
  return [{ x: width / 2 + scale * east, y: height / 2 - scale * north }]
}
