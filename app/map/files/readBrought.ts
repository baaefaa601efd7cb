import type { CoordinateOrder } from '#shared/geo/parseCoordinates'
import { looksLikeWkt, readWkt } from '#shared/geo/readWkt'
import { InputError } from '#shared/types/issue'
import { readPasted, type ReadOutlines } from '../readPasted'

/** Outlines of a text: GeoJSON, KML, well-known text, or coordinates line by line, told apart by how it begins. Throws InputError. */
export async function readText(text: string, order: CoordinateOrder): Promise<ReadOutlines> {
  if (/^\uFEFF?\s*</.test(text)) return (await import('./readKml')).readKml(text)
  if (looksLikeWkt(text)) return { ...readWkt(text), typed: false }
  return readPasted(text, order)
}

const sqliteHead = new TextEncoder().encode('SQLite format 3\0')

/** Outlines of a file by its content: what `readText` reads, a zipped shapefile, a GeoPackage, or KMZ. Throws InputError. */
export async function readBytes(bytes: Uint8Array, order: CoordinateOrder): Promise<ReadOutlines> {
  const starts = (...head: number[]) => head.every((byte, k) => bytes[k] === byte)
  if (starts(0x50, 0x4B)) return (await import('./readArchive')).readArchive(bytes)
  if (starts(...sqliteHead)) return (await import('./readGeoPackage')).readGeoPackage(bytes)
  if (starts(0, 0, 0x27, 0x0A)) throw new InputError('This is one file of a shapefile. Zip it together with its .dbf, .prj and .shx and bring the archive.', [], 422)
  return readText(new TextDecoder().decode(bytes), order)
}
