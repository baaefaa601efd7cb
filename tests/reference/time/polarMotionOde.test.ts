import { createRequire } from 'node:module'
import { describe, expect, it } from 'vitest'
import { poleFromExcitation } from '../../../shared/earth/time/polarMotion.ts'

// A second opinion by a library for ordinary differential equations: odex 2.0.4, a port of ODEX of Hairer & Wanner (extrapolation of the
// midpoint rule). It ships its TypeScript source, which is not strict: hence by require, with what is used of it written here.
interface Solver { absoluteTolerance: number, relativeTolerance: number, maxSteps: number, solve: (f: (t: number, y: number[]) => number[], from: number, start: number[], to: number) => { y: number[] } }
const { Solver: Odex } = createRequire(import.meta.url)('odex') as { Solver: new (dimension: number) => Solver }

const [periodDays, q] = [433, 179]

/** dp/dt = iσ(p − χ) with p = x − iy, σ = (2π/T)(1 + i/2Q), in x and y. */
function rates(x: number, y: number, chi1: number, chi2: number): number[] {
  const [real, imaginary] = [2 * Math.PI / periodDays, Math.PI / (periodDays * q)]
  const [a, b] = [x - chi1, -y - chi2]
  // i(real + i imaginary)(a + ib) = (−imaginary a − real b) + i(real a − imaginary b); y is minus the imaginary part.
  return [-imaginary * a - real * b, -(real * a - imaginary * b)]
}

describe('the pole against a solver of differential equations', () => {
  it('agrees to 1e-6 mas over twenty years of monthly excitation that is straight between its epochs', () => {
    const mjd = Array.from({ length: 241 }, (_, i) => 45000 + 30.4375 * i)
    const chi1 = mjd.map((t, i) => 20 + 0.004 * (t - 45000) + 9 * Math.sin(2 * Math.PI * t / 365.25) + 4 * Math.sin(i * i / 7))
    const chi2 = mjd.map((t, i) => -310 - 0.008 * (t - 45000) + 17 * Math.cos(2 * Math.PI * t / 365.25) + 6 * Math.cos(i * i / 11))
    const { xMas, yMas } = poleFromExcitation(mjd, chi1, chi2, { xMas: 120, yMas: 390 }, { periodDays, q })
    let state = [120, 390]
    let worst = 0
    for (let k = 1; k < mjd.length; k++) {
      const solver = new Odex(2)
      solver.absoluteTolerance = solver.relativeTolerance = 1e-13
      const [t0, t1] = [mjd[k - 1]!, mjd[k]!]
      const along = (column: number[], t: number) => column[k - 1]! + (column[k]! - column[k - 1]!) * (t - t0) / (t1 - t0)
      state = solver.solve((t, [x, y]) => rates(x!, y!, along(chi1, t), along(chi2, t)), t0, state, t1).y
      worst = Math.max(worst, Math.abs(state[0]! - xMas[k]!), Math.abs(state[1]! - yMas[k]!))
    }
    expect(worst).toBeLessThan(1e-6)
    // The wobble is there to be wrong about.
    expect(Math.max(...xMas) - Math.min(...xMas)).toBeGreaterThan(150)
  })
})
