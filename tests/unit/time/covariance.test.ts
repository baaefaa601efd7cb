import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import {
  addCovariance, covarianceOf, covarianceOfFunctionals, scaleCovariance, sigmasOf, varianceOfFunctional
} from '../../../shared/earth/time/covariance.ts'

describe('low-rank covariance', () => {
  it('adds independent errors as squares and a shared source linearly, with its sign', () => {
    const a = covarianceOf([3], [{ source: 'gia', loading: [2] }])
    const b = covarianceOf([4], [{ source: 'gia', loading: [1] }, { source: 'frame', loading: [5] }])
    expect(sigmasOf(addCovariance(a, b))[0]! ** 2).toBeCloseTo(9 + 16 + 9 + 25, 12)
    expect(sigmasOf(addCovariance(a, scaleCovariance(b, -2)))[0]! ** 2).toBeCloseTo(9 + 64 + 0 + 100, 12)
  })

  it('merges a source that is named twice', () => {
    const c = covarianceOf([0], [{ source: 'gia', loading: [2] }, { source: 'gia', loading: [3] }])
    expect(c.factors).toHaveLength(1)
    expect(sigmasOf(c)[0]).toBe(5)
  })

  it('equals the dense matrix', () => {
    const numbers = fc.array(fc.double({ min: -3, max: 3, noNaN: true }), { minLength: 4, maxLength: 4 })
    fc.assert(fc.property(numbers, numbers, numbers, numbers, numbers, (sigma, l1, l2, a, b) => {
      const c = covarianceOf(sigma.map(Math.abs), [{ source: 's', loading: l1 }, { source: 't', loading: l2 }])
      let dense = 0
      for (let i = 0; i < 4; i++) {
        for (let j = 0; j < 4; j++) dense += a[i]! * b[j]! * ((i === j ? sigma[i]! ** 2 : 0) + l1[i]! * l1[j]! + l2[i]! * l2[j]!)
      }
      expect(covarianceOfFunctionals(c, a, b)).toBeCloseTo(dense, 9)
      expect(varianceOfFunctional(c, a)).toBeGreaterThanOrEqual(0)
    }))
  })

  it('refuses sizes that differ', () => {
    expect(() => addCovariance(covarianceOf([1]), covarianceOf([1, 2]))).toThrow('equal sizes, got 1 and 2')
    expect(() => covarianceOf([1, 2], [{ source: 'gia', loading: [1] }])).toThrow('loading of "gia" must have 2 numbers, got 1')
  })
})
