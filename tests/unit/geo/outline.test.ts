import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { checkOutline, limits, readOutline, readOutlineFile, readOutlines, requireOutline } from '../../../shared/geo/outline.ts'
import type { Position } from '../../../shared/types/domain.ts'
import { InputError, type Issue } from '../../../shared/types/issue.ts'
import { box } from './geodesicArea.ts'
import { cpuMilliseconds } from '../../support/cpuTime.ts'

const polygon = (...coordinates: unknown[]): unknown => ({ type: 'Polygon', coordinates })
const feature = (geometry: unknown, properties: unknown = {}): unknown => ({ type: 'Feature', properties, geometry })
const codes = (issues: Issue[]): string[] => issues.map(issue => issue.code)

const refused = (input: unknown): InputError => {
  try {
    readOutlineFile(input)
  }
  catch (error) {
    expect(error).toBeInstanceOf(InputError)
    return error as InputError
  }
  throw new Error('was not refused')
}

describe('readOutline', () => {
  it('reads a polygon, a multipolygon, a feature and a collection, as text or object', () => {
    const ring = box(0, 0, 10, 10)
    for (const input of [polygon(ring), feature(polygon(ring)), { type: 'FeatureCollection', features: [feature(polygon(ring))] }]) {
      expect(readOutline(input)).toEqual(polygon(ring))
      expect(readOutline(`\uFEFF ${JSON.stringify(input)}`)).toEqual(polygon(ring))
    }
    expect(readOutline({ type: 'MultiPolygon', coordinates: [[ring]] })).toEqual({ type: 'MultiPolygon', coordinates: [[ring]] })
  })

  it('leaves heights and foreign members out', () => {
    expect(readOutline({ ...polygon(box(0, 0, 1, 1).map(([x, y]) => [x, y, 250])) as object, bbox: [0, 0, 1, 1] })).toEqual(polygon(box(0, 0, 1, 1)))
  })

  it('gives several features with names from their attributes, and counts what is not an area', () => {
    const { outlines, leftOut } = readOutlineFile({
      type: 'FeatureCollection',
      features: [
        feature(polygon(box(0, 0, 1, 1)), { NAME: ' Amber Reach ', id: 4 }),
        feature({ type: 'Point', coordinates: [0, 0] }),
        feature(null),
        feature(polygon(box(5, 0, 6, 1)))
      ]
    })
    expect(outlines.map(outline => outline.name)).toEqual(['Amber Reach', undefined])
    expect(leftOut).toBe(2)
    expect(readOutlines(polygon(box(0, 0, 1, 1)))).toHaveLength(1)
  })

  it('asks for one where there are several', () => {
    const collection = { type: 'FeatureCollection', features: [feature(polygon(box(0, 0, 1, 1))), feature(polygon(box(5, 0, 6, 1)))] }
    expect(() => readOutline(collection)).toThrow(/2 outlines here, and one is wanted/)
  })

  it('says where a text stops being JSON', () => {
    expect(refused('{"type": "Polygon",\n "coordinates": [[[0, 0] [1, 1]]]}').message).toContain('Line 2, column 26: “[1, 1]]]}” was not expected there.')
    expect(refused('{"type": "Polygon"').message).toContain('the end of the text')
    expect(refused('{"type": "Poly\ngon"}').message).toContain('Line 1, column 15')
    expect(refused('  ').issues).toEqual([expect.objectContaining({ code: 'empty' })])
  })

  it('says what a JSON text lacks to be an outline', () => {
    expect(codes(refused({ a: 1 }).issues)).toEqual(['not-geojson'])
    expect(codes(refused([1, 2]).issues)).toEqual(['not-geojson'])
    expect(codes(refused('42').issues)).toEqual(['not-geojson'])
    expect(codes(refused({ type: 'Topology', objects: {} }).issues)).toEqual(['not-geojson'])
    expect(codes(refused({ type: 'Point', coordinates: [0, 0] }).issues)).toEqual(['no-polygon'])
    expect(codes(refused({ type: 'FeatureCollection', features: [] }).issues)).toEqual(['no-polygon'])
    expect(codes(refused({ type: 'FeatureCollection' }).issues)).toEqual(['not-geojson'])
    expect(refused({ type: 'FeatureCollection', features: [3] }).issues[0]!.path).toBe('features/0')
  })

  it('refuses another coordinate system by name and knows the names of its own', () => {
    const named = (name: string): unknown => ({ ...polygon(box(0, 0, 1, 1)) as object, crs: { type: 'name', properties: { name } } })
    expect(refused(named('urn:ogc:def:crs:EPSG::3031')).issues[0]).toMatchObject({ code: 'other-crs', value: 'urn:ogc:def:crs:EPSG::3031' })
    expect(readOutline(named('urn:ogc:def:crs:OGC:1.3:CRS84'))).toEqual(polygon(box(0, 0, 1, 1)))
  })

  it('refuses a million vertices with 413 before any deep work', () => {
    const ring = Array.from({ length: 1_000_001 }, (_, k): Position => [k % 2, k])
    expect(cpuMilliseconds(() => {
      const error = refused(polygon(ring))
      expect(error.status).toBe(413)
      expect(codes(error.issues)).toEqual(['too-many-vertices'])
    })).toBeLessThan(2000)
    expect(refused(`{"type":"Polygon","coordinates":[[${'[0,0],'.repeat(1_500_000)}[0,0]]]}`).status).toBe(413)
    expect(codes(checkOutline(polygon(ring)))).toEqual(['too-many-vertices'])
  })

  it('counts the vertices of all features together', () => {
    const ring = Array.from({ length: 1001 }, (_, k): Position => [Math.cos(2 * Math.PI * k / 1000), Math.sin(2 * Math.PI * k / 1000)])
    const features = Array.from({ length: 201 }, () => feature(polygon(ring)))
    expect(refused({ type: 'FeatureCollection', features }).status).toBe(413)
    expect(limits.vertices).toBe(200_000)
  })
})

