import { beamFigure } from '#shared/figures/beam/beamFigure'
import { beamData } from '#shared/figures/beam/data'
import { driftData } from '#shared/figures/drift/data'
import { driftFigure } from '#shared/figures/drift/driftFigure'
import { comparisonFigure, totalSeriesData } from '#shared/figures/series/comparisonFigure'
import { timeSeriesFigure } from '#shared/figures/series/timeSeriesFigure'
import type { ComparedQuantity } from '#shared/figures/series/comparisonFigure'
import type { ReportData } from './types'

/** Drawn at this width in px and set smaller, so that figure text of 12 px comes to 8.4 points. */
const drawn = 700

const options = (id: string, width = drawn) => ({ width, theme: 'print' as const, id })

export function reportBeam({ result }: ReportData): string {
  return beamFigure(beamData(result), options('beam')).svg
}

export function reportDrift({ result, comparison }: ReportData): string {
  return driftFigure(driftData(result, comparison), { ...options('drift'), height: 380 }).svg
}

/** Observed, model and residual where something was observed, else the model with its band. */
export function reportChart({ result, comparison }: ReportData, quantity: ComparedQuantity): string {
  const compared = comparison && comparisonFigure(comparison, quantity, { ...options(quantity), plotHeight: quantity === 'lod' ? 110 : 84 })
  return (compared ?? timeSeriesFigure(totalSeriesData(result.epochsMjd, result.total.series, quantity), { ...options(quantity), plotHeight: quantity === 'lod' ? 160 : 130 })).svg
}
