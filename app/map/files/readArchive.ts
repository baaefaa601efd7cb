import { strFromU8, unzipSync } from 'fflate'
import { InputError } from '#shared/types/issue'
import type { ReadOutlines } from '../readPasted'

/** Unpacked, an archive may hold this much of what is read: it would otherwise fill the browser's memory. */
const mostBytes = 64 * 1024 * 1024

/** Outlines of an archive: a zipped shapefile, or KMZ. Throws InputError. */
export async function readArchive(bytes: Uint8Array): Promise<ReadOutlines> {
  const files = unpack(bytes)
  const shapes = files.filter(file => file.ending === 'shp')
  const kml = files.find(file => file.ending === 'kml')
  if (shapes.length > 1) {
    throw new InputError(`The archive holds ${shapes.length} shapefiles (${shapes.slice(0, 5).map(file => file.name).join(', ')}). Zip the one that is wanted.`, [], 422)
  }
  const [shape] = shapes
  if (shape) {
    const part = (ending: string) => files.find(file => file.ending === ending && file.stem === shape.stem)?.bytes
    const text = (ending: string) => {
      const found = part(ending)
      return found && strFromU8(found)
    }
    const { readShapefile } = await import('./readShapefile')
    return readShapefile({ shp: shape.bytes, dbf: part('dbf'), prj: text('prj'), cpg: text('cpg') })
  }
  if (kml) return (await import('./readKml')).readKml(strFromU8(kml.bytes))
  throw new InputError('The archive holds neither a shapefile (.shp) nor KML.', [], 422)
}

interface Unpacked { name: string, stem: string, ending: string, bytes: Uint8Array }

function unpack(bytes: Uint8Array): Unpacked[] {
  let sum = 0
  try {
    const found = unzipSync(bytes, {
      filter: ({ name, originalSize }) => {
        if (!/\.(?:shp|dbf|prj|cpg|kml)$/i.test(name) || name.startsWith('__MACOSX/')) return false
        sum += originalSize
        if (sum > mostBytes) throw new InputError('Unpacked, the archive is over 64 MiB. Simplify the outlines and try again.', [], 413)
        return true
      },
    })
    return Object.entries(found).map(([name, content]) => {
      const dot = name.lastIndexOf('.')
      return { name, stem: name.slice(0, dot).toLowerCase(), ending: name.slice(dot + 1).toLowerCase(), bytes: content }
    })
  }
  catch (error) {
    if (error instanceof InputError) throw error
    throw new InputError('The archive is damaged, locked or cut off.', [], 422)
  }
}
