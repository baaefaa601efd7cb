import { julianYearsFromMjd } from './epochs.ts'

/** Secular pole of the IERS Conventions (2010), ch. 7, 2018 update: mas at 2000.0 and mas per year. */
export const secularPoleRates = { xMas: 55.0, xMasPerYear: 1.677, yMas: 320.5, yMasPerYear: 3.460 } as const

/**
 * Secular pole at an epoch (MJD), mas: x_s towards Greenwich, y_s towards 90° W. It is a straight line through the observed pole, so it
 * is drawn beside it and never subtracted as a background: it would take away the drift that is to be explained.
 */
export function secularPole(mjd: number): { xMas: number, yMas: number } {
  const years = julianYearsFromMjd(mjd)
  return { xMas: secularPoleRates.xMas + secularPoleRates.xMasPerYear * years, yMas: secularPoleRates.yMas + secularPoleRates.yMasPerYear * years }
}
