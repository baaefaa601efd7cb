import { compareRun } from '#shared/earth/time/compare'
import { circularityWarnings } from '#shared/observed/circularity'
import { gravityWarnings } from '#shared/observed/gravityExcitation'
import type { Principal } from '#shared/permissions'
import { InputError } from '#shared/types/issue'
import type { Comparison } from '#shared/types/run'
import { Problem } from '../utils/problem'
import type { ComparisonAnswer, ComparisonTask } from '../workers/comparison'
import { correctionsOf } from './angularMomentum'
import { namedChain } from './chains'
import { authorise } from './change'
import type { Context } from './context'
import { canonicalJson } from './hash'
import { gravityFieldsOf, loadObserved, observedRow } from './observed'
import { basesOfRegions } from './seriesBases'
import { runInputOf, runResultOf, runRow, type RunRow } from './runs'
import { versionsOf } from './seriesStore'

/** What a run is held against, and how that is treated before: by its tides alone, or by a chain, which then says all. */
export interface ComparisonQuestion { observed: string, zonalTides?: 'none' | 'all', chain?: string }

const kept = new WeakMap<Context, Map<string, Promise<Comparison>>>()

/** A run beside an observed series of its workspace. All that it depends on is immutable, so comparisons are kept for a while. */
export async function compareWith(context: Context, row: RunRow, { observed: observedId, zonalTides = 'none', chain: text }: ComparisonQuestion): Promise<Comparison> {
  const observed = observedRow(context, observedId)
  if (observed.workspaceId !== row.workspaceId) throw new Problem(404, 'not-found', 'There is no such observed series.')
  const named = text ? namedChain(context, row.workspaceId, text) : null
  const corrections = named ? correctionsOf(context, row.workspaceId, named.chain) : {}
  const cache = kept.get(context) ?? new Map<string, Promise<Comparison>>()
  kept.set(context, cache)
  const key = `${row.inputSha256} ${row.resultSha256} ${versionsOf(context, observedId)[0]!.id} ${zonalTides} ${Object.keys(corrections).join()} ${named ? canonicalJson(named) : ''}`
  let comparison = cache.get(key)
  if (!comparison) {
    const result = runResultOf(row)
    const series = loadObserved(context, observedId, result.settings)
    const gravity = gravityFieldsOf(context, observed)
    const compared = named ? reduced(context, { result, series, named, inputs: { corrections, gravity } }) : Promise.resolve(compareRun(result, series, { zonalTides }))
    const before = [
      ...circularityWarnings(gravity ? 'gravity' : 'rotation', basesOfRegions(context, row.workspaceId, runInputOf(row))),
      ...(gravity && !named ? gravityWarnings(gravity) : []),
    ]
    comparison = compared.then(answer => ({ ...answer, warnings: [...before, ...answer.warnings] }))
    comparison.catch(() => cache.delete(key))
    if (cache.size > 50) cache.clear()
    cache.set(key, comparison)
  }
  return await comparison
}

async function reduced(context: Context, task: ComparisonTask): Promise<Comparison> {
  const answer = await context.jobs.compute<ComparisonAnswer>('comparison', task)
  if ('fault' in answer) throw new InputError(answer.fault.message, answer.fault.issues)
  return answer.comparison
}

export async function readComparison(context: Context, principal: Principal | null, id: string, question: ComparisonQuestion): Promise<Comparison> {
  const row = runRow(context, id)
  authorise(principal, 'run.read', { workspaceId: row.workspaceId })
  return await compareWith(context, row, question)
}