describe('checkOutline', () => {
  it('names the position whose latitude is over 90, and suspects swapped coordinates', () => {
    const issues = checkOutline(polygon([[0, 0], [10, 0], [10, 91.2], [0, 0]]), 'regions/0/geometry')
    expect(issues).toEqual([{
      path: 'regions/0/geometry/coordinates/0/2', code: 'latitude', value: '[10,91.2]',
      message: 'Latitude 91.2° is outside −90° to 90°. GeoJSON gives the longitude first. It is near 0.0000° N, 10.0000° E.',
      lines: [[[10, 0], [0, 0]]]
    }])
  })

  it('names positions that are not numbers, rings too short and rings left open', () => {
    expect(checkOutline(polygon([[0, 0], [1, '2'], [1, 1], [0, 0]]))).toMatchObject([{ path: 'coordinates/0/1', code: 'not-a-position' }])
    expect(checkOutline(polygon([[0, 0], [1, null], [1, NaN], [0, 0]])).map(issue => issue.path)).toEqual(['coordinates/0/1', 'coordinates/0/2'])
    expect(checkOutline(polygon([[0, 0], [1, 1], [0, 0]]))).toMatchObject([{ path: 'coordinates/0', code: 'ring-short' }])
    expect(checkOutline(polygon([[0, 0], [1, 0], [1, 1], [0, 1]]))).toMatchObject([{ path: 'coordinates/0/3', code: 'ring-open' }])
    expect(codes(checkOutline(polygon([[500_000, 20], [500_100, 20], [500_100, 30], [500_000, 20]])))).toContain('longitude')
  })

  it('names what is empty or no polygon at all', () => {
    expect(codes(checkOutline({ type: 'Polygon', coordinates: [] }))).toEqual(['empty'])
    expect(codes(checkOutline({ type: 'MultiPolygon', coordinates: [[]] }))).toEqual(['empty'])
    expect(codes(checkOutline(null))).toEqual(['not-geojson'])
    expect(codes(checkOutline({ type: 'LineString', coordinates: [[0, 0], [1, 1]] }))).toEqual(['not-polygon'])
  })

  it('gives the place and the edges where an outline crosses itself', () => {
    expect(checkOutline(polygon([[0, 0], [4, 2], [4, 0], [0, 2], [0, 0]]))).toEqual([{
      path: 'coordinates/0/0', code: 'self-crossing', value: '[2.000000, 1.000000]',
      message: 'The outline crosses itself at 1.0000° N, 2.0000° E: edge 0–1 and edge 2–3.',
      lines: [[[0, 0], [4, 2]], [[4, 0], [0, 2]]]
    }])
  })

  it('finds crossings across the antimeridian, round a pole and through a shared vertex', () => {
    for (const ring of [
      [[170, 0], [-170, 2], [-170, 0], [170, 2], [170, 0]],
      [[0, 80], [120, 80], [-120, 80], [30, 85], [-30, 85], [0, 80]],
      [[0, 0], [1, 1], [2, 2], [2, 0], [1, 1], [0, 2], [0, 0]],
      [[0, 0], [10, 0], [10, 10], [5, -3], [0, 10], [0, 0]]
    ]) {
      expect(codes(checkOutline(polygon(ring)))).toContain('self-crossing')
    }
  })

  it('counts edges as they stand in the file, repeated vertices and all', () => {
    const [issue] = checkOutline(polygon([[0, 0], [0, 0], [0, 0], [4, 2], [4, 2], [4, 0], [0, 2], [0, 0]]))
    expect(issue!.message).toContain('edge 2–3 and edge 5–6')
  })

  it('takes lines that only touch, rings closed along ±90°, full turns and keyholes', () => {
    for (const ring of [
      [[-180, -90], [180, -90], [180, -60], [0, -65], [-180, -60], [-180, -90]],
      [[-180, -90], [180, -90], [180, 90], [-180, 90], [-180, -90]],
      [[0, 80], [120, 80], [-120, 80], [0, 80]],
      [[0, 0], [2, 0], [2, 2], [1, 0], [0, 2], [0, 0]],
      [[0, 0], [10, 0], [10, 5], [6, 5], [6, 3], [4, 3], [4, 6], [6, 6], [6, 5], [10, 5], [10, 10], [0, 10], [0, 0]]
    ]) {
      expect(checkOutline(polygon(ring))).toEqual([])
    }
  })

  it('names rings without area, holes outside and parts inside one another', () => {
    expect(checkOutline(polygon([[0, 0], [5, 5], [10, 10], [0, 0]]))).toMatchObject([{ path: 'coordinates/0', code: 'no-area' }])
    expect(checkOutline(polygon([[5, 5], [5, 5], [5, 5], [5, 5]]))).toMatchObject([{ path: 'coordinates/0', code: 'no-area' }])
    expect(checkOutline(polygon(box(0, 0, 10, 10), box(20, 0, 22, 2)))).toMatchObject([{ path: 'coordinates/1', code: 'hole-outside' }])
    expect(checkOutline(polygon(box(0, 0, 10, 10), box(1, 1, 9, 9), box(2, 2, 3, 3)))).toMatchObject([{ path: 'coordinates/2', code: 'hole-in-hole' }])
    expect(checkOutline({ type: 'MultiPolygon', coordinates: [[box(0, 0, 10, 10)], [box(362, 2, 363, 3)]] }))
      .toMatchObject([{ path: 'coordinates/1/0', code: 'parts-overlap' }])
    expect(codes(checkOutline({ type: 'MultiPolygon', coordinates: [[box(0, 0, 10, 10)], [box(5, 5, 15, 15)]] }))).toContain('self-crossing')
  })

  it('takes an island in a hole', () => {
    expect(checkOutline({ type: 'MultiPolygon', coordinates: [[box(0, 0, 10, 10), box(2, 2, 8, 8)], [box(4, 4, 6, 6)]] })).toEqual([])
  })

  it('never finds a fault in a star-shaped ring, and always in one with two neighbours swapped across it', () => {
    fc.assert(fc.property(
      fc.array(fc.double({ min: 5, max: 40, noNaN: true }), { minLength: 8, maxLength: 80 }),
      fc.integer({ min: -400, max: 400 }), fc.integer({ min: -45, max: 45 }),
      (radii, lon, lat) => {
        const ring = radii.map((r, k): Position =>
          [lon + r * Math.cos(2 * Math.PI * k / radii.length), lat + r * Math.sin(2 * Math.PI * k / radii.length)])
        expect(checkOutline(polygon([...ring, ring[0]]))).toEqual([])
        const half = Math.floor(ring.length / 2)
        const swapped = [...ring]
        ;[swapped[0], swapped[half]] = [ring[half]!, ring[0]!]
        expect(codes(checkOutline(polygon([...swapped, swapped[0]])))).toContain('self-crossing')
      }
    ), { numRuns: 100, seed: 2 })
  })

  it('looks through 200 000 vertices in a second or two', () => {
    const ring = Array.from({ length: 199_999 }, (_, k): Position => {
      const angle = 2 * Math.PI * k / 199_999
      const radius = 20 + 3 * Math.sin(500 * angle)
      return [radius * Math.cos(angle), radius * Math.sin(angle)]
    })
    expect(cpuMilliseconds(() => expect(checkOutline(polygon([...ring, ring[0]]))).toEqual([]))).toBeLessThan(10_000)
  })

  it('gives up on a tangle rather than hold the server', () => {
    const comb = Array.from({ length: 90_000 }, (_, k): Position => [-60 + k * 0.001 + (k % 2 ? 30 : 0), k % 2 ? 30 : -60])
    const ring = [...comb, [70, 40], [70, -80], [-61, -80], comb[0]]
    expect(cpuMilliseconds(() => expect(codes(checkOutline(polygon(ring)))).toEqual(['too-intricate']))).toBeLessThan(10_000)
  })

  it('throws from requireOutline what it finds, in one sentence', () => {
    expect(() => requireOutline(polygon([[0, 0], [1, 1], [0, 0]]))).toThrow(/needs at least 4 positions/)
    expect(requireOutline(polygon(box(0, 0, 1, 1)))).toEqual(polygon(box(0, 0, 1, 1)))
  })
})
