import topology from 'world-atlas/land-50m.json'
import { print } from '#shared/design/tokens'
import { landOf } from '#shared/figures/map/land'
import { mapFigure, type MapData } from '#shared/figures/map/mapFigure'
import { element } from '#shared/figures/svg'
import type { ReportData } from './types'

/** What the map of a run shows: plain data, which goes to a worker as it is. */
export type RunMap = Omit<MapData, 'land'>

/** Drawn at this width in px and set smaller, so that figure text of 12 px comes to 8.4 points. */
const drawn = 700

export function runMap({ result, sources }: Pick<ReportData, 'result' | 'sources'>): RunMap {
  const masses = new Map(result.regions.map(region => [region.key, region.scale === 0 ? null : region.massGtPerYear?.value ?? null]))
  return {
    regions: sources.map(({ key, name, geometry }) => ({ name, geometry, massGtPerYear: masses.get(key) ?? null })),
    driftDegEast: result.total.directionDegEast?.value ?? null,
  }
}

export function drawMap(map: RunMap): string {
  return mapFigure({ ...map, land: landOf(topology) }, { width: drawn, theme: 'print', id: 'map' }).svg
}

/** The map as a file of its own: on paper, so that it reads wherever it is put. */
export function mapFile(map: RunMap): string {
  return drawMap(map).replace('</desc>', `</desc>${paper}`)
}

const paper = element('rect', { width: '100%', height: '100%', fill: print.paper })

/** Size in px, and free rim, of a page's picture in messages and search results. */
export const pictureSize = { width: 1200, height: 630, rim: 30 } as const

/** The map as large as it fits on a sheet of `pictureSize`. */
export function pictureSheet(map: RunMap): string {
  const { width, height, rim } = pictureSize
  const placed = drawMap(map).replace(/^<svg xmlns="[^"]*" width="[\d.]+" height="[\d.]+"/, `<svg x="${rim}" y="${rim}" width="${width - 2 * rim}" height="${height - 2 * rim}"`)
  return element('svg', { xmlns: 'http://www.w3.org/2000/svg', width, height }, paper + placed)
}
