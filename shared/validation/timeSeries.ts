import { weightedLeastSquares } from '../earth/time/leastSquares.ts'
import { poleFromExcitation } from '../earth/time/polarMotion.ts'
import { fitTrend } from '../earth/time/trend.ts'
import { zonalTideEffect } from '../earth/time/zonalTides.ts'
import type { ReferenceCheck } from './check.ts'
import { longley, norris } from './data/nistStrd.ts'
import reference from './data/timeReference.json' with { type: 'json' }

const independent = 'Independent reference implementation in another language'
const J2000_MJD = 51544.5

/** Fits, tides and polar motion beside certified and independent values. */
export function timeSeriesChecks(): ReferenceCheck[] {
  return [...regressions(), ...trend(), ...tides(), ...wobble()]
}

function regressions(): ReferenceCheck[] {
  const ones = (n: number) => new Float64Array(n).fill(1)
  const norrisFit = weightedLeastSquares([ones(norris.x.length), Float64Array.from(norris.x)], norris.y)
  const columns = [1, 2, 3, 4, 5, 6].map(i => Float64Array.from(longley.rows, row => row[i]!))
  const longleyFit = weightedLeastSquares([ones(longley.rows.length), ...columns], longley.rows.map(row => row[0]!))
  const rows = (id: string, source: string, got: ArrayLike<number>, wanted: number[]): ReferenceCheck[] => wanted.map((value, i) => ({
    id: `${id}-b${i}`, group: 'Least squares', title: `${source.split(':')[0]}: B${i}`, unit: '1', computed: got[i]!, reference: value,
    tolerance: { kind: 'relative', within: 1e-9 }, source: `${source}; certified value`, origin: 'published', cause: 'Double precision on a nearly dependent design.',
  }))
  return [...rows('norris', norris.source, norrisFit.coefficients, norris.coefficients), ...rows('longley', longley.source, longleyFit.coefficients, longley.coefficients)]
}

function trend(): ReferenceCheck[] {
  const { stats } = reference
  const fit = fitTrend({ mjd: stats.t.map(t => J2000_MJD + (t - 2000) * 365.25), value: stats.y })
  const row = (id: string, title: string, computed: number, value: number): ReferenceCheck => ({
    id, group: 'Trend of sixty months', title, unit: 'per year', computed, reference: value, tolerance: { kind: 'relative', within: stats.rel_tol }, source: independent, origin: 'independent', cause: 'Printed digits.',
  })
  return [
    row('trend-value', 'Trend', fit.value, stats.coef[1]!),
    row('trend-white', 'One-sigma under white noise', fit.sigmaWhite, stats.sigma_white[1]!),
    row('trend-sigma', 'One-sigma with lag-one correlation', fit.sigma, stats.sigma_infl[1]!),
  ]
}

function tides(): ReferenceCheck[] {
  const conventions = zonalTideEffect(0.07995893223819302)
  const source = 'IERS Conventions (2010), ch. 8: test value for t = 0.07995893223819302 centuries (MJD 54465)'
  const row = (id: string, title: string, unit: string, computed: number, value: number, within: number): ReferenceCheck => ({
    id, group: 'Zonal tides', title, unit, computed, reference: value, tolerance: { kind: 'absolute', within }, source, origin: 'published', cause: 'Order of summing.',
  })
  return [
    row('tide-ut1', 'δUT1', 's', conventions.ut1Seconds, 7.983287678576557e-2, 1e-12),
    row('tide-lod', 'δLOD', 's', conventions.lodSeconds, 5.035331113978199e-5, 1e-14),
    row('tide-omega', 'δω', 'rad/s', conventions.omegaRadPerSecond, -4.249711616463017e-14, 1e-22),
    ...reference.zonalTides.T.slice(1).map((t, i): ReferenceCheck => ({
      ...row(`tide-lod-${i + 1}`, `δLOD at t = ${t}`, 's', zonalTideEffect(t).lodSeconds, reference.zonalTides.dLOD_s[i + 1]!, 1e-14), source: independent, origin: 'independent', cause: 'Twelve printed digits.',
    })),
  ]
}

function wobble(): ReferenceCheck[] {
  const { liouville } = reference
  const pole = poleFromExcitation(liouville.t, liouville.chi1, liouville.chi2, { xMas: 100, yMas: 50 })
  const last = liouville.t.length - 1
  const row = (id: string, title: string, computed: number, value: number): ReferenceCheck => ({
    id, group: 'Polar motion', title, unit: 'mas', computed, reference: value, tolerance: { kind: 'absolute', within: 1e-6 }, source: `${independent}: integration over 1170 days, 433 d, Q 179`, origin: 'independent', cause: 'Printed digits.',
  })
  return [row('pole-x', 'x after 1170 days', pole.xMas[last]!, liouville.xp[last]!), row('pole-y', 'y after 1170 days', pole.yMas[last]!, liouville.yp[last]!)]
}
