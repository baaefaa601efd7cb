import { describe, expect, it } from 'vitest'
import { fourierPlan, fourierTransform } from '../../../shared/earth/fourier.ts'
import { gaussLegendre } from '../../../shared/earth/gaussLegendre.ts'
import { valueAtPlace, valuesOnNodes } from '../../../shared/earth/harmonicValues.ts'
import { geodeticFromGeocentricDeg } from '../../../shared/earth/latitude.ts'
import { coefficientCount, coefficientIndex, legendreInto, legendreRecursion } from '../../../shared/earth/legendre.ts'
import { analyse, emptyHarmonics, gridLongitudes, harmonicGrid, sphereMean, synthesise, transformScratch, type Harmonics } from '../../../shared/earth/sphericalHarmonics.ts'

/** Coefficients of every degree and order, of changing sign. */
function sample(degree: number): Harmonics {
  const h = emptyHarmonics(degree)
  for (let m = 0; m <= degree; m++) {
    for (let l = m; l <= degree; l++) {
      const k = coefficientIndex(degree, l, m)
      h.cosine[k] = Math.sin(1.3 * k + 1)
      h.sine[k] = m > 0 ? Math.cos(0.7 * k) : 0
    }
  }
  return h
}

describe('associated Legendre functions', () => {
  // scipy 1.17.1, scipy.special.lpmv (phase taken off) times √((2 − δ₀ₘ)(2l + 1)(l − m)!/(l + m)!); the last three by sph_harm_y.
  it.each([
    [1, 0, 0.3, 0.5196152422706632],
    [2, 0, -0.7, 0.5254759747124503],
    [2, 1, 0.5, 1.6770509831248426],
    [2, 2, 0.5, 1.452368754827781],
    [5, 3, -0.25, -0.6887480018070956],
    [10, 7, 0.9, 0.16116628973624986],
    [20, 0, 0.123, -0.9263563258141],
    [37, 21, 0.6, 1.9696530061212014],
    [60, 60, 0.1, 3.1023147327558047],
    [64, 10, -0.95, 3.0423097079267154],
    [100, 50, 0.333, 0.7683156519433221],
    [128, 64, 0.2, -1.6032805161856256],
    [200, 3, 0.8, -1.0586912808611295],
    [256, 128, 0.45, -0.48597073332366764]
  ])('degree %d, order %d at %d', (l, m, t, expected) => {
    const out = new Float64Array(coefficientCount(256))
    legendreInto(legendreRecursion(256), t, out)
    expect(out[coefficientIndex(256, l, m)]).toBeCloseTo(expected, 10)
  })

  it('fulfil the addition theorem: Σ_m P̄²_lm = 2l + 1 at every latitude', () => {
    const degree = 200
    const out = new Float64Array(coefficientCount(degree))
    const recursion = legendreRecursion(degree)
    for (const t of [-0.999, -0.5, 0, 0.2, 0.87, 1]) {
      legendreInto(recursion, t, out)
      for (const l of [0, 1, 2, 17, 100, 200]) {
        let sum = 0
        for (let m = 0; m <= l; m++) sum += out[coefficientIndex(degree, l, m)]! ** 2
        expect(sum / (2 * l + 1)).toBeCloseTo(1, 11)
      }
    }
  })
})

describe('Gauss–Legendre rule', () => {
  // Newton's iteration in 40 digits with mpmath. (scipy 1.17.1 roots_legendre(386) has its last weight 8e-10 too small.)
  it('has the nodes and weights of a calculation in 40 digits', () => {
    const g64 = gaussLegendre(64)
    expect(g64.nodes[0]).toBeCloseTo(-0.9993050417357721, 15)
    expect(g64.weights[0]).toBeCloseTo(0.001783280721696433, 14)
    expect(g64.nodes[33]).toBeCloseTo(0.07299312178779904, 15)
    expect(g64.weights[33]).toBeCloseTo(0.04857546744150343, 14)
    const g386 = gaussLegendre(386)
    expect(g386.nodes[385]).toBeCloseTo(0.9999806430681045, 15)
    expect(g386.weights[385]! / 4.967597790645932e-5).toBeCloseTo(1, 10)
  })
  it('integrates powers exactly up to degree 2n − 1', () => {
    const { nodes, weights } = gaussLegendre(7)
    for (let power = 0; power <= 13; power++) {
      const sum = nodes.reduce((total, x, i) => total + weights[i]! * x ** power, 0)
      expect(sum).toBeCloseTo(power % 2 === 0 ? 2 / (power + 1) : 0, 14)
    }
  })
  it('refuses what is no count', () => expect(() => gaussLegendre(0)).toThrow('n must be a positive integer, got 0'))
})

