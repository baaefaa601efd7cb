import { intersect, featureCollection, polygon as turfPolygon } from '@turf/turf'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { overlapsOf, overlapsWith } from '../../../shared/geo/overlap.ts'
import { spreadOf } from '../../../shared/geo/spread.ts'
import type { Outline, Position } from '../../../shared/types/domain.ts'
import { box, geographicLibAreaM2 } from './geodesicArea.ts'
import { cpuMilliseconds } from '../../support/cpuTime.ts'

const region = (id: string, ...coordinates: Position[][]): { id: string, geometry: Outline } =>
  ({ id, geometry: { type: 'Polygon', coordinates } })

/** A star-shaped ring about a point, from radii in degrees. */
const star = (lon: number, lat: number, radii: number[]): Position[] => {
  const ring = radii.map((r, k): Position => {
    const angle = 2 * Math.PI * k / radii.length
    return [lon + r * Math.cos(angle), lat + r * Math.sin(angle)]
  })
  return [...ring, ring[0]!]
}

describe('area of an outline laid out flat', () => {
  const spreadArea = (ring: Position[]): number => spreadOf({ type: 'Polygon', coordinates: [ring] }).areaM2

  it('is the area GeographicLib gives for edges straight in longitude and latitude', () => {
    for (const ring of [box(-60, 60, -20, 83), star(170, -10, [9, 4, 15, 7, 12]), star(20, 0, [3, 5, 2, 6])]) {
      expect(spreadArea(ring) / geographicLibAreaM2(ring, 0.05) - 1).toBeCloseTo(0, 6)
    }
  })

  it('of a ring round the pole is that of its smaller side, closed by hand or not', () => {
    const winding: Position[] = [[-180, -70], [-60, -65], [60, -72], [180, -70]]
    const byHand: Position[] = [...winding, [180, -90], [-180, -90], [-180, -70]]
    const area = spreadArea([...winding.slice(0, 3), winding[0]!])
    expect(spreadArea(byHand) / area).toBeCloseTo(1, 12)
    const dense: Position[] = []
    for (let k = 1; k < winding.length; k++) {
      for (let t = 0; t < 4000; t++) {
        const part = t / 4000
        dense.push([winding[k - 1]![0] + 120 * part, winding[k - 1]![1] + (winding[k]![1] - winding[k - 1]![1]) * part])
      }
    }
    expect(area / geographicLibAreaM2([...dense, dense[0]!]) - 1).toBeCloseTo(0, 6)
  })

  it('does not depend on first vertex, direction, whole turns or repeated vertices', () => {
    fc.assert(fc.property(
      fc.array(fc.double({ min: 2, max: 30, noNaN: true }), { minLength: 3, maxLength: 12 }),
      fc.integer({ min: -180, max: 180 }), fc.integer({ min: -50, max: 50 }), fc.nat(20),
      (radii, lon, lat, shift) => {
        const ring = star(lon, lat, radii)
        const open = ring.slice(0, -1)
        const k = shift % open.length
        const turned = [...open.slice(k), ...open.slice(0, k)]
        const variants: Position[][] = [
          [...turned, turned[0]!],
          [...ring].reverse(),
          ring.map(([x, y]) => [x + 360, y]),
          ring.map(([x, y]) => [x > 180 ? x - 360 : x < -180 ? x + 360 : x, y]),
          ring.flatMap(position => [position, position])
        ]
        for (const variant of variants) expect(spreadArea(variant) / spreadArea(ring)).toBeCloseTo(1, 9)
      }
    ), { numRuns: 200, seed: 11 })
  })
})

