import { runChain } from '#shared/observed/chain'
import { plainChain, type PlainChainResult } from '#shared/observed/chainPlain'
import type { Chain, FluidCorrection } from '#shared/observed/chainTypes'
import type { GravityFields } from '#shared/observed/gravityTypes'
import { InputError, type Issue } from '#shared/types/issue'
import type { ObservedSeries } from '#shared/types/run'

export interface ChainTask { series: ObservedSeries, chain: Chain, corrections: Record<string, FluidCorrection>, gravity?: GravityFields, points: number }
/** What a chain found, or why it cannot be run: an error that is thrown loses its issues between threads. */
export type ChainAnswer = { result: PlainChainResult } | { fault: { message: string, issues: Issue[] } }

/** A reduction of an observed series, away from the thread that answers requests. */
export default function chain({ series, chain, corrections, gravity, points }: ChainTask): ChainAnswer {
  try {
    return { result: plainChain(runChain(series, chain, { corrections, gravity }), points) }
  }
  catch (error) {
    if (error instanceof InputError) return { fault: { message: error.message, issues: error.issues } }
    throw error
  }
}
