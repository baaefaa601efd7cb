import type { ScenarioDraft } from '#shared/api/schemas'
import { choiceOf } from '#shared/earth/time/countedOnce'
import { overlapsOf } from '#shared/geo/overlap'
import { massOnGround, sharedGround, waterOnGround } from '#shared/text/overlaps'
import { InputError, type Issue } from '#shared/types/issue'
import type { Context } from './context'
import { derivedOfRegion, latestOutline, regionNames } from './regions'
import { factsOf, versionRow } from './seriesStore'

/** Regions of a draft that count and share ground, with the trend that each chosen version holds there. */
export function overlapsOfDraft(context: Context, draft: Pick<ScenarioDraft, 'regions' | 'overlaps'>) {
  const counting = draft.regions.filter(r => r.scale !== 0).map(choice => ({ choice, outline: latestOutline(context, choice.regionId) }))
  const names = regionNames(context, counting.map(({ choice }) => choice.regionId))
  const onGround = (id: string, share: number) => {
    const { choice, outline } = counting.find(({ choice }) => choice.regionId === id)!
    const mass = derivedOfRegion(context, outline, choice.versionId).trend?.massGtPerYear
    const factor = share * choice.scale * (choice.groundedFraction ?? 1)
    return mass ? { value: mass.value * factor, sigma: mass.sigma * Math.abs(factor) } : null
  }
  return overlapsOf(counting.map(({ choice, outline }) => ({ id: choice.regionId, geometry: outline.geometry }))).map((pair) => {
    const settled = choiceOf(draft.overlaps ?? [], pair)
    const held = (id: string) => factsOf(versionRow(context, counting.find(({ choice }) => choice.regionId === id)!.choice.versionId))?.contains ?? []
    return {
      ...pair, aName: names.get(pair.a) ?? '', bName: names.get(pair.b) ?? '',
      onGroundGtPerYear: { a: onGround(pair.a, pair.shareOfA), b: onGround(pair.b, pair.shareOfB) },
      contains: { a: held(pair.a), b: held(pair.b) },
      settled: settled ? { choice: settled.choice, from: settled.from, reason: settled.reason } : null,
    }
  })
}

/** Choices that cannot stand: of regions that are not in the draft, named twice, without the region that is counted less or without a reason. */
export function faultsOfChoices({ regions, overlaps = [] }: ScenarioDraft): Issue[] {
  return overlaps.flatMap((choice, i): Issue[] => {
    const { a, b, from } = choice
    const path = `draft/overlaps/${i}`
    const unknown = [a, b].some(id => !regions.some(r => r.regionId === id)) || a === b
    return [
      ...(unknown ? [{ path, code: 'unknown', message: 'is not about two regions of this scenario' }] : []),
      ...(choiceOf(overlaps, choice) === choice ? [] : [{ path, code: 'duplicate', message: 'settles a pair that is settled already' }]),
      ...(choice.choice === 'subtract' && from !== a && from !== b ? [{ path: `${path}/from`, code: 'unknown', message: 'must name one of the two regions' }] : []),
      ...(choice.choice === 'keep' && !choice.reason ? [{ path: `${path}/reason`, code: 'empty', message: 'needs a reason why both count in full' }] : []),
    ]
  })
}

/**
 * What was decided of every pair that shares ground now.
 *
 * @throws InputError with an issue for each pair that nothing was decided of
 */
export function settledOverlaps(context: Context, draft: ScenarioDraft) {
  const pairs = overlapsOfDraft(context, draft)
  const open = pairs.filter(pair => !pair.settled)
  if (open.length) {
    throw new InputError(`${open.length === 1 ? 'Two regions share' : `${open.length} pairs of regions share`} ground and it is not said how they are counted: settle that before a run.`, open.map(({ settled: _, ...pair }) => ({
      path: 'draft/overlaps', code: 'overlap-unsettled', value: `${pair.a} ${pair.b}`,
      message: `${[sharedGround(pair), massOnGround(pair), waterOnGround(pair)].filter(Boolean).join(' ')} Take one off the other, or keep both with a reason.`,
    })))
  }
  return pairs.map(pair => choiceOf(draft.overlaps!, pair)!)
}