describe('overlapsOf', () => {
  it('finds the shared strip of two boxes and its part of each', () => {
    const [hit, ...more] = overlapsOf([region('a', box(0, 0, 10, 10)), region('b', box(8, 5, 20, 15)), region('c', box(30, 0, 40, 10))])
    expect(more).toEqual([])
    const area = geographicLibAreaM2(box(8, 5, 10, 10), 0.05)
    expect(hit).toMatchObject({ a: 'a', b: 'b' })
    expect(hit!.areaKm2 / (area / 1e6) - 1).toBeCloseTo(0, 6)
    expect(hit!.shareOfA / (area / geographicLibAreaM2(box(0, 0, 10, 10), 0.05)) - 1).toBeCloseTo(0, 5)
  })

  it('sees across the antimeridian, however each outline writes its longitudes', () => {
    const cut: Outline = { type: 'MultiPolygon', coordinates: [[box(170, -5, 180, 5)], [box(-180, -5, -170, 5)]] }
    const hits = overlapsOf([
      { id: 'cut', geometry: cut }, region('unwrapped', box(170, -5, 190, 5)), region('short way', box(-190, -5, -170, 5))
    ])
    expect(hits.map(hit => [hit.a, hit.b])).toEqual([['cut', 'unwrapped'], ['cut', 'short way'], ['unwrapped', 'short way']])
    for (const hit of hits) expect(hit.shareOfA).toBeCloseTo(1, 12)
  })

  it('sees a box inside a cap over the pole, and a hole where there is nothing to share', () => {
    const cap: Position[] = [[-120, 60], [0, 60], [120, 60], [-120, 60]]
    const inner: Position[] = [[-120, 80], [0, 80], [120, 80], [-120, 80]]
    const small = region('small', box(40, 84, 70, 88))
    expect(overlapsOf([region('cap', cap), small])[0]!.shareOfB).toBeCloseTo(1, 12)
    expect(overlapsOf([region('ring', cap, inner), small])).toEqual([])
  })

  it('does not call neighbours with a common border overlapping', () => {
    const border: Position[] = [[10.1, 0.3], [9.7, 3.3], [10.9, 7.1], [10.2, 9.9]]
    const west: Position[] = [[0, 0], ...border, [0, 10], [0, 0]]
    const east: Position[] = [[20, 0], [20, 10], ...[...border].reverse(), [20, 0]]
    expect(overlapsOf([region('west', west), region('east', east)])).toEqual([])
  })

  it('agrees with polygon clipping in the plane for crossing stars', () => {
    const radii = fc.array(fc.double({ min: 3, max: 20, noNaN: true }), { minLength: 3, maxLength: 9 })
    fc.assert(fc.property(radii, radii, fc.integer({ min: -20, max: 20 }), fc.integer({ min: -20, max: 20 }), (r, s, dx, dy) => {
      const a = star(0, 10, r)
      const b = star(dx + 0.123, 10 + dy + 0.077, s)
      const shared = intersect(featureCollection([turfPolygon([a]), turfPolygon([b])]))
      const coordinates = !shared ? [] : shared.geometry.type === 'Polygon' ? [shared.geometry.coordinates] : shared.geometry.coordinates
      let expected = 0
      for (const rings of coordinates) {
        rings.forEach((ring, k) => { expected += (k === 0 ? 1 : -1) * geographicLibAreaM2(ring as Position[], 0.1) })
      }
      const found = overlapsOf([region('a', a), region('b', b)])[0]?.areaKm2 ?? 0
      expect(Math.abs(found - expected / 1e6)).toBeLessThan(2e-6 * spreadOf(region('a', a).geometry).areaM2 / 1e6)
    }), { numRuns: 60, seed: 7 })
  })

  it('finds the same for one against the others', () => {
    const items = [region('a', box(0, 0, 10, 10)), region('b', box(8, 5, 20, 15)), region('c', box(15, 0, 40, 10))]
    const pairs = overlapsOf(items)
    expect(overlapsWith(items[0]!, items.slice(1))).toEqual(pairs.filter(pair => pair.a === 'a'))
    expect(overlapsWith(items[1]!, [items[2]!])).toEqual(pairs.filter(pair => pair.a === 'b'))
  })

  it('is symmetric', () => {
    const a = region('a', star(0, 0, [8, 12, 5, 14]))
    const b = region('b', star(6, 3, [9, 4, 11]))
    expect(overlapsOf([a, b])[0]!.areaKm2).toBeCloseTo(overlapsOf([b, a])[0]!.areaKm2, 6)
  })

  it('takes 200 outlines of 200 vertices in a moment', () => {
    const items = Array.from({ length: 200 }, (_, k) =>
      region(`r${k}`, star(-170 + (k % 20) * 17, -60 + Math.floor(k / 20) * 13, Array.from({ length: 200 }, (_, v) => 7 + 2 * Math.sin(v * 0.7 + k)))))
    expect(cpuMilliseconds(() => expect(overlapsOf(items).length).toBeGreaterThan(50))).toBeLessThan(6000)
  })
})
