import { eq } from 'drizzle-orm'
import type { RegionSource } from '#shared/api/runSchemas'
import type { Principal } from '#shared/permissions'
import type { RunInput, RunResult } from '#shared/types/run'
import { schema } from '../database/client'
import { Problem } from '../utils/problem'
import { authorise } from './change'
import type { Context } from './context'
import { freezeInput, scenarioRow } from './scenarios'

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
