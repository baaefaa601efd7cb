import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { cellAverages } from '../../../shared/earth/cellAverages.ts'
import { cellCoverage } from '../../../shared/earth/cellCoverage.ts'
import { contourOf } from '../../../shared/earth/contour.ts'
import { oceanCellsBase64 } from '../../../shared/earth/data/oceanCells.ts'
import { oceanMeans } from '../../../shared/earth/data/oceanMeans.ts'
import { loadOceanCells } from '../../../shared/earth/detailedEarthModel.ts'
import { contourMeans } from '../../../shared/earth/gridStack.ts'
import { geocentricFromGeodeticDeg } from '../../../shared/earth/latitude.ts'
import { decodeOceanCells, encodeOceanCells, geocentricRowEdgesDeg } from '../../../shared/earth/oceanCells.ts'
import { oceanField } from '../../../shared/earth/oceanFunction.ts'
import { sha256Hex } from '../../../shared/earth/sha256.ts'
import type { Outline, Position } from '../../../shared/types/domain.ts'

const D = Math.PI / 180
const cells = loadOceanCells()
const box = (w: number, s: number, e: number, n: number): Outline => ({ type: 'Polygon', coordinates: [[[w, s], [e, s], [e, n], [w, n], [w, s]]] })

describe('ocean cells', () => {
  it('have the sea of the exact contours, and their checksum', () => {
    const sum = { area: 0, sea: 0, xz: 0, yz: 0, cos2: 0 }
    for (let i = 0; i < cells.rows; i++) {
      const psi = ((i + 0.5) * 180 / cells.rows - 90) * D
      for (let j = 0; j < cells.columns; j++) {
        const lambda = ((j + 0.5) * 360 / cells.columns - 180) * D
        const w = Math.cos(psi)
        const sea = w * cells.fraction[i * cells.columns + j]!
        sum.area += w
        sum.sea += sea
        sum.xz += sea * Math.sin(psi) * Math.cos(psi) * Math.cos(lambda)
        sum.yz += sea * Math.sin(psi) * Math.cos(psi) * Math.sin(lambda)
        sum.cos2 += sea * Math.cos(psi) ** 2
      }
    }
    expect(sum.sea / sum.area).toBeCloseTo(oceanMeans.fraction, 5)
    expect(sum.xz / sum.sea).toBeCloseTo(oceanMeans.means.xz, 5)
    expect(sum.yz / sum.sea).toBeCloseTo(oceanMeans.means.yz, 5)
    expect(sum.cos2 / sum.sea).toBeCloseTo(oceanMeans.means.cos2, 5)
    expect(sha256Hex(new TextEncoder().encode(oceanCellsBase64))).toBe(oceanMeans.sha256)
  })

  const at = (lon: number, lat: number): number => cells.fraction[Math.floor((geocentricFromGeodeticDeg(lat) + 90) * 4) * cells.columns + Math.floor((lon + 180) * 4)]!
  it.each([
    ['Caspian Sea, filled', 51, 42, 0],
    ['Lake Superior', -87.5, 47.7, 0],
    ['Lake Victoria', 33, -1, 0],
    ['Ross ice shelf', -175, -81, 1],
    ['Filchner–Ronne ice shelf', -60, -78, 1],
    ['south pole', 0, -89.9, 0],
    ['north pole', 0, 89.9, 1],
    ['Pacific at 180°', 179.9, 0.1, 1],
    ['Chukotka beyond 180°', -176, 67, 0],
    ['Vanua Levu, beside 180°', 179.1, -16.7, 0],
    ['sea between Fiji and Samoa', -175, -16.5, 1],
    ['Black Sea', 34, 43.3, 1],
    ['Sahara', 10, 23, 0]
  ])('%s', (_, lon, lat, sea) => {
    expect(Math.abs(at(lon, lat) - sea)).toBeLessThan(sea === 0 && lon === 179.1 ? 0.6 : 0.05)
  })

  it('round trip through their code', () => {
    const fraction = Float64Array.from({ length: 40 }, (_, i) => i < 7 ? 0 : i < 31 ? 1 : (i % 5) / 5)
    const back = decodeOceanCells(encodeOceanCells(fraction), 4, 10).fraction
    back.forEach((value, i) => expect(value).toBeCloseTo(fraction[i]!, 2))
    expect(() => decodeOceanCells(encodeOceanCells(fraction), 4, 11)).toThrow('must fill 4 × 11 = 44 cells, got 40')
  })
})

