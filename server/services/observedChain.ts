import type { PlainChainResult } from '#shared/observed/chainPlain'
import type { Principal } from '#shared/permissions'
import { InputError } from '#shared/types/issue'
import type { ChainAnswer, ChainTask } from '../workers/chain'
import { correctionsOf } from './angularMomentum'
import { namedChain } from './chains'
import { authorise } from './change'
import type { Context } from './context'
import { canonicalJson } from './hash'
import { gravityFieldsOf, loadObserved, observedRow } from './observed'
import { versionsOf } from './seriesStore'

const most = 8
const kept = new WeakMap<Context, Map<string, Promise<PlainChainResult>>>()

/** An observed series reduced step by step; stores nothing. Series and chain do not change, so answers are kept for a while. */
export async function readChainOfObserved(context: Context, principal: Principal | null, id: string, { chain: text, points }: { chain?: string, points: number }): Promise<PlainChainResult> {
  const row = observedRow(context, id)
  authorise(principal, 'observed.read', { workspaceId: row.workspaceId })
  const { chain } = namedChain(context, row.workspaceId, text)
  const corrections = correctionsOf(context, row.workspaceId, chain)
  const cache = kept.get(context) ?? new Map<string, Promise<PlainChainResult>>()
  kept.set(context, cache)
  const key = `${versionsOf(context, id)[0]!.id} ${points} ${Object.keys(corrections).join()} ${canonicalJson(chain)}`
  let answer = cache.get(key)
  if (!answer) {
    if (cache.size >= most) cache.clear()
    answer = reduced(context, { series: loadObserved(context, id), chain, corrections, gravity: gravityFieldsOf(context, row), points })
    answer.catch(() => cache.delete(key))
    cache.set(key, answer)
  }
  return await answer
}

async function reduced(context: Context, task: ChainTask): Promise<PlainChainResult> {
  const answer = await context.jobs.compute<ChainAnswer>('chain', task)
  if ('fault' in answer) throw new InputError(answer.fault.message, answer.fault.issues)
  return answer.result
}
