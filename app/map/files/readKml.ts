import { kml } from '@tmcw/togeojson'
import { DOMParser, ParseError } from '@xmldom/xmldom'
import type { Feature, Geometry, Position } from 'geojson'
import { limits, readOutlineFeatures } from '#shared/geo/outline'
import { InputError } from '#shared/types/issue'
import type { ReadOutlines } from '../readPasted'

/** Outlines of a KML text, named as its placemarks are. KML is WGS 84 longitude and latitude. Throws InputError. */
export function readKml(text: string): ReadOutlines {
  if (text.length > limits.bytes) throw new InputError('The text is over 8 MiB. Simplify the outline and try again.', [], 413)
  const { features } = kml(parse(text) as unknown as Document)
  const areas = features.map((feature): Feature<Geometry | null> => ({ ...feature, geometry: feature.geometry && joined(feature.geometry) }))
  return { ...readOutlineFeatures({ type: 'FeatureCollection', features: areas }), typed: false }
}

function parse(text: string) {
  let root
  try {
    root = new DOMParser({ onError: level => { if (level !== 'warning') throw new ParseError('not well-formed') } }).parseFromString(text.replace(/^\uFEFF/, ''), 'text/xml')
  }
  catch {
    throw new InputError('This looks like KML but is not well-formed XML.', [], 422)
  }
  if (root.documentElement?.localName !== 'kml') throw new InputError(`This is XML but not KML: its root is “${root.documentElement?.localName?.slice(0, 40)}”.`, [], 422)
  return root
}

/** The polygons of a MultiGeometry as one outline; anything else as it is. */
function joined(geometry: Geometry): Geometry {
  if (geometry.type !== 'GeometryCollection') return geometry
  const polygons = geometry.geometries.map(joined).flatMap((part): Position[][][] =>
    part.type === 'Polygon' ? [part.coordinates] : part.type === 'MultiPolygon' ? part.coordinates : [])
  return polygons.length ? { type: 'MultiPolygon', coordinates: polygons } : geometry
}
