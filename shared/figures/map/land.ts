import { feature } from 'topojson-client'
import type { FeatureCollection, Feature } from 'geojson'
import type { GeometryCollection, Topology } from 'topojson-specification'

/** Land of a world-atlas topology (Natural Earth), for mapFigure. d3-geo reads its rings, stitched across ±180°, as they are. */
export function landOf(topology: unknown): FeatureCollection | Feature {
  const atlas = topology as Topology<{ land: GeometryCollection }>
  return feature(atlas, atlas.objects.land)
}

/** The same with inland seas filled: the ocean function counts the Caspian as land. */
export function landWithoutSeas(topology: unknown): FeatureCollection {
  const land = landOf(topology)
  const features = land.type === 'FeatureCollection' ? land.features : [land]
  return {
    type: 'FeatureCollection',
    features: features.map((part): Feature => {
      const { geometry } = part
      if (geometry.type === 'Polygon') return { ...part, geometry: { ...geometry, coordinates: geometry.coordinates.slice(0, 1) } }
      if (geometry.type === 'MultiPolygon') return { ...part, geometry: { ...geometry, coordinates: geometry.coordinates.map(rings => rings.slice(0, 1)) } }
      return part
    }),
  }
}
