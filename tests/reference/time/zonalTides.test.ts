import { describe, expect, it } from 'vitest'
import { ttCenturies } from '../../../shared/earth/time/timeScales.ts'
import { zonalTideEffect, zonalTides } from '../../../shared/earth/time/zonalTides.ts'
import { zonalTideTerms } from '../../../shared/earth/time/zonalTideTerms.ts'
import reference from '../../../shared/validation/data/timeReference.json'

describe('zonal tides, IERS Conventions (2010), Table 8.1', () => {
  it('give the test value of the Conventions', () => {
    // IERS Conventions (2010), ch. 8, RG_ZONT2 (corrected in 2011): t = 0.07995893223819302.
    // The order of summing alone moves it by 1e-13 s.
    const effect = zonalTideEffect(0.07995893223819302)
    expect(Math.abs(effect.ut1Seconds - 7.983287678576557e-2)).toBeLessThan(1e-12)
    expect(Math.abs(effect.lodSeconds - 5.035331113978199e-5)).toBeLessThan(1e-14)
    expect(Math.abs(effect.omegaRadPerSecond - -4.249711616463017e-14)).toBeLessThan(1e-23)
  })

  it.each(reference.zonalTides.T.map((t, i) => [t, i] as const))('agree with an independent reference implementation at t = %f', (t, i) => {
    const effect = zonalTideEffect(t)
    // Its stated tolerances: 1e-9 s, 1e-9 s per day, 1e-17 rad/s; the printed values hold 12 digits.
    expect(Math.abs(effect.ut1Seconds - reference.zonalTides.dUT1_s[i]!)).toBeLessThan(1e-12)
    expect(Math.abs(effect.lodSeconds - reference.zonalTides.dLOD_s[i]!)).toBeLessThan(1e-14)
    expect(Math.abs(effect.omegaRadPerSecond - reference.zonalTides.dOmega[i]!)).toBeLessThan(1e-22)
  })

  it('have 62 terms, 41 of them under 35 days, with the periods of their arguments', () => {
    expect(zonalTideTerms).toHaveLength(62)
    expect(zonalTides('under-35-days')).toEqual(zonalTideTerms.slice(0, 41))
    // Mean rates of eq. 5.43, arcseconds per Julian century.
    const rates = [1717915923.2178, 129596581.0481, 1739527262.8478, 1602961601.2090, -6962890.5431]
    for (const term of zonalTideTerms) {
      const rate = rates.reduce((sum, r, i) => sum + r * (term[i] as number), 0)
      expect(1296000 * 36525 / rate / term[5]).toBeCloseTo(1, 4)
    }
  })

  it('have a length of day that is minus the rate of UT1, to the rounding of the table', () => {
    const day = 1 / 36525
    for (const t of [-0.2, 0.03, 0.22]) {
      const rate = (zonalTideEffect(t + day / 100).ut1Seconds - zonalTideEffect(t - day / 100).ut1Seconds) / 0.02
      expect(Math.abs(zonalTideEffect(t).lodSeconds + rate)).toBeLessThan(1e-7)
    }
  })
})

describe('Terrestrial Time', () => {
  it.each([
    // TAI − UTC by SOFA's iauDat (pyerfa 2.0.1.5), plus 32.184 s.
    ['1962-01-01', 37665, 1.845858], ['1965-07-01', 38942, 3.9747060000000003], ['1968-03-01', 39916, 6.26085], ['1971-12-01', 41286, 9.81189],
    ['1972-01-01', 41317, 10], ['1972-07-01', 41499, 11], ['2017-01-01', 57754, 37], ['2022-11-01', 59884, 37]
  ])('at %s is UTC + 32.184 s + %f', (_, mjd, seconds) => {
    expect((ttCenturies(mjd) * 36525 - (mjd - 51544.5)) * 86400).toBeCloseTo(seconds + 32.184, 4)
  })
})
