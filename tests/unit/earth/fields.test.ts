import { createHash } from 'node:crypto'
import { gunzipSync, gzipSync } from 'node:zlib'
import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { contourOf } from '../../../shared/earth/contour.ts'
import { loadOceanCells } from '../../../shared/earth/detailedEarthModel.ts'
import { loadEarthModel, withFields } from '../../../shared/earth/earthModel.ts'
import { oceanMeans } from '../../../shared/earth/data/oceanMeans.ts'
import { contourMeans, gridStack, valuesAt } from '../../../shared/earth/gridStack.ts'
import { geocentricFromGeodeticDeg } from '../../../shared/earth/latitude.ts'
import { makeFields } from '../../../shared/earth/makeFields.ts'
import { functionalAt, functionals } from '../../../shared/earth/sensitivity.ts'
import { decodeField, encodePayload, fieldFile, fingerprintModes, nodeCount, readFieldFile, splitFieldFile, unpackFields } from '../../../shared/earth/sensitivityField.ts'
import { sha256Hex } from '../../../shared/earth/sha256.ts'
import type { Outline, Position } from '../../../shared/types/domain.ts'
import { fieldBytes } from '../../reference/earth/shippedModel.ts'

const D = Math.PI / 180
const box = (w: number, s: number, e: number, n: number): Outline => ({ type: 'Polygon', coordinates: [[[w, s], [e, s], [e, n], [w, n], [w, s]]] })

/** Node values of a function of geodetic latitude and longitude, degrees. */
function nodes(stepDeg: number, f: (lon: number, lat: number) => number): Float64Array {
  const { rows, columns } = nodeCount(stepDeg)
  return Float64Array.from({ length: rows * columns }, (_, k) => f(-180 + (k % columns) * stepDeg, -90 + Math.floor(k / columns) * stepDeg))
}

describe('means over contours by contour sums', () => {
  const one = gridStack([nodes(2, () => 1)], 2)
  const outlines: [string, Outline][] = [
    ['a box', box(10, 20, 43, 61)],
    ['across 180°', box(170, -30, 200, 10)],
    ['round the south pole', { type: 'Polygon', coordinates: [[[0, -70], [100, -65], [200, -75], [290, -60], [0, -70]]] }],
    ['round the north pole, westward', { type: 'Polygon', coordinates: [[[0, 70], [-100, 65], [-200, 75], [-290, 60], [0, 70]]] }],
    ['closed along the pole', box(-180, -90, 180, -75)],
    ['the whole sphere', box(-180, -90, 180, 90)],
    ['with a hole', { type: 'Polygon', coordinates: [box(0, 0, 40, 40).coordinates[0] as Position[], box(10, 10, 20, 20).coordinates[0] as Position[]] }],
    ['smaller than a cell', box(33.1, 44.2, 33.3, 44.5)]
  ]

  it.each(outlines)('of 1 are 1: %s', (_, outline) => {
    expect(contourMeans(one, contourOf(outline))[0]).toBeCloseTo(1, 8)
  })

  it('of the functionals are the exact means, up to bilinear interpolation', () => {
    // Nodes 1° apart: the curvature of a degree-2 function leaves some 1e-4.
    const stack = gridStack((['xz', 'yz', 'p2'] as const).map(g => nodes(1, (lon, lat) => functionalAt(g, geocentricFromGeodeticDeg(lat) * D, lon * D))), 1)
    for (const [, outline] of outlines) {
      const contour = contourOf(outline)
      const [xz, yz, p2] = contourMeans(stack, contour)
      expect(Math.abs(xz! - contour.means.xz)).toBeLessThan(2e-4)
      expect(Math.abs(yz! - contour.means.yz)).toBeLessThan(2e-4)
      expect(Math.abs(p2! - (1 - 1.5 * contour.means.cos2))).toBeLessThan(3e-4)
    }
  })

  it('of any field over a tiny outline are its value there', () => {
    const stack = gridStack([nodes(2, (lon, lat) => Math.sin(3 * lon * D) * Math.cos(5 * lat * D))], 2)
    fc.assert(fc.property(fc.double({ min: -179, max: 179, noNaN: true }), fc.double({ min: -80, max: 80, noNaN: true }), (lon, lat) => {
      const h = 1e-3
      expect(Math.abs(contourMeans(stack, contourOf(box(lon - h, lat - h, lon + h, lat + h)))[0]! - valuesAt(stack, lon, lat)[0]!)).toBeLessThan(1e-4)
    }), { numRuns: 50, seed: 7 })
  })

  it('agree with a sum over many small boxes', () => {
    const stack = gridStack([nodes(5, (lon, lat) => Math.sin(2 * lon * D + 1) + lat / 90)], 5)
    const whole = contourOf(box(-47, -33, 101, 52))
    let sum = 0
    let area = 0
    const n = 37
    for (let i = 0; i < n; i++) {
      for (let j = 0; j < n; j++) {
        const part = contourOf(box(-47 + 148 * i / n, -33 + 85 * j / n, -47 + 148 * (i + 1) / n, -33 + 85 * (j + 1) / n))
        sum += contourMeans(stack, part)[0]! * part.areaSr
        area += part.areaSr
      }
    }
    expect(sum / area).toBeCloseTo(contourMeans(stack, whole)[0]!, 7)
  })

  it('refuse fields of another size', () => expect(() => gridStack([new Float64Array(5)], 90)).toThrow('a field at 90° must have 3 × 5 values, got 5'))
})

