import { formatMeasured, formatNumber, formatShare, formatSigned, formatSignificant } from '#shared/format/numbers'
import { bandNames, type BandName, type ComparisonStatistics } from '#shared/attribution/comparisonStatistics'
import { quantityNames, rotationQuantities, type RotationQuantity } from '#shared/attribution/types'
import type { AttributionBudget, AttributionRow, Rate } from '#shared/attribution/budget'
import type { Identifiability } from '#shared/attribution/identifiability'
import type { ScalingFactor } from '#shared/attribution/scaling'
import type { TrendNoiseReport } from '#shared/earth/time/trendNoise'
import type { DriftData } from '#shared/figures/drift/data'

const none = '–'
const share = (value: number | null | undefined) => formatShare(value)
const part = (value: number | null | undefined) => value === null || value === undefined ? none : `${formatNumber(value * 100)}\u00a0%`

const bandTexts: Readonly<Record<BandName, string>> = { annual: 'annual, 9 to 16 months', interannual: 'interannual, 16 months to 8 years', decadal: 'decadal, over 8 years' }

export interface BandRow { name: string, observed: string, model: string, residual: string, explained: string, coherence: string, note: string | null }

/** RMS of observed, model and residual, variance explained and coherence: the whole first, then by bands. */
export function bandRows({ rms, varianceExplained, bands }: ComparisonStatistics): BandRow[] {
  const size = (variance: number) => formatSignificant(Math.sqrt(Math.max(0, variance)), 2)
  return [
    { name: 'all, trend left in', observed: formatSignificant(rms.observed, 2), model: formatSignificant(rms.model, 2), residual: formatSignificant(rms.residual, 2), explained: share(varianceExplained), coherence: '', note: null },
    ...bandNames.flatMap((name): BandRow[] => {
      const band = bands.find(entry => entry.band === name)
      if (!band) return []
      return [{
        name: bandTexts[name], observed: size(band.varianceObserved), model: size(band.varianceModel), residual: size(band.varianceResidual), explained: share(band.varianceExplained),
        coherence: band.coherence === null ? none : `${formatNumber(band.coherence, 2)}${band.coherenceThreshold95 === null ? '' : ` (${formatNumber(band.coherenceThreshold95, 2)})`}`,
        note: band.reason,
      }]
    }),
  ]
}

const noiseNames = { 'white': 'white', 'ar1': 'AR(1)', 'power-law': 'power law' } as const
export const noiseModels = Object.keys(noiseNames) as (keyof typeof noiseNames)[]
export const noiseName = (model: keyof typeof noiseNames) => noiseNames[model]

export interface NoiseRow { name: string, cells: { model: keyof typeof noiseNames, text: string, quoted: boolean }[], sentence: string }

/** Trends of observed, model and residual under each noise, µs or mas per year, with the one to be quoted marked. */
export function noiseRows(trends: Record<'observed' | 'model' | 'residual', TrendNoiseReport>, toRate: number): NoiseRow[] {
  return (['observed', 'model', 'residual'] as const).map((name) => {
    const { models, quote, sentence, simple } = trends[name]
    return {
      name, sentence,
      cells: noiseModels.map((model) => {
        const fit = models.find(entry => entry.model === model)
        // A short record has no fit under AR(1); the inflated error of the simple one stands for it.
        const shown = fit ?? (model === 'ar1' && quote === 'ar1' ? simple : null)
        return { model, text: shown ? formatMeasured(shown.value * toRate, shown.sigma * toRate).text : none, quoted: model === quote }
      }),
    }
  })
}

export interface BudgetLine { key: string, name: string, kind: AttributionRow['kind'], cells: string[] }
export const budgetHeads = ['mass, Gt/yr', 'ΔLOD, µs/yr', 'χ₁, mas/yr', 'χ₂, mas/yr', 'of the model, day', 'of the model, pole', 'along the observed drift', 'across it'] as const

/** Rows of the budget with model, observed and residual. The day has a share of the model alone. */
export function budgetLines({ rows, model, observed, residual }: AttributionBudget): BudgetLine[] {
  const rate = (figure: Rate | null) => figure ? formatMeasured(figure.value, figure.sigma).text : none
  const percent = (figure: Rate | undefined) => figure ? `${formatMeasured(figure.value * 100, figure.sigma * 100, { signed: false, unit: '%' }).text}` : none
  return [...rows, model, observed, residual].map(row => ({
    key: row.key, name: row.name, kind: row.kind,
    cells: [
      rate(row.massGtPerYear), rate(row.lodMicrosecondsPerYear), rate(row.chi1MasPerYear), rate(row.chi2MasPerYear),
      row.shareOfModel.lod === null ? none : share(row.shareOfModel.lod), row.shareOfModel.pole === null ? none : share(row.shareOfModel.pole),
      percent(row.ofObservedDrift?.shareAlong), percent(row.ofObservedDrift?.shareAcross),
    ],
  }))
}

