import { sixRegions } from './sampleRun.ts'
import type { SampleRegion } from './sampleRun.ts'

const long = 'The great upper & lower <Halcyon> ice dome and its "outlet" w.'

/** Accounts that a figure must bear: many, few, long-named, tiny, one-sided, empty. */
export const hostileRegions: Record<string, SampleRegion[]> = {
  'six regions': sixRegions,
  'one region': [sixRegions[0]!],
  'no regions': [],
  'twelve with long names': Array.from({ length: 12 }, (_, i) => ({
    name: i % 3 ? `Region ${i} of the plain` : long.slice(0, 60),
    mass: i % 4 ? -20 : 15,
    lod: (i % 5 - 1.2) * 0.8 / (1 + i * 0.2),
    chi1: 0.3 * Math.cos(i * 2.1) / (1 + i * 0.1),
    chi2: 0.3 * Math.sin(i * 1.3) / (1 + i * 0.1),
  })),
  'two hundred': Array.from({ length: 200 }, (_, i) => ({ name: `Basin ${i}`, mass: i % 2 ? -1 : 1, lod: Math.sin(i), chi1: Math.cos(i), chi2: Math.sin(2 * i) })),
  'tiny values': sixRegions.map(region => ({ ...region, mass: region.mass * 1e-6, lod: region.lod * 1e-7, chi1: region.chi1 * 1e-7, chi2: region.chi2 * 1e-7 })),
  'huge values': sixRegions.map(region => ({ ...region, lod: region.lod * 1e9, chi1: region.chi1 * 1e9, chi2: region.chi2 * 1e9 })),
  'all gain': sixRegions.map(region => ({ ...region, mass: Math.abs(region.mass), lod: -Math.abs(region.lod), chi1: -region.chi1, chi2: -region.chi2 })),
  'all zero': sixRegions.map(region => ({ ...region, mass: 0, lod: 0, chi1: 0, chi2: 0 })),
  'two that cancel': [{ name: 'West', mass: -5, lod: 1, chi1: 1, chi2: 1 }, { name: 'East', mass: 5, lod: -1, chi1: -1, chi2: -1 }],
  'not a number': sixRegions.map((region, i) => i % 2 ? { ...region, lod: Number.NaN, chi1: Number.NaN } : region),
  'names that are markup': [{ name: '<script>alert(1)</script>&amp;\u0000', mass: -5, lod: 1, chi1: 1, chi2: 1 }, { name: '"\'><svg onload=x>', mass: 5, lod: -3, chi1: -1, chi2: 1 }, { name: '', mass: 1, lod: 2, chi1: 0, chi2: 0 }],
  'other alphabets': [{ name: 'Ледник Северный', mass: -5, lod: 4, chi1: 1, chi2: 1 }, { name: '北の氷床と湖', mass: -5, lod: 2, chi1: -1, chi2: 2 }],
}

export const widths = [280, 340, 560, 820, 1400]
