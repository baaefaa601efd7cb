import { readFileSync } from 'node:fs'
import fc from 'fast-check'
import { geoMercator, geoPath, geoProjection, type GeoProjection } from 'd3-geo'
import { describe, expect, it } from 'vitest'
import { unpackLand } from '#shared/geo/landFile'
import type { Outline, Position } from '#shared/types/domain'
import { displayFill, displayShape } from '~/map/displayShape'
import { cameraOf, type Camera } from '~/map/picture/camera'
import { Path } from '~/map/picture/path'
import { LabelPlaces, type Candidate } from '~/map/picture/placeLabels'
import { standsAt, traceFill, traceLine, type Pen } from '~/map/picture/trace'

const size = { width: 860, height: 700 }

/** A map as far as a camera asks it. */
function chartAt(globe: boolean, [lng, lat]: Position, zoom: number): Parameters<typeof cameraOf>[0] {
  return {
    getContainer: () => ({ clientWidth: size.width, clientHeight: size.height }), getCenter: () => ({ lng, lat }), getZoom: () => zoom,
    getProjection: () => ({ type: globe ? 'globe' : 'mercator' }),
  } as unknown as Parameters<typeof cameraOf>[0]
}

/**
 * The vertical perspective projection (Snyder, Map Projections: A Working Manual, USGS Professional Paper 1395, 1987, eqs. 23-3 and 22-4, 22-5)
 * in d3-geo 3.1, which turns the sphere, clips at the horizon and measures by its own code. `eye` is the eye's distance from the surface in radii.
 */
function perspective([lon, lat]: Position, radius: number, eye: number): GeoProjection {
  const P = 1 + eye
  const raw = (l: number, p: number): [number, number] => {
    const k = (P - 1) / (P - Math.cos(l) * Math.cos(p))
    return [k * Math.cos(p) * Math.sin(l), k * Math.sin(p)]
  }
  return geoProjection(raw).rotate([-lon, -lat]).scale(radius).translate([size.width / 2, size.height / 2])
    .clipAngle(Math.acos(1 / P) * 180 / Math.PI - 1e-6).precision(0.05)
}

/** A pen that keeps the rings; the area filled by the even-odd rule of rings that do not cross is a sum with signs. */
function recorder() {
  const rings: { x: number, y: number }[][] = []
  const pen: Pen = {
    moveTo: (x, y) => { rings.push([{ x, y }]) },
    lineTo: (x, y) => { rings.at(-1)!.push({ x, y }) },
    closePath: () => {},
    arc: (x, y, r) => { rings.push(Array.from({ length: 2001 }, (_, k) => ({ x: x + r * Math.cos(k * Math.PI / 1000), y: y + r * Math.sin(k * Math.PI / 1000) }))) },
  }
  return { pen, rings }
}

const signedArea = (ring: readonly { x: number, y: number }[]) => ring.reduce((sum, a, k) => {
  const b = ring[(k + 1) % ring.length]!
  return sum + (a.x * b.y - b.x * a.y) / 2
}, 0)

/** The filled area: of one ring its size; a ring round the whole globe takes the rest. */
function filledArea(polygon: readonly Path[], camera: Camera): number {
  const { pen, rings } = recorder()
  traceFill(pen, [polygon], camera)
  const areas = rings.map(ring => Math.abs(signedArea(ring)))
  const [outer, ...others] = areas.sort((a, b) => b - a)
  return (outer ?? 0) - others.reduce((sum, area) => sum + area, 0)
}

const centres: Position[] = [[0, 0], [-30, 25], [179, -60], [90, 85], [-100, -88]]
/** What a zoom means: the map library's `planetScaleAtLatitude`, which ends with the Mercator square. */
const scaleAt = (lat: number) => Math.cos(Math.min(85.0511287798066, Math.abs(lat)) * Math.PI / 180)
const radiusAt = (zoom: number, lat: number) => 512 * 2 ** zoom / (2 * Math.PI * scaleAt(lat))

