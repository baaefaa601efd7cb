import { JULIAN_YEAR_DAYS } from '../earth/time/epochs.ts'
import type { TrendNoiseReport } from '../earth/time/trendNoise.ts'
import type { Chain } from '../observed/chainTypes.ts'
import type { RunInput, RunResult } from '../types/run.ts'
import { rateOf } from './assemble.ts'
import { comparisonStatistics, comparisonTrends } from './comparisonStatistics.ts'
import type { ComparisonStatistics } from './comparisonStatistics.ts'
import { likeObserved } from './likeObserved.ts'
import type { ReducedMonths } from './observedMonths.ts'
import { rotationQuantities } from './types.ts'
import type { RotationQuantity } from './types.ts'

/** Observed, model and residual of one quantity on the months of a run, ms for the day and mas for χ, about their means over common months. */
export interface ComparedReport {
  unit: 'ms' | 'mas'
  observed: (number | null)[]
  /** Regions, background and rest of the world together, treated as the observed series was. */
  model: (number | null)[]
  modelSigma: (number | null)[]
  residual: (number | null)[]
  statistics: ComparisonStatistics | null
  /** Null where no trend may be quoted or where there are too few months. */
  trends: Record<'observed' | 'model' | 'residual', TrendNoiseReport> | null
}

/** Sum of the regions with the rates of background and rest of the world about the middle of the span, in ms or mas. */
export function modelWithBackground(input: RunInput, result: RunResult, quantity: RotationQuantity): (number | null)[] {
  const { series } = result.total
  const sum = quantity === 'lod' ? series.lodMicroseconds : quantity === 'chi1' ? series.chi1Mas : series.chi2Mas
  const rows = [...input.background, ...(input.restOfWorld ? [input.restOfWorld] : [])]
  const rate = rows.reduce((total, row) => total + (rateOf(row, quantity)?.value ?? 0), 0)
  const middle = (result.epochsMjd[0]! + result.epochsMjd.at(-1)!) / 2
  const factor = quantity === 'lod' ? 1e-3 : 1
  return sum.map((v, j) => v === null ? null : factor * (v + rate * (result.epochsMjd[j]! - middle) / JULIAN_YEAR_DAYS))
}

/** Each observed quantity beside the model, with its statistics by band and its trends under three noise models. */
export function comparedQuantities(input: RunInput, result: RunResult, months: ReducedMonths, chain: Chain, withoutTrend: readonly RotationQuantity[]): Partial<Record<RotationQuantity, ComparedReport>> {
  const list: Partial<Record<RotationQuantity, ComparedReport>> = {}
  const mjd = result.epochsMjd
  const { sigmaLodMicroseconds, sigmaChi1Mas, sigmaChi2Mas } = result.total.series
  for (const quantity of rotationQuantities) {
    const observed = { lod: months.lodMs, chi1: months.chi1Mas, chi2: months.chi2Mas }[quantity]
    if (!observed?.some(v => v !== null)) continue
    const model = likeObserved(chain, mjd, modelWithBackground(input, result, quantity))
    const both = mjd.map((_, j) => j).filter(j => observed[j] !== null && model[j] !== null)
    const about = (values: readonly (number | null)[]): (number | null)[] => {
      const mean = both.length > 0 ? both.reduce((sum, j) => sum + values[j]!, 0) / both.length : 0
      return values.map(v => v === null ? null : v - mean)
    }
    const [seen, made] = [about(observed), about(model)]
    const sigma = { lod: sigmaLodMicroseconds.map(v => v === null ? null : v / 1000), chi1: sigmaChi1Mas, chi2: sigmaChi2Mas }[quantity]
    const pair = { mjd, observed: seen, model: made }
    list[quantity] = {
      unit: quantity === 'lod' ? 'ms' : 'mas', observed: seen, model: made, modelSigma: sigma,
      residual: seen.map((v, j) => v === null || made[j] === null ? null : v - made[j]!),
      statistics: comparisonStatistics(pair),
      trends: withoutTrend.includes(quantity) ? null : comparisonTrends(pair)
    }
  }
  return list
}
