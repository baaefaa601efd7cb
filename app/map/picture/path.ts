import type { Position } from '#shared/types/domain'
import { mercatorX, mercatorY } from './camera'

/** A line or a ring as both projections want it, thinned to what a pixel can show. */
export class Path {
  private round: Thinned | null = null
  private plane: Thinned | null = null
  private hull: Cap | null = null

  constructor(readonly places: readonly Position[]) {}

  /** Unit vectors, three numbers each, no two nearer than `distance` radians; first and last stay. */
  vectors(distance: number): Float64Array {
    return (this.round ??= new Thinned(vectorsOf(this.places), 3)).at(distance)
  }

  /** Places in the Mercator square, two numbers each, no two nearer than `distance`. */
  squares(distance: number): Float64Array {
    return (this.plane ??= new Thinned(this.places.flatMap(([lon, lat]) => [mercatorX(lon), mercatorY(lat)]), 2)).at(distance)
  }

  /** A cap of the sphere that holds the whole line. */
  get cap(): Cap {
    return this.hull ??= capOf(this.vectors(0))
  }

  private range: { west: number, east: number } | null = null
  /** From west to east in the Mercator square. */
  get span(): { west: number, east: number } {
    if (!this.range) {
      let [west, east] = [Infinity, -Infinity]
      for (const [lon] of this.places) {
        west = Math.min(west, lon)
        east = Math.max(east, lon)
      }
      this.range = { west: mercatorX(west), east: mercatorX(east) }
    }
    return this.range
  }
}

export interface Cap { x: number, y: number, z: number, /** Radians. */ reach: number }

/** Points of one line at every fineness, each made when it is first asked for. */
class Thinned {
  private readonly whole: Float64Array
  private readonly levels = new Map<number, Float64Array>()

  constructor(numbers: ArrayLike<number>, private readonly stride: number) {
    this.whole = Float64Array.from(numbers)
  }

  at(distance: number): Float64Array {
    if (!(distance > 0)) return this.whole
    const level = Math.floor(Math.log2(distance))
    let found = this.levels.get(level)
    if (!found) this.levels.set(level, found = this.thin(2 ** level))
    return found
  }

  private thin(distance: number): Float64Array {
    const { whole, stride } = this
    const out = new Float64Array(whole.length)
    let count = 0
    const least = distance * distance
    for (let k = 0; k < whole.length; k += stride) {
      let away = 0
      for (let d = 0; d < stride; d++) away += (whole[k + d]! - out[count - stride + d]!) ** 2
      const isEnd = k === 0 || k === whole.length - stride
      if (!isEnd && away < least) continue
      for (let d = 0; d < stride; d++) out[count++] = whole[k + d]!
    }
    return out.slice(0, count)
  }
}

function vectorsOf(places: readonly Position[]): Float64Array {
  const out = new Float64Array(3 * places.length)
  places.forEach(([lon, lat], k) => {
    const [l, p] = [lon * Math.PI / 180, lat * Math.PI / 180]
    out[3 * k] = Math.cos(p) * Math.cos(l)
    out[3 * k + 1] = Math.cos(p) * Math.sin(l)
    out[3 * k + 2] = Math.sin(p)
  })
  return out
}

function capOf(vectors: Float64Array): Cap {
  let [x, y, z] = [0, 0, 0]
  for (let k = 0; k < vectors.length; k += 3) {
    x += vectors[k]!
    y += vectors[k + 1]!
    z += vectors[k + 2]!
  }
  const length = Math.hypot(x, y, z)
  if (length < 1e-9) return { x: 0, y: 0, z: 1, reach: Math.PI }
  x /= length
  y /= length
  z /= length
  let least = 1
  for (let k = 0; k < vectors.length; k += 3) least = Math.min(least, x * vectors[k]! + y * vectors[k + 1]! + z * vectors[k + 2]!)
  return { x, y, z, reach: Math.acos(Math.max(-1, least)) }
}
