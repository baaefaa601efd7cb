import { describe, expect, it } from 'vitest'
import { publishedBackground } from '#shared/text/background'
import { commonSpan, emptyRate, newDraft, placeOfIssue, runFault, withBackground, withoutRegion, withRegion } from '../../../app/scenario/draft'
import { pairsOfDraft, withChoice } from '../../../app/scenario/overlaps'

const region = (id: string, versionId: string | null = `v-${id}`) => ({ id, name: `Region ${id}`, series: versionId ? { latest: { id: versionId } } : null })
const draft = newDraft([region('a'), region('b'), region('c', null)], 'fingerprint', 'o1')

describe('a new draft', () => {
  it('takes regions with a series at their newest version and leaves out the others', () => {
    expect(draft.regions).toEqual([{ regionId: 'a', versionId: 'v-a', scale: 1 }, { regionId: 'b', versionId: 'v-b', scale: 1 }])
    expect(draft.settings).toMatchObject({ ocean: 'fingerprint', fromMjd: null, toMjd: null })
    expect(draft.observedId).toBe('o1')
  })

  it('carries the published background as copies', () => {
    expect(draft.background).toEqual(publishedBackground)
    expect(draft.background[0]).not.toBe(publishedBackground[0])
  })
})

describe('regions of a draft', () => {
  it('adds at the end, changes in place, takes out', () => {
    const added = withRegion(draft, { regionId: 'c', versionId: 'v-c', scale: 2 })
    expect(added.regions.map(r => r.regionId)).toEqual(['a', 'b', 'c'])
    expect(withRegion(added, { regionId: 'a', versionId: 'v-a1', scale: 0 }).regions[0]).toEqual({ regionId: 'a', versionId: 'v-a1', scale: 0 })
    expect(withoutRegion(added, 'b').regions.map(r => r.regionId)).toEqual(['a', 'c'])
    expect(draft.regions).toHaveLength(2)
  })

  const shared = { areaKm2: 5, shareOfA: 0.1, shareOfB: 0.2, aName: 'A', bName: 'B' }
  const overlaps = [{ a: 'a', b: 'b', ...shared }, { a: 'a', b: 'c', ...shared }]
  it('counts overlaps between regions that are switched on only', () => {
    expect(pairsOfDraft(draft, overlaps, []).map(({ a, b }) => a + b)).toEqual(['ab'])
    expect(pairsOfDraft(withRegion(draft, { regionId: 'b', versionId: 'v-b', scale: 0 }), overlaps, [])).toEqual([])
  })

  it('wants every pair on common ground settled, keeping both only with a reason, and forgets what was said of a region that goes', () => {
    const pairs = (of: typeof draft) => pairsOfDraft(of, overlaps, [])
    expect(runFault(draft, pairs(draft))).toMatch(/Two regions share ground/)
    const kept = withChoice(draft, { a: 'b', b: 'a', choice: 'keep', from: null, reason: '' })
    expect(runFault(kept, pairs(kept))).toMatch(/Two regions share ground/)
    const settled = withChoice(kept, { a: 'a', b: 'b', choice: 'subtract', from: 'a', reason: '' })
    expect(settled.overlaps).toHaveLength(1)
    expect(runFault(settled, pairs(settled))).toBeNull()
    expect(withoutRegion(settled, 'b').overlaps).toBeUndefined()
  })

  it('finds the span that switched-on series have in common', () => {
    const versions = [{ id: 'v-a', firstMjd: 53000, lastMjd: 60000 }, { id: 'v-b', firstMjd: 52000, lastMjd: 58000 }]
    expect(commonSpan(draft, versions)).toEqual({ fromMjd: 53000, toMjd: 58000 })
    expect(commonSpan(withRegion(draft, { regionId: 'b', versionId: 'v-b', scale: 0 }), versions)).toEqual({ fromMjd: 53000, toMjd: 60000 })
    expect(commonSpan(draft, [versions[0]!, { id: 'v-b', firstMjd: 60001, lastMjd: 61000 }])).toBeNull()
  })
})

describe('background of a draft', () => {
  it('brings a published row back to its place', () => {
    const [first] = publishedBackground
    const without = withBackground(draft, first!.key, null)
    expect(without.background.map(row => row.key)).toEqual(publishedBackground.slice(1).map(row => row.key))
    expect(withBackground(without, first!.key, first!).background.map(row => row.key)).toEqual(publishedBackground.map(row => row.key))
  })

  it('gives own rows keys that are free', () => {
    expect(emptyRate(['row-1', 'row-2'], 'x').key).toBe('row-3')
    const own = withBackground(draft, 'row-1', emptyRate([], 'Own'))
    expect(own.background.at(-1)).toMatchObject({ key: 'row-1', name: 'Own', core: null, lodMsPerCentury: null })
  })
})

describe('faults of a draft', () => {
  it('says why it cannot be run', () => {
    expect(runFault(draft)).toBeNull()
    expect(runFault({ ...draft, regions: draft.regions.map(r => ({ ...r, scale: 0 })) })).toMatch(/switch on/)
    expect(runFault({ ...draft, settings: { ...draft.settings, fromMjd: 2, toMjd: 2 } })).toMatch(/last day/)
  })

  it('names the place of an issue', () => {
    const at = (path: string) => placeOfIssue({ path, code: 'x', message: 'y' }, draft, id => `Region ${id}`)
    expect(at('draft/regions/1/versionId')).toBe('Region b, series')
    expect(at('regions/0/scale')).toBe('Region a, factor')
    expect(at('draft/settings/toMjd')).toBe('span')
    expect(at('draft/background/0/source')).toBe(publishedBackground[0]!.name)
    expect(at('draft/regions')).toBe('regions')
    expect(at('')).toBe('')
  })
})
