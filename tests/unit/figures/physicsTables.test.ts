import { describe, expect, it } from 'vitest'
import { dataUncertaintyRow, derivedMissing, derivedTable, modelUncertaintyTable, uncertaintyColumns } from '../../../shared/figures/budget/physicsTables.ts'
import { waterWaySentences } from '../../../shared/text/waterWay.ts'
import { withPhysics } from './sampleRun.ts'

describe('derived quantities', () => {
  it('are seven rows with their errors and units', () => {
    expect(derivedTable(withPhysics()).map(({ id, value, sigma, unit }) => [id, value, sigma.replace(/\s/g, ' '), unit])).toEqual([
      ['barystatic', '+1.181', '± 0.074', 'mm/yr'],
      ['j2', '+4.53', '± 0.28', '10⁻¹¹/yr'],
      ['c21', '−0.710', '± 0.040', '10⁻¹¹/yr'],
      ['s21', '+0.42', '± 0.11', '10⁻¹¹/yr'],
      ['x', '−0.080', '± 0.010', 'mm/yr'],
      ['y', '+0.050', '± 0.020', 'mm/yr'],
      ['z', '−0.310', '± 0.030', 'mm/yr'],
    ])
    expect(derivedMissing(withPhysics())).toBeNull()
  })

  it('say why some are missing', () => {
    const run = withPhysics()
    const none = { ...run, settings: { ...run.settings, ocean: 'none' as const }, total: { ...run.total, derived: { ...run.total.derived!, geocentreMmPerYear: null } } }
    expect(derivedTable(none).map(({ id }) => id)).toEqual(['barystatic', 'j2', 'c21', 's21'])
    expect(derivedMissing(none)).toMatch(/no geocentre/)
    const { derived: _, ...total } = run.total
    expect(derivedTable({ ...run, total }).map(({ id }) => id)).toEqual(['barystatic', 'j2'])
    expect(derivedMissing({ ...run, total })).toMatch(/earlier engine/)
  })
})

describe('model uncertainty', () => {
  it('is a line each, with the length of the pole’s part on the ground', () => {
    const rows = modelUncertaintyTable(withPhysics())
    expect(rows.map(({ name, cells }) => [name, ...cells])).toEqual([
      // (0.003, 0.004) mas are 0.005 mas, 3.0887 cm each.
      ['Coefficient set', '0.051', '0.0030', '0.0040', '0.015'],
      ['Frequency dependence', '0', '0.035', '0.020', '0.12'],
    ])
    expect(rows.every(({ cells }) => cells.length === uncertaintyColumns.length)).toBe(true)
  })

  it('stands beside the data’s and changes none of it', () => {
    const run = withPhysics()
    const { modelUncertainty: _, ...without } = run
    expect(dataUncertaintyRow(run)).toEqual(dataUncertaintyRow(without))
    expect(dataUncertaintyRow(run)!.cells[0]).toBe(run.total.lodMicrosecondsPerYear!.sigma.toFixed(2))
    expect(modelUncertaintyTable(without)).toEqual([])
  })
})

describe('the way of the water', () => {
  const nameOf = (key: string) => ({ r2: 'High Weir reservoirs' })[key] ?? '?'
  it('says nothing where all of it counts and reaches the sea', () => {
    expect(waterWaySentences({}, nameOf)).toEqual([])
    expect(waterWaySentences({ fractionToOcean: 1, restTo: 'r2', groundedFraction: 1 }, nameOf)).toEqual([])
  })
  it('names parts and target', () => {
    expect(waterWaySentences({ fractionToOcean: 0.6, restTo: 'r2' }, nameOf)).toEqual(['60\u00a0% reaches the sea, the rest goes to High Weir reservoirs.'])
    expect(waterWaySentences({ fractionToOcean: 0, restTo: null }, nameOf)).toEqual(['0\u00a0% reaches the sea, the rest goes to land elsewhere, evenly.'])
    expect(waterWaySentences({ groundedFraction: 0.825 }, nameOf)[0]).toMatch(/^82\.5\u00a0% of the ice is grounded/)
  })
})
