import type { Position } from '../types/domain.ts'
import { outlineForFile, type WrittenOutline } from './forFile.ts'
import { polygonsOf } from './parts.ts'

/** The coordinate system of what is written, as the .prj of a shapefile names it. */
export const wgs84Prj = 'GEOGCS["GCS_WGS_1984",DATUM["D_WGS_1984",SPHEROID["WGS_1984",6378137.0,298.257223563]],PRIMEM["Greenwich",0.0],UNIT["Degree",0.0174532925199433]]'

const polygonShape = 5
const fields = [['name', 254], ['kind', 32], ['agency', 254]] as const

/**
 * Outlines as the files of a shapefile, by their endings (the published technical description of July 1998; attributes as dBASE III in
 * UTF-8). Degrees, WGS 84; shells run clockwise, holes the other way. A name is cut at 254 bytes, all that the format holds.
 */
export function shapefileOf(outlines: readonly WrittenOutline[]): Record<'shp' | 'shx' | 'dbf', Uint8Array> & Record<'prj' | 'cpg', string> {
  const records = outlines.map(({ geometry }) => record(polygonsOf(outlineForFile(geometry)).flatMap(([shell, ...holes]) => [turned(shell!, true), ...holes.map(hole => turned(hole, false))])))
  const size = records.reduce((sum, { bytes }) => sum + 8 + bytes.byteLength, 100)
  const shp = header(size, records)
  const shx = header(100 + 8 * records.length, records)
  let at = 100
  records.forEach(({ bytes }, k) => {
    for (const [view, place, words] of [[shx, 100 + 8 * k, at / 2], [shp, at, k + 1]] as const) {
      view.setInt32(place, words)
      view.setInt32(place + 4, bytes.byteLength / 2)
    }
    new Uint8Array(shp.buffer).set(bytes, at + 8)
    at += 8 + bytes.byteLength
  })
  return { shp: new Uint8Array(shp.buffer), shx: new Uint8Array(shx.buffer), dbf: attributes(outlines), prj: wgs84Prj, cpg: 'UTF-8' }
}

interface ShapeRecord { bytes: Uint8Array, box: Box }
/** West, south, east, north in degrees. */
type Box = [number, number, number, number]

function record(rings: readonly Position[][]): ShapeRecord {
  const points = rings.reduce((sum, ring) => sum + ring.length, 0)
  const view = new DataView(new ArrayBuffer(44 + 4 * rings.length + 16 * points))
  const box = around(rings.flat())
  view.setInt32(0, polygonShape, true)
  box.forEach((value, k) => view.setFloat64(4 + 8 * k, value, true))
  view.setInt32(36, rings.length, true)
  view.setInt32(40, points, true)
  let point = 0
  rings.forEach((ring, k) => {
    view.setInt32(44 + 4 * k, point, true)
    for (const [lon, lat] of ring) {
      const at = 44 + 4 * rings.length + 16 * point++
      view.setFloat64(at, lon, true)
      view.setFloat64(at + 8, lat, true)
    }
  })
  return { bytes: new Uint8Array(view.buffer), box }
}

function around(points: readonly (readonly [number, number])[]): Box {
  return points.reduce<Box>(([west, south, east, north], [x, y]) => [Math.min(west, x), Math.min(south, y), Math.max(east, x), Math.max(north, y)], [Infinity, Infinity, -Infinity, -Infinity])
}

function header(bytes: number, records: readonly ShapeRecord[]): DataView {
  const view = new DataView(new ArrayBuffer(bytes))
  view.setInt32(0, 9994)
  view.setInt32(24, bytes / 2)
  view.setInt32(28, 1000, true)
  view.setInt32(32, polygonShape, true)
  const corners = records.flatMap(({ box }): [number, number][] => [[box[0], box[1]], [box[2], box[3]]])
  if (corners.length) around(corners).forEach((value, k) => view.setFloat64(36 + 8 * k, value, true))
  return view
}

/** The ring clockwise or the other way, by the sign of its area in the plane. */
function turned(ring: readonly Position[], clockwise: boolean): Position[] {
  const doubled = ring.reduce((sum, [x, y], k) => k === 0 ? 0 : sum + (x - ring[k - 1]![0]) * (y + ring[k - 1]![1]), 0)
  return (doubled > 0) === clockwise ? [...ring] : [...ring].reverse()
}

function attributes(outlines: readonly WrittenOutline[]): Uint8Array {
  const head = 32 + 32 * fields.length + 1
  const width = fields.reduce((sum, [, bytes]) => sum + bytes, 1)
  const out = new Uint8Array(head + width * outlines.length + 1).fill(0x20, head)
  const view = new DataView(out.buffer)
  // The date of the last change is a required field; a fixed one keeps the bytes the same for the same outlines.
  out.set([3, 100, 1, 1])
  view.setUint32(4, outlines.length, true)
  view.setUint16(8, head, true)
  view.setUint16(10, width, true)
  fields.forEach(([name, bytes], k) => {
    out.set(new TextEncoder().encode(`${name.padEnd(11, '\0')}C`), 32 + 32 * k)
    out[32 + 32 * k + 16] = bytes
  })
  out[head - 1] = 0x0D
  outlines.forEach((outline, row) => {
    let at = head + width * row + 1
    for (const [name, bytes] of fields) {
      new TextEncoder().encodeInto(outline[name] ?? '', out.subarray(at, at + bytes))
      at += bytes
    }
  })
  out[out.length - 1] = 0x1A
  return out
}
