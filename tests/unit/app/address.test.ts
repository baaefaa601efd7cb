import { describe, expect, it } from 'vitest'
import { citation } from '../../../app/result/citation'
import { editionFilePath, runFilePath } from '../../../app/result/files'
import { slugFault, suggestSlug } from '../../../app/utils/slug'
import { closedSpan, dateOfMjd, mjdOfDate, queryOfSpan, spanOfQuery } from '../../../app/utils/timeSpan'

describe('link of an edition', () => {
  it.each([
    ['Six regions of the Halcyon Compact, 2004–2024', 'six-regions-of-the-halcyon-compact-2004-2024'],
    ['Größe & Maß: Ångström', 'grosse-mass-angstrom'],
    ['  Earth’s day  ', 'earths-day'],
    ['水', 'edition'],
    ['a', 'edition-a'],
  ])('makes %s readable', (title, slug) => {
    expect(suggestSlug(title)).toBe(slug)
    expect(slugFault(suggestSlug(title))).toBeNull()
  })
  it('never suggests a link that is refused', () => {
    for (const title of ['-', '--a--b--', 'x'.repeat(79) + ' y', `${'word '.repeat(40)}`, '!!!', '½ × ¾']) expect(slugFault(suggestSlug(title)), title).toBeNull()
  })
  it.each(['ab', 'A-b-c', 'a--b', '-abc', 'abc-', 'a b c', 'x'.repeat(81)])('refuses %s', (slug) => {
    expect(slugFault(slug)).not.toBeNull()
  })
})

describe('span in an address', () => {
  it('goes to the address and back', () => {
    const span = { fromMjd: 53005, toMjd: 60676 }
    expect(queryOfSpan(span)).toEqual({ from: '2004-01-01', to: '2025-01-01' })
    expect(spanOfQuery(queryOfSpan(span))).toEqual(span)
    expect(queryOfSpan({ fromMjd: null, toMjd: null })).toEqual({ from: undefined, to: undefined })
  })
  it('takes nonsense for no span', () => {
    expect(spanOfQuery({ from: '2004-02-30', to: ['2005-01-01'] })).toEqual({ fromMjd: null, toMjd: null })
    expect(spanOfQuery({ from: '2006-01-01', to: '2005-01-01' })).toEqual({ fromMjd: null, toMjd: null })
    expect(closedSpan(spanOfQuery({ from: '2004-01-01' }))).toBeNull()
    expect(mjdOfDate('')).toBeNull()
    expect(dateOfMjd(null)).toBe('')
  })
})

describe('addresses of files', () => {
  it('carry the observed series', () => {
    expect(runFilePath('R', 'report.pdf', null)).toBe('/api/v1/runs/R/files/report.pdf')
    expect(runFilePath('R', 'report.pdf', 'O')).toBe('/api/v1/runs/R/files/report.pdf?observed=O')
    expect(editionFilePath('a-b', 2, 'run.json')).toBe('/api/v1/editions/a-b/2/run.json')
  })
})

describe('citation', () => {
  const edition = { workspaceName: 'Halcyon Compact', createdAt: '2026-12-01T06:18:26.480Z', title: 'Six regions.', n: 2, licence: 'CC BY 4.0', invented: true, run: { resultSha256: 'fd5328fd79ef9db69385543511687a25' } }
  it('says who, when, what, where and under which licence', () => {
    expect(citation(edition, 'https://example.org/p/six/2')).toBe('Halcyon Compact (2026): Six regions. Edition 2, 2026-12-01. https://example.org/p/six/2. Result SHA-256 fd5328fd79ef9db6…. Licence: CC BY 4.0. Invented data.')
  })
  it('does not say twice that data are invented, nor a licence that is not stated', () => {
    expect(citation({ ...edition, licence: 'CC BY 4.0. Invented data.' }, 'x')).toMatch(/Licence: CC BY 4\.0\. Invented data\.$/)
    expect(citation({ ...edition, licence: ' ', invented: false }, 'x')).not.toMatch(/Licence|Invented/)
  })
})