describe('the camera of the canvas', () => {
  it.each(centres)('puts places of the globe where the vertical perspective does, seen from %d, %d', (...centre) => {
    const zoom = 0.6 + Math.log2(scaleAt(centre[1]))
    const camera = cameraOf(chartAt(true, centre, zoom))
    const project = perspective(centre, radiusAt(zoom, centre[1]), 1.5 * size.height / radiusAt(zoom, centre[1]))
    fc.assert(fc.property(fc.double({ min: -180, max: 180, noNaN: true }), fc.double({ min: -90, max: 90, noNaN: true }), (lon, lat) => {
      const found = standsAt(new Path([[lon, lat]]), camera)
      // `stream` clips, a call does not: what it passes on is what is in sight.
      let seen: [number, number] | null = null
      const sink = { point: (x: number, y: number) => { seen = [x, y] }, lineStart: () => {}, lineEnd: () => {}, polygonStart: () => {}, polygonEnd: () => {}, sphere: () => {} }
      project.stream(sink).point(lon, lat)
      expect(found.length).toBe(seen ? 1 : 0)
      if (!seen) return
      expect(found[0]!.x).toBeCloseTo(seen[0], 6)
      expect(found[0]!.y).toBeCloseTo(seen[1], 6)
    }), { numRuns: 300 })
  })

  it('puts places of the flat map where the Mercator projection of d3-geo does', () => {
    const camera = cameraOf(chartAt(false, [-30, 20], 1.2))
    const world = 512 * 2 ** 1.2
    const project = geoMercator().scale(world / (2 * Math.PI)).rotate([30, 0]).center([0, 20]).translate([size.width / 2, size.height / 2])
    for (const place of [[-30, 20], [10, 60], [-120, -45], [5, 85]] as Position[]) {
      const [x, y] = project(place)!
      const nearest = standsAt(new Path([place]), camera).find(at => Math.abs(at.x - x) < 1)!
      expect(nearest.x).toBeCloseTo(x, 6)
      expect(nearest.y).toBeCloseTo(y, 6)
    }
  })

  it('shows a place on every copy of the world that the window holds', () => {
    const camera = cameraOf(chartAt(false, [0, 0], -0.5))
    const world = 512 * 2 ** -0.5
    const found = standsAt(new Path([[0, 0]]), camera).map(at => at.x).filter(x => x >= 0 && x <= size.width)
    expect(found).toHaveLength(3)
    expect(found[1]! - found[0]!).toBeCloseTo(world, 9)
  })
})

describe('filling on the globe', () => {
  const land = unpackLand(JSON.parse(readFileSync('public/tiles/land.json', 'utf8')))
  const large = (displayFill(land) as { coordinates: Position[][][] }).coordinates.filter(([shell]) => shell!.length > 400)

  /** A circle of 60 places about a place, cut as all outlines are. */
  const disc = (lon: number, lat: number, reach: number): Outline => ({ type: 'Polygon', coordinates: [Array.from({ length: 61 }, (_, k): Position => [lon + reach * Math.cos(k * Math.PI / 30), lat + reach * Math.sin(k * Math.PI / 30)])] })

  it.each(centres)('covers as many pixels of each continent as d3-geo, seen from %d, %d', (...centre) => {
    const zoom = 0.4 + Math.log2(scaleAt(centre[1]))
    const radius = radiusAt(zoom, centre[1])
    const camera = cameraOf(chartAt(true, centre, zoom))
    const measure = geoPath(perspective(centre, radius, 1.5 * size.height / radius))
    expect(large.length).toBeGreaterThan(8)
    for (const rings of large) {
      // d3-geo takes the other winding: shells clockwise on the sphere.
      const wound = rings.map(ring => [...ring].reverse())
      const expected = measure.area({ type: 'Polygon', coordinates: wound })
      const found = filledArea(rings.map(ring => new Path(ring)), camera)
      // Vertices nearer than 0.7 pixels are left out: half that along the whole line at the very most.
      expect(Math.abs(found - expected)).toBeLessThan(6 + 0.01 * expected)
    }
  })

  it('covers as many pixels of a region anywhere as d3-geo, also behind and round the point opposite to the eye', () => {
    fc.assert(fc.property(fc.integer({ min: -140, max: 140 }), fc.integer({ min: -45, max: 45 }), fc.integer({ min: 2, max: 38 }), fc.constantFrom(...centres), (lon, lat, reach, centre) => {
      const zoom = Math.log2(scaleAt(centre[1]))
      const radius = radiusAt(zoom, centre[1])
      const [rings] = (displayShape(disc(lon, lat, reach)).fill as { coordinates: Position[][][] }).coordinates
      const expected = geoPath(perspective(centre, radius, 1.5 * size.height / radius)).area({ type: 'Polygon', coordinates: rings!.map(ring => [...ring].reverse()) })
      const found = filledArea(rings!.map(ring => new Path(ring)), cameraOf(chartAt(true, centre, zoom)))
      expect(Math.abs(found - expected)).toBeLessThan(3 + 0.01 * expected)
    }), { numRuns: 200 })
  })
})

