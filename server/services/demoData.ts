import { isoDateFromMjd, mjdFromIsoDate } from '#shared/earth/time/epochs'
import type { Position, RegionKind } from '#shared/types/domain'

export interface DemoRegion {
  name: string
  kind: RegionKind
  ring: Position[]
  /** What the generator is given: trend, annual amplitude, month of the maximum, noise, all in Gt. */
  trendGtPerYear: number
  accelerationGtPerYear2: number
  annualGt: number
  peakMonth: number
  noiseGt: number
  sharedRates: { source: string, sigmaGtPerYear: number }[]
}

const closed = (ring: Position[]): Position[] => [...ring, ring[0]!]

/** Six invented regions on the real globe. Outlines, names and figures stand for nobody's account. */
export const demoRegions: DemoRegion[] = [
  {
    name: 'Northern ice dome', kind: 'ice-sector', trendGtPerYear: -214, accelerationGtPerYear2: -3, annualGt: 120, peakMonth: 4.5, noiseGt: 28,
    ring: closed([[-44, 60.6], [-48.5, 61.8], [-50.5, 65], [-51.5, 68.8], [-54, 71.2], [-58.5, 75.2], [-66, 76.8], [-62, 80.2], [-45, 82.2], [-30, 82], [-22, 79.4], [-21.5, 75], [-25, 71.5], [-31, 68.6], [-40, 65.2]]),
    sharedRates: [{ source: 'isostatic adjustment model', sigmaGtPerYear: 7 }, { source: 'degree-1 motion', sigmaGtPerYear: 4 }],
  },
  {
    name: 'Southern ice margin', kind: 'ice-sector', trendGtPerYear: -131, accelerationGtPerYear2: -2, annualGt: 45, peakMonth: 9, noiseGt: 34,
    ring: closed([[-135, -74.6], [-118, -74.2], [-102, -74.6], [-90, -73.4], [-80, -75.2], [-84, -78.6], [-98, -80.2], [-118, -80], [-134, -78.2]]),
    sharedRates: [{ source: 'isostatic adjustment model', sigmaGtPerYear: 14 }, { source: 'degree-1 motion', sigmaGtPerYear: 6 }],
  },
  {
    name: 'Corran glaciers', kind: 'glacier-region', trendGtPerYear: -62, accelerationGtPerYear2: 0, annualGt: 70, peakMonth: 5, noiseGt: 14,
    ring: closed([[-153, 60.6], [-149, 62.6], [-143.5, 62.4], [-138.5, 61], [-134.5, 58.9], [-137.6, 58.7], [-141, 60.1], [-146, 60.9], [-150.5, 59.8]]),
    sharedRates: [{ source: 'isostatic adjustment model', sigmaGtPerYear: 4 }],
  },
  {
    name: 'High Weir reservoirs', kind: 'reservoir', trendGtPerYear: 19, accelerationGtPerYear2: 0, annualGt: 22, peakMonth: 10.5, noiseGt: 4,
    ring: closed([[99, 27.4], [103, 26.2], [106, 27.6], [109.5, 29.4], [111.2, 30.4], [110, 31.6], [106.2, 30.9], [102.4, 30.2]]),
    sharedRates: [],
  },
  {
    name: 'Lower Sorrow basin', kind: 'basin', trendGtPerYear: -17, accelerationGtPerYear2: 0.6, annualGt: 60, peakMonth: 4, noiseGt: 15,
    ring: closed([[-122, 36.2], [-121.6, 39.4], [-118.6, 41.4], [-113.6, 40.8], [-109.4, 37.4], [-110.4, 33.6], [-114.6, 32.8], [-118.4, 34.8]]),
    sharedRates: [{ source: 'degree-1 motion', sigmaGtPerYear: 1 }],
  },
  {
    name: 'Tessel Plain aquifer', kind: 'aquifer', trendGtPerYear: -24, accelerationGtPerYear2: 0, annualGt: 55, peakMonth: 9.5, noiseGt: 9,
    ring: closed([[72.6, 29.4], [74.2, 31.9], [76.4, 31.2], [78.6, 29.2], [80.4, 27.4], [79.2, 26], [76.2, 26.8], [73.8, 27.6]]),
    sharedRates: [{ source: 'degree-1 motion', sigmaGtPerYear: 1.5 }],
  },
]

