import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { ar1Whitening, estimateAr1, stepsOf } from '../../../shared/attribution/ar1.ts'
import { closureOf, missingRows } from '../../../shared/attribution/closure.ts'
import { NotPositiveError, cholesky, dot, invertCholesky, logDeterminant, orthonormal, singularValues, solveCholesky, withoutSpan } from '../../../shared/attribution/linearAlgebra.ts'
import type { Matrix } from '../../../shared/attribution/linearAlgebra.ts'
import { quadraticForm, whiteningOf } from '../../../shared/attribution/metric.ts'
import { covarianceOf } from '../../../shared/earth/time/covariance.ts'
import type { BackgroundRow } from '../../../shared/types/run.ts'
import { ar1Noise, normals } from './series.ts'

const columns = (n: number, p: number, seed: number): Float64Array[] => {
  const normal = normals(seed)
  return Array.from({ length: p }, () => Float64Array.from({ length: n }, normal))
}
const gram = (cols: readonly Float64Array[]): Matrix => cols.map(a => Float64Array.from(cols, b => dot(a, b)))

/** C⁻¹x by elimination with the dense matrix: what the product never forms. */
function denseQuadratic(c: number[][], x: number[]): number {
  const n = x.length
  const a = c.map((row, i) => [...row, x[i]!])
  for (let k = 0; k < n; k++) {
    const pivot = a.slice(k).reduce((best, row, i) => Math.abs(row[k]!) > Math.abs(a[best]![k]!) ? k + i : best, k)
    ;[a[k], a[pivot]] = [a[pivot]!, a[k]!]
    for (let i = k + 1; i < n; i++) {
      const f = a[i]![k]! / a[k]![k]!
      for (let j = k; j <= n; j++) a[i]![j] = a[i]![j]! - f * a[k]![j]!
    }
  }
  const y = new Array<number>(n).fill(0)
  for (let i = n - 1; i >= 0; i--) y[i] = (a[i]![n]! - y.reduce((sum, v, j) => j > i ? sum + a[i]![j]! * v : sum, 0)) / a[i]![i]!
  return x.reduce((sum, v, i) => sum + v * y[i]!, 0)
}

describe('small matrices', () => {
  it('are factored, solved and inverted', () => {
    const a = gram(columns(30, 8, 1))
    const l = cholesky(a)
    const b = Float64Array.from({ length: 8 }, (_, i) => i - 3)
    const x = solveCholesky(l, b)
    a.forEach((row, i) => expect(dot(row, x)).toBeCloseTo(b[i]!, 9))
    const inverse = invertCholesky(l)
    a.forEach((row, i) => inverse.forEach((_, j) => expect(dot(row, inverse.map(r => r[j]!))).toBeCloseTo(i === j ? 1 : 0, 10)))
    expect(logDeterminant(l)).toBeCloseTo(2 * l.reduce((sum, row, i) => sum + Math.log(row[i]!), 0), 12)
    expect(() => cholesky(gram([...columns(30, 2, 1), columns(30, 1, 1)[0]!]))).toThrow(NotPositiveError)
  })

  it('have singular values that rotate and stretch the columns back', () => {
    const cols = columns(40, 6, 2)
    const { values, vectors } = singularValues(cols)
    expect([...values]).toEqual([...values].sort((a, b) => b - a))
    vectors.forEach((v, k) => {
      const image = Float64Array.from({ length: 40 }, (_, i) => cols.reduce((sum, c, j) => sum + c[i]! * v[j]!, 0))
      expect(Math.sqrt(dot(image, image))).toBeCloseTo(values[k]!, 9)
      vectors.forEach((w, m) => expect(dot(v, w)).toBeCloseTo(k === m ? 1 : 0, 10))
    })
    // Two columns an angle θ apart: √(1 ± cos θ), small ones to their digits.
    const theta = 1e-6
    const near = singularValues([Float64Array.from([1, 0]), Float64Array.from([Math.cos(theta), Math.sin(theta)])])
    expect(near.values[1]! / Math.sqrt(2 * Math.sin(theta / 2) ** 2)).toBeCloseTo(1, 6)
  })

  it('have an orthonormal basis that leaves nothing of their span', () => {
    const cols = columns(20, 3, 3)
    const basis = orthonormal([...cols, cols[0]!.map((v, i) => v + 2 * cols[1]![i]!)])
    expect(basis).toHaveLength(3)
    expect(withoutSpan(cols[2]!, basis).every(v => Math.abs(v) < 1e-12)).toBe(true)
  })
})

