import type { Outline, Position } from '../types/domain.ts'
import { polygonsOf } from './parts.ts'

/** An outline as a GeoJSON feature (RFC 7946) with its name. */
export function outlineAsGeoJson(outline: Outline, name: string): string {
  return `${JSON.stringify({ type: 'Feature', properties: { name }, geometry: outline }, null, 1)}\n`
}

/** An outline as well-known text, longitude first. */
export function outlineAsWkt(outline: Outline): string {
  const polygons = polygonsOf(outline).map(rings => `(${rings.map(ring => `(${ring.map(([lon, lat]) => `${lon} ${lat}`).join(', ')})`).join(', ')})`)
  return outline.type === 'Polygon' ? `POLYGON ${polygons[0]}\n` : `MULTIPOLYGON (${polygons.join(', ')})\n`
}

/** An outline as KML 2.2 (OGC 07-147r2) with its name. */
export function outlineAsKml(outline: Outline, name: string): string {
  const boundary = (kind: 'outer' | 'inner', ring: readonly Position[]) =>
    `<${kind}BoundaryIs><LinearRing><coordinates>${ring.map(([lon, lat]) => `${lon},${lat}`).join(' ')}</coordinates></LinearRing></${kind}BoundaryIs>`
  const polygons = polygonsOf(outline).map(([shell, ...holes]) => `<Polygon>${boundary('outer', shell!)}${holes.map(hole => boundary('inner', hole)).join('')}</Polygon>`)
  const geometry = polygons.length === 1 ? polygons[0] : `<MultiGeometry>${polygons.join('')}</MultiGeometry>`
  return `<?xml version="1.0" encoding="UTF-8"?>\n<kml xmlns="http://www.opengis.net/kml/2.2"><Document><Placemark><name>${escapeXml(name)}</name>${geometry}</Placemark></Document></kml>\n`
}

function escapeXml(text: string): string {
  return text.replace(/[&<>]/g, sign => sign === '&' ? '&amp;' : sign === '<' ? '&lt;' : '&gt;')
}
