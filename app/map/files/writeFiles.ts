import type { WrittenOutline } from '#shared/geo/forFile'

export interface OutlineFormat { name: string, ending: string, type: string, write: (outlines: readonly WrittenOutline[]) => Promise<string | Uint8Array> }

const texts = () => import('#shared/geo/writeOutline')

/** The formats that outlines are written in, all in this browser; what is large is loaded when it is asked for. */
export const outlineFormats: readonly OutlineFormat[] = [
  { name: 'GeoJSON', ending: 'geojson', type: 'application/geo+json', write: async outlines => (await texts()).outlinesAsGeoJson(outlines) },
  { name: 'shapefile', ending: 'zip', type: 'application/zip', write: zippedShapefile },
  { name: 'GeoPackage', ending: 'gpkg', type: 'application/geopackage+sqlite3', write: async outlines => (await import('./writeGeoPackage')).geoPackageOf(outlines) },
  { name: 'KML', ending: 'kml', type: 'application/vnd.google-earth.kml+xml', write: async outlines => (await texts()).outlinesAsKml(outlines) },
  { name: 'WKT', ending: 'wkt', type: 'text/plain', write: async outlines => (await texts()).outlinesAsWkt(outlines) },
]

async function zippedShapefile(outlines: readonly WrittenOutline[]): Promise<Uint8Array> {
  const [{ strToU8, zipSync }, { shapefileOf }] = await Promise.all([import('fflate'), import('#shared/geo/writeShapefile')])
  const files = Object.entries(shapefileOf(outlines)).map(([ending, content]) => [`outlines.${ending}`, typeof content === 'string' ? strToU8(content) : content] as const)
  return zipSync(Object.fromEntries(files), { mtime: '2000-01-01T00:00:00' })
}
