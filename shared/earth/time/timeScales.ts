import { J2000_MJD } from './epochs.ts'

/** TT − TAI, s, exact by definition. */
const TT_MINUS_TAI = 32.184

/**
 * TAI − UTC from an epoch on: seconds, then reference MJD and drift (s/d) of the years before 1972, when UTC ran at a rate of its own.
 * IERS Earth Orientation Centre, UTC-TAI.history; agrees with SOFA's `iauDat`.
 */
const steps: readonly (readonly [mjd: number, seconds: number, reference?: number, drift?: number])[] = [
  [36934, 1.417818, 37300, 0.001296], [37300, 1.422818, 37300, 0.001296], [37512, 1.372818, 37300, 0.001296],
  [37665, 1.845858, 37665, 0.0011232], [38334, 1.945858, 37665, 0.0011232],
  [38395, 3.24013, 38761, 0.001296], [38486, 3.34013, 38761, 0.001296], [38639, 3.44013, 38761, 0.001296], [38761, 3.54013, 38761, 0.001296],
  [38820, 3.64013, 38761, 0.001296], [38942, 3.74013, 38761, 0.001296], [39004, 3.84013, 38761, 0.001296],
  [39126, 4.31317, 39126, 0.002592], [39887, 4.21317, 39126, 0.002592],
  [41317, 10], [41499, 11], [41683, 12], [42048, 13], [42413, 14], [42778, 15], [43144, 16], [43509, 17], [43874, 18], [44239, 19],
  [44786, 20], [45151, 21], [45516, 22], [46247, 23], [47161, 24], [47892, 25], [48257, 26], [48804, 27], [49169, 28], [49534, 29],
  [50083, 30], [50630, 31], [51179, 32], [53736, 33], [54832, 34], [56109, 35], [57204, 36], [57754, 37]
]

/**
 * TAI − UTC in seconds at an MJD (UTC). Before 1960 the first value is carried back, after the last leap second the last one is
 * carried on: within a minute, which moves the fastest zonal tide by less than 0.3 µs.
 */
export function taiMinusUtcSeconds(mjdUtc: number): number {
  let low = 0
  let high = steps.length - 1
  while (low < high) {
    const middle = (low + high + 1) >> 1
    if (steps[middle]![0] <= mjdUtc) low = middle
    else high = middle - 1
  }
  const [start, seconds, reference, drift] = steps[low]!
  return reference === undefined ? seconds : seconds + (Math.max(mjdUtc, start) - reference) * drift!
}

/** Terrestrial Time in Julian centuries since J2000.0 at an MJD (UTC). */
export function ttCenturies(mjdUtc: number): number {
  return (mjdUtc - J2000_MJD + (taiMinusUtcSeconds(mjdUtc) + TT_MINUS_TAI) / 86400) / 36525
}
