import type { AttributionReport, AttributionTask } from '#shared/attribution/report'
import type { Principal } from '#shared/permissions'
import { InputError } from '#shared/types/issue'
import { Problem } from '../utils/problem'
import type { AttributionAnswer } from '../workers/attribution'
import { correctionsOf } from './angularMomentum'
import { namedChain } from './chains'
import { authorise } from './change'
import type { Context } from './context'
import { canonicalJson } from './hash'
import { gravityFieldsOf, loadObserved, observedRow } from './observed'
import { runInputOf, runResultOf, runRow } from './runs'
import { basesOfRegions } from './seriesBases'
import { versionsOf } from './seriesStore'

interface Question { observed: string, chain?: string, prior: number, groups?: string }

const most = 8
const kept = new WeakMap<Context, Map<string, Promise<AttributionReport>>>()

/** A run attributed to an observed series of its workspace; stores nothing. All that it depends on is immutable, so answers are kept for a while. */
export async function attributionOfRun(context: Context, principal: Principal | null, id: string, question: Question): Promise<AttributionReport> {
  const row = runRow(context, id)
  authorise(principal, 'run.read', { workspaceId: row.workspaceId })
  const observed = observedRow(context, question.observed)
  if (observed.workspaceId !== row.workspaceId) throw new Problem(404, 'not-found', 'There is no such observed series.')
  const { name: chainName, chain } = namedChain(context, row.workspaceId, question.chain)
  const corrections = correctionsOf(context, row.workspaceId, chain)
  const cache = kept.get(context) ?? new Map<string, Promise<AttributionReport>>()
  kept.set(context, cache)
  const key = `${row.resultSha256} ${versionsOf(context, observed.id)[0]!.id} ${question.prior} ${question.groups ?? ''} ${Object.keys(corrections).join()} ${canonicalJson([chainName, chain])}`
  let answer = cache.get(key)
  if (!answer) {
    if (cache.size >= most) cache.clear()
    const input = runInputOf(row)
    // Outlines are not asked for here, and are most of what a run holds.
    const light = { ...input, regions: input.regions.map(region => ({ ...region, geometry: { type: 'Polygon' as const, coordinates: [] } })) }
    answer = attributed(context, { input: light, result: runResultOf(row), series: loadObserved(context, observed.id, input.settings), gravity: gravityFieldsOf(context, observed), chain, chainName, corrections, bases: basesOfRegions(context, row.workspaceId, input), priorSigma: question.prior, groups: groupsOfText(question.groups) })
    answer.catch(() => cache.delete(key))
    cache.set(key, answer)
  }
  return await answer
}

/** Groups as they stand in an address; the report checks them against the run. */
function groupsOfText(text: string | undefined): unknown {
  if (!text) return undefined
  try {
    return JSON.parse(text) as unknown
  }
  catch (error) {
    throw new InputError('The groups are no JSON.', [{ path: 'groups', code: 'json', message: error instanceof Error ? error.message : 'cannot be read' }])
  }
}

async function attributed(context: Context, task: AttributionTask): Promise<AttributionReport> {
  const answer = await context.jobs.compute<AttributionAnswer>('attribution', task)
  if ('fault' in answer) throw new InputError(answer.fault.message, answer.fault.issues)
  return answer.report
}
