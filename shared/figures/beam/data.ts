import { formatMeasured, measuredDecimals } from '../../format/measured.ts'
import type { Measured } from '../../types/domain.ts'
import type { RunResult } from '../../types/run.ts'

/** One region on the beam: its effect on the day, and the sign of its mass for the colour. */
export interface BeamItem {
  name: string
  /** µs per year. */
  value: number
  sigma: number | null
  /** Gt per year; its sign chooses loss or gain. */
  mass: number
}

export interface BeamData {
  items: BeamItem[]
  /** The sum of the items with its one-sigma, which is not the root-sum-square where errors are shared. */
  total: { value: number, sigma: number | null }
  /** Unit of all values, e.g. `µs per year`. */
  unit: string
}

const finite = (measured: Measured | null) => measured !== null && Number.isFinite(measured.value) ? measured : null

/** The beam of a run: trends of ΔLOD, regions that are switched off or have no trend left out. */
export function beamData(result: RunResult): BeamData {
  const items = result.regions.flatMap((region) => {
    const lod = finite(region.lodMicrosecondsPerYear)
    return lod && region.scale !== 0
      ? [{ name: region.name, value: lod.value, sigma: lod.sigma, mass: region.massGtPerYear?.value ?? 0 }]
      : []
  })
  const total = finite(result.total.lodMicrosecondsPerYear)
  return { items, total: { value: total?.value ?? 0, sigma: total?.sigma ?? null }, unit: 'µs per year' }
}

/** A beam segment: an item with its place on the axis, head to tail from zero outwards, the largest nearest to the pivot. */
export interface BeamSegment extends BeamItem {
  from: number
  to: number
  figure: string
}

export function beamSegments({ items, total }: BeamData): BeamSegment[] {
  // One decimal more than the sum deserves, so that a small item does not run on.
  const decimals = Number.isFinite(total.value) && total.value !== 0 ? measuredDecimals(total.value, total.sigma) + 1 : undefined
  const ends = { plus: 0, minus: 0 }
  return [...items]
    .filter(item => Number.isFinite(item.value))
    .sort((a, b) => Math.abs(b.value) - Math.abs(a.value))
    .map((item) => {
      const side = item.value < 0 ? 'minus' : 'plus'
      const from = ends[side]
      ends[side] += item.value
      return { ...item, from, to: ends[side], figure: formatMeasured(item.value, item.sigma, { decimals }).text }
    })
}
