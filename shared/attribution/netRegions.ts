import type { RunRegionResult, RunResult } from '../types/run.ts'

const effects = ['chi1Mas', 'chi2Mas', 'chi3', 'lodMicroseconds', 'barystaticMm', 'deltaJ2'] as const

/**
 * The regions of a run, each with the effect per gigatonne of its whole water: what is kept on land has a row of its own in the
 * result, with effects per gigatonne of the region's series, but it is no cause of its own.
 */
export function netRegions({ regions }: Pick<RunResult, 'regions'>): RunRegionResult[] {
  return regions.filter(region => !region.keptFrom).map((region) => {
    const kept = regions.filter(row => row.keptFrom === region.key)
    if (kept.length === 0) return region
    const perGt = { ...region.perGt }
    for (const effect of effects) for (const row of kept) perGt[effect] += row.perGt[effect]
    return { ...region, perGt }
  })
}
