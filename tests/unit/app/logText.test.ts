import { describe, expect, it } from 'vitest'
import { changeSummary, entityLink, entryName, fieldChanges } from '~/people/logText'

const names = new Map([['01A', 'Water Office'], ['01R', 'Tessel Plain']])

describe('a logged change', () => {
  it('shows only what differs, with names for known ids', () => {
    expect(fieldChanges({ role: 'lead', agencyId: '01A' }, { role: 'reader', agencyId: '01A' }, names)).toEqual([{ field: 'role', before: 'lead', after: 'reader' }])
    expect(fieldChanges({ agencyId: '01A' }, { agencyId: '01B' }, names)).toEqual([{ field: 'agency', before: 'Water Office', after: '01B' }])
  })

  it('goes into nested rows and lists, and keeps what was added or taken away', () => {
    expect(fieldChanges({ draft: { regions: [{ scale: 1 }] } }, { draft: { regions: [{ scale: -0.5 }] }, roles: ['a', 'b'] })).toEqual([
      { field: 'draft / regions / 1 / scale', before: '1', after: '\u22120.5' },
      { field: 'roles', before: null, after: 'a, b' },
    ])
    expect(fieldChanges({ name: 'x' }, null)).toEqual([{ field: 'name', before: 'x', after: null }])
  })

  it('shortens checksums and leaves them out of the summary', () => {
    const changes = fieldChanges(null, { outline: 'a'.repeat(64), name: 'Plain' })
    expect(changes[0]!.after).toBe(`${'a'.repeat(12)}…`)
    expect(changeSummary(changes)).toBe('name: Plain; 1 more')
    expect(changeSummary(changes.slice(0, 1))).toBe('one checksum')
  })

  it('is named by what the entry holds and leads to its page', () => {
    expect(entryName('01S', null, { region: '01R' }, names)).toBe('Tessel Plain')
    expect(entryName('a@b.example', null, { email: 'a@b.example' }, names)).toBe('a@b.example')
    expect(entityLink('series', '01S', { region: '01R' })).toBe('/regions/01R')
    expect(entityLink('member', '01M', null)).toBeNull()
  })
})
