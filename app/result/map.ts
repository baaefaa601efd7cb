import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'
import type { MapRegion } from '#shared/figures/map/mapFigure'
import type { Outline } from '#shared/types/domain'
import type { RunResult } from '#shared/types/run'

type Sources = AnswerOf<typeof contracts.runRead>['sources']

/** The regions of a run for its map: those that are switched off are drawn without a sign. */
export function mapRegions(result: RunResult, sources: Sources): MapRegion[] {
  const rows = new Map(result.regions.map(row => [row.key, row]))
  return sources.map(({ key, name, geometry }) => {
    const row = rows.get(key)
    return { name, geometry: geometry as Outline, massGtPerYear: row && row.scale !== 0 ? row.massGtPerYear?.value ?? null : null }
  })
}