/** Vectors of the budget head to tail, with the observed drift and both ellipses. */
export function budgetDrift({ rows, model, observed }: AttributionBudget): DriftData {
  const vector = (row: AttributionRow) => ({ name: row.name.toLowerCase(), chi1: row.chi1MasPerYear?.value ?? 0, chi2: row.chi2MasPerYear?.value ?? 0, covariance: row.driftCovariance })
  return {
    items: rows.filter(row => row.chi1MasPerYear || row.chi2MasPerYear).map(row => ({ ...vector(row), name: row.name, mass: row.massGtPerYear?.value ?? 0 })),
    total: vector(model),
    observed: observed.chi1MasPerYear && observed.chi2MasPerYear ? vector(observed) : null,
  }
}

export interface FactorLine { key: string, name: string, cells: string[] }
export const factorHeads = ['factor', 'prior', 'without the prior', 'decided by data', 'pull of the data', 'carried by'] as const

/** One factor a row: 1 means as reported. */
export function factorLines(factors: readonly ScalingFactor[]): FactorLine[] {
  const figure = ({ value, sigma }: { value: number, sigma: number }) => formatMeasured(value, sigma, { signed: false }).text
  return factors.map(({ key, name, posterior, prior, dataOnly, resolution, pull, carriedBy }) => ({
    key, name,
    cells: [
      figure(posterior), `${formatNumber(prior.mean, 2)} ± ${formatNumber(prior.sigma, 2)}`, dataOnly ? figure(dataOnly) : 'not determined', part(resolution), `${formatSigned(pull, 1)} σ`,
      rotationQuantities.filter(quantity => carriedBy[quantity] !== undefined).map(quantity => `${symbols[quantity]} ${part(carriedBy[quantity])}`).join(', '),
    ],
  }))
}

const symbols: Readonly<Record<RotationQuantity, string>> = { lod: 'ΔLOD', chi1: 'χ₁', chi2: 'χ₂' }
export const symbolOf = (quantity: RotationQuantity) => symbols[quantity]
export const longNameOf = (quantity: RotationQuantity) => quantityNames[quantity]

export interface AngleLine { key: string, a: string, b: string, cells: string[], told: boolean }

/** Angles between pairs of groups: 0° where the one is a multiple of the other, 90° where nothing is in common. */
export function angleLines({ groups, pairs }: Identifiability): AngleLine[] {
  const name = (key: string) => groups.find(group => group.key === key)?.name ?? key
  return pairs.map(({ a, b, pole, day, all }) => ({
    key: `${a} ${b}`, a: name(a), b: name(b), told: all.told,
    cells: [pole, day, all].map(angle => angle ? `${formatNumber(angle.foldedDeg, 1)}°` : none).concat(`${formatSignificant(all.separation, 2)} σ`),
  }))
}

/** Singular values of each set of observables, largest first, with the combination that each belongs to. */
export function spectrumLines({ groups, spectra }: Identifiability): { key: string, set: string, value: string, combination: string }[] {
  const sets = { pole: 'pole', day: 'day', all: 'pole and day' } as const
  return spectra.flatMap(({ set, values, vectors }) => values.map((value, k) => ({
    key: `${set} ${k}`, set: sets[set], value: formatNumber(value, 3),
    combination: vectors[k]!.map((weight, g) => ({ weight, name: groups[g]!.name })).filter(({ weight }) => Math.abs(weight) >= 0.1)
      .sort((x, y) => Math.abs(y.weight) - Math.abs(x.weight)).map(({ weight, name }) => `${formatSigned(weight, 2)} ${name}`).join(', '),
  })))
}

/** Correlations between the rows of the budget, each pair once, strongest first. */
export function correlationLines({ rows, correlation }: AttributionBudget, quantity: RotationQuantity): { key: string, a: string, b: string, text: string }[] {
  const list = rows.flatMap((a, i) => rows.flatMap((b, j) => {
    const r = j > i ? correlation[quantity][i]![j] : null
    return r === null || r === undefined || Math.abs(r) < 0.005 ? [] : [{ key: `${a.key} ${b.key}`, a: a.name, b: b.name, r }]
  }))
  return list.sort((x, y) => Math.abs(y.r) - Math.abs(x.r)).map(({ r, ...pair }) => ({ ...pair, text: formatSigned(r, 2) }))
}
