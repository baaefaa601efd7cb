import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { decayTimeDays, defaultChandler, excitationFromPole, filterGain, poleFromExcitation } from '../../../shared/earth/time/polarMotion.ts'
import reference from '../../../shared/validation/data/timeReference.json'

const { liouville } = reference
const days = (count: number, step = 1): number[] => Array.from({ length: count }, (_, i) => 50000 + i * step)

describe('pole from excitation', () => {
  it('agrees with an independent integration to 1e-6 mas', () => {
    const { xMas, yMas } = poleFromExcitation(liouville.t, liouville.chi1, liouville.chi2, { xMas: 100, yMas: 50 })
    liouville.xp.forEach((x, i) => {
      expect(Math.abs(xMas[i]! - x)).toBeLessThan(1e-6)
      expect(Math.abs(yMas[i]! - liouville.yp[i]!)).toBeLessThan(1e-6)
    })
  })

  it('agrees with an ODE library: scipy 1.17.1, solve_ivp, DOP853 at 1e-13, over two years of monthly straight pieces', () => {
    const mjd = Array.from({ length: 25 }, (_, i) => i * 30.4375)
    const { xMas, yMas } = poleFromExcitation(
      mjd, mjd.map(t => 30 + 12 * Math.sin(2 * Math.PI * t / 365.25) + 0.01 * t), mjd.map(t => -8 + 7 * Math.cos(2 * Math.PI * t / 182.625)), { xMas: 90, yMas: -40 }
    )
    const scipy: [number, number, number][] = [
      [6, -27.99095137004047, 29.800050143807116], [12, 79.1204413615684, 16.82211023988205], [18, 15.000573718012925, -13.11640414330928], [24, 28.240390258969203, 35.94729547918563]
    ]
    for (const [k, x, y] of scipy) {
      expect(Math.abs(xMas[k]! - x)).toBeLessThan(1e-9)
      expect(Math.abs(yMas[k]! - y)).toBeLessThan(1e-9)
    }
  })

  it('rests where the excitation is: x_p = χ₁, y_p = −χ₂', () => {
    const { xMas, yMas } = poleFromExcitation(days(100, 7), new Array(100).fill(30), new Array(100).fill(-8), { xMas: 30, yMas: 8 })
    expect(xMas.every(x => Math.abs(x - 30) < 1e-9) && yMas.every(y => Math.abs(y - 8) < 1e-9)).toBe(true)
  })

  it('decays freely at the period and Q given: 67.5 years for 433 d and 179', () => {
    expect(decayTimeDays(defaultChandler) / 365.25).toBeCloseTo(67.5, 1)
    const mjd = days(11, 433)
    const zero = new Array(11).fill(0)
    const { xMas, yMas } = poleFromExcitation(mjd, zero, zero, { xMas: 200, yMas: 0 })
    expect(xMas[10]).toBeCloseTo(200 * Math.exp(-4330 / decayTimeDays(defaultChandler)), 9)
    expect(yMas[10]).toBeCloseTo(0, 9)
    // Prograde: a quarter of the period later the pole is towards 90° E, where y_p is negative.
    expect(poleFromExcitation([0, 433 / 4], [0, 0], [0, 0], { xMas: 200, yMas: 0 }).yMas[1]).toBeLessThan(-199)
  })

  it('does not depend on how the time is cut', () => {
    fc.assert(fc.property(fc.double({ min: 0.05, max: 0.95, noNaN: true }), fc.double({ min: -50, max: 50, noNaN: true }), (cut, slope) => {
      const whole = poleFromExcitation([0, 40], [1, 1 + slope], [2, 2 - slope], { xMas: 90, yMas: -20 })
      const parts = poleFromExcitation([0, 40 * cut, 40], [1, 1 + slope * cut, 1 + slope], [2, 2 - slope * cut, 2 - slope], { xMas: 90, yMas: -20 })
      expect(parts.xMas[2]).toBeCloseTo(whole.xMas[1]!, 8)
      expect(parts.yMas[2]).toBeCloseTo(whole.yMas[1]!, 8)
    }))
  })
})

describe('excitation from the pole', () => {
  it('gets a constant excitation back exactly, whatever free wobble there is', () => {
    const mjd = days(400)
    const { xMas, yMas } = poleFromExcitation(mjd, new Array(400).fill(12), new Array(400).fill(-30), { xMas: 150, yMas: 250 })
    const back = excitationFromPole(mjd, xMas, yMas)
    expect(back.mjd[0]).toBe(50000.5)
    expect(back.mjd).toHaveLength(399)
    expect(back.chi1Mas.every(c => Math.abs(c - 12) < 1e-7) && back.chi2Mas.every(c => Math.abs(c + 30) < 1e-7)).toBe(true)
  })

  it.each([[365.25, 1], [-365.25, 1], [30, 1], [60, 5], [13, 1]])('damps a period of %f d at steps of %f d by the gain that is stated', (period, step) => {
    // Steps of the forward integration are fine, so that χ linear between epochs is not the limit.
    const fine = 20
    const mjd = days(200 * fine, step / fine)
    const phase = mjd.map(t => 2 * Math.PI * (t - 50000) / period)
    const { xMas, yMas } = poleFromExcitation(mjd, phase.map(Math.cos), phase.map(Math.sin), { xMas: 0, yMas: 0 })
    const pick = <T>(list: ArrayLike<T>): T[] => Array.from(list).filter((_, i) => i % fine === 0)
    const back = excitationFromPole(pick(mjd), pick(xMas), pick(yMas))
    const gain = filterGain(period, step)
    back.mjd.forEach((t, i) => {
      const angle = 2 * Math.PI * (t - 50000) / period
      expect(Math.abs(back.chi1Mas[i]! - gain * Math.cos(angle))).toBeLessThan(1e-3)
      expect(Math.abs(back.chi2Mas[i]! - gain * Math.sin(angle))).toBeLessThan(1e-3)
    })
    if (Math.abs(period) >= 13 * step) expect(Math.abs(gain - 1)).toBeLessThan(0.011)
  })

  it('leaves gaps open', () => {
    const back = excitationFromPole([1, 2, 3, 10, 11], [1, Number.NaN, 1, 1, 1], [1, 1, 1, 1, 1], defaultChandler, 3)
    expect([...back.mjd]).toEqual([10.5])
  })

  it('goes round: forward and back within the stated band to 1 %', () => {
    const mjd = days(3000)
    const chi1 = mjd.map(t => 20 * Math.sin(2 * Math.PI * t / 365.25) + 5 * Math.sin(2 * Math.PI * t / 40) + 0.01 * (t - 50000))
    const chi2 = mjd.map(t => 15 * Math.cos(2 * Math.PI * t / 182.6) - 0.02 * (t - 50000))
    const { xMas, yMas } = poleFromExcitation(mjd, chi1, chi2, { xMas: 50, yMas: 300 })
    const back = excitationFromPole(mjd, xMas, yMas)
    for (let i = 0; i < back.mjd.length; i++) {
      expect(Math.abs(back.chi1Mas[i]! - (chi1[i]! + chi1[i + 1]!) / 2)).toBeLessThan(0.05)
      expect(Math.abs(back.chi2Mas[i]! - (chi2[i]! + chi2[i + 1]!) / 2)).toBeLessThan(0.05)
    }
  })
})
