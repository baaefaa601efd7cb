import { commonMonths, comparedQuantity } from '../earth/time/compare.ts'
import { rowsWhere } from '../earth/time/observedExcitation.ts'
import { SEASONAL_MINIMUM_DAYS } from '../earth/time/trendDesign.ts'
import { runChain } from '../observed/chain.ts'
import type { ChainInputs } from '../observed/chain.ts'
import type { Chain } from '../observed/chainTypes.ts'
import type { Comparison, ComparisonQuantity, ObservedSeries, RunResult, RunWarning } from '../types/run.ts'
import { likeObserved } from './likeObserved.ts'
import { observedMonths } from './observedMonths.ts'
import type { RotationQuantity } from './types.ts'

/**
 * A run beside an observed series that a chain has reduced: monthly ΔLOD in ms and χ in mas over the months that both have, the model
 * treated as the chain treats the observed. Quantities whose trend must not be quoted are left out, with a warning. The chain is part of
 * the comparison, so that whoever reads it can make it again.
 *
 * @throws InputError for a chain that does not hold for this series
 */
export function compareReduced(result: RunResult, series: ObservedSeries, { name, chain }: { name: string | null, chain: Chain }, inputs: ChainInputs = {}): Comparison {
  const reduced = runChain(series, chain, inputs)
  const gravity = series.from === 'gravity'
  const months = observedMonths(reduced, result.epochsMjd)
  const rows = rowsWhere(series, i => chain.includePredictions || series.predicted[i] === 0)
  const common = commonMonths(result, rows)
  const warnings: RunWarning[] = reduced.warnings.filter(({ code }) => code !== 'no-trend')
  const warn = (code: string, message: string): void => {
    warnings.push({ code, message, regions: [] })
  }
  if (common.length === 0) warn('no-common-span', 'The run and the observed series have no month in common.')
  const place = new Map(result.epochsMjd.map((t, j) => [t, j]))
  const { total } = result
  const of = (quantity: RotationQuantity, unit: 'ms' | 'mas', factor: number): ComparisonQuantity | null => {
    const observed = { lod: months.lodMs, chi1: months.chi1Mas, chi2: months.chi2Mas }[quantity]
    if (!observed) return null
    const sum = { lod: total.series.lodMicroseconds, chi1: total.series.chi1Mas, chi2: total.series.chi2Mas }[quantity]
    const budget = { lod: total.lodMicrosecondsPerYear, chi1: total.chi1MasPerYear, chi2: total.chi2MasPerYear }[quantity]
    const model = likeObserved(chain, result.epochsMjd, sum.map(v => v === null ? null : factor * v))
    const onCommon = (values: readonly (number | null)[]): (number | null)[] => common.map(month => values[place.get(month.middleMjd)!] ?? null)
    return comparedQuantity(unit, onCommon(observed), onCommon(model), common, budget, factor)
  }
  const [lod, chi1, chi2] = [of('lod', 'ms', 1e-3), of('chi1', 'mas', 1), of('chi2', 'mas', 1)]
  for (const { quantity, reason } of months.leftOut) if (reduced.noTrend.some(entry => entry.quantity === quantity)) warn('no-trend', reason)
  if (common.length > 0 && !lod && !chi1 && !chi2) warn('too-few-months', 'Too few months have both a model and an observed value whose trend may be quoted.')
  const spanDays = common.length > 0 ? common.at(-1)!.endMjd - common[0]!.startMjd : 0
  if (spanDays > 0 && spanDays < SEASONAL_MINIMUM_DAYS) warn('short-span', 'The common span is shorter than two years: trends are fitted without seasons and may hold part of one.')
  if (lod && !gravity) warn('core', 'Decadal changes in length of day come mostly from the Earth’s core; surface mass explains a small part. A small explained share is not an error.')
  if (result.background.length > 0) warn('background-apart', 'Background rows are not in the model of this comparison; they stand beside it in the budget.')
  return {
    ...(gravity ? { from: 'gravity' as const } : {}),
    span: common.length > 0 ? { fromMjd: common[0]!.startMjd, toMjd: common.at(-1)!.endMjd } : { ...result.span },
    epochsMjd: common.map(month => month.middleMjd), lod, chi1, chi2, noise: 'ar1', notRemoved: reduced.notRemoved, warnings,
    reduction: { name, chain, chartNote: reduced.chartNote, steps: reduced.steps.filter(step => step.on).map(({ title, sentence, source }) => ({ title, sentence, source })) }
  }
}
