// TEMPORARY stand-in so that the dev server starts; engineer B overwrites this file.
import type { Comparison, ObservedSeries, RunResult } from '../../types/run.ts'
export function compareRun(result: RunResult, _o: ObservedSeries): Comparison {
  return { span: result.span, epochsMjd: [], lod: null, chi1: null, chi2: null, noise: 'ar1', notRemoved: [], warnings: [] }
}
