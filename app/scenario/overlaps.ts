import { choiceOf } from '#shared/earth/time/countedOnce'
import type { ScenarioDraft } from '#shared/api/schemas'
import type { SeriesFacts } from '#shared/series/facts'
import type { NamedPair } from '#shared/text/overlaps'

export type OverlapChoice = NonNullable<ScenarioDraft['overlaps']>[number]
/** A pair as far as it takes to see whether it is settled. */
export type OpenPair = Pick<NamedPair, 'settled'>

interface Trended { id: string, series: { latest: { id: string } } | null, trend: { massGtPerYear: { value: number, sigma: number } } | null }

/** Pairs that share ground among the regions that count in a draft, with what each series holds there and what was decided. */
export function pairsOfDraft(
  draft: ScenarioDraft, overlaps: readonly Pick<NamedPair, 'a' | 'b' | 'aName' | 'bName' | 'areaKm2' | 'shareOfA' | 'shareOfB'>[], regions: readonly Trended[],
  versions: readonly { id: string, facts: SeriesFacts | null }[] = [],
): NamedPair[] {
  const held = (id: string) => versions.find(version => version.id === counting.get(id)!.versionId)?.facts?.contains ?? []
  const counting = new Map(draft.regions.filter(region => region.scale !== 0).map(region => [region.regionId, region]))
  const onGround = (id: string, share: number) => {
    const choice = counting.get(id)!
    const region = regions.find(known => known.id === id)
    // Only the trend of the newest version is at hand.
    if (!region?.trend || region.series?.latest.id !== choice.versionId) return null
    const factor = share * choice.scale * (choice.groundedFraction ?? 1)
    return { value: region.trend.massGtPerYear.value * factor, sigma: region.trend.massGtPerYear.sigma * Math.abs(factor) }
  }
  return overlaps.filter(({ a, b }) => counting.has(a) && counting.has(b)).map((pair) => {
    const settled = choiceOf(draft.overlaps ?? [], pair)
    return { ...pair, contains: { a: held(pair.a), b: held(pair.b) }, onGroundGtPerYear: { a: onGround(pair.a, pair.shareOfA), b: onGround(pair.b, pair.shareOfB) }, settled: settled && { choice: settled.choice, from: settled.from, reason: settled.reason } }
  })
}

/** Keeping both takes a reason; taking one off the other is one. */
export function isSettled({ settled }: OpenPair): boolean {
  return settled ? settled.choice === 'subtract' || settled.reason.trim() !== '' : false
}

/** The draft with these choices. None at all leaves the field out, so that an untouched draft stays as it was. */
export function withChoices({ overlaps: _, ...draft }: ScenarioDraft, choices: readonly OverlapChoice[]): ScenarioDraft {
  return choices.length > 0 ? { ...draft, overlaps: [...choices] } : draft
}

/** The draft with one pair decided anew. */
export function withChoice(draft: ScenarioDraft, choice: OverlapChoice): ScenarioDraft {
  const known = draft.overlaps ?? []
  const before = choiceOf(known, choice)
  return withChoices(draft, before ? known.map(other => other === before ? choice : other) : [...known, choice])
}