describe('the metric of a covariance of a diagonal and low-rank factors', () => {
  it('is the inverse of the dense matrix', () => {
    fc.assert(fc.property(fc.integer({ min: 1, max: 100000 }), fc.integer({ min: 0, max: 4 }), (seed, sources) => {
      const normal = normals(seed)
      const n = 12
      const sigma = Array.from({ length: n }, () => 0.5 + Math.abs(normal()))
      const factors = Array.from({ length: sources }, (_, s) => ({ source: `s${s}`, loading: Array.from({ length: n }, () => 3 * normal()) }))
      const covariance = covarianceOf(sigma, factors)
      const dense = sigma.map((s, i) => sigma.map((_, j) => (i === j ? s * s : 0) + factors.reduce((sum, f) => sum + f.loading[i]! * f.loading[j]!, 0)))
      const x = Array.from({ length: n }, normal)
      expect(quadraticForm(covariance, x) / denseQuadratic(dense, x)).toBeCloseTo(1, 8)
    }), { numRuns: 60, seed: 4 })
  })

  it('takes equal factors as one that is twice as strong in variance, and refuses variances that are not positive', () => {
    const one = covarianceOf([1, 1, 1], [{ source: 'a', loading: [Math.SQRT2, 0, Math.SQRT2] }])
    const two = covarianceOf([1, 1, 1], [{ source: 'a', loading: [1, 0, 1] }, { source: 'b', loading: [1, 0, 1] }])
    expect(quadraticForm(one, [1, 2, 3])).toBeCloseTo(quadraticForm(two, [1, 2, 3]), 12)
    expect(() => whiteningOf(covarianceOf([1, 0]))).toThrow(RangeError)
  })
})

describe('AR(1) noise', () => {
  it('is whitened across gaps by the exact inverse of its covariance', () => {
    const mjd = [0, 30, 60, 150, 180]
    const whiten = ar1Whitening({ sigma: 2, phi: 0.7 }, stepsOf(mjd, 30))
    const x = [1, -2, 0.5, 3, 1]
    const dense = mjd.map(a => mjd.map(b => 4 * 0.7 ** (Math.abs(a - b) / 30)))
    const white = whiten(x)
    expect(dot(white, white)).toBeCloseTo(denseQuadratic(dense, x), 10)
  })

  it('is estimated without bias, also where columns take part of it', () => {
    const n = 120
    const steps = new Float64Array(n).fill(1)
    const design = [new Float64Array(n).fill(1), Float64Array.from({ length: n }, (_, i) => i - 60)]
    let [phi, variance] = [0, 0]
    for (let seed = 1; seed <= 200; seed++) {
      const noise = estimateAr1(Float64Array.from(ar1Noise(n, 0.6, 3, normals(seed))), design, steps)
      phi += noise.phi / 200
      variance += noise.sigma ** 2 / 200
    }
    // 200 estimates of φ scatter by 0.08/√200 = 0.006 each about the mean; least squares would be low by (1 + 4·0.6)/120 = 0.03.
    expect(Math.abs(phi - 0.6)).toBeLessThan(0.02)
    expect(Math.abs(variance / 9 - 1)).toBeLessThan(0.08)
  })
})

describe('closure', () => {
  const row = (more: Partial<BackgroundRow>): BackgroundRow => ({ key: 'k', name: 'n', source: 's', core: null, lodMsPerCentury: null, chi1MasPerYear: null, chi2MasPerYear: null, ...more })
  const rate = { value: 1, sigma: 0.1 }
  const full = { background: [row({ chi1MasPerYear: rate, chi2MasPerYear: rate })], restOfWorld: row({ chi1MasPerYear: rate, chi2MasPerYear: rate }) }

  it('is quoted only where background and rest of the world are entered for what is compared', () => {
    const covariance = covarianceOf([1, 1])
    expect(closureOf([1, 1], covariance, ['chi1', 'chi2'], { ...full, restOfWorld: null })).toMatchObject({ quoted: false })
    expect(closureOf([1, 1], covariance, ['chi1', 'chi2'], { ...full, background: [] })).toMatchObject({ quoted: false })
    expect(missingRows(['lod'], full)).toBe('No closure is quoted: no background rate is entered for the length of day, and the rest of the world is not entered for the length of day.')
    expect(closureOf([1, 1], covariance, ['chi1', 'chi2'], full)).toMatchObject({ quoted: true, chiSquare: 2, degreesOfFreedom: 2, reduced: 1 })
  })

  it('counts a shared error once: a residual along it is forgiven, one across it is not', () => {
    const covariance = covarianceOf([0.1, 0.1], [{ source: 'gia', loading: [5, 5] }])
    const along = closureOf([3, 3], covariance, ['chi1', 'chi2'], full)
    const across = closureOf([3, -3], covariance, ['chi1', 'chi2'], full)
    expect(along).toMatchObject({ quoted: true })
    expect(along.quoted && along.pValue).toBeGreaterThan(0.5)
    expect(across.quoted && across.pValue).toBeLessThan(1e-100)
    expect(across.quoted && across.sentence).toContain('does not close')
  })

  it('has χ² of its degrees of freedom for residuals that are drawn from the covariance', () => {
    const covariance = covarianceOf(Array.from({ length: 40 }, (_, i) => 1 + i / 20), [{ source: 'a', loading: Array.from({ length: 40 }, (_, i) => Math.sin(i)) }])
    let small = 0
    for (let seed = 1; seed <= 300; seed++) {
      const normal = normals(seed)
      const shared = normal()
      const residual = Array.from(covariance.diagonal, (d, i) => Math.sqrt(d) * normal() + shared * covariance.factors[0]!.loading[i]!)
      const closure = closureOf(residual, covariance, ['chi1'], full)
      if (closure.quoted && closure.pValue < 0.1) small++
    }
    // √(0.1 · 0.9/300) = 1.7 %.
    expect(Math.abs(small / 300 - 0.1)).toBeLessThan(0.052)
    expect(closureOf([1], covarianceOf([1]), ['chi1'], full, 1)).toMatchObject({ quoted: false })
  })
})
