import { runChain } from '../observed/chain.ts'
import { circularityWarnings } from '../observed/circularity.ts'
import type { Basis } from '../observed/circularity.ts'
import type { Chain, FluidCorrection } from '../observed/chainTypes.ts'
import { asGravitySees } from '../observed/gravityBackground.ts'
import type { GravityFields } from '../observed/gravityTypes.ts'
import { InputError } from '../types/issue.ts'
import type { ObservedSeries, RunInput, RunResult, RunWarning } from '../types/run.ts'
import { assembleAttribution } from './assemble.ts'
import type { ObservedMonths } from './assemble.ts'
import { attributionBudget } from './budget.ts'
import type { AttributionBudget } from './budget.ts'
import { comparedQuantities } from './compared.ts'
import type { ComparedReport } from './compared.ts'
import { readGroups } from './groups.ts'
import type { ScalingGroup } from './groups.ts'
import { identifiability } from './identifiability.ts'
import type { Identifiability } from './identifiability.ts'
import { netRegions } from './netRegions.ts'
import { observedMonths, observedTrends } from './observedMonths.ts'
import type { ReducedMonths } from './observedMonths.ts'
import { forwardReport, ut1Report } from './poleAndUt1.ts'
import type { ForwardReport, Ut1Report } from './poleAndUt1.ts'
import { closingResidual } from './residual.ts'
import type { ClosingResidual } from './residual.ts'
import { estimateScaling } from './scaling.ts'
import type { Scaling } from './scaling.ts'
import type { ScalingVariant } from './scalingVariants.ts'
import { seriesSignatures } from './signatures.ts'
import type { AttributionData, RotationQuantity } from './types.ts'

export interface AttributionTask {
  input: RunInput
  result: RunResult
  series: ObservedSeries
  chain: Chain
  /** Name that the chain is kept under, if it is. */
  chainName?: string | null
  /** Series that the chain subtracts, by the keys that it names. */
  corrections?: Record<string, FluidCorrection>
  /** Answers stored with gravity coefficients, where the series comes from them. */
  gravity?: GravityFields
  /** What the mass of each region was made from, for the warning about circular comparisons. */
  bases: { key: string, name: string, bases: Basis[] }[]
  /** One-sigma of the prior, about 1, of every factor that has none of its own. */
  priorSigma: number
  /** Regions that get one factor together, and priors of their own, as JSON that `readGroups` checks; absent: every region by itself. */
  groups?: unknown
}

/** As JSON: null stands for an infinite condition. */
export type PlainScaling = Omit<Scaling, 'condition'> & { condition: number | null }
export type ScalingReport = { scaling: PlainScaling, reason: null } | { scaling: null, reason: string }

/** A run attributed to one reduction of one observed series, as plain JSON. */
export interface AttributionReport {
  chain: Chain
  /** Name that the chain is kept under; null where it is kept under none. */
  chainName: string | null
  /** What was observed: rotation itself, or gravity coefficients that stand for it. */
  from: 'rotation' | 'gravity'
  chartNote: string
  notRemoved: string[]
  epochsMjd: number[]
  compared: Partial<Record<RotationQuantity, ComparedReport>>
  /** Quantities without a trend of their own, or not observed at all, and why. */
  leftOut: { quantity: RotationQuantity, reason: string }[]
  budget: AttributionBudget
  closing: ClosingResidual
  scaling: Record<ScalingVariant, ScalingReport>
  identifiability: Identifiability | null
  /** Why there is no identifiability. */
  identifiabilityReason: string | null
  forward: ForwardReport
  ut1: Ut1Report
  circularity: RunWarning[]
  warnings: RunWarning[]
}

/**
 * Everything that a run and an observed series say of one another: comparison by bands, trends under three noise models, budget with
 * correlations, closure, factors, what can be told apart, and what would close the rest. Depends on its arguments alone.
 *
 * @throws InputError for a chain that does not hold for this series
 */
export function attributionReport({ input: entered, result, series, chain, chainName = null, corrections, gravity, bases, priorSigma, groups: given }: AttributionTask): AttributionReport {
  const { input, warnings } = series.from === 'gravity' ? asGravitySees(entered) : { input: entered, warnings: [] }
  const reduced = runChain(series, chain, { corrections, gravity })
  const months = observedMonths(reduced, result.epochsMjd)
  const loose = observedMonths(reduced, result.epochsMjd, 'out')
  const { rates } = observedTrends(months)
  const groups = given === undefined ? [] : readGroups(given, netRegions(result).filter(region => region.scale !== 0))
  const data = dataOf(input, result, months, groups)
  const looseData = dataOf(input, result, loose, groups)
  const smoothed = chain.steps.some(step => step.on && step.kind === 'smoothing')
  const unseasoned = chain.steps.some(step => step.on && step.kind === 'seasons')
  const factors = (variant: ScalingVariant): ScalingReport => {
    const source = variant === 'interannual' ? data : looseData
    if ('reason' in source) return { scaling: null, reason: source.reason }
    if (smoothed) return { scaling: null, reason: 'The observed series is smoothed and the regions are not: switch the smoothing off to estimate factors.' }
    if (variant === 'annual' && unseasoned) return { scaling: null, reason: 'The seasons were taken out of the observed series.' }
    const priors = Object.fromEntries(source.groups.map(({ key }) => [key, groups.find((_, i) => keyOfGroup(i) === key)?.prior ?? { mean: 1, sigma: priorSigma }]))
    const scaling = estimateScaling(source, { band: variant === 'annual' ? 'annual' : 'interannual', trend: variant === 'interannual' ? 'in' : 'out', priors })
    return { scaling: { ...scaling, condition: Number.isFinite(scaling.condition) ? scaling.condition : null }, reason: null }
  }
  const toldApart = 'reason' in data || smoothed || data.groups.length === 0 ? null : identifiability(seriesSignatures(data))
  return {
    chain,
    chainName,
    from: series.from === 'gravity' ? 'gravity' : 'rotation',
    chartNote: reduced.chartNote,
    notRemoved: reduced.notRemoved,
    epochsMjd: result.epochsMjd,
    compared: comparedQuantities(input, result, loose, chain, months.leftOut.map(({ quantity }) => quantity)),
    leftOut: months.leftOut,
    budget: attributionBudget(input, result, rates),
    closing: closingResidual(input, result, rates),
    scaling: { 'interannual': factors('interannual'), 'interannual-without-trend': factors('interannual-without-trend'), 'annual': factors('annual') },
    identifiability: toldApart,
    identifiabilityReason: toldApart ? null : 'reason' in data ? data.reason : smoothed ? 'The observed series is smoothed: its noise is no longer that of the observation.' : 'No region is switched on.',
    forward: forwardReport(input, result, series, chain),
    ut1: ut1Report(result),
    circularity: circularityWarnings(series.from === 'gravity' ? 'gravity' : 'rotation', bases),
    warnings: [...warnings, ...reduced.warnings]
  }
}

const keyOfGroup = (i: number): string => `group ${i + 1}`

/** Data of the estimates, or why there are none. */
function dataOf(input: RunInput, result: RunResult, months: ReducedMonths & ObservedMonths, groups: readonly ScalingGroup[]): AttributionData | { reason: string } {
  try {
    return assembleAttribution(input, result, months, { groups: groups.map(({ name, regions }, i) => ({ key: keyOfGroup(i), name, regions })) })
  } catch (error) {
    if (error instanceof InputError) return { reason: error.issues[0]?.message ?? error.message }
    throw error
  }
}
