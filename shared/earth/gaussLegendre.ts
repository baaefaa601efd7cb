/** Nodes in (−1, 1), rising, and weights with the sum 2. */
export interface GaussLegendre { nodes: Float64Array, weights: Float64Array }

/**
 * Gauss–Legendre rule of `n` points, exact for polynomials of degree 2n − 1. Newton's iteration on P_n from the asymptotic
 * roots (Abramowitz & Stegun 1964, 22.16.6); nodes and weights to the last bits for n up to some thousands.
 */
export function gaussLegendre(n: number): GaussLegendre {
  if (!(Number.isInteger(n) && n > 0)) throw new RangeError(`n must be a positive integer, got ${n}`)
  const nodes = new Float64Array(n)
  const weights = new Float64Array(n)
  for (let i = 0; i < Math.ceil(n / 2); i++) {
    let x = Math.cos(Math.PI * (i + 0.75) / (n + 0.5))
    let slope = 1
    for (let step = 0; step < 100; step++) {
      let p = 1
      let before = 0
      for (let k = 1; k <= n; k++) {
        const next = ((2 * k - 1) * x * p - (k - 1) * before) / k
        before = p
        p = next
      }
      slope = n * (x * p - before) / (x * x - 1)
      const change = p / slope
      x -= change
      if (Math.abs(change) < 1e-16) break
    }
    if (2 * i + 1 === n) x = 0
    const weight = 2 / ((1 - x * x) * slope * slope)
    nodes[i] = -x
    nodes[n - 1 - i] = x
    weights[i] = weight
    weights[n - 1 - i] = weight
  }
  return { nodes, weights }
}
