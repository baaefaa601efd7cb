import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { contourOf } from '../../../shared/earth/contour.ts'
import { blocksOf } from '../../../shared/grids/blocks.ts'
import { cellBounds, cellWeights } from '../../../shared/grids/cellWeights.ts'
import { openGrid } from '../../../shared/grids/heightGrid.ts'
import type { Outline } from '../../../shared/types/domain.ts'
import { box, madeGrid, middles, wavy } from './gridFixtures.ts'

const gridOf = (lat: number[], lon: number[]) => openGrid(madeGrid({ lat, lon, days: [0], height: () => 1 }))
const degrees = gridOf(middles(-90, 90, 2), middles(-180, 180, 2))

/** Whether a place lies in a ring, by counting crossings of its edges: straight in longitude and latitude. */
function inside(lon: number, lat: number, outline: Outline): boolean {
  const ring = outline.type === 'Polygon' ? outline.coordinates[0]! : []
  let odd = false
  for (let i = 1; i < ring.length; i++) {
    const [x0, y0] = ring[i - 1]!
    const [x1, y1] = ring[i]!
    if ((y0 > lat) !== (y1 > lat) && lon < x0 + (lat - y0) / (y1 - y0) * (x1 - x0)) odd = !odd
  }
  return odd
}

describe('weights of cells', () => {
  it('are those of brute force: 400 × 400 places in each cell, counted', () => {
    const outline = wavy(21.3, 44.7, 3.1)
    const weights = cellWeights(contourOf(outline), degrees.latitude, degrees.longitude)
    const [a, b] = [6_378_137, 6_356_752.314245179]
    let worst = 0
    weights.row.forEach((row, i) => {
      const { west, east, south, north } = cellBounds(degrees.latitude, degrees.longitude, row, weights.column[i]!)
      let area = 0
      for (let y = 0; y < 400; y++) {
        const lat = south + (y + 0.5) / 400 * (north - south)
        const phi = lat * Math.PI / 180
        // Meridian and transverse radius of the WGS 84 ellipsoid: area of a patch is M N cos φ dφ dλ.
        const w = Math.sqrt(1 - (1 - (b / a) ** 2) * Math.sin(phi) ** 2)
        const patch = (b * b / a / w ** 3) * (a / w) * Math.cos(phi) * ((north - south) / 400) * ((east - west) / 400) * (Math.PI / 180) ** 2
        for (let x = 0; x < 400; x++) if (inside(west + (x + 0.5) / 400 * (east - west), lat, outline)) area += patch
      }
      const whole = contourOf(box(west, south, east, north)).areaM2
      worst = Math.max(worst, Math.abs(area - weights.areaM2[i]!) / whole)
    })
    // An edge across a cell misjudges about one place in 400 along it.
    expect(worst).toBeLessThan(2e-3)
    expect(weights.row.length).toBeGreaterThan(10)
  })

  it.each<[string, Outline]>([
    ['a wavy ring', wavy(10, 30, 8)],
    ['one across ±180°', wavy(179, -20, 9)],
    ['a cap round the south pole', { type: 'Polygon', coordinates: [[[-180, -65], [180, -65], [180, -90], [-180, -90], [-180, -65]]] }],
    ['a ring with a hole', { type: 'Polygon', coordinates: [box(0, 0, 20, 20).coordinates[0] as [number, number][], box(5, 5, 15, 15).coordinates[0] as [number, number][]] }],
    ['a box along the cells', box(-40, -30, -20, -10)]
  ])('sum to the area of %s', (_, outline) => {
    const contour = contourOf(outline)
    for (const grid of [degrees, gridOf(middles(-90, 90, 1.5).reverse(), middles(0, 360, 1.25)), gridOf([-90, -45, 0, 45, 90], [0, 40, 80, 120, 160, 200, 240, 280, 320])]) {
      const { areaM2, outsideM2 } = cellWeights(contour, grid.latitude, grid.longitude)
      // A piece of edge inside a cell takes three Gauss points: rounding in cells of a degree or two, a little more in those of 45°.
      expect(Math.abs(areaM2.reduce((a, b) => a + b) / contour.areaM2 - 1)).toBeLessThan(grid.longitude.stepDeg < 10 ? 1e-11 : 1e-5)
      expect(outsideM2).toBe(0)
    }
  })

  it('are exact for an outline along the cells', () => {
    const contour = contourOf(box(-40, -30, -20, -10))
    expect(Math.abs(cellWeights(contour, degrees.latitude, degrees.longitude).areaM2.reduce((a, b) => a + b) / contour.areaM2 - 1)).toBeLessThan(1e-12)
  })

  it('tell the part of an outline that a regional grid does not reach', () => {
    const regional = gridOf(middles(20, 40, 0.5), middles(0, 20, 0.5))
    const weights = cellWeights(contourOf(box(10, 30, 30, 40)), regional.latitude, regional.longitude)
    const half = contourOf(box(20, 30, 30, 40)).areaM2
    expect(Math.abs(weights.outsideM2 / half - 1)).toBeLessThan(1e-9)
    expect(weights.areaM2.length).toBe(20 * 20)
  })

  it('are placed alike whatever the order of rows and columns', () => {
    const outline = wavy(-3, 51, 4)
    const table = (lat: number[], lon: number[]) => {
      const grid = gridOf(lat, lon)
      const w = cellWeights(contourOf(outline), grid.latitude, grid.longitude)
      return new Map(Array.from(w.row, (row, i) => [`${grid.latitude.centresDeg[row]!.toFixed(3)} ${((grid.longitude.centresDeg[w.column[i]!]! + 360) % 360).toFixed(3)}`, w.areaM2[i]!]))
    }
    const first = table(middles(-90, 90, 1), middles(-180, 180, 1))
    for (const other of [table(middles(-90, 90, 1).reverse(), middles(0, 360, 1)), table(middles(30, 70, 1), middles(-180, 180, 1).reverse())]) {
      expect([...other.keys()].sort()).toEqual([...first.keys()].sort())
      for (const [place, area] of first) expect(Math.abs(other.get(place)! - area)).toBeLessThan(1e-3)
    }
  })
})

