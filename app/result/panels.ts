import { comparisonPanels, totalSeriesData, type ComparedQuantity } from '#shared/figures/series/comparisonFigure'
import type { SeriesData } from '#shared/figures/series/data'
import type { Comparison, RunResult } from '#shared/types/run'

export interface QuantityText { id: ComparedQuantity, name: string, short: string, unit: string, rateUnit: string, toRate: number }

/** The three quantities that a run and an observation meet in. Rates: `toRate` turns the comparison's unit into the table's. */
export const quantities: readonly QuantityText[] = [
  { id: 'lod', name: 'excess length of day', short: 'ΔLOD', unit: 'ms', rateUnit: 'µs/yr', toRate: 1000 },
  { id: 'chi1', name: 'pole excitation towards 0°', short: 'χ₁', unit: 'mas', rateUnit: 'mas/yr', toRate: 1 },
  { id: 'chi2', name: 'pole excitation towards 90° E', short: 'χ₂', unit: 'mas', rateUnit: 'mas/yr', toRate: 1 },
]

export function quantityOf(text: unknown): ComparedQuantity {
  return quantities.find(({ id }) => id === text)?.id ?? 'lod'
}

/** One-sigma of the model on the comparison's epochs and in its unit. */
export function modelSigma(result: RunResult, comparison: Comparison, quantity: ComparedQuantity): (number | null)[] {
  const { series } = result.total
  const sigma = { lod: series.sigmaLodMicroseconds, chi1: series.sigmaChi1Mas, chi2: series.sigmaChi2Mas }[quantity]
  const factor = quantity === 'lod' ? 1e-3 : 1
  const byEpoch = new Map(result.epochsMjd.map((mjd, i) => [mjd, sigma[i] ?? null]))
  return comparison.epochsMjd.map((mjd) => {
    const value = byEpoch.get(mjd) ?? null
    return value === null ? null : value * factor
  })
}

/** What the chart of a quantity shows: observed, model with its band and residual; the model alone where nothing is observed. */
export function panelsOf(result: RunResult, comparison: Comparison | null, quantity: ComparedQuantity): SeriesData[] {
  const compared = comparison && comparisonPanels(comparison, quantity, { sigma: modelSigma(result, comparison, quantity) })
  return compared ?? [totalSeriesData(result.epochsMjd, result.total.series, quantity)]
}
