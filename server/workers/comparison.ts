import { compareReduced } from '#shared/attribution/compareReduced'
import type { ChainInputs } from '#shared/observed/chain'
import type { Chain } from '#shared/observed/chainTypes'
import { InputError, type Issue } from '#shared/types/issue'
import type { Comparison, ObservedSeries, RunResult } from '#shared/types/run'

export interface ComparisonTask { result: RunResult, series: ObservedSeries, named: { name: string | null, chain: Chain }, inputs: ChainInputs }
/** A comparison, or why it cannot be made: an error that is thrown loses its issues between threads. */
export type ComparisonAnswer = { comparison: Comparison } | { fault: { message: string, issues: Issue[] } }

/** A run beside a reduced series, away from the thread that answers requests. */
export default function comparison({ result, series, named, inputs }: ComparisonTask): ComparisonAnswer {
  try {
    return { comparison: compareReduced(result, series, named, inputs) }
  }
  catch (error) {
    if (error instanceof InputError) return { fault: { message: error.message, issues: error.issues } }
    throw error
  }
}
