import { describe, expect, it } from 'vitest'
import { compare } from '../../../shared/validation/check.ts'
import { allChecks } from '../../../shared/validation/index.ts'
import { shippedModel } from '../earth/shippedModel.ts'

const checks = allChecks(await shippedModel())

describe('every row of the validation page', () => {
  it('is there, each once', () => {
    // 12 loads × 4 modes × 3 quantities, 15 published rows, 2 + 7 regressions, 3 of a trend, 6 tides, 2 of the pole.
    expect(checks).toHaveLength(12 * 4 * 3 + 15 + 9 + 3 + 6 + 2)
    expect(new Set(checks.map(c => c.id)).size).toBe(checks.length)
  })

  it.each(checks.map(check => [check.id, check] as const))('%s', (_, check) => {
    const { within, deviation } = compare(check)
    expect(within, `${check.title}: ${check.computed} against ${check.reference} ${check.unit}, ${deviation} off`).toBe(true)
  })
})

describe('compare', () => {
  const reference = 2
  it('fails what is outside its tolerance, in each measure', () => {
    expect(compare({ computed: 2.1, reference, tolerance: { kind: 'relative', within: 0.04 } }).within).toBe(false)
    expect(compare({ computed: 2.1, reference, tolerance: { kind: 'scale', within: 0.04, scale: 2 } }).within).toBe(false)
    expect(compare({ computed: 2.1, reference, tolerance: { kind: 'absolute', within: 0.09 } }).within).toBe(false)
    expect(compare({ computed: 0.9, reference, tolerance: { kind: 'factor', within: 2 } }).within).toBe(false)
    expect(compare({ computed: -2, reference, tolerance: { kind: 'factor', within: 2 } }).within).toBe(false)
    expect(compare({ computed: NaN, reference, tolerance: { kind: 'absolute', within: 1e9 } }).within).toBe(false)
  })
})
