declare module 'geojson-vt' {
  export interface VectorTile { features: unknown[] }
  export default function geojsonvt(data: unknown, options: Record<string, number>): { getTile(z: number, x: number, y: number): VectorTile | null }
}

declare module 'vt-pbf' {
  import type { VectorTile } from 'geojson-vt'

  const vtpbf: { fromGeojsonVt(layers: Record<string, VectorTile>, options: { version: number, extent: number }): Uint8Array }
  export default vtpbf
}