describe('lines', () => {
  it('are thinned by less than a pixel, and keep both ends', () => {
    const places = Array.from({ length: 2000 }, (_, k): Position => [k / 20, 30 * Math.sin(k / 90)])
    const path = new Path(places)
    const thin = path.vectors(0.01)
    const whole = path.vectors(0)
    expect(thin.length).toBeLessThan(whole.length / 2)
    expect([...thin.slice(0, 3), ...thin.slice(-3)]).toEqual([...whole.slice(0, 3), ...whole.slice(-3)])
    for (let k = 0; k < whole.length; k += 3) {
      let least = Infinity
      for (let j = 0; j < thin.length; j += 3) least = Math.min(least, Math.hypot(whole[k]! - thin[j]!, whole[k + 1]! - thin[j + 1]!, whole[k + 2]! - thin[j + 2]!))
      expect(least).toBeLessThan(0.01)
    }
  })

  it('end at the globe’s edge where they go behind it', () => {
    const camera = cameraOf(chartAt(true, [0, 0], 0))
    const { pen, rings } = recorder()
    traceLine(pen, new Path(Array.from({ length: 361 }, (_, k): Position => [k - 180, 0])), camera)
    expect(rings).toHaveLength(1)
    const away = rings[0]!.map(at => Math.hypot(at.x - size.width / 2, at.y - size.height / 2))
    const limb = camera.kind === 'globe' ? camera.limb : 0
    expect(away[0]).toBeCloseTo(limb, 6)
    expect(away.at(-1)).toBeCloseTo(limb, 6)
    expect(Math.max(...away)).toBeLessThanOrEqual(limb + 1e-9)
  })
})

describe('labels', () => {
  const one = fc.record({
    x: fc.integer({ min: -50, max: 900 }), y: fc.integer({ min: -50, max: 750 }), width: fc.integer({ min: 10, max: 140 }), height: fc.integer({ min: 10, max: 40 }),
    anchors: fc.constantFrom('centre' as const, 'around' as const),
  })

  it('never meet, and never run over the globe’s edge', () => {
    fc.assert(fc.property(fc.array(one, { maxLength: 120 }), (all) => {
      const candidates = all.map(({ x, y, ...rest }, k): Candidate => ({ key: String(k), at: { x, y }, padding: 2, offset: 12, ...rest }))
      const limb = 300
      const placed = new LabelPlaces().place(candidates, { ...size, limb })
      placed.forEach((a, i) => {
        const corner = Math.hypot(Math.abs(a.x - size.width / 2) + a.candidate.width / 2, Math.abs(a.y - size.height / 2) + a.candidate.height / 2)
        expect(corner).toBeLessThanOrEqual(limb)
        for (const b of placed.slice(i + 1)) {
          expect(Math.abs(a.x - b.x) >= (a.candidate.width + b.candidate.width) / 2 || Math.abs(a.y - b.y) >= (a.candidate.height + b.candidate.height) / 2).toBe(true)
        }
      })
    }), { numRuns: 100 })
  })

  it('keep their side while there is room, and give way to those before them', () => {
    const places = new LabelPlaces()
    const label = (key: string, x: number, anchors: Candidate['anchors']): Candidate => ({ key, at: { x, y: 300 }, width: 80, height: 20, padding: 2, offset: 16, anchors })
    const bounds = { ...size, limb: null }
    const first = places.place([label('a', 300, 'centre'), label('b', 310, 'around'), label('c', 305, 'centre')], bounds)
    expect(first.map(({ candidate }) => candidate.key)).toEqual(['a', 'b'])
    const side = first[1]!
    const later = places.place([label('b', 310, 'around')], bounds)
    expect(later[0]).toMatchObject({ x: side.x, y: side.y })
  })
})
