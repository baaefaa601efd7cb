import type { ComparedReport } from '#shared/attribution/compared'
import type { ForwardReport, Ut1Report } from '#shared/attribution/poleAndUt1'
import type { RotationQuantity } from '#shared/attribution/types'
import type { PolePath } from '#shared/figures/drift/polePathFigure'
import type { SeriesData } from '#shared/figures/series/data'

const titles: Readonly<Record<RotationQuantity, string>> = { lod: 'Excess length of day', chi1: 'Excitation towards 0°', chi2: 'Excitation towards 90° E' }
const symbols: Readonly<Record<RotationQuantity, string>> = { lod: 'ΔLOD', chi1: 'χ₁', chi2: 'χ₂' }

/** Stretches of months that hold a value, MJD. */
function covered(mjd: readonly number[], value: readonly (number | null)[]): [number, number][] {
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

/** Observed and model with its one-sigma above, residual below, and the months that each of them covers. */
export function comparedPanels(mjd: readonly number[], quantity: RotationQuantity, data: ComparedReport): SeriesData[] {
  const unit = `${symbols[quantity]}, ${data.unit}`
  return [
    {
      title: `${titles[quantity]}: observed and model`, unit,
      series: [{ label: 'observed', role: 'observed', mjd, value: data.observed }, { label: 'model ± 1σ', role: 'model', mjd, value: data.model, sigma: data.modelSigma }],
      coverage: [{ label: 'observed', spans: covered(mjd, data.observed) }, { label: 'model', spans: covered(mjd, data.model) }],
    },
    { title: `${titles[quantity]}: residual`, unit, series: [{ label: 'residual', role: 'residual', mjd, value: data.residual }] },
  ]
}

/** Observed and predicted way over the pole plane: x is χ₁'s axis, towards 0°; −y is χ₂'s, towards 90° E. */
export function polePaths({ stretches }: ForwardReport): PolePath[] {
  const minus = (values: (number | null)[]) => values.map(v => v === null ? null : -v)
  return stretches.flatMap((stretch, i): PolePath[] => {
    const number = stretches.length > 1 ? ` ${i + 1}` : ''
    return [
      { label: `observed${number}`, role: 'observed', mjd: stretch.mjd, chi1: stretch.observedXMas, chi2: minus(stretch.observedYMas) },
      { label: `predicted${number}`, role: 'model', mjd: stretch.mjd, chi1: stretch.xMas, chi2: minus(stretch.yMas) },
    ]
  })
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
