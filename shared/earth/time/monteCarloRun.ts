import { formatNumber, formatSignificant } from '../../format/numbers.ts'
import type { Measured } from '../../types/domain.ts'
import type { RunInput, RunRegionResult, RunResult } from '../../types/run.ts'
import { covarianceOf } from './covariance.ts'
import { trendWeights } from './covarianceTrend.ts'
import { rateNames } from './monteCarlo.ts'
import type { Distribution, MonteCarloResult, MonteCarloSeries, RateName } from './monteCarlo.ts'
import { fitTrend } from './trend.ts'

/**
 * The regions of a run as a Monte Carlo draws them: errors of the epochs as AR(1) noise with the scatter and the lag-one correlation of the
 * residuals, drawn epoch by epoch and refitted, and each systematic source as one number for all its series. The run quotes the long-series
 * factor √((1 + r₁)/(1 − r₁)) in place of drawing; how far the two agree on these very epochs is what is checked.
 */
export function monteCarloInputOf(input: RunInput, result: RunResult): MonteCarloSeries[] {
  return input.regions.filter(region => region.scale !== 0).map((region) => {
    const { fromMjd, toMjd } = result.span
    const inside = region.series.mjd.map((t, i) => t >= fromMjd && t <= toMjd ? i : -1).filter(i => i >= 0)
    const mjd = inside.map(i => region.series.mjd[i]!)
    const sigma = region.series.sigmaGt ? inside.map(i => region.series.sigmaGt![i]!) : null
    const fit = fitTrend({ mjd, value: inside.map(i => region.series.massGt[i]!), sigma })
    const size = sigma ? fit.residualSigma / Math.sqrt(sigma.reduce((sum, s) => sum + s * s, 0) / sigma.length) : fit.residualSigma
    const effects = arWeights(trendWeights(mjd, sigma, { seasonal: fit.seasonal }).map((w, i) => w * size * (sigma?.[i] ?? 1)), fit.r1)
    // The last place has no error of its own: systematic rates enter through it as they are.
    const loading = (rate: number): Float64Array => Float64Array.from([...effects, 0], (_, i) => i === effects.length ? rate : 0)
    return {
      key: region.key,
      rate: fit.value,
      weights: Float64Array.from([...effects, 1]),
      covariance: covarianceOf([...effects.map(() => 1), 0], region.series.sharedRates.map(({ source, sigmaGtPerYear }) => ({ source, loading: loading(sigmaGtPerYear) }))),
      perGt: netPerGt(result.regions.filter(row => row.key === region.key || row.keptFrom === region.key), region.scale * (region.groundedFraction ?? 1))
    }
  })
}

/** What independent unit numbers do where errors follow u₀ = z₀, uᵢ = r uᵢ₋₁ + √(1 − r²) zᵢ and are weighted with w: Σ w u = Σ g z. */
export function arWeights(weights: Float64Array, r: number): Float64Array {
  const out = new Float64Array(weights.length)
  let later = 0
  for (let i = weights.length - 1; i >= 0; i--) {
    later = weights[i]! + r * later
    out[i] = i === 0 ? later : Math.sqrt(Math.max(0, 1 - r * r)) * later
  }
  return out
}

/** Effect of a gigatonne of the series with the region's factor, and with the rows of what is kept on land or counted once. */
function netPerGt(rows: readonly RunRegionResult[], scale: number): MonteCarloSeries['perGt'] {
  const own = rows.find(row => !row.keptFrom)!.massGtPerYear!.value
  const sum = (pick: (row: RunRegionResult) => number): number => scale * rows.reduce((total, row) => total + pick(row), 0)
  return {
    massGt: sum(row => row.keptFrom ? own === 0 ? 0 : row.massGtPerYear!.value / own : 1),
    chi1Mas: sum(row => row.perGt.chi1Mas), chi2Mas: sum(row => row.perGt.chi2Mas), lodMicroseconds: sum(row => row.perGt.lodMicroseconds)
  }
}

export interface CheckedRate { linear: { value: number, sigma: number }, sampled: Distribution, agrees: boolean }

/** Sampled beside quoted errors of a run's trends, per year. */
export interface MonteCarloCheck {
  members: number
  seed: number
  sentence: string
  total: Record<RateName, CheckedRate>
  drift: { lengthMas: Distribution, linearLengthMas: number, directionDegEast: number | null, turnDeg: Distribution }
  regions: { key: string, name: string, massGt: CheckedRate }[]
}

/** Sampled standard deviations scatter by 1/√(2(n − 1)) of their size; beyond three times that they differ. */
const SAMPLING = 3

/** Holds the members of a run's trends against the errors that the run quotes. */
export function monteCarloCheck(sampled: MonteCarloResult, { regions, total }: RunResult): MonteCarloCheck {
  const allowed = SAMPLING / Math.sqrt(2 * (sampled.members - 1))
  const check = (linear: Measured, distribution: Distribution): CheckedRate => ({
    linear: { value: linear.value, sigma: linear.sigma }, sampled: distribution,
    agrees: Math.abs(distribution.sigma - linear.sigma) <= allowed * linear.sigma
  })
  const quoted: Record<RateName, Measured> = { massGt: total.massGtPerYear!, chi1Mas: total.chi1MasPerYear!, chi2Mas: total.chi2MasPerYear!, lodMicroseconds: total.lodMicrosecondsPerYear! }
  const checked = Object.fromEntries(rateNames.map(name => [name, check(quoted[name], sampled.total[name])])) as Record<RateName, CheckedRate>
  return {
    members: sampled.members,
    seed: sampled.seed,
    sentence: sentenceOf(checked, sampled.members, allowed),
    total: checked,
    drift: { lengthMas: sampled.drift.length, linearLengthMas: Math.hypot(quoted.chi1Mas.value, quoted.chi2Mas.value), directionDegEast: sampled.drift.directionDegEast, turnDeg: sampled.drift.direction },
    regions: sampled.series.map(({ key, massGt }) => {
      const row = regions.find(region => region.key === key)!
      return { key, name: row.name, massGt: check(row.massGtPerYear!, massGt) }
    })
  }
}

const names: Record<RateName, string> = { massGt: 'mass', chi1Mas: 'χ₁', chi2Mas: 'χ₂', lodMicroseconds: 'length of day' }

function sentenceOf(checked: Record<RateName, CheckedRate>, members: number, allowed: number): string {
  const limit = `${formatSignificant(allowed * 100, 2)} %`
  const apart = rateNames.filter(name => !checked[name].agrees)
  if (apart.length === 0) return `The errors of ${formatNumber(members)} members agree with those that the run quotes, within the ${limit} that so many members allow.`
  const parts = apart.map((name) => {
    const ratio = checked[name].sampled.sigma / checked[name].linear.sigma - 1
    return `${names[name]} ${formatSignificant(Math.abs(ratio) * 100, 2)} % ${ratio > 0 ? 'larger' : 'smaller'}`
  })
  const together = parts.length === 1 ? parts[0] : `${parts.slice(0, -1).join(', ')} and ${parts.at(-1)}`
  return `The errors of ${formatNumber(members)} members differ from those that the run quotes by more than the ${limit} that sampling allows: ${together}. The run widens white noise by a factor that holds for long series; the members carry the correlation from epoch to epoch.`
}
