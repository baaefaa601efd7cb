import { wahr1998, wang2012 } from './data/loadLoveNumbers.ts'

/** Tables of load Love numbers. `wahr-1998` prints k alone: its h is that of Wang et al. (2012). */
export type LoveTable = 'wang-2012' | 'wahr-1998'

/** Greatest degree that the tables serve. */
export const LOVE_DEGREE = 256

/**
 * 1 + k′_l − h′_l for degrees 0 to `degree`: what a load does to the height of the sea's surface above the ground. Degree 0 is 0,
 * since the mass is conserved; degree 1 is the same in every frame. Throws RangeError beyond degree 256.
 */
export function seaLevelFactors(degree: number, table: LoveTable = 'wang-2012'): Float64Array {
  requireDegree(degree)
  return Float64Array.from({ length: degree + 1 }, (_, l) => {
    if (l === 0) return 0
    const h = wang2012.h[l - 1]!
    // The printed k₁ = 0.027 belongs to the centre of figure; in the frame of h₁ it is 0 by definition.
    const k = table === 'wang-2012' || l === 1 ? wang2012.k[l - 1]! : wahrK(l)
    return 1 + k - h
  })
}

/** h′_l, l′_l, k′_l of Wang et al. (2012) at a degree from 1 to 256; degree 1 in the frame of the solid Earth's centre of mass. */
export function loveNumbersAt(degree: number): { h: number, l: number, k: number } {
  requireDegree(degree)
  if (degree < 1) throw new RangeError(`degree must be at least 1, got ${degree}`)
  return { h: wang2012.h[degree - 1]!, l: wang2012.l[degree - 1]!, k: wang2012.k[degree - 1]! }
}

/**
 * k′_l of Wahr et al. (1998), Table 1, linear between the printed degrees as the paper advises; beyond 200, where the table ends,
 * (2l + 1) k′_l is kept, which varies slowly.
 */
export function wahrK(degree: number): number {
  const { degrees, k } = wahr1998
  const last = degrees.length - 1
  if (degree >= degrees[last]!) return k[last]! * (2 * degrees[last]! + 1) / (2 * degree + 1)
  const i = degrees.findIndex((d, n) => d <= degree && degrees[n + 1]! > degree)
  return k[i]! + (k[i + 1]! - k[i]!) * (degree - degrees[i]!) / (degrees[i + 1]! - degrees[i]!)
}

function requireDegree(degree: number): void {
  if (!(Number.isInteger(degree) && degree >= 0 && degree <= LOVE_DEGREE)) throw new RangeError(`degree must be an integer in [0, ${LOVE_DEGREE}], got ${degree}`)
}