/** Uniform numbers in [0, 1) from a seed: a 32-bit mixing generator, the same everywhere. */
function uniform(seed: number) {
  let state = seed >>> 0
  return () => {
    state = (state + 0x6d2b79f5) >>> 0
    let t = Math.imul(state ^ (state >>> 15), 1 | state)
    t = (t + Math.imul(t ^ (t >>> 7), 61 | t)) ^ t
    return ((t ^ (t >>> 14)) >>> 0) / 4294967296
  }
}

/** Gaussian numbers of mean 0 and variance 1 (Box and Muller, 1958). */
export function gaussian(seed: number) {
  const next = uniform(seed)
  return () => Math.sqrt(-2 * Math.log(1 - next())) * Math.cos(2 * Math.PI * next())
}

export const [first, last] = [2004, 2024]

/** Monthly mass of one region with its one-sigma, as the CSV that a specialist would bring. */
export function demoSeriesCsv(region: DemoRegion, seed: number): string {
  const draw = gaussian(seed)
  const lines = ['# Invented data: made by a seeded generator for the demonstration', 'date,mass (Gt),sigma (Gt)']
  let memory = 0
  for (let month = 0; month < (last - first + 1) * 12; month++) {
    const years = (month + 0.5) / 12
    memory = 0.55 * memory + region.noiseGt * Math.sqrt(1 - 0.55 ** 2) * draw()
    const middle = years - (last - first + 1) / 2
    const mass = region.trendGtPerYear * middle + region.accelerationGtPerYear2 / 2 * (middle ** 2 - 36)
      + region.annualGt * Math.cos(2 * Math.PI * (years - (region.peakMonth - 0.5) / 12)) + memory
    const date = `${first + Math.floor(month / 12)}-${String(month % 12 + 1).padStart(2, '0')}-15`
    lines.push(`${date},${mass.toFixed(2)},${(region.noiseGt * 0.7).toFixed(1)}`)
  }
  return `${lines.join('\n')}\n`
}

/**
 * A synthetic Earth orientation, daily: a drifting pole with a Chandler and an annual circle, a length of day with a slow
 * decadal wander, a season and the fortnightly tide. It looks like the real one; it observes nothing.
 */
export function demoObservedCsv(seed: number): string {
  const lines = ['# Synthetic: made by a seeded generator for the demonstration, no observation', 'mjd,date,x_mas,y_mas,lod_ms,sigma_x,sigma_y,sigma_lod']
  for (const { mjd, x, y, lod } of demoDays(seed)) lines.push(`${mjd},${isoDateFromMjd(mjd)},${x.toFixed(3)},${y.toFixed(3)},${lod.toFixed(4)},0.050,0.050,0.0100`)
  return `${lines.join('\n')}\n`
}

/** Angle, radians, of a wave of some period in days with a phase. */
export const turn = (days: number, period: number, phase: number) => 2 * Math.PI * days / period + phase

/** Days of the synthetic orientation: pole in mas, length of day in ms, and the wander in it that its air makes. */
export function demoDays(seed: number): { mjd: number, x: number, y: number, lod: number, wander: number }[] {
  const draw = gaussian(seed)
  const from = mjdFromIsoDate(`${first}-01-01`)
  const to = mjdFromIsoDate(`${last}-12-31`)
  const list: ReturnType<typeof demoDays> = []
  let slow = 0
  let wander = 0
  for (let mjd = from; mjd <= to; mjd++) {
    const days = mjd - from
    const years = days / 365.25
    slow += 0.0006 * draw()
    wander = 0.97 * wander + 0.011 * draw()
    const x = 60 + 2.1 * years + 145 * Math.cos(turn(days, 433, 0.4)) + 88 * Math.cos(turn(days, 365.25, 2.1)) + 0.05 * draw()
    const y = 335 + 1.4 * years - 145 * Math.sin(turn(days, 433, 0.4)) - 80 * Math.sin(turn(days, 365.25, 2.1)) + 0.05 * draw()
    const lod = 0.72 + 0.42 * Math.sin(turn(days, 5600, 2.4)) - 0.012 * years + slow + 0.34 * Math.cos(turn(days, 365.25, 0.6)) + 0.29 * Math.cos(turn(days, 182.62, 3.6))
      + 0.36 * Math.cos(turn(days, 13.6608, 1)) + 0.19 * Math.cos(turn(days, 27.5546, 2)) + wander
    list.push({ mjd, x, y, lod, wander })
  }
  return list
}
