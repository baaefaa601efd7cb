import proj4 from 'proj4'
import type { Outline, Position } from '#shared/types/domain'
import { InputError } from '#shared/types/issue'

/** Takes coordinates of a file to WGS 84 longitude and latitude. */
export interface Projection { name: string, geographic: boolean, toLonLat: (point: readonly number[]) => Position }

/**
 * The coordinate system of a .prj text (well-known text). Systems on the WGS 84 or GRS 80 ellipsoid (WGS 84, ETRS89, NAD83, …) are taken as
 * WGS 84, which differs by a metre or two; on another ellipsoid the text must say how it lies (TOWGS84). Refuses all else by name.
 */
export function projectionOf(prj: string): Projection {
  const name = /^\s*\w+\s*\[\s*"([^"]*)"/.exec(prj)?.[1] ?? 'an unnamed system'
  const refuse = (why: string) => new InputError(`The file is in ${name.slice(0, 80)}, ${why}. Convert it to WGS 84 longitude and latitude first.`, [], 422)
  const ellipsoid = /(?:SPHEROID|ELLIPSOID)\s*\[\s*"[^"]*"\s*,\s*([\d.]+)\s*,\s*([\d.]+)/i.exec(prj)
  const modern = ellipsoid !== null && Number(ellipsoid[1]) === 6378137 && Math.abs(Number(ellipsoid[2]) - 298.2572) < 1e-3
  if (!modern && !/TOWGS84\s*\[/i.test(prj)) throw refuse('and how its datum lies in WGS 84 is not known here')
  const geographic = /^\s*GEOG(?:CS|CRS)/i.test(prj)
  try {
    const converter = proj4(prj.replace(/PROJECTION\["(?:Lambert_)?Cylindrical_Equal_Area"/i, 'PROJECTION["cea"'), 'EPSG:4326')
    const toLonLat = ([x, y]: readonly number[]): Position => {
      const [lon, lat] = converter.forward([x!, y!])
      return [lon!, lat!]
    }
    return { name, geographic, toLonLat: geographic && modern ? ([x, y]) => [x!, y!] : toLonLat }
  }
  catch {
    throw refuse('whose projection is not known here')
  }
}

/** Degrees by which a straight edge of the file may stray from its image between two vertices: about a metre. */
const strayDeg = 1e-5
const mostHalvings = 8
/** Parts of a degree that are kept of what was converted: about 1 cm. */
const kept = 1e7

/** An outline in the file's coordinates as longitude and latitude; where a straight edge of the file bends, vertices are put in. */
export function convertOutline(outline: Outline, { toLonLat, geographic, name }: Projection): Outline {
  const convert = (point: readonly number[]): Position => {
    const [lon, lat] = toLonLat(point)
    if (!Number.isFinite(lon) || !Number.isFinite(lat)) throw new InputError(`The coordinates ${point[0]}, ${point[1]} have no place in ${name}, the system that the file names.`, [], 422)
    if (lon === point[0] && lat === point[1]) return [lon, lat]
    return [Math.round(lon * kept) / kept + 0, Math.round(lat * kept) / kept + 0]
  }
  const ringOf = (ring: readonly Position[]): Position[] => {
    const out: Position[] = []
    ring.forEach((to, k) => {
      const image = convert(to)
      const from = ring[k - 1]
      if (from && !geographic) between(from, out.at(-1)!, to, image, mostHalvings, out)
      out.push(image)
    })
    return out
  }
  const between = (from: Position, fromImage: Position, to: Position, toImage: Position, left: number, out: Position[]): void => {
    const middle: Position = [(from[0] + to[0]) / 2, (from[1] + to[1]) / 2]
    const image = convert(middle)
    const turn = (degrees: number) => degrees - 360 * Math.round(degrees / 360)
    const strayLon = turn(image[0] - fromImage[0] - turn(toImage[0] - fromImage[0]) / 2) * Math.cos(image[1] * Math.PI / 180)
    if (left === 0 || Math.hypot(strayLon, image[1] - (fromImage[1] + toImage[1]) / 2) < strayDeg) return
    between(from, fromImage, middle, image, left - 1, out)
    out.push(image)
    between(middle, image, to, toImage, left - 1, out)
  }
  return outline.type === 'Polygon'
    ? { type: 'Polygon', coordinates: outline.coordinates.map(ringOf) }
    : { type: 'MultiPolygon', coordinates: outline.coordinates.map(rings => rings.map(ringOf)) }
}
