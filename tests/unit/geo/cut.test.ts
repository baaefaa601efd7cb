import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cutAtAntimeridian } from '../../../shared/geo/cut.ts'
import { checkOutline } from '../../../shared/geo/outline.ts'
import { overlapsOf } from '../../../shared/geo/overlap.ts'
import { polygonsOf } from '../../../shared/geo/parts.ts'
import { spreadOf } from '../../../shared/geo/spread.ts'
import type { Outline, Position } from '../../../shared/types/domain.ts'
import { box } from './geodesicArea.ts'

const polygon = (...coordinates: Position[][]): Outline => ({ type: 'Polygon', coordinates })
const area = (outline: Outline): number => spreadOf(outline).areaM2

const expectSameRegion = (before: Outline, after: Outline): void => {
  for (const [lon, lat] of polygonsOf(after).flat(2)) {
    expect(Math.abs(lon)).toBeLessThanOrEqual(180)
    expect(Math.abs(lat)).toBeLessThanOrEqual(90)
  }
  expect(checkOutline(after)).toEqual([])
  expect(area(after) / area(before)).toBeCloseTo(1, 9)
  expect(overlapsOf([{ id: 'a', geometry: before }, { id: 'b', geometry: after }])[0]!.shareOfA).toBeCloseTo(1, 9)
  const again = cutAtAntimeridian(after)
  expect(polygonsOf(again).map(rings => rings.length)).toEqual(polygonsOf(after).map(rings => rings.length))
  expect(area(again) / area(after)).toBeCloseTo(1, 12)
}

describe('cutAtAntimeridian', () => {
  it('leaves an outline that stays clear of it, turned anticlockwise', () => {
    const ring = box(10, 20, 30, 40)
    expect(cutAtAntimeridian(polygon([...ring].reverse()))).toMatchObject({ type: 'Polygon' })
    expectSameRegion(polygon(ring), cutAtAntimeridian(polygon([...ring].reverse())))
  })

  it('makes two boxes of a box across it', () => {
    const cut = cutAtAntimeridian(polygon(box(170, -5, 190, 5)))
    expect(cut).toEqual({
      type: 'MultiPolygon',
      coordinates: [
        [[[-180, -5], [-170, -5], [-170, 5], [-180, 5], [-180, -5]]],
        [[[170, -5], [180, -5], [180, 5], [170, 5], [170, -5]]]
      ]
    })
    expectSameRegion(polygon(box(170, -5, 190, 5)), cut)
  })

  it('closes a ring round a pole along ±90°', () => {
    const south: Outline = polygon([[0, -70], [120, -66], [-120, -72], [0, -70]])
    const cut = cutAtAntimeridian(south)
    expect(cut.type).toBe('Polygon')
    expect(cut.coordinates.flat(1)).toEqual(expect.arrayContaining([[-180, -90], [180, -90]]))
    expectSameRegion(south, cut)
  })

  it('keeps a zone round a pole, a hole across the antimeridian and an island in it', () => {
    const cap: Position[] = [[0, 60], [120, 62], [-120, 58], [0, 60]]
    expectSameRegion(polygon(cap, [[0, 80], [120, 81], [-120, 79], [0, 80]]), cutAtAntimeridian(polygon(cap, [[0, 80], [120, 81], [-120, 79], [0, 80]])))
    const holed = polygon(cap, box(165, 70, 195, 80))
    expectSameRegion(holed, cutAtAntimeridian(holed))
    const island: Outline = { type: 'MultiPolygon', coordinates: [[cap, box(165, 70, 195, 80)], [box(175, 73, 185, 77)]] }
    expectSameRegion(island, cutAtAntimeridian(island))
  })

  it('keeps a band about the whole Earth wherever its seam is', () => {
    for (const seam of [-180, -100, 0, 33]) {
      const band = polygon(box(seam, -10, seam + 360, 10))
      expectSameRegion(band, cutAtAntimeridian(band))
    }
  })

  it('keeps boxes that only touch it', () => {
    for (const outline of [polygon(box(170, -5, 180, 5)), polygon(box(-180, -5, -170, 5)), polygon(box(180, -5, 190, 5))]) {
      const cut = cutAtAntimeridian(outline)
      expect(cut.type).toBe('Polygon')
      expectSameRegion(outline, cut)
    }
  })

  it('keeps any star, wherever it lies and whichever way it turns', () => {
    fc.assert(fc.property(
      fc.array(fc.double({ min: 4, max: 40, noNaN: true }), { minLength: 5, maxLength: 30 }),
      fc.integer({ min: -540, max: 540 }), fc.integer({ min: -45, max: 45 }), fc.boolean(),
      (radii, lon, lat, reverse) => {
        const ring = radii.map((r, k): Position =>
          [lon + r * Math.cos(2 * Math.PI * k / radii.length), lat + r * Math.sin(2 * Math.PI * k / radii.length)])
        const closed: Position[] = [...ring, ring[0]!]
        const outline = polygon(reverse ? closed.reverse() : closed)
        expectSameRegion(outline, cutAtAntimeridian(outline))
      }
    ), { numRuns: 120, seed: 5 })
  })

  it('keeps any ring round a pole', () => {
    fc.assert(fc.property(
      fc.array(fc.double({ min: 30, max: 85, noNaN: true }), { minLength: 3, maxLength: 30 }),
      fc.double({ min: -180, max: 180, noNaN: true }), fc.constantFrom(1, -1), fc.constantFrom(1, -1),
      (latitudes, start, hemisphere, direction) => {
        const ring = latitudes.map((lat, k): Position => [start + direction * 360 * k / latitudes.length, hemisphere * lat])
        const outline = polygon([...ring, ring[0]!])
        expectSameRegion(outline, cutAtAntimeridian(outline))
      }
    ), { numRuns: 120, seed: 6 })
  })
})
