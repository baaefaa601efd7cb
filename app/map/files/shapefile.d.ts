/** The part of the reader that is used; the package brings no types. */
declare module 'shapefile' {
  import type { Feature } from 'geojson'

  interface Source { read: () => Promise<{ done: true, value: undefined } | { done: false, value: Feature }> }
  export function open(shp: ArrayBuffer, dbf?: ArrayBuffer, options?: { encoding?: string }): Promise<Source>
}
