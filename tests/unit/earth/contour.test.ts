import { describe, expect, it } from 'vitest'
import { contourOf } from '../../../shared/earth/contour.ts'
import { geodeticFromGeocentricDeg } from '../../../shared/earth/latitude.ts'
import { InputError } from '../../../shared/types/issue.ts'
import type { Outline, Position } from '../../../shared/types/domain.ts'

const polygon = (...rings: Position[][]): Outline => ({ type: 'Polygon', coordinates: rings })
const box = (west: number, south: number, east: number, north: number): Position[] => [[west, south], [east, south], [east, north], [west, north], [west, south]]
const D = Math.PI / 180
const lat = (psi: number): number => geodeticFromGeocentricDeg(psi)

describe('closed forms on the sphere', () => {
  it('octant: area π/2, means of xy, yz, zx 2/(3π), of cos² ψ 2/3', () => {
    const octant = contourOf(polygon([[0, 0], [90, 0], [90, 90], [0, 90], [0, 0]]))
    expect(octant.areaSr).toBeCloseTo(Math.PI / 2, 13)
    // ∫ sin ψ cos² ψ dψ ∫ cos λ dλ = 1/3, over π/2.
    expect(octant.means.xz).toBeCloseTo(2 / (3 * Math.PI), 13)
    expect(octant.means.yz).toBeCloseTo(2 / (3 * Math.PI), 13)
    expect(octant.means.cos2).toBeCloseTo(2 / 3, 13)
    expect(octant.centroid[0]).toBeCloseTo(45, 12)
    expect(octant.centroid[1]).toBeCloseTo(lat(Math.atan(Math.SQRT1_2) / D), 12)
  })

  it('box between meridians and parallels', () => {
    const [w, s, e, n] = [-50, 20, 10, 65]
    const contour = contourOf(polygon(box(w, lat(s), e, lat(n))))
    const sines = Math.sin(n * D) - Math.sin(s * D)
    const area = (e - w) * D * sines
    const cubes = (Math.cos(s * D) ** 3 - Math.cos(n * D) ** 3) / 3
    expect(contour.areaSr).toBeCloseTo(area, 13)
    expect(contour.means.xz).toBeCloseTo(cubes * (Math.sin(e * D) - Math.sin(w * D)) / area, 13)
    expect(contour.means.yz).toBeCloseTo(cubes * (Math.cos(w * D) - Math.cos(e * D)) / area, 13)
    expect(contour.means.cos2).toBeCloseTo(1 - (Math.sin(n * D) ** 3 - Math.sin(s * D) ** 3) / (3 * sines), 13)
  })

  it('cap round a pole: cos² ψ has the mean (2 − s − s²)/3, the moments vanish', () => {
    for (const psi of [10, 60, 89]) {
      const s = Math.sin(psi * D)
      const cap = contourOf(polygon([[0, lat(psi)], [120, lat(psi)], [-120, lat(psi)], [0, lat(psi)]]))
      expect(cap.areaSr).toBeCloseTo(2 * Math.PI * (1 - s), 13)
      expect(cap.means.cos2).toBeCloseTo((2 - s - s * s) / 3, 11)
      expect(cap.means.xz).toBeCloseTo(0, 13)
      expect(cap.means.yz).toBeCloseTo(0, 13)
      expect(cap.centroid).toEqual([0, 90])
    }
  })

  it('whole sphere: area 4π, the ellipsoid of WGS 84, mean cos² ψ of 2/3, no centre', () => {
    const world = contourOf(polygon(box(-180, -90, 180, 90)))
    expect(world.areaSr).toBeCloseTo(4 * Math.PI, 12)
    // Area of the WGS 84 ellipsoid: 510 065 621.724 km² (Moritz 2000, Geodetic Reference System, to the digits of WGS 84).
    expect(world.areaM2 / 1e6).toBeCloseTo(510_065_621.724, 2)
    expect(world.means.cos2).toBeCloseTo(2 / 3, 13)
    expect(world.means.xz).toBeCloseTo(0, 13)
    expect(world.centroid).toEqual([0, 0])
  })
})

