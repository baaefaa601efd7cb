import type { OverlapChoice, RegionOverlap } from '../../types/run.ts'
import type { EffectPerGt } from './budget.ts'
import { netEffect, scaledEffect } from './keptOnLand.ts'
import type { FittedRegion } from './run.ts'

/** Mass of a region's series that is taken off another region, which holds it as well. */
export interface TakenOff {
  /** The region that is counted less. */
  from: FittedRegion
  /** Gigatonnes taken off `from` for each gigatonne of the region's own series, factor included; negative. */
  factor: number
  /** What that does, with what `from` keeps on land. */
  effect: EffectPerGt
}

/** The choice that belongs to a pair, whichever of the two is named first. */
export function choiceOf<T extends { a: string, b: string }>(choices: readonly T[], pair: { a: string, b: string }): T | null {
  return choices.find(({ a, b }) => (a === pair.a && b === pair.b) || (a === pair.b && b === pair.a)) ?? null
}

/**
 * Counts common ground once where that was chosen: from one region is taken, with its response and its factor, the part of the
 * other's series that lies on the common ground, which is the other's mass times the share of its area, as if spread evenly.
 * Both regions keep their own rows; what is taken off is fully correlated with the series that it comes from.
 */
export function countedOnce(fitted: readonly FittedRegion[], overlaps: readonly RegionOverlap[], choices: readonly OverlapChoice[]): FittedRegion[] {
  const byKey = new Map(fitted.map(f => [f.region.key, f]))
  const taken = new Map<string, TakenOff[]>()
  for (const overlap of overlaps) {
    const settled = choiceOf(choices, overlap)
    if (settled?.choice !== 'subtract') continue
    const giver = byKey.get(settled.from === overlap.a ? overlap.b : overlap.a)!
    const from = byKey.get(settled.from!)!
    const share = giver.region.key === overlap.a ? overlap.shareOfA : overlap.shareOfB
    const factor = -share * from.region.scale / giver.region.scale
    taken.set(giver.region.key, [...taken.get(giver.region.key) ?? [], { from, factor, effect: scaledEffect(netEffect(from), factor) }])
  }
  return fitted.map(f => taken.has(f.region.key) ? { ...f, taken: taken.get(f.region.key)! } : f)
}
