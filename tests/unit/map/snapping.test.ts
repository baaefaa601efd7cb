import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { addPlaces, beginRing, emptyDraft, finishRing } from '../../../app/map/drawing/draft'
import { draftOutline } from '../../../app/map/drawing/draftShape'
import { alongLine, snapAt, snapIndexOf, snapLinesOf, snapWords, type Snap, type SnapIndex } from '../../../app/map/drawing/snapping'
import type { Surface } from '../../../app/map/drawing/surface'
import { fromPlane, polarPlane, toPlane, type Pole } from '../../../app/map/polar/polarPlane'
import { checkOutline } from '../../../shared/geo/outline'
import { overlapsOf, sharedAreaM2 } from '../../../shared/geo/overlap'
import { spreadOf } from '../../../shared/geo/spread'
import type { Outline, Position } from '../../../shared/types/domain'

/** A sheet on which a degree is ten pixels, 180° W at the left edge; the same place a turn on is the same place. */
const sheet = {
  toScreen: ([lon, lat]: Position) => ({ x: (lon - 360 * Math.floor((lon + 180) / 360) + 180) * 10, y: (90 - lat) * 10 }),
  toPlace: ({ x, y }: { x: number, y: number }): Position => [x / 10 - 180, 90 - y / 10],
} as Surface
const box = (west: number, south: number, east: number, north: number): Outline =>
  ({ type: 'Polygon', coordinates: [[[west, south], [east, south], [east, north], [west, north], [west, south]]] })
const indexes = new Map<Outline, SnapIndex>()
const indexOf = (outline: Outline): SnapIndex => {
  const index = indexes.get(outline) ?? snapIndexOf(snapLinesOf(outline, 'border', 'Beside'))
  indexes.set(outline, index)
  return index
}
const near = (outline: Outline, [lon, lat]: Position, dx = 0, dy = 0): Snap | null => {
  const { x, y } = sheet.toScreen([lon, lat])!
  return snapAt([indexOf(outline)], sheet, { x: x + dx, y: y + dy })
}

describe('snapping', () => {
  const beside = box(10, 20, 40, 35)
  it('takes the vertex that is near, else the place on the edge, else nothing, and says which', () => {
    const corner = near(beside, [10, 20], 6, -5)!
    expect(corner.place).toEqual([10, 20])
    expect(snapWords(corner)).toBe('on a corner of Beside')
    const edge = near(beside, [23.45, 20], 0, 7)!
    expect(edge.place[1]).toBe(20)
    expect(edge.place[0]).toBeCloseTo(23.45, 6)
    expect(snapWords(edge)).toBe('on the border of Beside')
    expect(near(beside, [23.45, 20], 0, 15)).toBeNull()
    expect(near(beside, [25, 27])).toBeNull()
  })

  it('knows a border across the antimeridian from either side, and no seam', () => {
    const across: Outline = { type: 'MultiPolygon', coordinates: [[[[170, 0], [180, 0], [180, 10], [170, 10], [170, 0]]], [[[-180, 0], [-170, 0], [-170, 10], [-180, 10], [-180, 0]]]] }
    expect(near(across, [-175, 10], 0, 4)!.place[1]).toBe(10)
    expect(near(across, [175, 10], 0, 4)!.place[1]).toBe(10)
    expect(near(across, [179.9, 5])).toBeNull()
  })

  it('follows a border between two places on it by the shorter way, every place of it to the last digit', () => {
    const [from, to] = [near(beside, [40, 22])!, near(beside, [38, 35])!]
    const between = alongLine(from, to)
    expect(between).toContainEqual([40, 35])
    expect(between).not.toContainEqual([10, 20])
    const back = alongLine(to, from)
    expect(back).toEqual([...between].reverse())
  })

  it('makes neighbours that share a border and no ground', () => {
    // The ring: two places on the western border of the box, and two away from it; every drawn edge is a great circle.
    const [south, north] = [near(beside, [10, 22])!, near(beside, [30, 35])!]
    const vertices: Position[] = [south.place, ...alongLine(south, north), north.place, [5, 45], [0, 22]]
    const drawn = draftOutline(finishRing(addPlaces(beginRing(emptyDraft), vertices)))!
    expect(checkOutline(drawn)).toEqual([])
    expect(overlapsOf([{ id: 'a', geometry: drawn }, { id: 'b', geometry: beside }])).toEqual([])
    const [a, b] = [spreadOf(drawn), spreadOf(beside)]
    expect(sharedAreaM2(a, b) / b.areaM2).toBeLessThan(1e-9)
  })
})

describe('the plane of a pole', () => {
  it.each(['north', 'south'] as Pole[])('maps there and back about the %s pole, 0° to the right', (pole) => {
    const plane = polarPlane(pole, 800, 600, 5)
    const sign = pole === 'north' ? 1 : -1
    expect(toPlane(plane, [0, sign * 85]).x).toBeCloseTo(400 + 300, 9)
    // Seen from outside: east runs against the clock about the north pole, with it about the south pole.
    expect(toPlane(plane, [90, sign * 85]).y).toBeCloseTo(300 - sign * 300, 9)
    fc.assert(fc.property(fc.double({ min: -179.9, max: 179.9, noNaN: true }), fc.double({ min: 0.001, max: 60, noNaN: true }), (lon, away) => {
      const back = fromPlane(plane, toPlane(plane, [lon, sign * (90 - away)]))!
      expect(back[1]).toBeCloseTo(sign * (90 - away), 9)
      expect(Math.cos((back[0] - lon) * Math.PI / 180)).toBeCloseTo(1, 9)
    }), { seed: 5 })
  })
})
