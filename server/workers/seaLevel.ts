import { contourOf } from '#shared/earth/contour'
import { loadOceanCells } from '#shared/earth/detailedEarthModel'
import { fingerprintAt, fingerprintGrid, fingerprintOf } from '#shared/earth/fingerprint'
import type { OceanCells } from '#shared/earth/oceanCells'
import type { Outline } from '#shared/types/domain'

export interface SeaLevelTask {
  loads: { geometry: Outline, massGt: number }[]
  feedback: boolean
  stepDeg: number
  /** Latitude (geodetic) and east longitude of places to answer for, degrees. */
  places: [number, number][]
}

export interface SeaLevelAnswer {
  degree: number
  barystaticMm: number
  stepDeg: number
  latitudesDeg: number[]
  longitudesDeg: number[]
  seaLevelMm: number[]
  sea: number[]
  places: { latitudeDeg: number, longitudeDeg: number, seaLevelMm: number, relative: number | null }[]
}

let cells: OceanCells | undefined

/** Solves the sea-level equation for the loads and reads it off on a grid and at places. */
export default function seaLevel({ loads, feedback, stepDeg, places }: SeaLevelTask): SeaLevelAnswer {
  cells ??= loadOceanCells()
  const fingerprint = fingerprintOf(loads.map(({ geometry, massGt }) => ({ contour: contourOf(geometry), massGt })), cells, { feedback })
  const grid = fingerprintGrid(fingerprint, cells, stepDeg)
  return {
    degree: fingerprint.degree, barystaticMm: fingerprint.barystaticMm, stepDeg,
    latitudesDeg: [...grid.latitudesDeg], longitudesDeg: [...grid.longitudesDeg],
    seaLevelMm: Array.from(grid.seaLevelMm, v => Math.round(v * 1e5) / 1e5), sea: Array.from(grid.sea, v => Math.round(v * 100) / 100),
    places: places.map(([latitudeDeg, longitudeDeg]) => ({ latitudeDeg, longitudeDeg, ...fingerprintAt(fingerprint, latitudeDeg, longitudeDeg) })),
  }
}
