import { DAY_SECONDS, MAS } from '#shared/earth/constants'
import { calendarFromMjd, mjdFromIsoDate } from '#shared/earth/time/epochs'
import type { AngularMomentumFields } from '#shared/observed/angularMomentumTypes'
import type { GravityFields } from '#shared/observed/gravityTypes'
import { demoDays, first, gaussian, last, turn } from './demoData'

/** What is answered about the invented air and sea: one pair, both with an inverted barometer, no water from land inside. */
export const demoFluidFields: Record<'atmosphere' | 'ocean', AngularMomentumFields> = {
  atmosphere: { component: 'atmosphere', model: 'invented air', pairedWith: null, invertedBarometer: 'yes', coefficients: 'gross-2007', subtracted: 'nothing', barystatic: 'no' },
  ocean: { component: 'ocean', model: 'invented sea', pairedWith: 'invented air', invertedBarometer: 'yes', coefficients: 'gross-2007', subtracted: 'nothing', barystatic: 'no' },
}

/**
 * Daily angular momentum of the air and sea that stir the synthetic orientation of the same seed: most of its season and of its wander from
 * week to week, with noise of their own. Plain text: date, MJD, mass χ₁ χ₂ χ₃, motion χ₁ χ₂ χ₃, dimensionless.
 */
export function demoFluidText(component: 'atmosphere' | 'ocean', orientationSeed: number, seed: number): string {
  const draw = gaussian(seed)
  const air = component === 'atmosphere'
  const size = air ? 1 : 0.22
  const lines = ['# Invented: made by a seeded generator for the demonstration, no observation', '# year month day hour mjd  mass: chi1 chi2 chi3  motion: chi1 chi2 chi3, dimensionless']
  const noise = [0, 0, 0]
  const days = demoDays(orientationSeed)
  for (const { mjd, wander } of days) {
    const t = mjd - days[0]!.mjd
    noise.forEach((v, i) => { noise[i] = 0.8 * v + [1.2, 1.8, 0.008][i]! * draw() })
    const year = turn(t, 365.25, 2.1)
    const chi1 = size * (-3.6 * Math.cos(year) + noise[0]!) * MAS
    const chi2 = size * (-17 * Math.sin(year) + noise[1]!) * MAS
    const lodMs = (air ? 0.85 * wander : 0.1 * wander) + size * (0.29 * Math.cos(turn(t, 365.25, 0.6)) + 0.24 * Math.cos(turn(t, 182.62, 3.6)) + noise[2]!)
    const chi3 = lodMs / 1000 / DAY_SECONDS
    const { year: y, month, day } = calendarFromMjd(mjd)
    const mass = [0.8 * chi1, 0.8 * chi2, 0.1 * chi3]
    const motion = [0.2 * chi1, 0.2 * chi2, 0.9 * chi3]
    lines.push(`${y} ${month} ${day} 0 ${mjd}.0 ${[...mass, ...motion].map(v => v.toExponential(5)).join(' ')}`)
  }
  return `${lines.join('\n')}\n`
}

/** What is answered about the invented coefficients: as careful a series as there can be, without atmosphere and ocean. */
export const demoGravityFields: GravityFields = {
  solidPoleTide: 'removed', oceanPoleTide: 'removed', permanentTide: 'zero-tide', meanPole: 'secular-2018', radiusM: 6378136.3, dealiasing: 'not-restored', axialLoadFactor: 0.695,
}

/** Months without a value, as between two satellite missions. */
const gap = ['2017-07-01', '2018-06-01'] as const

/** Monthly changes of C₂₀, C₂₁, S₂₁ with trend, season, noise and a gap of eleven months. Rates are of the size that melting ice makes. */
export function demoGravityCsv(seed: number): string {
  const draw = gaussian(seed)
  const lines = ['# Invented: made by a seeded generator for the demonstration, no observation', 'date,dC20,dC21,dS21,sigma C20,sigma C21,sigma S21']
  const [from, to] = gap.map(mjdFromIsoDate) as [number, number]
  for (let month = 0; month < (last - first + 1) * 12; month++) {
    const date = `${first + Math.floor(month / 12)}-${String(month % 12 + 1).padStart(2, '0')}-15`
    const years = (month + 0.5) / 12
    const season = 2 * Math.PI * years
    const values = [
      -2.2e-11 * years + 6e-11 * Math.cos(season - 1.1) + 1.5e-11 * draw(),
      -4.6e-12 * years + 1.1e-11 * Math.cos(season - 2.4) + 5e-12 * draw(),
      2.1e-12 * years + 1.6e-11 * Math.cos(season + 0.7) + 5e-12 * draw(),
    ]
    const mjd = mjdFromIsoDate(date)
    if (mjd < from || mjd >= to) lines.push([date, ...values.map(v => v.toExponential(4)), '1.5e-11', '5e-12', '5e-12'].join(','))
  }
  return `${lines.join('\n')}\n`
}
