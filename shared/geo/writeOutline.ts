import type { Outline, Position } from '../types/domain.ts'
import { outlineForFile, type WrittenOutline } from './forFile.ts'
import { polygonsOf } from './parts.ts'

/** Outlines as GeoJSON (RFC 7946) with name, kind and agency: one is a feature, several are a collection. Degrees, WGS 84. */
export function outlinesAsGeoJson(outlines: readonly WrittenOutline[]): string {
  const features = outlines.map(({ name, kind, agency, geometry }) => ({ type: 'Feature', properties: { name, ...(kind ? { kind } : {}), ...(agency ? { agency } : {}) }, geometry: outlineForFile(geometry) }))
  return `${JSON.stringify(features.length === 1 ? features[0] : { type: 'FeatureCollection', features }, null, 1)}\n`
}

/** Outlines as well-known text, longitude in degrees first, one a line. */
export function outlinesAsWkt(outlines: readonly WrittenOutline[]): string {
  return outlines.map(({ geometry }) => wktOf(outlineForFile(geometry))).join('')
}

function wktOf(outline: Outline): string {
  const polygons = polygonsOf(outline).map(rings => `(${rings.map(ring => `(${ring.map(([lon, lat]) => `${lon} ${lat}`).join(', ')})`).join(', ')})`)
  return outline.type === 'Polygon' ? `POLYGON ${polygons[0]}\n` : `MULTIPOLYGON (${polygons.join(', ')})\n`
}

/** Outlines as KML 2.2 (OGC 07-147r2) with name, kind and agency. Degrees, WGS 84. */
export function outlinesAsKml(outlines: readonly WrittenOutline[]): string {
  return `<?xml version="1.0" encoding="UTF-8"?>\n<kml xmlns="http://www.opengis.net/kml/2.2"><Document>${outlines.map(placemark).join('\n')}</Document></kml>\n`
}

function placemark({ name, kind, agency, geometry: outline }: WrittenOutline): string {
  const boundary = (side: 'outer' | 'inner', ring: readonly Position[]) =>
    `<${side}BoundaryIs><LinearRing><coordinates>${ring.map(([lon, lat]) => `${lon},${lat}`).join(' ')}</coordinates></LinearRing></${side}BoundaryIs>`
  const polygons = polygonsOf(outlineForFile(outline)).map(([shell, ...holes]) => `<Polygon>${boundary('outer', shell!)}${holes.map(hole => boundary('inner', hole)).join('')}</Polygon>`)
  const geometry = polygons.length === 1 ? polygons[0] : `<MultiGeometry>${polygons.join('')}</MultiGeometry>`
  const data = Object.entries({ kind, agency }).flatMap(([key, value]) => value ? [`<Data name="${key}"><value>${escapeXml(value)}</value></Data>`] : [])
  return `<Placemark><name>${escapeXml(name)}</name>${data.length ? `<ExtendedData>${data.join('')}</ExtendedData>` : ''}${geometry}</Placemark>`
}

function escapeXml(text: string): string {
  return text.replace(/[&<>]/g, sign => sign === '&' ? '&amp;' : sign === '<' ? '&lt;' : '&gt;')
}
