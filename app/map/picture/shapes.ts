import type { Feature, FeatureCollection, Geometry } from 'geojson'
import type { Position } from '#shared/types/domain'
import { Path } from './path'
import type { Rings } from './trace'

/** A feature made ready to be traced. */
export interface Shape { properties: Record<string, unknown>, polygons: Rings[], lines: Path[], points: Path[] }

/** What is costly of a geometry, kept by its coordinates: a feature whose colour alone changes is not made ready anew. */
const ready = new WeakMap<object, Omit<Shape, 'properties'>>()

export function shapesOf({ features }: FeatureCollection): Shape[] {
  return features.map(shapeOf)
}

export function shapeOf({ geometry, properties }: Feature): Shape {
  const coordinates = (geometry as Exclude<Geometry, { type: 'GeometryCollection' }>).coordinates
  let known = ready.get(coordinates)
  if (!known) ready.set(coordinates, known = geometryOf(geometry))
  return { ...known, properties: properties ?? {} }
}

function geometryOf(geometry: Geometry): Omit<Shape, 'properties'> {
  const path = (places: unknown): Path => new Path(places as Position[])
  const none = { polygons: [], lines: [], points: [] }
  switch (geometry.type) {
    case 'Polygon': return { ...none, polygons: [geometry.coordinates.map(path)] }
    case 'MultiPolygon': return { ...none, polygons: geometry.coordinates.map(rings => rings.map(path)) }
    case 'LineString': return { ...none, lines: [path(geometry.coordinates)] }
    case 'MultiLineString': return { ...none, lines: geometry.coordinates.map(path) }
    case 'Point': return { ...none, points: [path([geometry.coordinates])] }
    case 'MultiPoint': return { ...none, points: geometry.coordinates.map(place => path([place])) }
    case 'GeometryCollection': return none
  }
}