describe('sea inside an outline', () => {
  const field = oceanField(cells)
  it('is all, nothing, or the share of a coast', () => {
    const sea = (outline: Outline) => contourMeans(field, contourOf(outline))[0]!
    expect(sea(box(-40, 20, -30, 30))).toBeCloseTo(1, 6)
    expect(sea(box(10, 20, 20, 28))).toBeCloseTo(0, 6)
    expect(sea(box(-180, -90, 180, 90))).toBeCloseTo(oceanMeans.fraction, 4)
    expect(sea(box(50.2, 38, 52, 41))).toBeCloseTo(0, 2)
  })
})

describe('coverage of cells', () => {
  const edges = geocentricRowEdgesDeg(36)
  const areaOf = (outline: Outline): { covered: number, area: number, fraction: Float64Array } => {
    const contour = contourOf(outline)
    const fraction = cellCoverage(contour.rings, { latEdgesDeg: edges, columns: 72 })
    let covered = 0
    for (let i = 0; i < 36; i++) {
      const height = Math.sin((5 * i - 85) * D) - Math.sin((5 * i - 90) * D)
      for (let j = 0; j < 72; j++) covered += fraction[i * 72 + j]! * height * 5 * D
    }
    return { covered, area: contour.areaSr, fraction }
  }

  it('adds up to the area of an outline, each cell between 0 and 1', () => {
    fc.assert(fc.property(fc.double({ min: -180, max: 180, noNaN: true }), fc.double({ min: -60, max: 60, noNaN: true }), fc.array(fc.double({ min: 0.2, max: 25, noNaN: true }), { minLength: 3, maxLength: 12 }), (lon, lat, radii) => {
      const ring = radii.map((r, i): Position => [lon + r * Math.cos(2 * Math.PI * i / radii.length), lat + r * Math.sin(2 * Math.PI * i / radii.length)])
      const { covered, area, fraction } = areaOf({ type: 'Polygon', coordinates: [[...ring, ring[0]!]] })
      expect(Math.abs(covered / area - 1)).toBeLessThan(1e-6)
      for (const value of fraction) {
        expect(value).toBeGreaterThan(-1e-9)
        expect(value).toBeLessThan(1 + 1e-9)
      }
    }), { numRuns: 40, seed: 11 })
  })

  it('takes poles, holes and the whole sphere', () => {
    for (const outline of [
      box(-180, -90, 180, 90),
      box(-180, -90, 180, -72),
      { type: 'Polygon', coordinates: [[[0, 70], [100, 65], [200, 75], [290, 60], [0, 70]]] } as Outline,
      { type: 'Polygon', coordinates: [[[0, -70], [100, -65], [200, -75], [290, -60], [0, -70]], [[10, -85], [130, -85], [250, -85], [10, -85]]] } as Outline
    ]) {
      const { covered, area } = areaOf(outline)
      expect(Math.abs(covered / area - 1)).toBeLessThan(1e-6)
    }
  })

  it('halves a cell that is cut along its middle', () => {
    const { fraction } = areaOf(box(-2.5, -30, 2.5, 30))
    expect(fraction[18 * 72 + 36]).toBeCloseTo(0.5, 12)
    expect(fraction[18 * 72 + 35]).toBeCloseTo(0.5, 12)
    expect(fraction[18 * 72 + 37]).toBeCloseTo(0, 12)
  })

  it('averages cells over other boxes without loss', () => {
    const lat = Float64Array.from({ length: 8 }, (_, i) => -90 + i * 180 / 7)
    const averages = cellAverages(cells, lat, 11, -180 + 3)
    let sum = 0
    for (let i = 0; i < 7; i++) {
      const height = Math.sin(geocentricFromGeodeticDeg(lat[i + 1]!) * D) - Math.sin(geocentricFromGeodeticDeg(lat[i]!) * D)
      for (let j = 0; j < 11; j++) sum += averages[i * 11 + j]! * height / 11
    }
    expect(sum / 2).toBeCloseTo(oceanMeans.fraction, 5)
  })
})
