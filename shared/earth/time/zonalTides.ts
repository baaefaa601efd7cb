import { DEGREE } from '../constants.ts'
import { ttCenturies } from './timeScales.ts'
import { zonalTideTerms } from './zonalTideTerms.ts'
import type { ZonalTideTerm } from './zonalTideTerms.ts'

/** All 62 terms, or the 41 whose periods are under 35 days. */
export type ZonalTideSet = 'all' | 'under-35-days'

/** Periods that count as short, days. */
export const SHORT_TIDE_DAYS = 35

const ARCSECOND = DEGREE / 3600

/**
 * Delaunay arguments l, l′, F, D, Ω: constant in degrees, then arcseconds times t, t², t³, t⁴, t in Julian centuries of TT since
 * J2000.0. IERS Conventions (2010), eq. 5.43.
 */
const delaunay: readonly (readonly [number, number, number, number, number])[] = [
  [134.96340251, 1717915923.2178, 31.8792, 0.051635, -0.00024470],
  [357.52910918, 129596581.0481, -0.5532, 0.000136, -0.00001149],
  [93.27209062, 1739527262.8478, -12.7512, -0.001037, 0.00000417],
  [297.85019547, 1602961601.2090, -6.3706, 0.006593, -0.00003169],
  [125.04455501, -6962890.5431, 7.4722, 0.007702, -0.00005939]
]

/** The five Delaunay arguments in radians at t Julian centuries of TT since J2000.0. */
export function delaunayArguments(t: number): [number, number, number, number, number] {
  return delaunay.map(([constant, a, b, c, d]) =>
    constant * DEGREE + ((((d * t + c) * t + b) * t + a) * t % 1296000) * ARCSECOND) as [number, number, number, number, number]
}

/** Terms of a set. */
export function zonalTides(set: ZonalTideSet): readonly ZonalTideTerm[] {
  return set === 'all' ? zonalTideTerms : zonalTideTerms.filter(term => Math.abs(term[5]) < SHORT_TIDE_DAYS)
}

/**
 * Effect of the zonal tides on rotation, IERS Conventions (2010), Table 8.1: what the tides add to UT1 (s), to the length of day (s,
 * longer positive) and to the rate of rotation (rad/s). Reduced values are the observed ones less these.
 *
 * @param t Julian centuries of TT since J2000.0
 */
export function zonalTideEffect(t: number, terms: readonly ZonalTideTerm[] = zonalTideTerms): { ut1Seconds: number, lodSeconds: number, omegaRadPerSecond: number } {
  const [l, lPrime, f, d, omega] = delaunayArguments(t)
  let ut1 = 0
  let lod = 0
  let rate = 0
  for (const [kl, klPrime, kf, kd, kOmega, , ut1Sin, ut1Cos, lodCos, lodSin, omegaCos, omegaSin] of terms) {
    const argument = kl * l + klPrime * lPrime + kf * f + kd * d + kOmega * omega
    const sin = Math.sin(argument)
    const cos = Math.cos(argument)
    ut1 += ut1Sin * sin + ut1Cos * cos
    lod += lodCos * cos + lodSin * sin
    rate += omegaCos * cos + omegaSin * sin
  }
  return { ut1Seconds: ut1 * 1e-4, lodSeconds: lod * 1e-5, omegaRadPerSecond: rate * 1e-14 }
}

/** Effect of the zonal tides on the length of day and on UT1, both in ms, at epochs in MJD (UTC). */
export function zonalTidesMs(mjdUtc: ArrayLike<number>, set: ZonalTideSet = 'all'): { lodMs: Float64Array, ut1Ms: Float64Array } {
  const terms = zonalTides(set)
  const lodMs = new Float64Array(mjdUtc.length)
  const ut1Ms = new Float64Array(mjdUtc.length)
  for (let i = 0; i < mjdUtc.length; i++) {
    const effect = zonalTideEffect(ttCenturies(mjdUtc[i]!), terms)
    lodMs[i] = effect.lodSeconds * 1000
    ut1Ms[i] = effect.ut1Seconds * 1000
  }
  return { lodMs, ut1Ms }
}

/** Effect of the zonal tides on the length of day in ms, at epochs in MJD (UTC). */
export function zonalTideLodMs(mjdUtc: ArrayLike<number>, set: ZonalTideSet = 'all'): Float64Array {
  return zonalTidesMs(mjdUtc, set).lodMs
}
