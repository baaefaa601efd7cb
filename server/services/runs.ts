import { eq } from 'drizzle-orm'
import type { RegionSource } from '#shared/api/runSchemas'
import { circularityWarnings } from '#shared/observed/circularity'
import { compareRun } from '#shared/earth/time/compare'
import type { Principal } from '#shared/permissions'
import type { Comparison, RunInput, RunResult } from '#shared/types/run'
import { schema } from '../database/client'
import { Problem } from '../utils/problem'
import { authorise } from './change'
import type { Context } from './context'
import { basesOfRegions } from './seriesBases'
import { freezeInput, scenarioRow } from './scenarios'
import { loadObserved, observedRow } from './observed'
import { versionsOf } from './seriesStore'

export type RunRow = typeof schema.run.$inferSelect

export function runRow(context: Context, id: string): RunRow {
  const row = context.db.select().from(schema.run).where(eq(schema.run.id, id)).get()
  if (!row) throw new Problem(404, 'not-found', 'There is no such run.')
  return row
}

export const runResultOf = (row: RunRow) => JSON.parse(row.result) as RunResult
export const runInputOf = (row: RunRow) => (JSON.parse(row.input) as { input: RunInput }).input

export function sourcesOf(input: RunInput): RegionSource[] {
  return input.regions.map(r => ({
    key: r.key, name: r.name, kind: r.kind, agency: r.agency, outlineSha256: r.outlineSha256, seriesVersion: r.seriesVersion,
    seriesSha256: r.seriesSha256, source: r.source, geometry: r.geometry, ...(r.facts ? { facts: r.facts } : {}),
    ...(r.fractionToOcean === undefined ? {} : { fractionToOcean: r.fractionToOcean, restTo: r.restTo ?? null }),
    ...(r.groundedFraction === undefined ? {} : { groundedFraction: r.groundedFraction }),
  }))
}

export function startRun(context: Context, principal: Principal | null, scenarioId: string, revision: number) {
  const row = scenarioRow(context, scenarioId)
  const actor = authorise(principal, 'run.create', { workspaceId: row.workspaceId, ownerId: row.createdBy })
  if (row.revision !== revision) throw new Problem(409, 'revision', `Somebody changed this scenario meanwhile: it is at revision ${row.revision}, you had ${revision}. Load it again before you run it.`)
  return context.jobs.startRun(actor, row.workspaceId, { scenarioId, name: row.name, input: freezeInput(context, row) })
}

const comparisons = new WeakMap<Context, Map<string, Comparison>>()

/** The run beside an observed series of its workspace. Both are immutable, so the answer is kept. */
export function compareWith(context: Context, row: RunRow, observedId: string, zonalTides: 'none' | 'all' = 'none'): Comparison {
  const observed = observedRow(context, observedId)
  if (observed.workspaceId !== row.workspaceId) throw new Problem(404, 'not-found', 'There is no such observed series.')
  const kept = comparisons.get(context) ?? new Map<string, Comparison>()
  comparisons.set(context, kept)
  const key = `${row.inputSha256} ${row.resultSha256} ${versionsOf(context, observedId)[0]!.dataSha256} ${zonalTides}`
  let comparison = kept.get(key)
  if (!comparison) {
    const series = loadObserved(context, observedId)
    comparison = compareRun(runResultOf(row), series, { zonalTides })
    // Agreement with what a mass was made from confirms nothing.
    comparison.warnings.push(...circularityWarnings(series.from === 'gravity' ? 'gravity' : 'rotation', basesOfRegions(context, row.workspaceId, runInputOf(row))))
    if (kept.size > 50) kept.clear()
    kept.set(key, comparison)
  }
  return comparison
}

export function readComparison(context: Context, principal: Principal | null, id: string, observedId: string, zonalTides: 'none' | 'all') {
  const row = runRow(context, id)
  authorise(principal, 'run.read', { workspaceId: row.workspaceId })
  return compareWith(context, row, observedId, zonalTides)
}
