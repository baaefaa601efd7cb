import { describe, expect, it } from 'vitest'
import { sumOfTrends } from '../../../server/services/regionTotal'

const trend = (value: number, ownSigma: number, sharedRates: { source: string, sigmaGtPerYear: number }[] = [], perGt = 1) =>
  ({ massGtPerYear: { value, sigmaWhite: ownSigma / 2, sigma: ownSigma }, ownSigma, sharedRates, perGt })

describe('sum of trends', () => {
  it('adds errors of their own in quadrature', () => {
    expect(sumOfTrends([trend(-3, 3), trend(5, 4)])).toEqual({ value: 2, sigmaWhite: 2.5, sigma: 5 })
  })

  it('adds an error of the same name linearly, errors of other names in quadrature', () => {
    const sum = sumOfTrends([trend(-10, 0, [{ source: 'a', sigmaGtPerYear: 2 }]), trend(-10, 0, [{ source: 'a', sigmaGtPerYear: 2 }, { source: 'b', sigmaGtPerYear: 3 }])])
    expect(sum).toMatchObject({ value: -20, sigma: 5 })
  })

  it('lets a shared error cancel where the effects have opposite signs', () => {
    const shared = [{ source: 'a', sigmaGtPerYear: 2 }]
    expect(sumOfTrends([trend(1, 0, shared, 0.5), trend(1, 0, shared, -0.5)])).toEqual({ value: 0, sigmaWhite: 0, sigma: 0 })
  })
})
