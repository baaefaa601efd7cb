import { describe, expect, it } from 'vitest'
import { newDraft, placeOfIssue } from '../../../app/scenario/draft'
import { historyOf, step } from '../../../app/scenario/history'
import { isIce, issuesOfRegion, partOf, percentOf, withWater } from '../../../app/scenario/water'

const choice = { regionId: 'a', versionId: 'v', scale: 1 }

describe('the way of a region’s water in a draft', () => {
  it('keeps what differs from the default and nothing else', () => {
    const some = withWater(choice, { fractionToOcean: 0.6 })
    expect(some).toEqual({ ...choice, fractionToOcean: 0.6, restTo: null })
    expect(withWater(some, { restTo: 'b' })).toEqual({ ...choice, fractionToOcean: 0.6, restTo: 'b' })
    expect(Object.keys(withWater(some, { fractionToOcean: 1 }))).toEqual(Object.keys(choice))
    expect(withWater(choice, { groundedFraction: 0 })).toEqual({ ...choice, groundedFraction: 0 })
    expect(Object.keys(withWater(withWater(choice, { groundedFraction: 0.5 }), { groundedFraction: 1 }))).toEqual(Object.keys(choice))
    // A target means nothing while all of it reaches the sea.
    expect(withWater(choice, { restTo: 'b' })).toEqual(choice)
  })

  it('leaves an untouched draft as it was: no step to undo', () => {
    const history = historyOf(choice)
    expect(step(history, withWater(choice, { fractionToOcean: 1 }))).toBe(history)
  })

  it('turns per cent into parts and back without dust', () => {
    for (const percent of [0, 7, 57.3, 99.99, 100]) expect(percentOf(partOf(percent))).toBe(percent)
    expect(percentOf(undefined)).toBe(100)
    expect(percentOf(0.573)).toBe(57.3)
  })

  it('knows ice', () => {
    expect((['ice-sector', 'glacier-region', 'snow-water', 'lake'] as const).map(isIce)).toEqual([true, true, false, false])
  })
})

describe('what the server refused', () => {
  const issues = [
    { path: 'draft/regions/1/restTo', code: 'unknown', message: 'is not another region of this scenario' },
    { path: 'regions/0/fractionToOcean', code: 'range', message: 'must be between 0 and 1' },
    { path: 'draft/settings/toMjd', code: 'order', message: 'must be later' },
  ]
  it('stands at its region, whether from saving or from the run', () => {
    expect(issuesOfRegion(issues, 1)).toEqual([{ field: 'restTo', message: 'is not another region of this scenario' }])
    expect(issuesOfRegion(issues, 0)).toEqual([{ field: 'fractionToOcean', message: 'must be between 0 and 1' }])
    expect(issuesOfRegion(issues, 2)).toEqual([])
  })
  it('is named in words', () => {
    const draft = newDraft([{ id: 'a', name: 'A', series: { latest: { id: 'v' } } }, { id: 'b', name: 'B', series: { latest: { id: 'w' } } }], 'fingerprint', null)
    expect(issues.map(issue => placeOfIssue(issue, draft, id => id.toUpperCase()))).toEqual(['B, where the rest goes', 'A, to the sea', 'span'])
  })
})