describe('poles and antimeridian', () => {
  const same = (a: Outline, b: Outline, digits = 12): void => {
    const p = contourOf(a)
    const q = contourOf(b)
    expect(p.areaSr).toBeCloseTo(q.areaSr, digits)
    expect(p.areaM2 / q.areaM2).toBeCloseTo(1, digits)
    expect(p.means.xz).toBeCloseTo(q.means.xz, digits)
    expect(p.means.yz).toBeCloseTo(q.means.yz, digits)
    expect(p.means.cos2).toBeCloseTo(q.means.cos2, digits)
  }
  const coast: Position[] = [[-180, -70], [-100, -75], [-40, -78], [20, -69], [90, -66], [150, -72]]

  it('a ring that winds round the pole is the ring closed along −90°, however it is closed', () => {
    const winding = polygon([...coast, coast[0]!])
    same(winding, polygon([...coast, [180, -70], [180, -90], [-180, -90], coast[0]!]))
    same(winding, polygon([...coast, [180, -70], [180, -90], [0, -90], [-180, -90], coast[0]!]))
    same(winding, polygon([...coast, [180, -70], coast[0]!]))
    same(winding, polygon([...coast.map(([lon, y]): Position => [lon + 360, y]), [540, -70], [180, -70]]))
    same(winding, polygon([...coast, coast[0]!].reverse()))
    same(winding, polygon([...coast.slice(3), ...coast.slice(0, 4)]))
  })

  it('a parallel walked from 180° W to 180° E and closed by a step back is a ring round the pole', () => {
    same(polygon([[-180, -75], [-90, -75], [0, -75], [90, -75], [180, -75], [-180, -75]]), polygon(box(-180, -90, 180, -75)))
  })

  it('encloses the smaller side, and north for the equator itself', () => {
    expect(contourOf(polygon([[0, 10], [120, 10], [-120, 10], [0, 10]])).centroid[1]).toBe(90)
    expect(contourOf(polygon([[0, -10], [120, -10], [-120, -10], [0, -10]])).centroid[1]).toBe(-90)
    expect(contourOf(polygon([[0, 0], [120, 0], [-120, 0], [0, 0]])).areaSr).toBeCloseTo(2 * Math.PI, 12)
    expect(contourOf(polygon([[0, 0], [-120, 0], [120, 0], [0, 0]])).centroid[1]).toBe(90)
  })

  it('a gap in a ring closed along the pole stays a gap', () => {
    const sector = contourOf(polygon([[-170, -80], [-85, -80], [0, -80], [85, -80], [170, -80], [170, -90], [-170, -90], [-170, -80]]))
    expect(sector.areaSr / contourOf(polygon(box(0, -90, 340 - 180, -80))).areaSr).toBeCloseTo(340 / 160, 12)
  })

  it('a band between two rings round the poles', () => {
    const ringAt = (y: number): Position[] => [[0, y], [120, y], [-120, y], [0, y]]
    same(polygon(ringAt(-60), ringAt(-80)), polygon(box(-180, -80, 180, -60)))
    same(polygon(ringAt(10), ringAt(-60)), polygon(box(-180, -60, 180, 10)))
    same(polygon(ringAt(-5), ringAt(5)), polygon(box(-180, -5, 180, 5)))
  })

  it('crosses 180° cut, unwrapped or the short way', () => {
    const cut: Outline = { type: 'MultiPolygon', coordinates: [[box(176, -19, 180, -16)], [box(-180, -19, -178, -16)]] }
    same(cut, polygon(box(176, -19, 182, -16)))
    same(cut, polygon(box(176, -19, -178, -16)))
    same(cut, polygon(box(-184, -19, -178, -16)))
    expect(contourOf(cut).centroid[0]).toBeCloseTo(179, 10)
  })

  it('an edge of more than 180° goes the short way, one of 360° is a full turn', () => {
    same(polygon(box(-170, 0, 170, 10)), polygon(box(170, 0, 190, 10)))
    same(polygon(box(-180, 0, 180, 10)), polygon(box(-180, 0, 0, 10).slice(0, 4).flatMap(([x, y], i): Position[] => i === 1 || i === 2 ? [[0, y], [180, y]].slice().sort((a, b) => i === 1 ? a[0]! - b[0]! : b[0]! - a[0]!) as Position[] : [[x, y]]).concat([[-180, 0]])))
  })
})

describe('holes, islands, repeated vertices', () => {
  it('a hole is taken off, an island in it is a part of its own, directions do not matter', () => {
    const shell = box(0, 0, 30, 30)
    const hole = box(10, 10, 20, 20)
    const island = box(14, 14, 16, 16)
    const areaOf = (g: Outline): number => contourOf(g).areaM2
    const expected = areaOf(polygon(shell)) - areaOf(polygon(hole)) + areaOf(polygon(island))
    for (const h of [hole, [...hole].reverse()]) {
      for (const i of [island, [...island].reverse()]) {
        expect(areaOf({ type: 'MultiPolygon', coordinates: [[shell, h], [i]] }) / expected).toBeCloseTo(1, 13)
      }
    }
  })

  it('repeated vertices and an open ring change nothing', () => {
    const plain = contourOf(polygon(box(5, 40, 25, 60)))
    const repeated = contourOf(polygon([[5, 40], [5, 40], [25, 40], [25, 60], [25, 60], [25, 60], [5, 60]]))
    expect(repeated.areaM2).toBe(plain.areaM2)
    expect(repeated.means).toEqual(plain.means)
  })

  it('keeps its digits for a pond of 10 m', () => {
    const h = 5e-5
    const pond = contourOf(polygon(box(120 - h, 45 - h, 120 + h, 45 + h)))
    const psi = Math.atan((1 - (2 - 1 / 298.257223563) / 298.257223563) * 1)
    expect(pond.means.xz).toBeCloseTo(Math.sin(psi) * Math.cos(psi) * Math.cos(120 * D), 8)
    expect(pond.areaM2).toBeCloseTo(111_132 * 1e-4 * 78_847 * 1e-4, 0)
  })
})

describe('faults', () => {
  const fault = (g: Outline): string => {
    try {
      contourOf(g)
    }
    catch (error) {
      if (!(error instanceof InputError)) throw error
      return `${error.issues[0]!.path} ${error.issues[0]!.code}`
    }
    return 'none'
  }
  it('are named with their place', () => {
    expect(fault(polygon([[0, 0], [1, 0], [1, NaN], [0, 0]]))).toBe('coordinates/0/2 not-a-number')
    expect(fault(polygon([[0, 0], [1, 0], [1, 90.1], [0, 0]]))).toBe('coordinates/0/2 latitude-out-of-range')
    expect(fault(polygon([[0, 0], [1, 0], [0, 0]]))).toBe('coordinates/0 ring-too-short')
    expect(fault(polygon([[0, 0], [1, 0], [2, 0], [0, 0]]))).toBe('coordinates/0 no-area')
    expect(fault({ type: 'MultiPolygon', coordinates: [[box(0, 0, 1, 1)], [[[0, 0], [1, 1], [0, 0]]]] })).toBe('coordinates/1/0 ring-too-short')
    expect(fault(polygon([[0, 80], [120, 80], [240, 80], [0, 81], [120, 82], [240, 82], [0, 80]]))).toBe('coordinates/0 ring-winds-twice')
    expect(fault({ type: 'Polygon', coordinates: [] })).toBe('coordinates no-area')
  })
})
