import { and, eq, inArray } from 'drizzle-orm'
import type { AttributionReport, AttributionTask } from '#shared/attribution/report'
import { basesOf } from '#shared/observed/circularity'
import type { Principal } from '#shared/permissions'
import { InputError } from '#shared/types/issue'
import type { RunInput } from '#shared/types/run'
import { schema } from '../database/client'
import { Problem } from '../utils/problem'
import type { AttributionAnswer } from '../workers/attribution'
import { correctionsOf } from './angularMomentum'
import { authorise } from './change'
import type { Context } from './context'
import { canonicalJson } from './hash'
import { loadObserved, observedRow } from './observed'
import { chainOfText } from './observedChain'
import { runInputOf, runResultOf, runRow } from './runs'
import { versionsOf } from './seriesStore'

interface Question { observed: string, chain?: string, prior: number }

const most = 8
const kept = new WeakMap<Context, Map<string, Promise<AttributionReport>>>()

/** A run attributed to an observed series of its workspace; stores nothing. All that it depends on is immutable, so answers are kept for a while. */
export async function attributionOfRun(context: Context, principal: Principal | null, id: string, question: Question): Promise<AttributionReport> {
  const row = runRow(context, id)
  authorise(principal, 'run.read', { workspaceId: row.workspaceId })
  const observed = observedRow(context, question.observed)
  if (observed.workspaceId !== row.workspaceId) throw new Problem(404, 'not-found', 'There is no such observed series.')
  const chain = chainOfText(question.chain)
  const corrections = correctionsOf(context, row.workspaceId, chain)
  const cache = kept.get(context) ?? new Map<string, Promise<AttributionReport>>()
  kept.set(context, cache)
  const key = `${row.resultSha256} ${versionsOf(context, observed.id)[0]!.id} ${question.prior} ${Object.keys(corrections).join()} ${canonicalJson(chain)}`
  let answer = cache.get(key)
  if (!answer) {
    if (cache.size >= most) cache.clear()
    const input = runInputOf(row)
    // Outlines are not asked for here, and are most of what a run holds.
    const light = { ...input, regions: input.regions.map(region => ({ ...region, geometry: { type: 'Polygon' as const, coordinates: [] } })) }
    answer = attributed(context, { input: light, result: runResultOf(row), series: loadObserved(context, observed.id), chain, corrections, bases: basesOfRegions(context, row.workspaceId, input), priorSigma: question.prior })
    answer.catch(() => cache.delete(key))
    cache.set(key, answer)
  }
  return await answer
}

async function attributed(context: Context, task: AttributionTask): Promise<AttributionReport> {
  const answer = await context.jobs.compute<AttributionAnswer>('attribution', task)
  if ('fault' in answer) throw new InputError(answer.fault.message, answer.fault.issues)
  return answer.report
}

/** What the masses were made from, as the notes on the very series versions say that the run froze. */
function basesOfRegions(context: Context, workspaceId: string, { regions }: RunInput): AttributionTask['bases'] {
  const versions = context.db.select({ sha256: schema.seriesVersion.dataSha256, independence: schema.seriesVersion.independence, source: schema.seriesVersion.source })
    .from(schema.seriesVersion).innerJoin(schema.series, eq(schema.series.id, schema.seriesVersion.seriesId))
    .where(and(eq(schema.series.workspaceId, workspaceId), inArray(schema.seriesVersion.dataSha256, regions.map(region => region.seriesSha256)))).all()
  return regions.filter(region => region.scale !== 0).map(({ key, name, seriesSha256 }) => ({
    key, name, bases: [...new Set(versions.filter(version => version.sha256 === seriesSha256).flatMap(({ independence, source }) => basesOf(`${independence}. ${source}`)))],
  }))
}
