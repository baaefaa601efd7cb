import { formatDate } from '#shared/format/numbers'
import type { SeriesData } from '#shared/figures/series/data'
import type { PolePath } from '#shared/figures/drift/polePathFigure'
import type { Measured } from '#shared/types/domain'
import type { Prediction } from './types'

/** Neighbours further apart than this are not joined: two and a half times the usual distance, two months at least. */
export function gapDays(mjd: ArrayLike<number>): number {
  if (mjd.length < 3) return Infinity
  // The usual distance of a long series is known well enough from every so many steps.
  const every = Math.ceil(mjd.length / 2000)
  const steps: number[] = []
  for (let i = 1; i < mjd.length; i += every) steps.push(mjd[i]! - mjd[i - 1]!)
  steps.sort((a, b) => a - b)
  return Math.max(62, 2.5 * steps[Math.floor(steps.length / 2)]!)
}

/** Mass above, what it does to the length of day below, on one time axis; one-sigma of each epoch as a band. */
export function predictionPanels(prediction: Prediction): SeriesData[] {
  const { mjd, massGt, sigmaMassGt, lodMicroseconds, perGt, trend } = prediction
  const maxGapDays = gapDays(mjd)
  const known = sigmaMassGt.some(s => s !== null)
  const lodSigma = sigmaMassGt.map(s => s === null ? null : s * Math.abs(perGt.lodMicroseconds))
  const role = trend && trend.massGtPerYear.value > 0 ? 'gain' as const : 'loss' as const
  return [
    { title: 'Mass', unit: 'Gt', series: [{ label: 'mass', role, mjd, value: massGt, sigma: known ? sigmaMassGt : null, maxGapDays }] },
    { title: 'Calculated length of day', unit: 'µs', series: [{ label: 'ΔLOD', role: 'model', mjd, value: lodMicroseconds, sigma: known ? lodSigma : null, maxGapDays }] },
  ]
}

export function predictedPath(prediction: Prediction, label: string): PolePath[] {
  return [{ label, role: 'model', mjd: prediction.mjd, chi1: prediction.chi1Mas, chi2: prediction.chi2Mas }]
}

/** A trend of mass times what a gigatonne does. */
export function effectOf(mass: Measured, perGt: number): Measured {
  return { value: mass.value * perGt, sigmaWhite: mass.sigmaWhite * Math.abs(perGt), sigma: mass.sigma * Math.abs(perGt) }
}

export interface ValueRow { mjd: number, date: string, massGt: number, sigmaGt: number | null, lodMicroseconds: number, chi1Mas: number, chi2Mas: number }

/** One page of the values, in order of time. */
export function valueRows(prediction: Prediction, page: number, size: number): ValueRow[] {
  const from = page * size
  return prediction.mjd.slice(from, from + size).map((mjd, i) => ({
    mjd, date: formatDate(mjd), massGt: prediction.massGt[from + i]!, sigmaGt: prediction.sigmaMassGt[from + i] ?? null,
    lodMicroseconds: prediction.lodMicroseconds[from + i]!, chi1Mas: prediction.chi1Mas[from + i]!, chi2Mas: prediction.chi2Mas[from + i]!,
  }))
}
