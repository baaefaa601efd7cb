import { describe, expect, it } from 'vitest'
import { forwardPole } from '../../../shared/attribution/forward.ts'
import { ut1Difference } from '../../../shared/attribution/ut1.ts'
import { poleFromExcitation } from '../../../shared/earth/time/polarMotion.ts'
import { normals } from '../time/runFixtures.ts'

const months = Array.from({ length: 240 }, (_, i) => 50000 + i * 30.4375)
const days = Array.from({ length: 7400 }, (_, i) => 50000 + i)
const chi1 = (t: number): number => 0.004 * (t - 50000) + 8 * Math.sin(2 * Math.PI * t / 365.25)
const chi2 = (t: number): number => -0.003 * (t - 50000) + 5 * Math.cos(2 * Math.PI * t / 3000)
const predicted = { mjd: months, chi1Mas: months.map(chi1), chi2Mas: months.map(chi2) }
/** Pole of the same excitation, straight between the months, with a state and a zero of its own. */
const fine = (t: number, f: (t: number) => number): number => {
  const k = Math.min(238, Math.floor((t - 50000) / 30.4375))
  const share = (t - months[k]!) / 30.4375
  return f(months[k]!) + share * (f(months[k + 1]!) - f(months[k]!))
}
const inside = days.filter(t => t <= months.at(-1)!)
const epochs = [...new Set([...inside, ...months])].sort((a, b) => a - b)
const observed = { mjd: epochs, ...poleFromExcitation(epochs, epochs.map(t => fine(t, chi1) + 60), epochs.map(t => fine(t, chi2) - 310), { xMas: 180, yMas: 120 }) }

describe('the predicted pole', () => {
  it('finds the state and the zero of a pole that the same excitation drives', () => {
    const { stretches: [stretch], sentence } = forwardPole(predicted, observed)
    expect(stretch!.start.xMas).toBeCloseTo(180, 2)
    expect(stretch!.start.yMas).toBeCloseTo(120, 2)
    // Observed poles are read by straight lines between days: 0.004 mas of curvature.
    expect(stretch!.rmsMas).toBeLessThan(0.01)
    expect(stretch!.freeWobbleMas).toBeGreaterThan(100)
    expect(sentence).toContain('67.5 years')
  })

  it('fits a state to each stretch and bridges no gap', () => {
    const gap = { ...predicted, chi1Mas: predicted.chi1Mas.map((c, i) => i >= 100 && i < 110 ? null : c) }
    const { stretches } = forwardPole(gap, observed)
    expect(stretches.map(s => [s.mjd[0], s.mjd.at(-1)])).toEqual([[months[0], months[99]], [months[110], months[239]]])
    stretches.forEach(s => expect(s.rmsMas).toBeLessThan(0.01))
  })

  it('says so where there is nothing to fit a state to', () => {
    expect(forwardPole(predicted, { mjd: [40000, 40001], xMas: [1, 1], yMas: [1, 1] }).stretches).toEqual([])
    expect(forwardPole({ mjd: [], chi1Mas: [], chi2Mas: [] }, observed).sentence).toContain('too little')
  })

  it('leaves a missing pole missing', () => {
    const holes = { ...observed, xMas: observed.xMas.map((x, i) => i > 1000 && i < 1500 ? Number.NaN : x) }
    const { stretches: [stretch] } = forwardPole(predicted, holes)
    expect(stretch!.observedXMas.some(Number.isNaN)).toBe(true)
    expect(stretch!.xMas.some(Number.isNaN)).toBe(false)
    expect(stretch!.start.xMas).toBeCloseTo(180, 2)
  })
})

describe('the UT1 difference', () => {
  it('is 18.26 s per century² for 1 ms per century', () => {
    // 86 400 s days of 1 ms/century: ½ · 1 ms · 36 525 d = 18.26 s, later clocks (negative) for longer days.
    const mjd = Array.from({ length: 1201 }, (_, i) => 15000 + i * 36525 / 1200)
    const { stretches: [s], caution } = ut1Difference({ mjd, lodMs: mjd.map(t => (t - 15000) / 36525), rateSigmaMsPerYear: 0.001, levelSigmaMs: 0 })
    expect(s!.ut1Ms.at(-1)! / 1000).toBeCloseTo(-18.2625, 6)
    // A wrong rate of 0.1 ms per century is a tenth of it.
    expect(s!.sigmaMs.at(-1)! / 1000).toBeCloseTo(1.82625, 6)
    expect(caution).toContain('official bulletins')
  })

  it('ends at a gap and begins again at zero', () => {
    const { stretches } = ut1Difference({ mjd: [0, 1, 2, 3, 4, 5], lodMs: [1, 1, null, 2, 2, 2] })
    expect(stretches.map(s => [...s.ut1Ms])).toEqual([[0, -1], [0, -2, -4]])
  })

  it.each([0, 0.6])('spreads as 4000 simulated integrals do, φ = %f', (phi) => {
    const mjd = Array.from({ length: 60 }, (_, i) => i * 30)
    const sigma = mjd.map((_, i) => 0.1 + 0.001 * i)
    const { stretches: [s] } = ut1Difference({ mjd, lodMs: mjd.map(() => 0), sigmaMs: sigma, phi })
    const normal = normals(3)
    const squares = new Float64Array(60)
    for (let run = 0; run < 4000; run++) {
      let u = normal()
      let error = sigma[0]! * u
      let sum = 0
      for (let k = 1; k < 60; k++) {
        u = phi * u + Math.sqrt(1 - phi * phi) * normal()
        sum += 15 * (error + sigma[k]! * u)
        error = sigma[k]! * u
        squares[k] = squares[k]! + sum * sum / 4000
      }
    }
    // A standard deviation of 4000 runs scatters by 1/√8000 = 1.1 %.
    for (const k of [1, 5, 59]) expect(Math.abs(s!.sigmaMs[k]! / Math.sqrt(squares[k]!) - 1)).toBeLessThan(0.04)
    // Independent errors grow with the root of time, a wrong level with time itself.
    expect(ut1Difference({ mjd, lodMs: mjd.map(() => 0), levelSigmaMs: 0.1 }).stretches[0]!.sigmaMs.at(-1)).toBeCloseTo(0.1 * 59 * 30, 9)
  })
})
