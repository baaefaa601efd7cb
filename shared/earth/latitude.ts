import { DEGREE, EARTH_RADIUS_M, WGS84_A, WGS84_E2 } from './constants.ts'

const ONE_MINUS_E2 = 1 - WGS84_E2
const POLAR_RADIUS_SQUARED = WGS84_A * WGS84_A * ONE_MINUS_E2

/** Geocentric latitude ψ (degrees) of a geodetic latitude φ (degrees, WGS 84): tan ψ = (1 − e²) tan φ. */
export function geocentricFromGeodeticDeg(latitudeDeg: number): number {
  const phi = requireLatitude(latitudeDeg) * DEGREE
  return Math.atan2(ONE_MINUS_E2 * Math.sin(phi), Math.cos(phi)) / DEGREE
}

/** Geodetic latitude φ (degrees, WGS 84) of a geocentric latitude ψ (degrees). */
export function geodeticFromGeocentricDeg(latitudeDeg: number): number {
  const psi = requireLatitude(latitudeDeg) * DEGREE
  return Math.atan2(Math.sin(psi), ONE_MINUS_E2 * Math.cos(psi)) / DEGREE
}

/**
 * Ellipsoidal area per radian of longitude between the equator and a geodetic latitude, m², from its sine:
 * Q(φ) = b²/2 [ sin φ/(1 − e² sin²φ) + artanh(e sin φ)/e ]. The series in e² is exact to the last bit for WGS 84.
 * Source: Snyder (1987), USGS Professional Paper 1395, eq. 3-12.
 */
export function zoneAreaM2(sinLatitude: number): number {
  const x = WGS84_E2 * sinLatitude * sinLatitude
  const artanh = 1 + x * (1 / 3 + x * (1 / 5 + x * (1 / 7 + x * (1 / 9 + x * (1 / 11 + x * (1 / 13 + x / 15))))))
  return 0.5 * POLAR_RADIUS_SQUARED * sinLatitude * (1 / (1 - x) + artanh)
}

/** r²/R²: distance of the ellipsoid's surface from the Earth's centre at a geodetic latitude, over the sphere's radius, squared. */
export function squaredRadiusRatio(latitudeDeg: number): number {
  const phi = requireLatitude(latitudeDeg) * DEGREE
  const s = Math.sin(phi)
  const c = Math.cos(phi)
  const normal2 = WGS84_A * WGS84_A / (1 - WGS84_E2 * s * s)
  return normal2 * (c * c + ONE_MINUS_E2 * ONE_MINUS_E2 * s * s) / (EARTH_RADIUS_M * EARTH_RADIUS_M)
}

function requireLatitude(latitudeDeg: number): number {
  if (!(Math.abs(latitudeDeg) <= 90)) throw new RangeError(`latitudeDeg must be in [-90, 90], got ${latitudeDeg}`)
  return latitudeDeg
}
