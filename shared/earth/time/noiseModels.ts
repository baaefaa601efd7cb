import { weightedLeastSquares } from './leastSquares.ts'
import type { LeastSquaresFit } from './leastSquares.ts'

export type NoiseModelName = 'white' | 'ar1' | 'power-law'

/** Design and values of a fit on a regular grid of epochs, whitened by division with the epochs' sigmas. */
export interface GridProblem {
  /** Columns of the design, then one indicator for each grid epoch that has no value. */
  columns: Float64Array[]
  y: Float64Array
  /** Columns of the design proper. */
  designColumns: number
}

export interface NoiseFit {
  /** Whitened fit: coefficients and their sigmas under this noise, the design's first. */
  fit: LeastSquaresFit
  /** φ of AR(1), d of the power law, 0 for white. */
  parameter: number
  /** −2 ln of the restricted likelihood, up to a constant that all models share. */
  deviance: number
}

/**
 * Turns noise of a model into white noise: a lower-triangular filter of unit diagonal (power law) or one whose log-determinant is
 * returned (AR(1)). Applied to the columns and to the values alike, it makes generalised least squares ordinary ones.
 */
type Whitener = (x: Float64Array, parameter: number) => Float64Array

/** AR(1), stationary: x₀, then (xₖ − φ xₖ₋₁)/√(1 − φ²), which has the variance of x itself. */
const whitenAr1: Whitener = (x, phi) => {
  const scale = 1 / Math.sqrt(1 - phi * phi)
  const out = Float64Array.from(x)
  for (let k = x.length - 1; k > 0; k--) out[k] = (x[k]! - phi * x[k - 1]!) * scale
  return out
}

/**
 * Power law of spectral index κ = −2d by fractional differences of order d (Hosking 1981, Biometrika 68, 165): white at d = 0,
 * flicker at ½, random walk at 1. The noise starts with the first epoch (as in Williams 2003, J. Geodesy 76, 483).
 */
const whitenPowerLaw: Whitener = (x, d) => {
  const n = x.length
  const filter = new Float64Array(n)
  filter[0] = 1
  for (let k = 1; k < n; k++) filter[k] = filter[k - 1]! * (k - 1 - d) / k
  const out = new Float64Array(n)
  for (let i = 0; i < n; i++) {
    let sum = 0
    for (let k = 0; k <= i; k++) sum += filter[k]! * x[i - k]!
    out[i] = sum
  }
  return out
}

/** Range that each parameter is sought in. */
const ranges: Record<Exclude<NoiseModelName, 'white'>, readonly [number, number]> = { 'ar1': [-0.9, 0.995], 'power-law': [-0.2, 1.4] }

/** Fit under a noise model whose parameter is given. */
export function fitUnder(model: NoiseModelName, parameter: number, { columns, y }: GridProblem): NoiseFit {
  const whiten = (x: Float64Array): Float64Array => model === 'white' ? x : model === 'ar1' ? whitenAr1(x, parameter) : whitenPowerLaw(x, parameter)
  const fit = weightedLeastSquares(columns.map(whiten), whiten(y))
  const logCovariance = model === 'ar1' ? (y.length - 1) * Math.log(1 - parameter * parameter) : 0
  return { fit, parameter, deviance: fit.degreesOfFreedom * Math.log(fit.variance) + fit.logDeterminant + logCovariance }
}

export interface AveragedFit {
  /** Coefficients of the design, averaged over the parameter with its likelihood as weight. */
  coefficients: Float64Array
  /** Half widths of the intervals about them that hold 68.3 % of the mixture. */
  sigma: Float64Array
  /** Mean of the parameter under its likelihood. */
  parameter: number
  /** Least −2 ln restricted likelihood. */
  deviance: number
}

/** Parameters tried over a range, and the fraction of the highest likelihood that still counts. */
const POINTS = 12
const COUNTS = 0.02
/** Points that the likelihood must spread over, or the range is narrowed around it. */
const RESOLVED = 5

/**
 * Fit under a noise model whose parameter is not known: restricted likelihood (Patterson & Thompson 1971, Biometrika 58, 545), which
 * does not forget the degrees of freedom that the design takes, averaged over the parameter with a flat prior. The spread of the
 * coefficient over the parameter is in its error; the single best parameter alone would make errors of short series too small.
 */
export function fitByLikelihood(model: NoiseModelName, problem: GridProblem): AveragedFit {
  const p = problem.designColumns
  if (model === 'white') {
    const { fit, deviance } = fitUnder('white', 0, problem)
    return { coefficients: fit.coefficients.slice(0, p), sigma: fit.sigma.slice(0, p), parameter: 0, deviance }
  }
  let [low, high] = ranges[model]
  for (let round = 0; ; round++) {
    const width = (high - low) / POINTS
    const tried = Array.from({ length: POINTS + 1 }, (_, i) => fitUnder(model, low + width * i, problem))
    const best = tried.reduce((least, fit) => fit.deviance < least.deviance ? fit : least)
    const weight = tried.map(fit => Math.exp((best.deviance - fit.deviance) / 2))
    const counting = weight.map((w, i) => w > COUNTS ? i : -1).filter(i => i >= 0)
    if (counting.length >= RESOLVED || round === 3) return average(tried, weight, p)
    const narrow = [low + width * (counting[0]! - 1), low + width * (counting.at(-1)! + 1)]
    low = Math.max(low, narrow[0]!)
    high = Math.min(high, narrow[1]!)
  }
}

function average(fits: NoiseFit[], weight: number[], p: number): AveragedFit {
  const total = weight.reduce((a, b) => a + b)
  const mean = (pick: (fit: NoiseFit) => number): number => fits.reduce((sum, fit, i) => sum + weight[i]! * pick(fit), 0) / total
  const coefficients = Float64Array.from({ length: p }, (_, j) => mean(({ fit }) => fit.coefficients[j]!))
  const sigma = coefficients.map((c, j) => halfWidth(c, fits.map(({ fit }, i) => ({ weight: weight[i]! / total, mean: fit.coefficients[j]!, sigma: fit.sigma[j]! }))))
  return { coefficients, sigma, parameter: mean(fit => fit.parameter), deviance: Math.min(...fits.map(fit => fit.deviance)) }
}

/** Part of a normal distribution within one sigma. */
const WITHIN_ONE_SIGMA = 0.6826894921370859

/** Half width s for which centre ± s holds as much of a mixture of normal distributions as ± one sigma of one of them. */
function halfWidth(centre: number, parts: { weight: number, mean: number, sigma: number }[]): number {
  let low = 0
  let high = Math.max(...parts.map(part => part.sigma + Math.abs(part.mean - centre)))
  const inside = (s: number): number => parts.reduce((sum, { weight, mean, sigma }) =>
    sum + (sigma > 0 ? weight * (normal((centre + s - mean) / sigma) - normal((centre - s - mean) / sigma)) : Math.abs(mean - centre) <= s ? weight : 0), 0)
  for (let round = 0; round < 50 && high - low > 1e-9 * high; round++) {
    const middle = (low + high) / 2
    if (inside(middle) < WITHIN_ONE_SIGMA) low = middle
    else high = middle
  }
  return high
}

/** Normal distribution function to 7.5e-8 (Abramowitz & Stegun 1964, 26.2.17). */
function normal(x: number): number {
  const t = 1 / (1 + 0.2316419 * Math.abs(x))
  const tail = Math.exp(-x * x / 2) / Math.sqrt(2 * Math.PI)
    * t * (0.319381530 + t * (-0.356563782 + t * (1.781477937 + t * (-1.821255978 + t * 1.330274429))))
  return x >= 0 ? 1 - tail : tail
}
