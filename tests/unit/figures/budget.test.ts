import { describe, expect, it } from 'vitest'
import { aligned } from '../../../shared/figures/budget/aligned.ts'
import { budgetColumns, budgetTable } from '../../../shared/figures/budget/table.ts'
import { sampleComparison, sampleRun, withPhysics } from './sampleRun.ts'

const plain = (text: string) => text.replace(/[\u00a0\u202f]/g, ' ')

describe('aligned', () => {
  it('fills figures so that decimal signs of a right-aligned column meet', () => {
    const texts = ['+5.15', '−214', '+0.040', '–', '', '+1.2']
    const filled = aligned(texts)
    expect(filled.map(({ text, after }) => text + after)).toEqual(['+5.150', '−214.000', '+0.040', '–.000', '.000', '+1.200'])
    const lengths = filled.map(({ before, text, after }) => (before + text + after).length)
    expect(new Set(lengths).size).toBe(1)
  })
})

describe('budgetTable', () => {
  const run = sampleRun()
  const cell = (rows: ReturnType<typeof budgetTable>, name: string, column: string) => {
    const { value, sigma } = rows.find(row => row.name === name)!.cells[budgetColumns.findIndex(({ id }) => id === column)]!
    return plain(`${value.text} ${sigma.text}`).trim()
  }

  it('sets what a region keeps on land right below it', () => {
    const rows = budgetTable(withPhysics())
    expect(rows.map(({ name }) => name).slice(0, 3)).toEqual(['Northern ice dome', 'Kept on land: Northern ice dome to Southern ice margin', 'Southern ice margin'])
    expect(rows[1]!.note).toBe('the part of the row above that does not reach the sea')
    expect(rows[0]!.note).toBeNull()
    expect(cell(rows, rows[1]!.name, 'mass')).toBe('+107.0 ± 7.5')
    expect(rows.filter(({ kind }) => kind === 'region')).toHaveLength(7)
  })

  it('holds regions by size, the model, the background and the rest of the world', () => {
    const rows = budgetTable(run)
    expect(rows.map(({ kind }) => kind)).toEqual([...Array(6).fill('region'), 'model', 'background', 'rest'])
    expect(rows.map(({ name }) => name).slice(0, 4)).toEqual(['Northern ice dome', 'Southern ice margin', 'Corran glaciers', 'Tessel Plain aquifer'])
    expect(rows.at(-1)!.note).toBe('not entered')
    expect(cell(rows, 'Northern ice dome', 'lod')).toBe('+5.15 ± 0.36')
    expect(cell(rows, 'Northern ice dome', 'lodCentury')).toBe('+0.515 ± 0.036')
    expect(cell(rows, 'Northern ice dome', 'shareLod')).toBe('+53')
    expect(cell(rows, 'Northern ice dome', 'direction')).toBe('35° ± 3° W')
    expect(cell(rows, 'Model', 'lod')).toBe('+9.63 ± 0.60')
    expect(cell(rows, 'Model', 'shareLod')).toBe('+100')
    // One decimal more than the sum, so 0.0400 ± 0.0080 is shortened.
    expect(cell(rows, 'High Weir reservoirs', 'lod')).toBe('+0.040 ± 0.008')
    expect(cell(rows, 'Tidal braking', 'chi1')).toBe('–')
  })

  it('says that no background was entered', () => {
    expect(budgetTable({ ...run, background: [] }).find(row => row.kind === 'background')).toMatchObject({ name: 'Background', note: 'not entered' })
  })

  it('adds observed and residual in the units of the table and gives no share of what was observed', () => {
    const rows = budgetTable(run, sampleComparison(run))
    expect(rows.slice(-2).map(({ name }) => name)).toEqual(['Observed', 'Residual'])
    expect(cell(rows, 'Observed', 'lod')).toBe('−21 ± 12')
    expect(cell(rows, 'Observed', 'lodCentury')).toBe('−2.1 ± 1.2')
    expect(cell(rows, 'Observed', 'shareLod')).toBe('–')
    expect(cell(rows, 'Residual', 'chi1')).toMatch(/^\+0\.22 ± 0\.63$/)
  })

  it('marks what is switched off or scaled', () => {
    const scaled = { ...run, regions: run.regions.map((region, i) => ({ ...region, scale: [0, 0.5, 1][i] ?? 1 })) }
    expect(budgetTable(scaled).slice(0, 3).map(({ note }) => note)).toEqual(['switched off', 'mass × 0.5', null])
  })
})
