/** ln Γ(x) for x > 0 to 1e-14 (Lanczos 1964, J. SIAM Numer. Anal. B 1, 86; g = 7, n = 9). */
export function logGamma(x: number): number {
  if (!(x > 0)) throw new RangeError(`x must be positive, got ${x}`)
  if (x < 0.5) return Math.log(Math.PI / Math.sin(Math.PI * x)) - logGamma(1 - x)
  const t = x + 6.5
  let sum = 0.99999999999980993
  lanczos.forEach((c, i) => { sum += c / (x + i) })
  return 0.5 * Math.log(2 * Math.PI) + (x - 0.5) * Math.log(t) - t + Math.log(sum)
}

const lanczos = [
  676.5203681218851, -1259.1392167224028, 771.32342877765313, -176.61502916214059, 12.507343278686905, -0.13857109526572012, 9.9843695780195716e-6, 1.5056327351493116e-7
] as const

/** Largest number of terms of a series or continued fraction; they converge within √a of them. */
const TERMS = 10_000

/** Probability that χ² with ν degrees of freedom is larger than x: the upper incomplete gamma function (Press et al., §6.2). */
export function chiSquareTail(x: number, degreesOfFreedom: number): number {
  if (!(degreesOfFreedom > 0)) throw new RangeError(`degreesOfFreedom must be positive, got ${degreesOfFreedom}`)
  if (!(x > 0)) return 1
  const a = degreesOfFreedom / 2
  const z = x / 2
  const front = Math.exp(-z + a * Math.log(z) - logGamma(a))
  if (z < a + 1) {
    let term = 1 / a
    let sum = term
    for (let n = 1; n < TERMS && term > sum * 1e-16; n++) {
      term *= z / (a + n)
      sum += term
    }
    return Math.max(0, 1 - sum * front)
  }
  // Lentz's continued fraction.
  let b = z + 1 - a
  let c = 1e300
  let d = 1 / b
  let h = d
  for (let n = 1; n < TERMS; n++) {
    const an = -n * (n - a)
    b += 2
    d = 1 / (an * d + b)
    c = b + an / c
    const factor = d * c
    h *= factor
    if (Math.abs(factor - 1) < 1e-15) break
  }
  return front * h
}

/** Probability that |t| of Student's distribution is larger than |t| given, two-sided; ν may be any positive number. */
export function studentTail(t: number, degreesOfFreedom: number): number {
  if (!(degreesOfFreedom > 0)) throw new RangeError(`degreesOfFreedom must be positive, got ${degreesOfFreedom}`)
  return incompleteBeta(degreesOfFreedom / (degreesOfFreedom + t * t), degreesOfFreedom / 2, 0.5)
}

/** Regularised incomplete beta function I_x(a, b) by Lentz's continued fraction (Press et al., §6.4). */
function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0
  if (x >= 1) return 1
  const front = Math.exp(logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log(1 - x))
  return x < (a + 1) / (a + b + 2) ? front * betaFraction(x, a, b) / a : 1 - front * betaFraction(1 - x, b, a) / b
}

function betaFraction(x: number, a: number, b: number): number {
  const tiny = 1e-300
  const guard = (v: number): number => Math.abs(v) < tiny ? tiny : v
  let c = 1
  let d = 1 / guard(1 - (a + b) * x / (a + 1))
  let h = d
  for (let m = 1; m < TERMS; m++) {
    const even = m * (b - m) * x / ((a + 2 * m - 1) * (a + 2 * m))
    d = 1 / guard(1 + even * d)
    c = guard(1 + even / c)
    h *= d * c
    const odd = -(a + m) * (a + b + m) * x / ((a + 2 * m) * (a + 2 * m + 1))
    d = 1 / guard(1 + odd * d)
    c = guard(1 + odd / c)
    h *= d * c
    if (Math.abs(d * c - 1) < 1e-15) break
  }
  return h
}
