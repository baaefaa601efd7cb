import type { ComparedReport } from '#shared/attribution/compared'
import type { ForwardReport, Ut1Report } from '#shared/attribution/poleAndUt1'
import type { RotationQuantity } from '#shared/attribution/types'
import { coveredMonths } from '#shared/figures/series/comparisonFigure'
import { secularLine, secularPath } from '#shared/figures/series/secular'
import type { PolePath } from '#shared/figures/drift/polePathFigure'
import type { SeriesData } from '#shared/figures/series/data'

const titles: Readonly<Record<RotationQuantity, string>> = { lod: 'Excess length of day', chi1: 'Excitation towards 0°', chi2: 'Excitation towards 90° E' }
const symbols: Readonly<Record<RotationQuantity, string>> = { lod: 'ΔLOD', chi1: 'χ₁', chi2: 'χ₂' }

/**
 * Observed and model with its one-sigma above, residual below, and the months that each of them covers; beside the pole, where the trend
 * is in, the secular pole about its own mean.
 */
export function comparedPanels(mjd: readonly number[], quantity: RotationQuantity, data: ComparedReport, secular = false): SeriesData[] {
  const unit = `${symbols[quantity]}, ${data.unit}`
  const line = secular && quantity !== 'lod' ? [secularLine(quantity, mjd.filter((_, j) => data.observed[j] !== null && data.model[j] !== null), 'about its mean')] : []
  return [
    {
      title: `${titles[quantity]}: observed and model`, unit,
      series: [{ label: 'observed', role: 'observed', mjd, value: data.observed }, { label: 'model ± 1σ', role: 'model', mjd, value: data.model, sigma: data.modelSigma }, ...line],
      coverage: [{ label: 'observed', spans: coveredMonths(mjd, data.observed) }, { label: 'model', spans: coveredMonths(mjd, data.model) }],
    },
    { title: `${titles[quantity]}: residual`, unit, series: [{ label: 'residual', role: 'residual', mjd, value: data.residual }] },
  ]
}

/** Observed and predicted way over the pole plane, with the secular pole drawn beside them: x is χ₁'s axis, towards 0°; −y is χ₂'s, towards 90° E. */
export function polePaths({ stretches }: ForwardReport): PolePath[] {
  const all = stretches.flatMap(stretch => stretch.mjd)
  const secular = all.length > 0 ? [secularPath(all[0]!, all.at(-1)!)] : []
  const minus = (values: (number | null)[]) => values.map(v => v === null ? null : -v)
  return [...secular, ...stretches.flatMap((stretch, i): PolePath[] => {
    const number = stretches.length > 1 ? ` ${i + 1}` : ''
    return [
      { label: `observed${number}`, role: 'observed', mjd: stretch.mjd, chi1: stretch.observedXMas, chi2: minus(stretch.observedYMas) },
      { label: `predicted${number}`, role: 'model', mjd: stretch.mjd, chi1: stretch.xMas, chi2: minus(stretch.yMas) },
    ]
  })]
}

/** UT1 difference since the start of each stretch, ms, with its growing one-sigma. */
export function ut1Panel({ stretches }: Ut1Report): SeriesData | null {
  if (stretches.length === 0) return null
  return {
    title: 'Change of UT1 by the regions, calculated', unit: 'UT1, ms',
    series: stretches.map(({ mjd, ut1Ms, sigmaMs }) => ({ label: 'calculated ± 1σ', role: 'model', mjd, value: ut1Ms, sigma: sigmaMs })),
    coverage: [{ label: 'model', spans: stretches.map(({ mjd }) => [mjd[0]!, mjd.at(-1)!]) }],
  }
}
