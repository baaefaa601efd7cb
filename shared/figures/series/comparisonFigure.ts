import { stackedFigure } from './timeSeriesFigure.ts'
import type { Comparison, ComparisonQuantity, RunTotalSeries } from '../../types/run.ts'
import { secularLine } from './secular.ts'
import type { SeriesData } from './data.ts'
import type { SeriesFigure, SeriesOptions } from './timeSeriesFigure.ts'

export type ComparedQuantity = 'lod' | 'chi1' | 'chi2'

const titles: Record<ComparedQuantity, string> = {
  lod: 'Excess length of day: observed, model and residual',
  chi1: 'Pole excitation χ₁ (towards 0°): observed, model and residual',
  chi2: 'Pole excitation χ₂ (towards 90° E): observed, model and residual',
}

/** Panels of a comparison: observed and model above, residual below. Null where the series does not hold the quantity. */
export function comparisonPanels(
  comparison: Comparison, quantity: ComparedQuantity, options: { observedLabel?: string, sigma?: (number | null)[] | null } = {},
): SeriesData[] | null {
  const data: ComparisonQuantity | null = comparison[quantity]
  if (!data) return null
  const mjd = comparison.epochsMjd
  // Beside an observed pole; gravity coefficients have a zero and a trend of their own.
  const secular = quantity === 'lod' || comparison.from === 'gravity' ? [] : [secularLine(quantity, mjd.filter((_, i) => data.observed[i] !== null && data.model[i] !== null), 'about its mean')]
  return [
    {
      title: titles[quantity],
      unit: data.unit,
      series: [
        { label: options.observedLabel ?? 'observed', role: 'observed', mjd, value: data.observed },
        { label: options.sigma ? 'model ± 1σ' : 'model', role: 'model', mjd, value: data.model, sigma: options.sigma },
        ...secular,
      ],
      coverage: [{ label: 'observed', spans: coveredMonths(mjd, data.observed) }, { label: 'model', spans: coveredMonths(mjd, data.model) }],
    },
    { title: titles[quantity], unit: data.unit, series: [{ label: 'residual', role: 'residual', mjd, value: data.residual }] },
  ]
}

/** Stretches of months that hold a value, MJD: neighbours in a list of months belong together, a missing one parts them. */
export function coveredMonths(mjd: readonly number[], value: readonly (number | null)[]): [number, number][] {
  const spans: [number, number][] = []
  let open = false
  mjd.forEach((t, i) => {
    if (value[i] === null || value[i] === undefined) {
      open = false
      return
    }
    if (open) spans.at(-1)![1] = t
    else spans.push([t, t])
    open = true
  })
  return spans
}

/** Observed and model over one another, the residual below on the same time axis. */
export function comparisonFigure(
  comparison: Comparison, quantity: ComparedQuantity, options: SeriesOptions & { observedLabel?: string },
): SeriesFigure | null {
  const panels = comparisonPanels(comparison, quantity, options)
  return panels && stackedFigure(panels, { plotHeight: 150, ...options })
}

const runTitles: Record<ComparedQuantity | 'mass', { title: string, unit: string }> = {
  mass: { title: 'Mass change of all regions', unit: 'Gt' },
  lod: { title: 'Calculated change of the length of day', unit: 'µs' },
  chi1: { title: 'Calculated pole excitation χ₁, towards 0°', unit: 'mas' },
  chi2: { title: 'Calculated pole excitation χ₂, towards 90° E', unit: 'mas' },
}

/** The sum of a run over time, for timeSeriesFigure. */
export function totalSeriesData(epochsMjd: number[], series: RunTotalSeries, quantity: ComparedQuantity | 'mass'): SeriesData {
  const value = { mass: series.massGt, lod: series.lodMicroseconds, chi1: series.chi1Mas, chi2: series.chi2Mas }[quantity]
  const sigma = { mass: null, lod: series.sigmaLodMicroseconds, chi1: series.sigmaChi1Mas, chi2: series.sigmaChi2Mas }[quantity]
  return { ...runTitles[quantity], series: [{ label: sigma ? 'model ± 1σ' : 'model', role: 'model', mjd: epochsMjd, value, sigma }], coverage: [{ label: 'model', spans: coveredMonths(epochsMjd, value) }] }
}