describe('Fourier transform', () => {
  it('is the plain sum', () => {
    const n = 16
    const re = Float64Array.from({ length: n }, (_, i) => Math.sin(i * i))
    const im = Float64Array.from({ length: n }, (_, i) => Math.cos(3 * i))
    const wanted = Array.from({ length: n }, (_, k) => {
      let r = 0
      let s = 0
      for (let j = 0; j < n; j++) {
        const a = -2 * Math.PI * j * k / n
        r += re[j]! * Math.cos(a) - im[j]! * Math.sin(a)
        s += re[j]! * Math.sin(a) + im[j]! * Math.cos(a)
      }
      return [r, s]
    })
    fourierTransform(fourierPlan(n), re, im, true)
    wanted.forEach(([r, s], k) => {
      expect(re[k]).toBeCloseTo(r!, 12)
      expect(im[k]).toBeCloseTo(s!, 12)
    })
  })
  it('wants a power of two', () => expect(() => fourierPlan(12)).toThrow('size must be a power of two, got 12'))
})

describe('transforms', () => {
  it.each([2, 7, 40, 90])('there and back, degree %d', (degree) => {
    const grid = harmonicGrid(degree)
    const scratch = transformScratch(grid)
    const field = new Float64Array(grid.rows * grid.columns)
    const h = sample(degree)
    const back = emptyHarmonics(degree)
    synthesise(grid, h, field, scratch)
    analyse(grid, field, back, scratch)
    for (let k = 0; k < h.cosine.length; k++) {
      expect(Math.abs(back.cosine[k]! - h.cosine[k]!)).toBeLessThan(1e-12)
      expect(Math.abs(back.sine[k]! - h.sine[k]!)).toBeLessThan(1e-12)
    }
  })

  it('hold Parseval: the mean square of the field is the sum of the squared coefficients', () => {
    const grid = harmonicGrid(30)
    const field = new Float64Array(grid.rows * grid.columns)
    const h = sample(30)
    synthesise(grid, h, field, transformScratch(grid))
    const sum = h.cosine.reduce((s, c) => s + c * c, 0) + h.sine.reduce((s, c) => s + c * c, 0)
    expect(sphereMean(grid, field.map(v => v * v)) / sum).toBeCloseTo(1, 12)
  })

  it('agree with the sum at single places', () => {
    const degree = 25
    const grid = harmonicGrid(degree)
    const field = new Float64Array(grid.rows * grid.columns)
    const h = sample(degree)
    synthesise(grid, h, field, transformScratch(grid))
    const longitudes = gridLongitudes(grid)
    for (const [i, j] of [[0, 0], [3, 17], [grid.rows - 1, grid.columns - 1], [20, 5]] as const) {
      const lat = geodeticFromGeocentricDeg(Math.asin(grid.sines[i]!) * 180 / Math.PI)
      expect(valueAtPlace(h, lat, longitudes[j]! * 180 / Math.PI)).toBeCloseTo(field[i * grid.columns + j]!, 10)
    }
  })

  it('give one value at a pole, whatever the longitude', () => {
    const values = valuesOnNodes(sample(12), [90], [-180, -33, 0, 100])
    for (const value of values) expect(value).toBeCloseTo(values[0]!, 11)
  })

  it('refuse grids that cannot hold the degree', () => {
    expect(() => harmonicGrid(1)).toThrow(RangeError)
    expect(() => harmonicGrid(20, 20)).toThrow('rows must be even and at least 21, got 20')
    expect(() => harmonicGrid(20, 33)).toThrow(RangeError)
  })
})
