import { DEGREE, WGS84_E2 } from './constants.ts'
import { zoneAreaM2 } from './latitude.ts'
import type { RingPath } from './rings.ts'

/**
 * Integrals of a ring, over what lies to the LEFT of its direction. Those of harmonics hold on the whole sphere; the two
 * areas are −∮ f dλ alone, without the 2π (or the half ellipsoid) of a ring that winds round a pole.
 */
export interface RingIntegrals {
  /** −∮ sin ψ dλ, sr. */
  areaSr: number
  /** −∮ Q(φ) dλ, m² on WGS 84. */
  areaM2: number
  /** ∫ sin ψ cos ψ cos λ dA, sr. */
  xz: number
  /** ∫ sin ψ cos ψ sin λ dA, sr. */
  yz: number
  /** ∫ P₂(sin ψ) dA, sr; cos² ψ = 2/3 − 2/3 P₂. */
  p2: number
  /** ∫ of the unit vector's components, sr. */
  x: number
  y: number
  z: number
}

const QUANTITIES = 8
/** Longest piece of an edge that one Gauss rule takes, degrees: with five points the error is below 1e-17 sr. */
const LONGEST_PIECE_DEG = 8
/** Edges shorter than this take three points: the error is below 2e-16 sr at the limit and falls with the seventh power. */
const SHORT_EDGE_DEG = 1

// Gauss–Legendre on [−1, 1]: Abramowitz & Stegun (1964), table 25.4; here from their closed forms.
const NODES_3 = [-Math.sqrt(3 / 5), 0, Math.sqrt(3 / 5)]
const WEIGHTS_3 = [5 / 9, 8 / 9, 5 / 9]
const INNER = Math.sqrt(5 - 2 * Math.sqrt(10 / 7)) / 3
const OUTER = Math.sqrt(5 + 2 * Math.sqrt(10 / 7)) / 3
const NODES_5 = [-OUTER, -INNER, 0, INNER, OUTER]
const WEIGHT_INNER = (322 + 13 * Math.sqrt(70)) / 900
const WEIGHT_OUTER = (322 - 13 * Math.sqrt(70)) / 900
const WEIGHTS_5 = [WEIGHT_OUTER, WEIGHT_INNER, 128 / 225, WEIGHT_INNER, WEIGHT_OUTER]

/**
 * Contour integrals along a ring whose edges are straight in longitude and GEODETIC latitude, each point mapped to the
 * geocentric latitude of the sphere: the limit of an ever finer densification (0.25° differs by less than 1e-8).
 *
 * A harmonic of degree n has ∫Y dA = −1/(n(n + 1)) ∮ ∂Y/∂ν ds with ν outward, so nothing happens at a pole or at ±180°.
 * Sums are compensated (Neumaier 1974).
 */
export function ringIntegrals(ring: RingPath): RingIntegrals {
  const { lonDeg, latDeg } = ring
  const sums = new Float64Array(QUANTITIES)
  const carries = new Float64Array(QUANTITIES)
  const edge = new Float64Array(QUANTITIES)
  for (let i = 1; i < lonDeg.length; i++) {
    const lon0 = lonDeg[i - 1]!
    const lat0 = latDeg[i - 1]!
    const dLon = lonDeg[i]! - lon0
    const dLat = latDeg[i]! - lat0
    const length = Math.max(Math.abs(dLon), Math.abs(dLat))
    if (length === 0) continue
    const short = length <= SHORT_EDGE_DEG
    const pieces = short ? 1 : Math.ceil(length / LONGEST_PIECE_DEG)
    const nodes = short ? NODES_3 : NODES_5
    const weights = short ? WEIGHTS_3 : WEIGHTS_5
    const lonStep = dLon / pieces
    const latStep = dLat / pieces
    for (let k = 0; k < pieces; k++) {
      addPiece(edge, (lon0 + k * lonStep) * DEGREE, (lat0 + k * latStep) * DEGREE, lonStep * DEGREE, latStep * DEGREE, nodes, weights)
      for (let q = 0; q < QUANTITIES; q++) {
        const value = edge[q]!
        const sum = sums[q]!
        const next = sum + value
        carries[q] = carries[q]! + (Math.abs(sum) >= Math.abs(value) ? (sum - next) + value : (value - next) + sum)
        sums[q] = next
      }
    }
  }
  const total = (q: number) => sums[q]! + carries[q]!
  return { areaSr: total(0), areaM2: total(1), xz: total(2), yz: total(3), p2: total(4), x: total(5), y: total(6), z: total(7) }
}

function addPiece(out: Float64Array, lon: number, lat: number, dLon: number, dLat: number, nodes: readonly number[], weights: readonly number[]): void {
  let areaSr = 0
  let areaM2 = 0
  let xz = 0
  let yz = 0
  let p2 = 0
  let x = 0
  let y = 0
  let z = 0
  const squeeze = 1 - WGS84_E2
  for (let g = 0; g < nodes.length; g++) {
    const t = 0.5 + 0.5 * nodes[g]!
    const half = 0.5 * weights[g]!
    const lambda = lon + t * dLon
    const phi = lat + t * dLat
    const sinLon = Math.sin(lambda)
    const cosLon = Math.cos(lambda)
    const sinPhi = Math.sin(phi)
    const cosPhi = Math.cos(phi)
    const norm2 = cosPhi * cosPhi + squeeze * squeeze * sinPhi * sinPhi
    const norm = Math.sqrt(norm2)
    const s = squeeze * sinPhi / norm
    const c = cosPhi / norm
    const wLon = half * dLon
    const wPsi = half * dLat * squeeze / norm2
    areaSr -= s * wLon
    areaM2 -= zoneAreaM2(sinPhi) * wLon
    const meridional = c * (1 - 2 * s * s) * wLon
    xz += meridional * cosLon + s * sinLon * wPsi
    yz += meridional * sinLon - s * cosLon * wPsi
    p2 += s * c * c * wLon
    const polar = s * c * wLon
    x += sinLon * wPsi - polar * cosLon
    y -= cosLon * wPsi + polar * sinLon
    z += c * c * wLon
  }
  out[0] = areaSr
  out[1] = areaM2
  out[2] = xz / 6
  out[3] = yz / 6
  out[4] = p2 / 2
  out[5] = x / 2
  out[6] = y / 2
  out[7] = z / 2
}
