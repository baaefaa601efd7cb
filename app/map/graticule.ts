import type { FeatureCollection } from 'geojson'

/** Meridians and parallels every `stepDeg` degrees, up to where the tiles end. */
export function graticule(stepDeg = 30): FeatureCollection {
  const lines: [number, number][][] = []
  for (let lon = -180; lon < 180; lon += stepDeg) {
    lines.push(Array.from({ length: 35 }, (_, k) => [lon, -85 + 5 * k]))
  }
  for (let lat = -90 + stepDeg; lat < 90; lat += stepDeg) {
    lines.push(Array.from({ length: 73 }, (_, k) => [-180 + 5 * k, lat]))
  }
  return { type: 'FeatureCollection', features: [{ type: 'Feature', properties: {}, geometry: { type: 'MultiLineString', coordinates: lines } }] }
}
