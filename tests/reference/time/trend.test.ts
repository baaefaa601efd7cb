import { describe, expect, it } from 'vitest'
import { fitTrend } from '../../../shared/earth/time/trend.ts'
import { J2000_MJD } from '../../../shared/earth/time/epochs.ts'
import reference from '../../../shared/validation/data/timeReference.json'

const { stats } = reference

function relative(values: ArrayLike<number>, expected: number[], tolerance: number): void {
  expect(values.length).toBe(expected.length)
  expected.forEach((e, i) => expect(Math.abs(values[i]! / e - 1), `value ${i}: ${values[i]} against ${e}`).toBeLessThan(tolerance))
}

// The times of the reference are rounded to 1e-8 yr, its values to 1e-6: hence a tolerance of 1e-6, the one it states.
describe('trend of 60 months against an independent reference implementation', () => {
  const mjd = stats.t.map(t => J2000_MJD + (t - 2000) * 365.25)
  const fit = fitTrend({ mjd, value: stats.y })

  it('gives the same coefficients, trend first of all', () => {
    expect(fit.names).toEqual(['constant', 'trend', 'annual cos', 'annual sin', 'semiannual cos', 'semiannual sin'])
    relative(fit.coefficients, stats.coef, stats.rel_tol)
    expect(fit.value).toBe(fit.coefficients[1])
  })

  it('gives the same white errors, lag-one correlation and inflated errors', () => {
    relative(fit.sigmaWhiteCoefficients, stats.sigma_white, stats.rel_tol)
    relative([fit.r1], [stats.r1], stats.rel_tol)
    relative(fit.sigmaCoefficients, stats.sigma_infl, stats.rel_tol)
  })
})
