import { kinks, lineIntersect, lineString, polygon as turfPolygon } from '@turf/turf'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { linesOf } from '../../../shared/geo/faultPlace.ts'
import { checkOutline, readOutlineFeatures } from '../../../shared/geo/outline.ts'
import type { Position } from '../../../shared/types/domain.ts'
import { box } from './geodesicArea.ts'

// Shapes whose fault is put where it is by hand, and turf's own search for crossings.

const polygon = (...coordinates: unknown[]) => ({ type: 'Polygon', coordinates })
const parts = (...coordinates: unknown[]) => ({ type: 'MultiPolygon', coordinates })
const spiral: Position[] = [[0, 80], [120, 80], [-120, 80], [0, 75], [120, 75], [-120, 75], [0, 80]]

describe('a fault of an outline', () => {
  it.each<[string, unknown, string, Position[][], RegExp]>([
    ['a hole beside its shell', polygon(box(0, 0, 10, 10), box(20, 1, 22, 3)), 'coordinates/1', [box(20, 1, 22, 3)], /^Hole 1 lies outside the shell.* 1\.0000° N, 20\.0000° E\.$/],
    ['a hole of another part', parts([box(0, 0, 10, 10)], [box(20, 0, 30, 10), box(2, 2, 3, 3)]), 'coordinates/1/1', [box(2, 2, 3, 3)], /^Hole 1 of part 2 lies outside part 2/],
    ['a hole in a hole', polygon(box(0, 0, 10, 10), box(1, 1, 9, 9), box(2, 2, 3, 3)), 'coordinates/2', [box(2, 2, 3, 3)], /^Hole 2 lies inside hole 1\./],
    ['a part in a part', parts([box(-30, -30, -20, -20)], [box(-28, -28, -27, -27)]), 'coordinates/1/0', [box(-28, -28, -27, -27)], /^Part 2 lies inside part 1.* 28\.0000° S, 28\.0000° W\.$/],
    ['a ring on one line', polygon(box(0, 0, 10, 10), [[2, 2], [3, 3], [4, 4], [2, 2]]), 'coordinates/1', [[[2, 2], [3, 3], [4, 4], [2, 2]]], /^Hole 1 encloses no area.* 2\.0000° N, 2\.0000° E\.$/],
    ['a ring in one place', parts([box(0, 0, 10, 10)], [[[50, 5], [50, 5], [50, 5], [50, 5]]]), 'coordinates/1/0', [[[50, 5], [50, 5], [50, 5], [50, 5]]], /^Part 2 encloses no area.* 5\.0000° N, 50\.0000° E\.$/],
    ['a hole that takes all', polygon(box(0, 0, 10, 10), box(0, 0, 10, 10)), 'coordinates', [box(0, 0, 10, 10), box(0, 0, 10, 10)], /^The outline encloses no area\.$/],
    ['a ring twice round a pole', polygon(spiral), 'coordinates/0', [spiral], /round the pole 2 times.* 80\.0000° N, 0\.0000° E\.$/],
    ['a ring that is open', polygon([[0, 0], [7, 0], [7, 5], [0, 5]]), 'coordinates/0/3', [[[0, 5], [0, 0]]], /^The ring is not closed.* 5\.0000° N, 0\.0000° E\.$/],
    ['a ring of two places', polygon(box(0, 0, 9, 9), [[1, 1], [2, 2], [1, 1]]), 'coordinates/1', [[[1, 1], [2, 2], [1, 1]]], /this one has 3\. It is near 1\.0000° N, 1\.0000° E\.$/],
    ['a latitude beyond the pole', polygon([[0, 0], [8, 0], [9, 95], [0, 9], [0, 0]]), 'coordinates/0/2', [[[8, 0], [0, 9]]], /^Latitude 95°.* 0\.0000° N, 8\.0000° E\.$/],
    ['a position that is none', polygon([[0, 0], [8, 0], null, [0, 9], [0, 0]]), 'coordinates/0/2', [[[8, 0], [0, 9]]], /^A position is two finite numbers/],
    ['a hole across its shell', polygon(box(0, 0, 10, 10), box(8, 4, 14, 6)), 'coordinates/0/1', [[[10, 0], [10, 10]], [[14, 6], [8, 6]]], /cross at 6\.0000° N, 10\.0000° E: edge 1–2 of the shell and edge 2–3 of hole 1\.$/],
  ])('tells where it is: %s', (_, geometry, path, lines, words) => {
    const [issue] = checkOutline(geometry, '')
    expect(issue).toMatchObject({ path, lines })
    expect(issue!.message.replaceAll('\u00A0', ' ')).toMatch(words)
  })

  it('crosses where turf finds that its two lines meet', () => {
    fc.assert(fc.property(
      fc.array(fc.double({ min: 5, max: 40, noNaN: true }), { minLength: 8, maxLength: 40 }), fc.integer({ min: -100, max: 100 }), fc.integer({ min: -45, max: 45 }),
      (radii, lon, lat) => {
        const ring = radii.map((r, k): Position => [lon + r * Math.cos(2 * Math.PI * k / radii.length), lat + r * Math.sin(2 * Math.PI * k / radii.length)])
        const half = Math.floor(ring.length / 2)
        ;[ring[0], ring[half]] = [ring[half]!, ring[0]!]
        const closed = [...ring, ring[0]!]
        const known = kinks(turfPolygon([closed])).features.map(({ geometry }) => geometry.coordinates)
        for (const { lines, value } of checkOutline(polygon(closed))) {
          const [x, y] = JSON.parse(value!) as Position
          const turns = (at: number) => at - 360 * Math.round(at / 360)
          const isHere = ([px, py]: number[]) => Math.abs(turns(px! - x)) < 2e-6 && Math.abs(py! - y) < 2e-6
          expect(known.some(isHere)).toBe(true)
          expect(lineIntersect(lineString(lines![0]!), lineString(lines![1]!)).features.some(({ geometry }) => isHere(geometry.coordinates))).toBe(true)
        }
      }
    ), { numRuns: 60, seed: 5 })
  })

  it('thins a long ring and keeps its ends', () => {
    const circle = Array.from({ length: 5001 }, (_, k): Position => [30 + Math.cos(2 * Math.PI * (k % 5000) / 5000), Math.sin(2 * Math.PI * (k % 5000) / 5000)])
    const [line] = linesOf(checkOutline(polygon(box(0, 0, 10, 10), circle)))
    expect(line).toHaveLength(100)
    expect([line![0], line!.at(-1)]).toEqual([circle[0], circle.at(-1)])
  })

  it('comes with each feature of a file that cannot be taken', () => {
    const feature = (name: string, geometry: unknown) => ({ type: 'Feature', properties: { name }, geometry })
    const { outlines, faulty } = readOutlineFeatures({ type: 'FeatureCollection', features: [
      feature('Good', polygon(box(0, 0, 1, 1))), feature('Bow', polygon([[0, 0], [4, 2], [4, 0], [0, 2], [0, 0]])),
    ] })
    expect(outlines.map(({ name }) => name)).toEqual(['Good'])
    expect(faulty.map(({ name, issues }) => [name, issues[0]!.path, linesOf(issues)])).toEqual([['Bow', 'features/1/geometry/coordinates/0/0', [[[0, 0], [4, 2]], [[4, 0], [0, 2]]]]])
  })
})
