import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'
import type { FigureSeries, SeriesData } from '#shared/figures/series/data'
import { coveredSpans, withSharedCoverage } from './coverage'
import { secularLine } from '#shared/figures/series/secular'

/** Columns of an observed series as a page gets them, or as a reader of files gives them. */
export type ObservedColumns = Pick<AnswerOf<typeof contracts.observedRead>, 'mjd' | 'lodMs' | 'xMas' | 'yMas' | 'sigmaLodMs' | 'sigmaXMas' | 'sigmaYMas' | 'predicted'>
  & { chi1Mas?: (number | null)[] | null, chi2Mas?: (number | null)[] | null, coefficients?: AnswerOf<typeof contracts.observedRead>['coefficients'] }

const kinds = [
  { value: 'lodMs', title: 'Excess length of day', unit: 'ΔLOD, ms' },
  { value: 'xMas', title: 'Pole towards Greenwich, x', unit: 'x, mas' },
  { value: 'yMas', title: 'Pole towards 90° W, y', unit: 'y, mas' },
  { value: 'chi1Mas', title: 'Excitation towards 0°, χ₁', unit: 'χ₁, mas' },
  { value: 'chi2Mas', title: 'Excitation towards 90° E, χ₂', unit: 'χ₂, mas' },
] as const

/** Typical distance between epochs, days: the median, so that a gap does not count. */
function usualStep(mjd: ArrayLike<number>): number {
  const steps = Array.from({ length: Math.min(mjd.length - 1, 2000) }, (_, i) => mjd[i + 1]! - mjd[i]!).sort((a, b) => a - b)
  return steps[steps.length >> 1] ?? 1
}

/**
 * One panel for each quantity that the series holds, on one time axis. Predictions are a line of their own; where the epochs are
 * further apart than usual the line is broken.
 */
export function observedPanels(data: ObservedColumns): SeriesData[] {
  const maxGapDays = 2.5 * usualStep(data.mjd)
  const predicting = data.predicted.some(flag => flag === 1)
  const found = kinds.flatMap(({ value, title, unit }): SeriesData[] => {
    const column = data[value]
    if (!column || !column.some(v => v !== null && Number.isFinite(v))) return []
    const part = (flag: 0 | 1): (number | null)[] => column.map((v, i) => data.predicted[i] === flag ? v : null)
    const line = (label: string, role: FigureSeries['role'], values: (number | null)[]): FigureSeries => ({ label, role, mjd: data.mjd, value: values, maxGapDays })
    const seen = predicting ? part(0) : column
    const series = [line('observed', 'observed', seen)]
    if (predicting && column.some((v, i) => v !== null && data.predicted[i] === 1)) series.push(line('predicted, not used', 'residual', part(1)))
    if (value === 'xMas' || value === 'yMas') series.push(secularLine(value === 'xMas' ? 'x' : 'y', data.mjd))
    return [{ title, unit, series, coverage: [{ label: 'values', spans: coveredSpans({ mjd: data.mjd, value: seen }) }] }]
  })
  return withSharedCoverage([...coefficientPanels(data), ...found])
}

const coefficientKinds = [
  { value: 'c20', sigma: 'sigmaC20', symbol: 'ΔC₂₀' }, { value: 'c21', sigma: 'sigmaC21', symbol: 'ΔC₂₁' }, { value: 's21', sigma: 'sigmaS21', symbol: 'ΔS₂₁' },
] as const

/** Changes of the gravity coefficients as they were sent, in units of 10⁻¹¹, with their one-sigma. */
function coefficientPanels({ mjd, coefficients }: ObservedColumns): SeriesData[] {
  if (!coefficients) return []
  const inUnits = (values: (number | null)[]) => values.map(v => v === null ? null : v * 1e11)
  return coefficientKinds.flatMap(({ value, sigma, symbol }): SeriesData[] => coefficients[value].some(v => v !== null)
    ? [{
        title: `Gravity coefficient ${symbol}, as sent`, unit: `${symbol}, 10⁻¹¹`,
        series: [{ label: 'observed ± 1σ', role: 'observed', mjd, value: inUnits(coefficients[value]), sigma: inUnits(coefficients[sigma]), maxGapDays: 2.5 * usualStep(mjd) }],
        coverage: [{ label: 'values', spans: coveredSpans({ mjd, value: coefficients[value] }) }],
      }]
    : [])
}

export interface ObservedRange { low: number, high: number, fromMjd: number, toMjd: number }

/** Lowest and highest observed value of a column, predictions left out; null where it is empty. */
export function observedRange(data: ObservedColumns, column: 'lodMs' | 'xMas' | 'yMas'): ObservedRange | null {
  let range: ObservedRange | null = null
  data[column].forEach((value, i) => {
    if (value === null || !Number.isFinite(value) || data.predicted[i] === 1) return
    const mjd = data.mjd[i]!
    range = range
      ? { low: Math.min(range.low, value), high: Math.max(range.high, value), fromMjd: range.fromMjd, toMjd: mjd }
      : { low: value, high: value, fromMjd: mjd, toMjd: mjd }
  })
  return range
}
