import { formatMeasured, formatNumber } from '../format/numbers.ts'
import type { Scaling } from './scaling.ts'
import { quantityNames } from './types.ts'
import type { RotationQuantity } from './types.ts'

/** Condition beyond which single factors are not to be read. */
const ILL_CONDITIONED = 30
/** Correlation of two factors that is told. */
const CLOSE = 0.9

/** What a scaling estimate says, group by group, and how far it may be read. */
export function scalingSentences({ band, trend, factors, correlation, condition }: Omit<Scaling, 'sentences'>): string[] {
  const what = band === 'annual' ? 'the seasons alone' : band === 'all' ? 'trend, seasons and everything between' : trend === 'in' ? 'trend and change from year to year, without seasons' : 'change from year to year, without trend and seasons'
  return [
    `Factors fitted to ${what}; 1 means as reported.`,
    ...factors.map(({ name, posterior, prior, resolution, carriedBy }) => {
      const carriers = (Object.entries(carriedBy) as [RotationQuantity, number][]).filter(([, share]) => share >= 0.25).sort((a, b) => b[1] - a[1])
      const carried = resolution < 0.05 || carriers.length === 0 ? '' : `, carried by ${carriers.map(([quantity]) => quantityNames[quantity]).join(' and ')}`
      const weight = resolution < 0.05 ? 'the data say nothing about it' : `the prior weighs ${Math.round((1 - resolution) * 100)} %`
      return `${name}: ${formatMeasured(posterior.value, posterior.sigma, { signed: false }).text} (prior ${formatNumber(prior.mean, 2)} ± ${formatNumber(prior.sigma, 2)})${carried}; ${weight}.`
    }),
    ...correlation.flatMap((row, i) => row.flatMap((r, j) => j > i && Math.abs(r) > CLOSE
      ? [`“${factors[i]!.name}” and “${factors[j]!.name}” are estimated together: their ${r < 0 ? 'sum' : 'difference'} is known far better than either (correlation ${formatNumber(r, 2)}).`]
      : [])),
    ...(condition > ILL_CONDITIONED ? [`The signatures are nearly dependent (condition ${Number.isFinite(condition) ? formatNumber(condition) : 'infinite'}): single factors lean on their priors.`] : [])
  ]
}
