import geojsonvt from 'geojson-vt'
import vtpbf from 'vt-pbf'
import type { LandShapes } from './land.ts'

export const deepestZoom = 5
const extent = 4096

/** Every tile of zoom 0 to 5 as it is written: layers `land` (fill) and `coast` (line), vector tile specification 2. */
export function* makeTiles({ land, coast }: Pick<LandShapes, 'land' | 'coast'>): Generator<{ z: number, x: number, y: number, bytes: Uint8Array }> {
  const options = { maxZoom: deepestZoom, indexMaxZoom: deepestZoom, indexMaxPoints: 0, extent, tolerance: 3, buffer: 64 }
  const landIndex = geojsonvt({ type: 'Feature', properties: {}, geometry: land }, options)
  const coastIndex = geojsonvt({ type: 'Feature', properties: {}, geometry: { type: 'MultiLineString', coordinates: coast } }, options)
  const none = { features: [] }
  for (let z = 0; z <= deepestZoom; z++) {
    for (let x = 0; x < 2 ** z; x++) {
      for (let y = 0; y < 2 ** z; y++) {
        const layers = { land: landIndex.getTile(z, x, y) ?? none, coast: coastIndex.getTile(z, x, y) ?? none }
        yield { z, x, y, bytes: vtpbf.fromGeojsonVt(layers, { version: 2, extent }) }
      }
    }
  }
}
