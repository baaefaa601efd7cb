import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { contourOf } from '../../../shared/earth/contour.ts'
import { insideOf, outsideOf } from '../../../shared/geo/combine.ts'
import { unpackLand } from '../../../shared/geo/landFile.ts'
import { checkOutline } from '../../../shared/geo/outline.ts'
import { sharedAreaM2 } from '../../../shared/geo/overlap.ts'
import { spreadOf } from '../../../shared/geo/spread.ts'
import type { Outline } from '../../../shared/types/domain.ts'

const land = unpackLand(JSON.parse(readFileSync('public/tiles/land.json', 'utf8')))
const box = (west: number, south: number, east: number, north: number): Outline =>
  ({ type: 'Polygon', coordinates: [[[west, south], [east, south], [east, north], [west, north], [west, south]]] })
const area = (outline: Outline | null): number => outline ? contourOf(outline).areaM2 : 0
const polarCap: Outline = { type: 'Polygon', coordinates: [[[0, -72], [90, -75], [180, -70], [-90, -78], [0, -72]]] }

describe('an outline cut by another', () => {
  it('leaves the rectangle that two rectangles share, and the rest', () => {
    const [a, b] = [box(10, 40, 20, 50), box(15, 45, 30, 60)]
    expect(area(insideOf(a, b))).toBeCloseTo(area(box(15, 45, 20, 50)), -3)
    expect(area(outsideOf(a, b))).toBeCloseTo(area(a) - area(box(15, 45, 20, 50)), -3)
    expect(insideOf(box(0, 0, 1, 1), box(5, 5, 6, 6))).toBeNull()
    expect(outsideOf(box(5, 5, 6, 6), box(0, 0, 10, 10))).toBeNull()
  })

  it('makes a hole where the other lies inside, and needs no thought at the antimeridian or a pole', () => {
    const holed = outsideOf(box(170, -20, 190, 0), box(175, -15, 185, -5))!
    expect(checkOutline(holed)).toEqual([])
    expect(area(holed) / (area(box(170, -20, 190, 0)) - area(box(175, -15, 185, -5))) - 1).toBeLessThan(1e-9)
    const sector = insideOf(polarCap, box(0, -90, 90, -60))!
    const rest = outsideOf(polarCap, box(0, -90, 90, -60))!
    expect(checkOutline(sector)).toEqual([])
    expect(checkOutline(rest)).toEqual([])
    expect(Math.abs((area(sector) + area(rest)) / area(polarCap) - 1)).toBeLessThan(1e-9)
  })

  it('keeps all ground: what is inside and what is outside add up, as the sweep along longitude finds them too', () => {
    const place = fc.record({ west: fc.integer({ min: -180, max: 170 }), south: fc.integer({ min: -89, max: 70 }), width: fc.integer({ min: 1, max: 60 }), height: fc.integer({ min: 1, max: 19 }) })
    const outline = place.map(({ west, south, width, height }) => box(west, south, west + width, south + height))
    fc.assert(fc.property(outline, outline, (a, b) => {
      const [inside, outside] = [insideOf(a, b), outsideOf(a, b)]
      expect(Math.abs(area(inside) + area(outside) - area(a))).toBeLessThan(1e-7 * area(a))
      expect(Math.abs(area(inside) - sharedAreaM2(spreadOf(a), spreadOf(b)))).toBeLessThan(1e-7 * area(a))
    }), { numRuns: 60, seed: 11 })
  })
})

describe('land and sea of an outline', () => {
  it.each([
    ['round the Aral and Caspian plains', box(45, 36, 62, 48)],
    ['across the antimeridian, Chukotka', box(170, 60, 195, 72)],
    ['round the South Pole', polarCap],
    ['an archipelago', box(118, -11, 132, 2)],
  ])('%s add up to the whole, and both can be stored', (_, outline) => {
    const [onLand, atSea] = [insideOf(outline, land), outsideOf(outline, land)]
    expect(Math.abs((area(onLand) + area(atSea)) / area(outline) - 1)).toBeLessThan(1e-7)
    for (const part of [onLand, atSea]) if (part) expect(checkOutline(part)).toEqual([])
  })

  it('finds the island of Sri Lanka as large as it is', () => {
    // Department of Census and Statistics of Sri Lanka: total area 65 610 km²; generalised coast of 1:50 million.
    expect(area(insideOf(box(79.4, 5.7, 82.2, 9.95), land)) / 65.61e9).toBeCloseTo(1, 1)
  })
})
