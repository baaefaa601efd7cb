import { inMemory } from '../../../shared/grids/csvGrid.ts'
import type { GridFile } from '../../../shared/grids/gridFile.ts'
import type { Outline, Position } from '../../../shared/types/domain.ts'

export interface MadeGrid {
  lat: number[]
  lon: number[]
  /** Days since 2002-01-01. */
  days: number[]
  /** Height by latitude, longitude and epoch. */
  height: (lat: number, lon: number, epoch: number) => number
  units?: string
  /** Names of the dimensions from the slowest to the fastest; default time, lat, lon. */
  order?: ('time' | 'lat' | 'lon')[]
}

/** A made-up grid in memory. */
export function madeGrid({ lat, lon, days, height, units = 'm', order = ['time', 'lat', 'lon'] }: MadeGrid): GridFile {
  const axes = { time: days, lat, lon }
  const dimensions = order.map(name => ({ name, size: axes[name].length }))
  const values = new Float64Array(lat.length * lon.length * days.length)
  let at = 0
  const index = { time: 0, lat: 0, lon: 0 }
  for (index[order[0]!] = 0; index[order[0]!] < dimensions[0]!.size; index[order[0]!]++) {
    for (index[order[1]!] = 0; index[order[1]!] < dimensions[1]!.size; index[order[1]!]++) {
      for (index[order[2]!] = 0; index[order[2]!] < dimensions[2]!.size; index[order[2]!]++) values[at++] = height(lat[index.lat]!, lon[index.lon]!, index.time)
    }
  }
  const axis = (name: 'time' | 'lat' | 'lon', unit: string) => inMemory(name, [{ name, size: axes[name].length }], Float64Array.from(axes[name]), { units: unit })
  return { format: 'csv', attributes: {}, variables: [axis('time', 'days since 2002-01-01'), axis('lat', 'degrees_north'), axis('lon', 'degrees_east'), inMemory('height', dimensions, values, { units })] }
}

/** Middles of equal cells from one bound to the other. */
export function middles(from: number, to: number, step: number): number[] {
  const n = Math.round((to - from) / step)
  return Array.from({ length: n }, (_, i) => from + (i + 0.5) * step)
}

/** A wavy ring of many vertices about a place. */
export function wavy(lon: number, lat: number, radius: number, vertices = 60): Outline {
  const ring = Array.from({ length: vertices }, (_, i): Position => {
    const angle = 2 * Math.PI * i / vertices
    const r = radius * (1 + 0.3 * Math.cos(5 * angle))
    return [lon + r * Math.cos(angle), lat + r * Math.sin(angle)]
  })
  return { type: 'Polygon', coordinates: [[...ring, ring[0]!]] }
}

/** A box of longitude and latitude. */
export function box(west: number, south: number, east: number, north: number): Outline {
  return { type: 'Polygon', coordinates: [[[west, south], [east, south], [east, north], [west, north], [west, south]]] }
}
