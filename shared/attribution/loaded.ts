import { dot } from './linearAlgebra.ts'

/**
 * A figure with its errors by cause: what one sigma of each independent cause does to it. Variances and covariances of any sums are
 * then exact, however many figures share a cause.
 */
export interface Loaded { value: number, loadings: Float64Array }

/** Names of the independent causes, in the order of the loadings. */
export class Causes {
  private readonly names = new Map<string, number>()

  /** Place of a cause, a new one if it is not known yet. */
  index(name: string): number {
    const known = this.names.get(name)
    if (known !== undefined) return known
    this.names.set(name, this.names.size)
    return this.names.size - 1
  }

  get size(): number {
    return this.names.size
  }
}

/** A figure without errors. */
export function exactly(value: number, causes: number): Loaded {
  return { value, loadings: new Float64Array(causes) }
}

/** Σ kᵢ xᵢ. */
export function combine(parts: readonly (readonly [factor: number, figure: Loaded])[], causes: number): Loaded {
  const sum = exactly(0, causes)
  for (const [factor, { value, loadings }] of parts) {
    sum.value += factor * value
    for (let i = 0; i < causes; i++) sum.loadings[i] = sum.loadings[i]! + factor * loadings[i]!
  }
  return sum
}

/** One-sigma of a figure. */
export function sigmaOf({ loadings }: Loaded): number {
  return Math.sqrt(dot(loadings, loadings))
}

/** Covariance of two figures. */
export function covarianceOfLoaded(x: Loaded, y: Loaded): number {
  return dot(x.loadings, y.loadings)
}

/** Correlation of two figures, 0 where one has no error. */
export function correlationOfLoaded(x: Loaded, y: Loaded): number {
  const size = sigmaOf(x) * sigmaOf(y)
  return size > 0 ? covarianceOfLoaded(x, y) / size : 0
}
