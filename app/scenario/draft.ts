import { isSettled, withChoices, type OpenPair } from './overlaps'
import { publishedBackground } from '#shared/text/background'
import type { ScenarioDraft } from '#shared/api/schemas'
import type { OceanMode } from '#shared/types/domain'
import type { BackgroundRow } from '#shared/types/run'
import type { Issue } from '#shared/types/issue'

export type DraftRegion = ScenarioDraft['regions'][number]

/** What the editor has to know of a region. */
export interface RegionChoice {
  id: string
  name: string
  series: { latest: { id: string } } | null
}

/** A draft without anything in it. */
export const emptyDraft = (): ScenarioDraft => newDraft([], 'uniform', null)

/** A draft to begin with: every region that has a series, at its newest version, and the published background. */
export function newDraft(regions: readonly RegionChoice[], ocean: OceanMode, observedId: string | null): ScenarioDraft {
  return {
    schemaVersion: 1,
    settings: { ocean, coefficients: 'gross-2007', core: 'decoupled', fromMjd: null, toMjd: null, maxGapDays: 62 },
    regions: regions.flatMap(region => region.series ? [{ regionId: region.id, versionId: region.series.latest.id, scale: 1 }] : []),
    background: publishedBackground.map(row => structuredClone(row)),
    restOfWorld: null,
    observedId,
  }
}

/** A rate that is entered by hand, with a key that no other row has. */
export function emptyRate(taken: readonly string[], name: string): BackgroundRow {
  let n = 1
  while (taken.includes(`row-${n}`)) n++
  return { key: `row-${n}`, name, source: '', core: null, lodMsPerCentury: null, chi1MasPerYear: null, chi2MasPerYear: null }
}

export const restOfWorldRow = (): BackgroundRow => ({ ...emptyRate([], 'Rest of the world, not in this account'), key: 'rest-of-world' })

/** The draft with one region added at the end, or with its choice changed. */
export function withRegion(draft: ScenarioDraft, choice: DraftRegion): ScenarioDraft {
  const known = draft.regions.some(region => region.regionId === choice.regionId)
  return { ...draft, regions: known ? draft.regions.map(region => region.regionId === choice.regionId ? choice : region) : [...draft.regions, choice] }
}

/** Without a region, and without what was decided of the ground that it shares. */
export function withoutRegion(draft: ScenarioDraft, regionId: string): ScenarioDraft {
  const kept = { ...draft, regions: draft.regions.filter(region => region.regionId !== regionId) }
  return withChoices(kept, (draft.overlaps ?? []).filter(({ a, b }) => a !== regionId && b !== regionId))
}

/** The draft with a background row added or changed; null in place of a row takes it out. Published rows keep their place. */
export function withBackground(draft: ScenarioDraft, key: string, row: BackgroundRow | null): ScenarioDraft {
  if (row && draft.background.some(known => known.key === key)) {
    return { ...draft, background: draft.background.map(known => known.key === key ? row : known) }
  }
  const rest = draft.background.filter(known => known.key !== key)
  return { ...draft, background: row ? [...rest, row].sort(byPublication) : rest }
}

function byPublication(a: BackgroundRow, b: BackgroundRow): number {
  const rank = ({ key }: BackgroundRow) => {
    const place = publishedBackground.findIndex(row => row.key === key)
    return place < 0 ? publishedBackground.length : place
  }
  return rank(a) - rank(b)
}

/** The stretch of time that all switched-on series hold; null where there is none. */
export function commonSpan(
  draft: ScenarioDraft, versions: readonly { id: string, firstMjd: number, lastMjd: number }[],
): { fromMjd: number, toMjd: number } | null {
  const byId = new Map(versions.map(version => [version.id, version]))
  const counting = draft.regions.filter(region => region.scale !== 0).flatMap(({ versionId }) => byId.get(versionId) ?? [])
  if (counting.length === 0) return null
  const fromMjd = Math.max(...counting.map(version => version.firstMjd))
  const toMjd = Math.min(...counting.map(version => version.lastMjd))
  return fromMjd < toMjd ? { fromMjd, toMjd } : null
}

/** Why a draft cannot be run yet; null where it can. */
export function runFault(draft: ScenarioDraft, pairs: readonly OpenPair[] = []): string | null {
  if (!draft.regions.some(region => region.scale !== 0)) return 'Nothing to run: switch on at least one region that has a series.'
  const { fromMjd, toMjd } = draft.settings
  if (fromMjd !== null && toMjd !== null && fromMjd >= toMjd) return 'The last day must come after the first.'
  const open = pairs.filter(pair => !isSettled(pair)).length
  if (open > 0) return `${open === 1 ? 'Two regions share' : `${open} pairs of regions share`} ground: say how they are counted, under “Common ground”.`
  return null
}

const regionFields: Record<string, string> = {
  versionId: 'series', series: 'series', scale: 'factor', fractionToOcean: 'to the sea', restTo: 'where the rest goes', groundedFraction: 'grounded part',
}

/** Where in the draft a fault lies, in words. */
export function placeOfIssue(issue: Issue, draft: ScenarioDraft, nameOf: (regionId: string) => string): string {
  const [, part, index, field] = /^(?:draft\/)?(\w+)(?:\/(\w+))?(?:\/(\w+))?/.exec(issue.path ?? '') ?? []
  if (part === 'regions' && index !== undefined) {
    const region = draft.regions[Number(index)]
    return [region ? nameOf(region.regionId) : 'a region', regionFields[field ?? ''] ?? ''].filter(Boolean).join(', ')
  }
  if (part === 'background' && index !== undefined) return draft.background[Number(index)]?.name || 'a background row'
  if (part === 'overlaps') return 'common ground'
  if (part === 'settings') return index === 'fromMjd' || index === 'toMjd' ? 'span' : 'settings'
  return { regions: 'regions', restOfWorld: 'rest of the world', observedId: 'observed series', name: 'name' }[part ?? ''] ?? ''
}
