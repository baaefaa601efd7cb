import { feature } from 'topojson-client'
import type { FeatureCollection, Feature } from 'geojson'
import type { GeometryCollection, Topology } from 'topojson-specification'

/** Land of a world-atlas topology (Natural Earth), for mapFigure. d3-geo reads its rings, stitched across ±180°, as they are. */
export function landOf(topology: unknown): FeatureCollection | Feature {
  const atlas = topology as Topology<{ land: GeometryCollection }>
  return feature(atlas, atlas.objects.land)
}
