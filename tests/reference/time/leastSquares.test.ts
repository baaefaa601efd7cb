import { describe, expect, it } from 'vitest'
import { weightedLeastSquares } from '../../../shared/earth/time/leastSquares.ts'
import { longley, norris } from '../../../shared/validation/data/nistStrd.ts'

/** Number of equal significant digits, the measure that NIST uses (log relative error). */
function digits(value: number, certified: number): number {
  return value === certified ? 15 : -Math.log10(Math.abs(value - certified) / Math.abs(certified))
}

function expectDigits(values: ArrayLike<number>, certified: number[], atLeast: number): void {
  expect(values.length).toBe(certified.length)
  certified.forEach((c, i) => expect(digits(values[i]!, c), `value ${i}: ${values[i]} against ${c}`).toBeGreaterThan(atLeast))
}

describe('NIST StRD certified regressions', () => {
  it(norris.source, () => {
    const fit = weightedLeastSquares([norris.x.map(() => 1), norris.x], norris.y)
    expectDigits(fit.coefficients, norris.coefficients, 11)
    expectDigits(fit.sigma, norris.sigma, 12)
    expectDigits([Math.sqrt(fit.variance)], [norris.residualSigma], 12)
    expect(fit.degreesOfFreedom).toBe(34)
  })

  it(longley.source, () => {
    const columns = [longley.rows.map(() => 1), ...[1, 2, 3, 4, 5, 6].map(j => longley.rows.map(row => row[j]!))]
    const fit = weightedLeastSquares(columns, longley.rows.map(row => row[0]!))
    expectDigits(fit.coefficients, longley.coefficients, 10)
    expectDigits(fit.sigma, longley.sigma, 10)
    expectDigits([Math.sqrt(fit.variance)], [longley.residualSigma], 10)
  })
})
