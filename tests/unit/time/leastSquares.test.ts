import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { RankError, weightedLeastSquares } from '../../../shared/earth/time/leastSquares.ts'

describe('weighted least squares', () => {
  it('weighs by 1/σ²: the mean of 1 ± 1 and 4 ± 2', () => {
    const fit = weightedLeastSquares([[1, 1]], [1, 4], [1, 2])
    expect(fit.coefficients[0]).toBeCloseTo((1 + 4 / 4) / (1 + 1 / 4), 14)
    expect(fit.cofactor[0]![0]).toBeCloseTo(1 / (1 + 1 / 4), 14)
  })

  it('counts an observation with half the sigma like four of them', () => {
    const x = [0, 1, 2, 3]
    const y = [1, 2.5, 2.5, 5]
    const weighted = weightedLeastSquares([[1, 1, 1, 1], x], y, [1, 1, 1, 0.5])
    const repeated = weightedLeastSquares([[1, 1, 1, 1, 1, 1, 1], [...x, 3, 3, 3]], [...y, 5, 5, 5])
    expect(weighted.coefficients[1]).toBeCloseTo(repeated.coefficients[1]!, 13)
    expect(weighted.cofactor[1]![1]).toBeCloseTo(repeated.cofactor[1]![1]!, 13)
  })

  it('leaves residuals that are orthogonal to the columns, in any unit of time', () => {
    fc.assert(fc.property(
      fc.array(fc.tuple(fc.double({ min: -50, max: 50, noNaN: true }), fc.double({ min: 0.5, max: 2, noNaN: true })), { minLength: 5, maxLength: 40 }),
      fc.constantFrom(1e-9, 1, 1e9),
      (points, unit) => {
        const t = points.map((_, i) => i * unit)
        const fit = weightedLeastSquares([points.map(() => 1), t], points.map(p => p[0]), points.map(p => p[1]))
        for (const column of [points.map(() => 1), points.map((_, i) => i)]) {
          const dot = fit.residuals.reduce((sum, r, i) => sum + r * column[i]! / points[i]![1] ** 2, 0)
          expect(Math.abs(dot)).toBeLessThan(1e-8 * points.length)
        }
      }
    ))
  })

  it('names the column that adds nothing', () => {
    const one = [1, 1, 1, 1]
    const t = [1, 2, 3, 4]
    expect(() => weightedLeastSquares([one, t, t.map(x => 3 - 2 * x)], t)).toThrow(RankError)
    expect(() => weightedLeastSquares([one, t, t.map(x => 3 - 2 * x)], t)).toThrow('column 2')
  })

  it('refuses sizes and sigmas that cannot be', () => {
    expect(() => weightedLeastSquares([[1, 1]], [1])).toThrow('column 0 must have 1 numbers, got 2')
    expect(() => weightedLeastSquares([[1], [2]], [1])).toThrow('at least 2 values')
    expect(() => weightedLeastSquares([[1, 1]], [1, 2], [1, 0])).toThrow('sigma must be positive and finite, got 0 at index 1')
  })
})
