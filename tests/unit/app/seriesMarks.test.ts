import { describe, expect, it } from 'vitest'
import { settleMarks, type Mark } from '#shared/series/checks'
import { largestChanges, shownRecipe } from '~/regions/versionRecipe'
import { canFix, canLeaveOut, decisionsOfDraft, decisionsToSend, markSpans, withDecision, withEdit, withLeftOut, withoutCorrections, withoutEdit, withoutLeftOut } from '~/series/marks'
import { columnsToSend, previewOf, type ColumnChoices, type Preview } from '~/series/preview'

function read(text: string, choices: ColumnChoices = {}, setting = {}): Preview {
  const preview = previewOf(text, choices, 1e10, setting)
  if (preview.state !== 'read') throw new Error(preview.message)
  return preview
}

/** Three years of months with a wobble; the nineteenth value is `odd`. */
const rows = Array.from({ length: 36 }, (_, i) => `${2010 + Math.floor(i / 12)}-${String(i % 12 + 1).padStart(2, '0')}-15,${i === 18 ? 'ODD' : (((i * 7) % 11 - 5) / 10).toFixed(2)}`)
const table = (odd: string) => `date,mass (Gt)\n${rows.join('\n').replace('ODD', odd)}\n`
const row = 20

describe('marks of a preview', () => {
  it('name the row and its cell, and change nothing', () => {
    const preview = read(table('90'))
    const outlier = preview.marks.find(mark => mark.kind === 'outlier')!
    expect(outlier).toMatchObject({ rows: [row], state: 'open' })
    expect(preview.cells[row]).toBe('90')
    expect(preview.massGt[18]).toBe(90)
    expect([canFix(outlier), canLeaveOut(outlier)]).toEqual([true, true])
  })

  it('are gone once the cell is corrected, which is sent along', () => {
    const choices = withEdit({}, { row, column: 1, text: '0.9' })
    const preview = read(table('90'), choices)
    expect(preview.marks.filter(mark => mark.kind === 'outlier')).toEqual([])
    expect(preview.massGt[18]).toBe(0.9)
    expect(preview.edited).toEqual([{ row, column: 1, text: '0.9', was: '90' }])
    expect(columnsToSend(preview)).toMatchObject({ edits: [{ row, column: 1, text: '0.9' }] })
  })

  it('leave a row out with its reason, and a gap in its place', () => {
    const preview = read(table('90'), withLeftOut({}, [row], 'a typing error'))
    expect(preview.mjd).toHaveLength(35)
    expect(preview.leftOut).toMatchObject([{ row, reason: 'a typing error' }])
    expect(preview.marks.map(mark => mark.kind)).toContain('gap')
  })

  it('hold the series against the version before it', () => {
    const own = read(table('0.1'))
    const turned = { name: 'version 1', mjd: [...own.mjd], massGt: [...own.massGt].map(mass => -mass) }
    const marks = read(table('0.1'), {}, { others: [turned] }).marks
    expect(marks.find(mark => mark.kind === 'disagreement')?.message).toMatch(/version 1.*other way/)
  })
})

describe('decisions', () => {
  const mark = { id: 'outlier:1:1', kind: 'outlier', fromMjd: 1, toMjd: 1, rows: [2], message: 'odd', state: 'open' } as Mark

  it('are one for each finding, the latest', () => {
    const decisions = withDecision(withDecision([], { id: mark.id, choice: 'accepted', note: '' }), { id: mark.id, choice: 'accepted', note: 'a flood' })
    expect(settleMarks([mark], decisions).marks[0]).toMatchObject({ state: 'accepted', note: 'a flood' })
  })

  it('are sent where they hold: accepted findings that stand, corrections whose finding is gone', () => {
    const accepted = { id: mark.id, choice: 'accepted', note: '' } as const
    const corrected = { id: mark.id, choice: 'corrected', note: 'row 2' } as const
    expect(decisionsToSend([mark], [accepted])).toEqual([accepted])
    expect(decisionsToSend([], [accepted])).toEqual([])
    expect(decisionsToSend([mark], [corrected])).toEqual([])
    expect(decisionsToSend([], [corrected])).toEqual([corrected])
  })

  it('come back from a draft', () => {
    const decisions = [{ id: 'a', choice: 'accepted', note: '' }]
    expect(decisionsOfDraft([...decisions, { id: 1 }, null, { id: 'b', choice: 'maybe', note: '' }])).toEqual(decisions)
    expect(decisionsOfDraft('x')).toEqual([])
  })
})

describe('corrections', () => {
  it('can be undone one by one or all', () => {
    const choices = withLeftOut(withEdit(withEdit({ unit: 'Gt' }, { row: 2, column: 1, text: '1' }), { row: 2, column: 1, text: '2' }), [3, 4, 3], 'why')
    expect(choices).toEqual({ unit: 'Gt', edits: [{ row: 2, column: 1, text: '2' }], leaveOut: [{ row: 3, reason: 'why' }, { row: 4, reason: 'why' }] })
    expect(withoutEdit(choices, { row: 2, column: 1 }).edits).toBeUndefined()
    expect(withoutLeftOut(choices, 3).leaveOut).toEqual([{ row: 4, reason: 'why' }])
    expect(withoutCorrections(choices)).toEqual({ unit: 'Gt' })
  })
})

describe('marks under a chart', () => {
  it('are never too narrow to see, and stay inside', () => {
    const at = (fromMjd: number, toMjd: number, kind = 'gap') => ({ fromMjd, toMjd, kind }) as Mark
    expect(markSpans([at(0, 0), at(500, 600), at(0, 1000, 'disagreement')], 0, 1000)).toEqual([[0, 2], [500, 600]])
  })
})

describe('a stored recipe', () => {
  it('from before checks and corrections shows its steps alone', () => {
    expect(shownRecipe({ steps: ['One.'], leftOutCount: 2 })).toEqual({ steps: ['One.'], leftOut: 2, leftOutOnPurpose: [], edited: [], checks: null })
    expect(shownRecipe({}).steps).toEqual([])
  })

  it('lists the largest changes first', () => {
    expect(largestChanges([{ before: 0, after: 1 }, { before: 0, after: -3 }, { before: 5, after: 7 }], 2)).toEqual([{ before: 0, after: -3 }, { before: 5, after: 7 }])
  })
})
