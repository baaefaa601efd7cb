import { describe, expect, it } from 'vitest'
import { readMassSeries } from '#shared/series/readMassSeries'
import { decodeText } from '#shared/series/decodeText'
import { columnsToSend, previewOf, type Preview } from '~/series/preview'
import { issueGroups, lineRange } from '~/series/issueGroups'
import { longestDraftText, mendedName, noOrigin, originToSend, readDraft, readSharedRates, writeDraft, type SeriesDraft } from '~/series/seriesDraft'
import { readFigure } from '~/utils/figureInput'

const areaM2 = 1e9
const text = ['date,storage (mm),error', '2004-01-15,10,1', '2004-02-15,n/a,1', '2004-03-15,12,1', '2004-04-31,13,1', '2004-05-15,14,1', ''].join('\n')

function read(source: string): Preview {
  const preview = previewOf(source, {}, areaM2)
  if (preview.state !== 'read') throw new Error(preview.message)
  return preview
}

describe('preview of a file', () => {
  it('lists every bad row with its place and keeps every good one', () => {
    const preview = read(text)
    expect(preview.issues.map(issue => issue.row)).toEqual([3, 5])
    expect(preview.mjd).toHaveLength(3)
    expect(preview.rowsRead).toBe(5)
    expect(preview.massGt[0]).toBeCloseTo(0.01, 15)
  })

  it('shows first and last rows without showing one twice', () => {
    const many = `date,Gt\n${Array.from({ length: 30 }, (_, i) => `2004-01-${String(i + 1).padStart(2, '0')},${i}`).join('\n')}\n`
    const preview = read(many)
    const rows = [...preview.head, ...preview.tail].map(row => row.row)
    expect(rows).toEqual([2, 3, 4, 5, 28, 29, 30, 31])
    expect(preview.tail.at(-1)!.massGt).toBe(29)
  })

  it('sends choices with which the server reads the very same values', () => {
    const preview = read(text)
    const again = readMassSeries(text, { ...columnsToSend(preview), areaM2 } as Parameters<typeof readMassSeries>[1])
    expect(again.massGt).toEqual([...preview.massGt])
    expect(again.issues).toEqual(preview.issues)
  })

  it('offers the columns even where their meaning is not recognised', () => {
    const preview = previewOf('a;b\nx;1\ny;2\n', {}, areaM2)
    expect(preview).toMatchObject({ state: 'refused', issues: [{ code: 'no-epoch-column' }] })
    expect(preview.columns.map(column => column.name)).toEqual(['a', 'b'])
  })

  it('gives no trend for two epochs', () => {
    expect(read('date,Gt\n2004-01-15,1\n2005-01-15,2\n').trend).toBeNull()
  })
})

describe('bad rows', () => {
  it('are counted by kind, the most frequent first', () => {
    const issues = ['missing-value', 'bad-epoch', 'missing-value'].map(code => ({ code, message: '' }))
    expect(issueGroups(issues)).toEqual([
      { code: 'missing-value', count: 2, text: 'without a value' },
      { code: 'bad-epoch', count: 1, text: 'with an epoch that cannot be read' },
    ])
  })

  it('are found in the text by their number', () => {
    const [from, to] = lineRange(text, 3)
    expect(text.slice(from, to)).toBe('2004-02-15,n/a,1')
    expect(text.slice(...lineRange(text, 1))).toBe('date,storage (mm),error')
    expect(lineRange('one', 7)).toEqual([0, 3])
  })
})

describe('draft', () => {
  const draft: SeriesDraft = {
    text, fileName: 'wells.csv', choices: { unit: 'mm-we', sigmaColumn: null }, conversion: null, decisions: [],
    facts: { name: 'Plain', reason: 'Recalibrated', source: 'Wells', licence: '', independence: '', sharedRates: [{ source: 'tilt', sigma: '0,5' }], origin: { ...noOrigin(), method: 'Well heads', contains: ['groundwater'], gravimetry: 'no' } },
  }

  it('comes back as it was', () => {
    expect(readDraft(writeDraft(draft))).toEqual(draft)
  })

  it('from before its fields were asked for has none, and fields that say nothing are not sent', () => {
    const { origin: _, ...old } = draft.facts
    expect(readDraft(JSON.stringify({ ...draft, facts: old }))!.facts.origin).toEqual(noOrigin())
    expect(originToSend(noOrigin())).toBeNull()
    expect(originToSend({ ...draft.facts.origin, citation: ' A (2020) ' })).toMatchObject({ citation: 'A (2020)', contains: ['groundwater'] })
  })

  it('leaves out a text that a browser would not hold, and keeps the rest', () => {
    const back = readDraft(writeDraft({ ...draft, text: 'x'.repeat(longestDraftText + 1) }))
    expect(back).toEqual({ ...draft, text: '' })
  })

  it.each([null, '', 'not json', '{}', '{"text":1}', '{"text":"a","choices":{},"facts":{"name":1}}'])('takes %j for none', (kept) => {
    expect(readDraft(kept)).toBeNull()
  })

  it('names a mended text otherwise than the file, once', () => {
    expect(mendedName('wells.csv')).toBe('wells-mended.csv')
    expect(mendedName(mendedName('wells.csv'))).toBe('wells-mended.csv')
    expect(mendedName('wells')).toBe('wells-mended')
  })
})

describe('systematic rates', () => {
  it('are read with decimal comma; empty lines are passed over', () => {
    expect(readSharedRates([{ source: ' tilt ', sigma: '0,5' }, { source: '', sigma: '' }], readFigure)).toEqual({ rates: [{ source: 'tilt', sigmaGtPerYear: 0.5 }], faults: [null, null] })
  })

  it.each([
    [{ source: '', sigma: '1' }, /Name the source/],
    [{ source: 'a', sigma: '' }, /missing/],
    [{ source: 'a', sigma: 'x' }, /not a number/],
    [{ source: 'a', sigma: '-1' }, /not negative/],
  ])('say what is wrong with %j', (field, message) => {
    const { rates, faults } = readSharedRates([field], readFigure)
    expect(rates).toEqual([])
    expect(faults[0]).toMatch(message)
  })

  it('name a source once', () => {
    expect(readSharedRates([{ source: 'a', sigma: '1' }, { source: 'a', sigma: '2' }], readFigure).faults[1]).toMatch(/already/)
  })
})

describe('bytes of a file', () => {
  it('are UTF-8 without its mark, or UTF-16 by its mark', () => {
    expect(decodeText(new Uint8Array([0xef, 0xbb, 0xbf, 0x61, 0xc2, 0xb5]))).toBe('aµ')
    expect(decodeText(new Uint8Array([0xff, 0xfe, 0x61, 0, 0xb5, 0]))).toBe('aµ')
    expect(decodeText(new Uint8Array([0xfe, 0xff, 0, 0x61, 0, 0xb5]))).toBe('aµ')
  })
})
