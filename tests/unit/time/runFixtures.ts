import type { Polygon } from '../../../shared/types/domain.ts'
import type { RunInput, RunRegionInput } from '../../../shared/types/run.ts'

export const box = (west: number, south: number, east: number, north: number): Polygon => ({
  type: 'Polygon',
  coordinates: [[[west, south], [east, south], [east, north], [west, north], [west, south]]]
})

/** Monthly epochs at the middles of months from January of a year on, near enough: every 30.4375 d. */
export const everyMonth = (count: number, from = 52289.5): number[] => Array.from({ length: count }, (_, i) => from + i * 30.4375)

/** A region of a run with a straight loss of `rate` Gt per year, unless `series` says otherwise. */
export function region(key: string, geometry: Polygon, rate: number, more: Partial<RunRegionInput> = {}): RunRegionInput {
  const mjd = more.series?.mjd ?? everyMonth(61)
  return {
    key,
    name: `Region ${key}`,
    kind: 'ice-sector',
    agency: 'Invented agency',
    geometry,
    outlineSha256: '0'.repeat(64),
    seriesVersion: 1,
    seriesSha256: '0'.repeat(64),
    source: 'invented',
    series: { mjd, massGt: mjd.map(t => rate * (t - 53000) / 365.25), sigmaGt: mjd.map(() => 5), sharedRates: [] },
    scale: 1,
    ...more
  }
}

export function runInput(regions: RunRegionInput[], more: Partial<RunInput> = {}): RunInput {
  return {
    schemaVersion: 1,
    settings: { ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled', fromMjd: null, toMjd: null, maxGapDays: 62 },
    regions,
    background: [],
    restOfWorld: null,
    ...more
  }
}

/** Repeatable noise: normal numbers from a 32-bit seed (mulberry32, Box–Muller). */
export function normals(seed: number): () => number {
  let state = seed >>> 0
  const uniform = (): number => {
    state = state + 0x6D2B79F5 >>> 0
    let t = Math.imul(state ^ state >>> 15, 1 | state)
    t = t + Math.imul(t ^ t >>> 7, 61 | t) ^ t
    return ((t ^ t >>> 14) >>> 0) / 4294967296
  }
  return () => Math.sqrt(-2 * Math.log(1 - uniform())) * Math.cos(2 * Math.PI * uniform())
}
