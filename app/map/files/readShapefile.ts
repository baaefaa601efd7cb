import { open } from 'shapefile'
import { limits, readOutlineFeatures } from '#shared/geo/outline'
import type { Outline } from '#shared/types/domain'
import { InputError } from '#shared/types/issue'
import type { ReadOutlines } from '../readPasted'
import { convertOutline, projectionOf } from './projection'

/** The files of a shapefile, by their endings. */
export interface ShapefileParts { shp: Uint8Array, dbf?: Uint8Array, prj?: string, cpg?: string }

/** Outlines of a shapefile in WGS 84, names from its attributes. Throws InputError: no .prj, a system that is not known, no areas. */
export async function readShapefile({ shp, dbf, prj, cpg }: ShapefileParts): Promise<ReadOutlines> {
  if (!prj) throw new InputError('The archive holds no .prj file, so that the coordinate system of the shapefile is not known. Add it and try again.', [], 422)
  const projection = projectionOf(prj)
  const features: object[] = []
  let leftOut = 0
  const source = await open(buffer(shp), dbf && buffer(dbf), { encoding: encodingOf(cpg) }).catch(() => { throw damaged() })
  for (;;) {
    const { done, value } = await source.read().catch(() => { throw damaged() })
    if (done) break
    const geometry = value.geometry
    if (geometry?.type !== 'Polygon' && geometry?.type !== 'MultiPolygon') {
      leftOut++
      continue
    }
    if (features.length >= limits.outlines) throw new InputError(`There are more than ${limits.outlines} outlines here; at most so many are read at once.`, [], 422)
    features.push({ type: 'Feature', properties: value.properties, geometry: convertOutline(geometry as Outline, projection) })
  }
  if (!features.length) throw new InputError('There is no area in the shapefile.', [], 422)
  const read = readOutlineFeatures({ type: 'FeatureCollection', features })
  return { ...read, leftOut: leftOut + read.leftOut, typed: false }
}

const damaged = () => new InputError('The shapefile is damaged or cut off.', [], 422)

function buffer(bytes: Uint8Array): ArrayBuffer {
  return bytes.buffer.slice(bytes.byteOffset, bytes.byteOffset + bytes.byteLength) as ArrayBuffer
}

/** Encoding that a .cpg names; UTF-8 where there is none. */
function encodingOf(cpg: string | undefined): string {
  const name = cpg?.trim() ?? ''
  const label = /^\d+$/.test(name) ? (name === '65001' ? 'utf-8' : `windows-${name}`) : name
  try {
    return new TextDecoder(label || 'utf-8').encoding
  }
  catch {
    throw new InputError(`The names in the shapefile are written in ${name.slice(0, 40)}, which is not read here. Save it in UTF-8.`, [], 422)
  }
}
