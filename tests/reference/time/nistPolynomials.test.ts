import { describe, expect, it } from 'vitest'
import { weightedLeastSquares } from '../../../shared/earth/time/leastSquares.ts'
import { fitTrend } from '../../../shared/earth/time/trend.ts'
import { pontius, wampler } from './nistPolynomials.ts'

/** Number of equal significant digits, the measure that NIST uses (log relative error). */
function digits(value: number, certified: number): number {
  return value === certified ? 15 : -Math.log10(Math.abs(value - certified) / Math.abs(certified))
}

function expectDigits(values: ArrayLike<number>, certified: number[], atLeast: number): void {
  expect(values.length).toBe(certified.length)
  certified.forEach((c, i) => expect(digits(values[i]!, c), `value ${i}: ${values[i]} against ${c}`).toBeGreaterThan(atLeast))
}

describe('NIST StRD certified polynomials', () => {
  it(pontius.source, () => {
    const fit = weightedLeastSquares([0, 1, 2].map(p => pontius.x.map(x => x ** p)), pontius.y)
    expectDigits(fit.coefficients, pontius.coefficients, 11)
    expectDigits(fit.sigma, pontius.sigma, 12)
  })

  it('Pontius as a trend with acceleration, which is twice the coefficient of the square', () => {
    // 100 000 of the load is a year, counted from zero.
    const order = pontius.x.map((_, i) => i).sort((a, b) => pontius.x[a]! - pontius.x[b]!)
    const fit = fitTrend(
      { mjd: order.map(i => pontius.x[i]! / 1e5 * 365.25), value: order.map(i => pontius.y[i]!) },
      { seasonal: false, acceleration: true, referenceMjd: 0 }
    )
    const [constant, trend, square] = pontius.coefficients as [number, number, number]
    expectDigits(fit.coefficients, [constant, 1e5 * trend, 2e10 * square], 10)
    expectDigits(fit.sigmaWhiteCoefficients, [pontius.sigma[0]!, 1e5 * pontius.sigma[1]!, 2e10 * pontius.sigma[2]!], 11)
  })

  // The more of y is error, the fewer digits of the coefficients are left in double precision.
  it.each(wampler)('$source', ({ y, coefficients, sigma, digits: atLeast }) => {
    const fit = weightedLeastSquares([0, 1, 2, 3, 4, 5].map(p => y.map((_, x) => x ** p)), y)
    expectDigits(fit.coefficients, coefficients, atLeast)
    if (sigma[0]! > 0) expectDigits(fit.sigma, sigma, 10)
    // Without errors none are found: what is left is rounding of y.
    else fit.sigma.forEach(s => expect(s).toBeLessThan(1e-9 * Math.max(...y)))
  })
})
