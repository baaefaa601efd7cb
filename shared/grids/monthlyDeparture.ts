import { formatSignificant } from '../format/numbers.ts'
import type { Effects } from './cellResponse.ts'

/** By how much one pattern for all months misses the effect of the monthly fields: RMS over RMS of the effect, both about their means. */
export interface MonthlyDeparture { lod: number, pole: number }

/**
 * Departure of mass × one pattern from the effect of every month's own field.
 *
 * @param massGt mass of the months, Gt
 * @param exact effect of the months by their own fields (χ in mas, ΔLOD in µs)
 * @param perGt effect of a gigatonne with the one pattern
 * @returns null where the effect does not change
 */
export function monthlyDeparture(massGt: readonly number[], exact: Pick<Effects<number[]>, 'chi1Mas' | 'chi2Mas' | 'lodMicroseconds'>, perGt: { chi1Mas: number, chi2Mas: number, lodMicroseconds: number }): MonthlyDeparture | null {
  const mass = anomalies(massGt)
  const squares = (name: keyof typeof perGt): { missed: number, whole: number } => {
    const effect = anomalies(exact[name])
    return { missed: sumOfSquares(effect.map((e, t) => e - mass[t]! * perGt[name])), whole: sumOfSquares(effect) }
  }
  const [lod, chi1, chi2] = [squares('lodMicroseconds'), squares('chi1Mas'), squares('chi2Mas')]
  const pole = chi1.whole + chi2.whole
  return lod.whole > 0 && pole > 0 ? { lod: Math.sqrt(lod.missed / lod.whole), pole: Math.sqrt((chi1.missed + chi2.missed) / pole) } : null
}

/** The departure in words. */
export function departureSentence({ lod, pole }: MonthlyDeparture): string {
  const percent = (part: number): string => part < 5e-4 ? 'less than 0.05 %' : `${formatSignificant(part * 100, 2)} %`
  return `One pattern stands for all months: against the field of each month the effect on the length of day is off by ${percent(lod)} of its own scatter, that on the pole by ${percent(pole)}.`
}

function anomalies(values: readonly number[]): number[] {
  const mean = values.reduce((sum, v) => sum + v, 0) / values.length
  return values.map(v => v - mean)
}

function sumOfSquares(values: readonly number[]): number {
  return values.reduce((sum, v) => sum + v * v, 0)
}
