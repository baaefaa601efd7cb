import { DEGREE } from './constants.ts'
import { geocentricFromGeodeticDeg } from './latitude.ts'
import { legendreInto, legendreRecursion, coefficientCount } from './legendre.ts'
import type { Harmonics } from './sphericalHarmonics.ts'

/**
 * Field values on nodes of geodetic latitude and longitude, row by row: rows at `latitudesDeg`, columns at `longitudesDeg`.
 * Latitudes are mapped to the sphere as loads and coastlines are.
 */
export function valuesOnNodes(harmonics: Harmonics, latitudesDeg: ArrayLike<number>, longitudesDeg: ArrayLike<number>): Float64Array {
  const { degree, cosine, sine } = harmonics
  const columns = longitudesDeg.length
  const recursion = legendreRecursion(degree)
  const legendre = new Float64Array(coefficientCount(degree))
  const step = Float64Array.from({ length: columns }, (_, j) => longitudesDeg[j]! * DEGREE)
  const stepC = step.map(Math.cos)
  const stepS = step.map(Math.sin)
  const turnC = new Float64Array(columns)
  const turnS = new Float64Array(columns)
  const out = new Float64Array(latitudesDeg.length * columns)
  for (let i = 0; i < latitudesDeg.length; i++) {
    legendreInto(recursion, Math.sin(geocentricFromGeodeticDeg(latitudesDeg[i]!) * DEGREE), legendre)
    turnC.fill(1)
    turnS.fill(0)
    let k = 0
    for (let m = 0; m <= degree; m++) {
      let c = 0
      let s = 0
      for (const end = k + degree - m + 1; k < end; k++) {
        c += legendre[k]! * cosine[k]!
        s += legendre[k]! * sine[k]!
      }
      for (let j = 0; j < columns; j++) {
        const tc = turnC[j]!
        const ts = turnS[j]!
        out[i * columns + j] = out[i * columns + j]! + c * tc + s * ts
        turnC[j] = tc * stepC[j]! - ts * stepS[j]!
        turnS[j] = ts * stepC[j]! + tc * stepS[j]!
      }
    }
  }
  return out
}

/** Value of a field at one place: geodetic latitude and east longitude, degrees. */
export function valueAtPlace(harmonics: Harmonics, latitudeDeg: number, longitudeDeg: number): number {
  return valuesOnNodes(harmonics, [latitudeDeg], [longitudeDeg])[0]!
}
