import { describe, expect, it } from 'vitest'
import { draftOf, groupsText, priorFaults, unitsOf } from '../../../app/attribution/groups'
import { readGroups } from '../../../shared/attribution/groups.ts'
import { InputError } from '../../../shared/types/issue.ts'

const regions = [{ key: 'r1', name: 'Ice' }, { key: 'r2', name: 'Glaciers' }, { key: 'r3', name: 'Basin' }]
const codesOf = (json: unknown): string[] => {
  try {
    readGroups(json, regions)
  } catch (error) {
    if (error instanceof InputError) return error.issues.map(({ path, code }) => `${path} ${code}`)
    throw error
  }
  return []
}

describe('groups as they are sent', () => {
  it('are taken with and without a prior', () => {
    expect(readGroups([{ name: ' All ice ', regions: ['r1', 'r2'], prior: { mean: 0.9, sigma: 0.2 } }, { name: 'Basin', regions: ['r3'] }], regions)).toEqual([
      { name: 'All ice', regions: ['r1', 'r2'], prior: { mean: 0.9, sigma: 0.2 } }, { name: 'Basin', regions: ['r3'], prior: null },
    ])
  })
  it('are refused with the place of each fault', () => {
    expect(codesOf({})).toEqual(['groups not-a-list'])
    expect(codesOf([{ name: 'A', regions: ['r1', 'r9'] }, { name: 'B', regions: ['r1'], prior: { mean: 1, sigma: 0 } }, { name: '', regions: [] }, null])).toEqual([
      'groups/0/regions unknown-region', 'groups/1/regions twice', 'groups/1/prior prior', 'groups/2 not-a-group', 'groups/3 not-a-group',
    ])
  })
})

describe('groups as they are typed', () => {
  it('go into the address and come back', () => {
    const draft = { nameOf: { r1: 'All ice', r2: ' All ice' }, priors: { 'group All ice': { mean: '0,9', sigma: '0.2' }, 'r3': { mean: '', sigma: '0.1' } } }
    expect(unitsOf(regions, draft).map(({ id, regions: keys }) => [id, ...keys])).toEqual([['group All ice', 'r1', 'r2'], ['r3', 'r3']])
    const text = groupsText(regions, draft)!
    expect(readGroups(JSON.parse(text), regions).map(({ prior }) => prior)).toEqual([{ mean: 0.9, sigma: 0.2 }, { mean: 1, sigma: 0.1 }])
    expect(groupsText(regions, draftOf(text, regions))).toBe(text)
    expect(groupsText(regions, draftOf('no JSON', regions))).toBeUndefined()
  })
  it('say which prior cannot be', () => {
    expect(priorFaults(regions, { nameOf: {}, priors: { r1: { mean: '2', sigma: '' }, r2: { mean: '', sigma: '-1' }, r3: { mean: '', sigma: '' } } })).toHaveLength(2)
  })
})
