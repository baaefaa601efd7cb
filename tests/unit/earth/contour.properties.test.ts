import fc from 'fast-check'
import { expect, it } from 'vitest'
import { contourOf, type Contour } from '../../../shared/earth/contour.ts'
import { geocentricFromGeodeticDeg } from '../../../shared/earth/latitude.ts'
import type { Position } from '../../../shared/types/domain.ts'

const runs = { numRuns: 60, seed: 20240229 }
const D = Math.PI / 180

/** Star-shaped rings of 3 to 40 vertices, anywhere between 85° S and 85° N. */
const star = fc.record({
  lon: fc.double({ min: -180, max: 180, noNaN: true }),
  lat: fc.double({ min: -60, max: 60, noNaN: true }),
  radii: fc.array(fc.double({ min: 0.05, max: 25, noNaN: true }), { minLength: 3, maxLength: 40 })
}).map(({ lon, lat, radii }): Position[] => radii.map((r, i) => [lon + r * Math.cos(2 * Math.PI * i / radii.length), lat + r * Math.sin(2 * Math.PI * i / radii.length)]))
  .filter(ring => contourArea(ring) > 1e-6)

function contourArea(ring: Position[]): number {
  let sum = 0
  ring.forEach(([x, y], i) => {
    const [x2, y2] = ring[(i + 1) % ring.length]!
    sum += x * y2 - x2 * y
  })
  return Math.abs(sum) / 2
}
const of = (ring: Position[]): Contour => contourOf({ type: 'Polygon', coordinates: [[...ring, ring[0]!]] })

function expectSame(a: Contour, b: Contour, tolerance = 1e-10): void {
  expect(Math.abs(a.areaM2 / b.areaM2 - 1)).toBeLessThan(tolerance)
  expect(Math.abs(a.areaSr / b.areaSr - 1)).toBeLessThan(tolerance)
  for (const key of ['xz', 'yz', 'cos2'] as const) expect(Math.abs(a.means[key] - b.means[key])).toBeLessThan(tolerance)
}

it('does not depend on direction, start vertex, whole turns of longitude or repeated vertices', () => {
  fc.assert(fc.property(star, fc.nat(), fc.constantFrom(-360, 0, 360), (ring, start, turn) => {
    const reference = of(ring)
    expectSame(of([...ring].reverse()), reference)
    const k = start % ring.length
    expectSame(of([...ring.slice(k), ...ring.slice(0, k)]), reference)
    expectSame(of(ring.map(([lon, lat]): Position => [lon + turn, lat])), reference)
    expectSame(of(ring.flatMap(p => [p, p])), reference)
    // Every longitude brought into [−180, 180]: edges across the antimeridian go the short way.
    expectSame(of(ring.map(([lon, lat]): Position => [((lon + 180) % 360 + 360) % 360 - 180, lat])), reference)
  }), runs)
})

it('turns xz and yz into one another when the outline is turned about the axis', () => {
  fc.assert(fc.property(star, fc.double({ min: -180, max: 180, noNaN: true }), (ring, angle) => {
    const a = of(ring)
    const b = of(ring.map(([lon, lat]): Position => [lon + angle, lat]))
    const c = Math.cos(angle * D)
    const s = Math.sin(angle * D)
    expect(Math.abs(b.means.xz - (c * a.means.xz - s * a.means.yz))).toBeLessThan(1e-10)
    expect(Math.abs(b.means.yz - (s * a.means.xz + c * a.means.yz))).toBeLessThan(1e-10)
    expect(Math.abs(b.means.cos2 - a.means.cos2)).toBeLessThan(1e-10)
  }), runs)
})

it('mirrors on the equator: xz and yz change sign', () => {
  fc.assert(fc.property(star, (ring) => {
    const a = of(ring)
    const b = of(ring.map(([lon, lat]): Position => [lon, -lat]))
    expect(Math.abs(a.means.xz + b.means.xz)).toBeLessThan(1e-10)
    expect(Math.abs(a.means.cos2 - b.means.cos2)).toBeLessThan(1e-10)
    expect(Math.abs(a.areaM2 / b.areaM2 - 1)).toBeLessThan(1e-10)
  }), runs)
})

it('adds up when an outline is cut in two', () => {
  fc.assert(fc.property(star, fc.nat(), (ring, k) => {
    fc.pre(ring.length > 4)
    const i = 2 + k % (ring.length - 3)
    const whole = of(ring)
    const centre: Position = [(ring[0]![0] + ring[i]![0]) / 2, (ring[0]![1] + ring[i]![1]) / 2]
    const parts = [[centre, ...ring.slice(0, i + 1)], [centre, ...ring.slice(i), ring[0]!]]
    // Signed, since a cut of a star need not stay inside it: a part counts as its vertices run.
    const signed = (p: Position[]): number => Math.sign(p.reduce((sum, [x, y], j) => sum + x * p[(j + 1) % p.length]![1] - p[(j + 1) % p.length]![0] * y, 0))
    const sum = parts.reduce((total, p) => total + (contourArea(p) > 1e-9 ? signed(p) * of(p).areaM2 : 0), 0)
    expect(Math.abs(sum / whole.areaM2 - 1)).toBeLessThan(1e-6)
  }), runs)
})

it('agrees with quadrature by brute force over the inside', () => {
  fc.assert(fc.property(star, (ring) => {
    const contour = of(ring)
    const west = Math.min(...ring.map(p => p[0]))
    const east = Math.max(...ring.map(p => p[0]))
    // Columns of longitude, each cut exactly by the edges, midpoint rule across and along.
    const columns = 500
    const sum = { area: 0, xz: 0, yz: 0, cos2: 0 }
    for (let c = 0; c < columns; c++) {
      const x = west + (c + 0.5) * (east - west) / columns
      const cuts: number[] = []
      ring.forEach(([x0, y0], i) => {
        const [x1, y1] = ring[(i + 1) % ring.length]!
        if ((x0 <= x) !== (x1 <= x)) cuts.push(y0 + (x - x0) / (x1 - x0) * (y1 - y0))
      })
      cuts.sort((a, b) => a - b)
      for (let k = 0; k + 1 < cuts.length; k += 2) addColumn(sum, x, cuts[k]!, cuts[k + 1]!)
    }
    // The midpoint rule across 500 columns with corners in between is good to some 1e-4.
    expect(Math.abs(sum.area * (east - west) / columns * D / contour.areaSr - 1)).toBeLessThan(2e-3)
    expect(Math.abs(sum.xz / sum.area - contour.means.xz)).toBeLessThan(1e-3)
    expect(Math.abs(sum.yz / sum.area - contour.means.yz)).toBeLessThan(1e-3)
    expect(Math.abs(sum.cos2 / sum.area - contour.means.cos2)).toBeLessThan(1e-3)
  }), { ...runs, numRuns: 25 })
})

function addColumn(sum: { area: number, xz: number, yz: number, cos2: number }, lon: number, south: number, north: number): void {
  const a = geocentricFromGeodeticDeg(south) * D
  const b = geocentricFromGeodeticDeg(north) * D
  const n = 20
  for (let i = 0; i < n; i++) {
    const psi = a + (i + 0.5) * (b - a) / n
    const w = Math.cos(psi) * (b - a) / n
    sum.area += w
    sum.xz += w * Math.sin(psi) * Math.cos(psi) * Math.cos(lon * D)
    sum.yz += w * Math.sin(psi) * Math.cos(psi) * Math.sin(lon * D)
    sum.cos2 += w * Math.cos(psi) ** 2
  }
}