describe('blocks of a variable', () => {
  it('cover every place once, within the limit or one stored piece', () => {
    const dimension = fc.record({ size: fc.integer({ min: 1, max: 12 }), chunk: fc.integer({ min: 1, max: 12 }), from: fc.nat(), length: fc.nat() })
    fc.assert(fc.property(fc.tuple(dimension, dimension, dimension), fc.boolean(), fc.integer({ min: 1, max: 200 }), (dims, chunked, most) => {
      const start = dims.map(d => d.from % d.size)
      const count = dims.map((d, i) => 1 + d.length % (d.size - start[i]!))
      const chunks = chunked ? dims.map(d => Math.min(d.chunk, d.size)) : null
      const seen = new Map<string, number>()
      for (const block of blocksOf({ chunks }, start, count, most)) {
        const values = block.count.reduce((a, b) => a * b, 1)
        expect(values).toBeGreaterThan(0)
        expect(values).toBeLessThanOrEqual(Math.max(most, chunks ? chunks.reduce((a, b) => a * b, 1) : 1))
        for (let i = 0; i < block.count[0]!; i++) for (let j = 0; j < block.count[1]!; j++) for (let k = 0; k < block.count[2]!; k++) {
          const key = [block.start[0]! + i, block.start[1]! + j, block.start[2]! + k].join()
          seen.set(key, (seen.get(key) ?? 0) + 1)
        }
      }
      expect(seen.size).toBe(count.reduce((a, b) => a * b, 1))
      expect([...seen.values()].every(times => times === 1)).toBe(true)
      for (const key of seen.keys()) key.split(',').forEach((at, d) => expect(Number(at) >= start[d]! && Number(at) < start[d]! + count[d]!).toBe(true))
    }), { numRuns: 200 })
  })
})
