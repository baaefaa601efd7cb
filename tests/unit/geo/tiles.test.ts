import { createHash } from 'node:crypto'
import { readFileSync } from 'node:fs'
import { VectorTile } from '@mapbox/vector-tile'
import { PbfReader } from 'pbf'
import { describe, expect, it } from 'vitest'
import { readLandShapes } from '../../../scripts/tiles/land.ts'
import { deepestZoom, makeTiles } from '../../../scripts/tiles/tiles.ts'
import { packLand, unpackLand } from '../../../shared/geo/landFile.ts'
import { isInsideRing } from '../../../shared/geo/pointInRing.ts'
import { ringPath } from '../../../shared/earth/rings.ts'
import { polygonsOf } from '../../../shared/geo/parts.ts'
import { spreadOf } from '../../../shared/geo/spread.ts'

const read = (path: string): Buffer => readFileSync(`public/tiles/${path}`)
const shapes = readLandShapes()
const tiles = [...makeTiles(shapes)]

const isLand = (lon: number, lat: number): boolean => polygonsOf(shapes.land).some(([shell, ...holes]) => {
  const inside = (ring: typeof shell): boolean => isInsideRing(lon, lat, { ...ringPath(ring!), pole: null })
  return inside(shell) && !holes.some(inside)
})

describe('the land of the map', () => {
  it('is where land is, the poles, the seam at ±180° and the Caspian too', () => {
    for (const [lon, lat] of [[0, -89.99], [179.99, -85], [-179.99, -85], [27, 66.5], [-40, 72], [179.9, 66.5], [-179.9, 66.5], [134, -25]] as const) {
      expect(isLand(lon, lat), `${lon} ${lat}`).toBe(true)
    }
    for (const [lon, lat] of [[0, 89.9], [51, 42], [-150, 0], [180, 0], [179.9, -30], [-30, 40]] as const) {
      expect(isLand(lon, lat), `${lon} ${lat}`).toBe(false)
    }
  })

  it('covers the part of the Earth that geographers give: 29 %, 149 million km²', () => {
    // CIA World Factbook, "World": land 148.94 million km². Without ice shelves, and without the Caspian (371 000 km²).
    const area = polygonsOf(shapes.land).reduce((sum, rings) => sum + spreadOf({ type: 'Polygon', coordinates: rings }).areaM2, 0)
    expect(area / 1e12).toBeGreaterThan(146)
    expect(area / 1e12).toBeLessThan(150)
  })

  it('has no coast along ±180° or beyond 85°', () => {
    for (const line of shapes.coast) {
      for (let k = 1; k < line.length; k++) {
        const [from, to] = [line[k - 1]!, line[k]!]
        expect(Math.max(Math.abs(from[1]), Math.abs(to[1]))).toBeLessThanOrEqual(85)
        expect(Math.abs(from[0]) === 180 && from[0] === to[0]).toBe(false)
        expect(Math.abs(to[0] - from[0])).toBeLessThan(20)
      }
    }
  })
})

describe('the land that ships for snapping and cutting', () => {
  it('is what the maker makes, and as large as what it was made from', () => {
    const text = read('land.json').toString('utf8')
    expect(text).toBe(packLand(shapes.land, JSON.parse(text).source as string))
    const area = (polygons: number[][][][]): number => polygons.reduce((sum, rings) => sum + spreadOf({ type: 'Polygon', coordinates: rings as [number, number][][] }).areaM2, 0)
    expect(area(polygonsOf(unpackLand(JSON.parse(text)))) / area(polygonsOf(shapes.land))).toBeCloseTo(1, 6)
  })
})

describe('the tiles that ship', () => {
  it('are what the maker makes, byte for byte, and the manifest says so', () => {
    const hash = createHash('sha256')
    let size = 0
    for (const { z, x, y, bytes } of tiles) {
      expect(read(`${z}/${x}/${y}.pbf`).equals(bytes), `${z}/${x}/${y}`).toBe(true)
      hash.update(`${z}/${x}/${y} ${createHash('sha256').update(bytes).digest('hex')}\n`)
      size += bytes.length
    }
    const manifest = JSON.parse(read('manifest.json').toString('utf8')) as Record<string, unknown>
    expect(manifest).toMatchObject({ zooms: [0, deepestZoom], tiles: 1365, bytes: size, sha256: hash.digest('hex'), sourceSha256: shapes.sha256 })
    expect(tiles).toHaveLength(1365)
  })

  it('read as vector tiles with a land and a coast layer', () => {
    const world = new VectorTile(new PbfReader(read('0/0/0.pbf')))
    expect(Object.keys(world.layers).sort()).toEqual(['coast', 'land'])
    const { land } = world.layers
    const rings = Array.from({ length: land!.length }, (_, k) => land!.feature(k).loadGeometry().length)
    expect(Math.max(...rings)).toBeGreaterThan(300)
    const pacific = new VectorTile(new PbfReader(read('5/4/20.pbf')))
    expect(pacific.layers.land?.length ?? 0).toBe(0)
  })
})
