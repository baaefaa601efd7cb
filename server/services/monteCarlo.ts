import { and, desc, eq, sql } from 'drizzle-orm'
import { monteCarloInputOf, monteCarloCheck } from '#shared/earth/time/monteCarloRun'
import type { MonteCarloResult } from '#shared/earth/time/monteCarlo'
import type { Principal } from '#shared/permissions'
import { schema } from '../database/client'
import type { MonteCarloTask } from '../workers/monteCarlo'
import { authorise } from './change'
import type { Context } from './context'
import type { JobView } from './jobs'
import { runInputOf, runResultOf, runRow } from './runs'
import type { Actor } from './runStore'

export interface MonteCarloJobInput { actor: Actor, runId: string, members: number, seed: number }

export function startMonteCarlo(context: Context, principal: Principal | null, runId: string, { members, seed }: { members: number, seed: number }): JobView {
  const row = runRow(context, runId)
  const actor = authorise(principal, 'run.create', { workspaceId: row.workspaceId, ownerId: principal?.userId })
  return context.jobs.start(actor, row.workspaceId, 'monte-carlo', { runId, members, seed })
}

export function monteCarloTask(context: Context, { runId, members, seed }: MonteCarloJobInput): MonteCarloTask {
  const row = runRow(context, runId)
  return { ask: 'trends', input: { series: monteCarloInputOf(runInputOf(row), runResultOf(row)), members, seed } }
}

/** The latest check that was finished; it is no part of the run, which stays as it is. */
export function readMonteCarlo(context: Context, principal: Principal | null, runId: string) {
  const row = runRow(context, runId)
  authorise(principal, 'run.read', { workspaceId: row.workspaceId })
  const job = context.db.select().from(schema.job)
    .where(and(eq(schema.job.workspaceId, row.workspaceId), eq(schema.job.kind, 'monte-carlo'), eq(schema.job.state, 'done'), sql`json_extract(${schema.job.input}, '$.runId') = ${runId}`))
    .orderBy(desc(schema.job.id)).limit(1).get()
  return { latest: job ? { createdAt: job.createdAt, ...monteCarloCheck(JSON.parse(job.answer!) as MonteCarloResult, runResultOf(row)) } : null }
}