describe('SHA-256', () => {
  // FIPS 180-4, appendix: "abc"; and Node's own for other lengths.
  it('is that of the standard', () => {
    expect(sha256Hex(new TextEncoder().encode('abc'))).toBe('ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad')
    for (const n of [0, 1, 55, 56, 63, 64, 65, 1000]) {
      const bytes = Uint8Array.from({ length: n }, (_, i) => (i * 7 + 3) & 255)
      expect(sha256Hex(bytes)).toBe(createHash('sha256').update(bytes).digest('hex'))
    }
  })
})

describe('the field file', () => {
  const bytes = fieldBytes()

  it('is under 1.5 MB, of this ocean, degree 256, nodes of 0.5°', () => {
    const { header } = splitFieldFile(bytes)
    expect(bytes.length).toBeLessThan(1_500_000)
    expect(header.degree).toBe(256)
    expect(header.stepDeg).toBe(0.5)
    expect(header.oceanSha256).toBe(oceanMeans.sha256)
    expect(header.fields.length).toBe(13)
  })

  it('unpacks one mode where one is wanted', async () => {
    const fields = await readFieldFile(bytes, ['fingerprint'])
    expect(Object.keys(fields.stacks)).toEqual(['fingerprint'])
  })

  it('is noticed when it is damaged, of another version or another file', async () => {
    const damaged = bytes.slice()
    damaged[damaged.length >> 1]! ^= 1
    await expect(readFieldFile(damaged)).rejects.toThrow()
    const { header, compressed } = splitFieldFile(bytes)
    await expect(readFieldFile(fieldFile({ ...header, payloadSha256: '0'.repeat(64) }, compressed))).rejects.toThrow('damaged')
    await expect(readFieldFile(fieldFile({ ...header, version: 2 }, compressed))).rejects.toThrow('version 1 are needed, got 2')
    await expect(readFieldFile(new Uint8Array(40))).rejects.toThrow('not a file of sensitivity fields')
    await expect(readFieldFile(fieldFile({ ...header, stepDeg: 1 }, compressed))).rejects.toThrow('must have')
  })

  it('belongs to one ocean', () => {
    const { header, compressed } = splitFieldFile(bytes)
    const fields = unpackFields(header, new Uint8Array(gunzipSync(compressed)), [])
    expect(() => withFields(loadEarthModel(), { ...fields, header: { ...header, oceanSha256: 'other' } })).toThrow('must belong to the ocean')
  })

  it('round trip: whole multiples of the quantum come back', () => {
    const values = nodes(10, (lon, lat) => Math.round(300 * Math.sin(lon * D) * Math.cos(lat * D)) / 100)
    const other = nodes(10, (_, lat) => lat / 90)
    const payload = encodePayload([{ values, quantum: 0.01 }, { values: other, quantum: 1 / 9000 }], 10)
    decodeField(payload, 0, 0.01, 10).forEach((value, k) => expect(value).toBeCloseTo(values[k]!, 12))
    decodeField(payload, 1, 1 / 9000, 10).forEach((value, k) => expect(value).toBeCloseTo(other[k]!, 12))
    expect(gzipSync(payload).length).toBeLessThan(payload.length)
    expect(() => encodePayload([{ values, quantum: 1e-6 }], 10)).toThrow('changes too much')
  })

  it('holds what the solver makes: a coarse set made anew differs by its truncation alone', async () => {
    const shipped = await readFieldFile(bytes)
    const { header, payload } = makeFields(loadOceanCells(), { degree: 32, stepDeg: 5, oceanSha256: oceanMeans.sha256 })
    const coarse = unpackFields(header, payload)
    const { rows, columns } = nodeCount(5)
    for (const mode of fingerprintModes) {
      const squares = new Float64Array(functionals.length)
      let count = 0
      for (let i = 1; i < rows - 1; i++) {
        for (let j = 0; j < columns - 1; j++) {
          const a = valuesAt(coarse.stacks[mode]!, -180 + 5 * j, -90 + 5 * i)
          const b = valuesAt(shipped.stacks[mode]!, -180 + 5 * j, -90 + 5 * i)
          functionals.forEach((_, k) => {
            squares[k] = squares[k]! + (a[k]! - b[k]!) ** 2
          })
          count++
        }
      }
      // Degree 32 against 256: 2e-3 root mean square, of fields that reach 0.2 (degree-2 means) and 0.36 (geocentre).
      functionals.forEach((functional, k) => expect(Math.sqrt(squares[k]! / count), functional).toBeLessThan(k < 3 ? 3e-3 : 6e-3))
    }
  })
})
