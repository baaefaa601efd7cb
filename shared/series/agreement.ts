import { medianStep } from '../earth/time/monthlyMeans.ts'
import { fitTrend } from '../earth/time/trend.ts'
import { formatDate, formatMeasured, formatNumber } from '../format/numbers.ts'

/** Another series of the same region. */
export interface OtherSeries { name: string, mjd: ArrayLike<number>, massGt: ArrayLike<number> }

export interface Disagreement { what: 'sign' | 'trend' | 'size', fromMjd: number, toMjd: number, message: string }

/** Epochs that two series must have in common. */
const LEAST_EPOCHS = 12
/** Sigmas that trends may be apart. */
const TREND_SIGMAS = 3
/** Correlation below which a sign is likely turned, and factor of the spreads beyond which a unit is. */
const TURNED = -0.5
const FACTOR = 5

/**
 * How a series disagrees with another of its region over their common time: turned about, in trend, or in size. The other is taken
 * between its epochs, across no more than two and a half of its steps. Null where they agree within their errors or hardly meet.
 */
export function disagreements(own: Omit<OtherSeries, 'name'>, other: OtherSeries): Disagreement | null {
  const pairs = common(own, other)
  if (pairs.mjd.length < LEAST_EPOCHS) return null
  const { mjd, a, b } = pairs
  const place = { fromMjd: mjd[0]!, toMjd: mjd.at(-1)! }
  const over = `from ${formatDate(place.fromMjd)} to ${formatDate(place.toMjd)}`
  const { correlation, spreadA, spreadB } = compared(a, b)
  if (correlation < TURNED) {
    return { what: 'sign', ...place, message: `“${other.name}” goes the other way ${over} (correlation ${formatNumber(correlation, 2)}). Is the sign of one of them turned?` }
  }
  const difference = fitTrend({ mjd, value: a.map((v, i) => v - b[i]!) })
  if (Math.abs(difference.value) > TREND_SIGMAS * difference.sigma) {
    const shown = (value: number[]): string => {
      const fit = fitTrend({ mjd, value })
      return formatMeasured(fit.value, fit.sigma, { unit: 'Gt/yr' }).text
    }
    return { what: 'trend', ...place, message: `The trend is ${shown(a)}, that of “${other.name}” ${shown(b)} ${over}: ${formatMeasured(difference.value, difference.sigma, { unit: 'Gt/yr' }).text} apart.` }
  }
  const ratio = spreadA / spreadB
  if (correlation > 0.5 && (ratio > FACTOR || ratio < 1 / FACTOR)) {
    return { what: 'size', ...place, message: `“${other.name}” goes along but varies ${formatNumber(ratio > 1 ? ratio : 1 / ratio, 1)} times ${ratio > 1 ? 'less' : 'more'} ${over}. Is the unit of one of them right?` }
  }
  return null
}

function common(own: Omit<OtherSeries, 'name'>, other: OtherSeries): { mjd: number[], a: number[], b: number[] } {
  const out = { mjd: [] as number[], a: [] as number[], b: [] as number[] }
  const reach = 2.5 * medianStep(other.mjd)
  let k = 0
  for (let i = 0; i < own.mjd.length; i++) {
    const t = own.mjd[i]!
    while (k < other.mjd.length && other.mjd[k]! < t) k++
    if (k === other.mjd.length) break
    const exact = other.mjd[k] === t
    if (!exact && (k === 0 || other.mjd[k]! - other.mjd[k - 1]! > reach)) continue
    const share = exact ? 1 : (t - other.mjd[k - 1]!) / (other.mjd[k]! - other.mjd[k - 1]!)
    out.mjd.push(t)
    out.a.push(own.massGt[i]!)
    out.b.push(exact ? other.massGt[k]! : other.massGt[k - 1]! * (1 - share) + other.massGt[k]! * share)
  }
  return out
}

function compared(a: number[], b: number[]): { correlation: number, spreadA: number, spreadB: number } {
  const n = a.length
  const meanA = a.reduce((x, y) => x + y) / n
  const meanB = b.reduce((x, y) => x + y) / n
  let aa = 0
  let bb = 0
  let ab = 0
  for (let i = 0; i < n; i++) {
    aa += (a[i]! - meanA) ** 2
    bb += (b[i]! - meanB) ** 2
    ab += (a[i]! - meanA) * (b[i]! - meanB)
  }
  return { correlation: aa > 0 && bb > 0 ? ab / Math.sqrt(aa * bb) : 0, spreadA: Math.sqrt(aa / n), spreadB: Math.sqrt(bb / n) }
}
