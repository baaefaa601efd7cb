import { resolve } from 'node:path'
import { PNG } from 'pngjs'
import { beforeAll, describe, expect, it } from 'vitest'
import { mapFile, type RunMap } from '../../../server/services/report/mapPicture'
import picture from '../../../server/workers/picture'
import { print } from '../../../shared/design/tokens'
import type { Position } from '../../../shared/types/domain'

const fonts = [resolve('node_modules/@expo-google-fonts/noto-sans/400Regular/NotoSans_400Regular.ttf')]
const map: RunMap = {
  regions: [{ name: 'Iridal', massGtPerYear: 12, geometry: { type: 'Polygon', coordinates: [[[2, 16], [28, 16], [28, 29], [2, 29], [2, 16]]] } }],
  driftDegEast: null,
}
type Colour = readonly [number, number, number]
const colour = (hex: string) => [1, 3, 5].map(at => Number.parseInt(hex.slice(at, at + 2), 16)) as unknown as Colour

/** Equal Earth, unit sphere: B. Šavrič, T. Patterson and B. Jenny (2018), doi:10.1080/13658816.2018.1504949, equation 1. */
function equalEarth([lonDeg, latDeg]: Position): [number, number] {
  const theta = Math.asin(Math.sqrt(3) / 2 * Math.sin(latDeg * Math.PI / 180))
  const [a1, a2, a3, a4] = [1.340264, -0.081106, 0.000893, 0.003796]
  const slope = 9 * a4 * theta ** 8 + 7 * a3 * theta ** 6 + 3 * a2 * theta ** 2 + a1
  return [2 * Math.sqrt(3) * (lonDeg * Math.PI / 180) * Math.cos(theta) / (3 * slope), a4 * theta ** 9 + a3 * theta ** 7 + a2 * theta ** 3 + a1 * theta]
}

// Decoded by pngjs, which shares nothing with the renderer.
let png: PNG
let bytes: Uint8Array
beforeAll(() => {
  bytes = picture({ map, fonts })
  png = PNG.sync.read(Buffer.from(bytes))
})

/** Where a place lies on the picture: the sphere fills a drawing of 700 × 341 px, above the key, which is fitted into 1140 × 570 px. */
function pixel(place: Position): [number, number] {
  const height = Number(/viewBox="0 0 700 ([\d.]+)"/.exec(mapFile(map))![1])
  const fit = Math.min(1140 / 700, 570 / height)
  const scale = Math.min(698 / (2 * equalEarth([180, 0])[0]), 339 / (2 * equalEarth([0, 90])[1]))
  const [x, y] = equalEarth(place)
  return [600 + scale * x * fit, 315 + (341 / 2 - scale * y - height / 2) * fit]
}
function at(x: number, y: number): Colour {
  const from = 4 * (Math.round(y) * png.width + Math.round(x))
  return [png.data[from]!, png.data[from + 1]!, png.data[from + 2]!]
}
const off = (a: Colour, b: Colour) => Math.max(...a.map((value, k) => Math.abs(value - b[k]!)))

describe('the map of a run as PNG', () => {
  it('is 1200 × 630 px, opaque, the same bytes each time', () => {
    expect([png.width, png.height]).toEqual([1200, 630])
    expect(png.data.every((value, k) => k % 4 !== 3 || value === 255)).toBe(true)
    expect(Buffer.from(picture({ map, fonts })).equals(Buffer.from(bytes))).toBe(true)
  })

  it('has the colours of paper, sea, land and region where the projection puts them', () => {
    expect(at(4, 4)).toEqual(colour(print.paper))
    for (const sea of [[-135, -35], [75, -40], [-40, 20]] as const) expect(off(at(...pixel([...sea])), colour(print.sea))).toBeLessThan(2)
    for (const land of [[-65, -8], [100, 63], [135, -25]] as const) expect(off(at(...pixel([...land])), colour(print.land))).toBeLessThan(2)
    // Mass gained covers 40 % of what it stands on.
    const [gain, land] = [colour(print.gain), colour(print.land)]
    const over = gain.map((value, k) => 0.4 * value + 0.6 * land[k]!) as unknown as Colour
    for (const inside of [[5, 27], [26, 18]] as const) expect(off(at(...pixel([...inside])), over)).toBeLessThan(3)
  })

  it('writes names in the fonts that it is given and in no other', () => {
    const ink = (of: PNG) => {
      let count = 0
      for (let k = 0; k < of.data.length; k += 4) if (off([of.data[k]!, of.data[k + 1]!, of.data[k + 2]!], colour(print.ink)) < 40) count++
      return count
    }
    const mute = PNG.sync.read(Buffer.from(picture({ map, fonts: [] })))
    expect(ink(png)).toBeGreaterThan(100)
    expect(ink(mute)).toBe(0)
  })
})
