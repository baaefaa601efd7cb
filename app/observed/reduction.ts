import { formatMeasured } from '#shared/format/numbers'
import { quantityTexts, stepTitles } from '#shared/observed/chainTexts'
import { defaultChain, readChain } from '#shared/observed/readChain'
import { counted, listed } from '#shared/text/words'
import { InputError, type Issue } from '#shared/types/issue'
import { coveredSpans, longestStep } from './coverage'
import { secularLine } from '#shared/figures/series/secular'
import type { FigureSeries, SeriesData } from '#shared/figures/series/data'
import type { PlainChainResult, PlainPanel, PlainTrack } from '#shared/observed/chainPlain'
import type { Chain, ChainQuantity, ChainStep } from '#shared/observed/chainTypes'

/** The usual chain with every step that the page can switch, those that are not usual switched off. */
export function pageChain(): Chain {
  const usual = defaultChain()
  return {
    ...usual,
    steps: usual.steps.flatMap((step): ChainStep[] => step.kind === 'monthly'
      ? [{ kind: 'smoothing', on: false, smoothing: { kind: 'gaussian', widthDays: 365 } }, step, { kind: 'detrend', on: false }]
      : [step]),
  }
}

export type ChainReading = { chain: Chain, fault: null } | { chain: null, fault: { text: string, issues: readonly Issue[] } }

/** A chain from an address or a text field, or what is wrong with it. */
export function chainOfText(text: unknown): ChainReading {
  if (typeof text !== 'string' || !text.trim()) return { chain: pageChain(), fault: null }
  try {
    return { chain: readChain(JSON.parse(text)), fault: null }
  }
  catch (error) {
    if (error instanceof InputError) return { chain: null, fault: { text: `${error.message}.`, issues: error.issues } }
    return { chain: null, fault: { text: 'The chain is no JSON.', issues: [{ code: 'json', message: error instanceof Error ? error.message : 'It cannot be read.' }] } }
  }
}

/** The chain for an address; undefined for the usual one, which needs no words. */
export function textOfChain(chain: Chain): string | undefined {
  const text = JSON.stringify(chain)
  return text === JSON.stringify(pageChain()) ? undefined : text
}

/** Whether two chains say the same, in whatever order their settings stand. */
export function sameChain(a: Chain, b: Chain): boolean {
  return ordered(a) === ordered(b)
}
function ordered(value: unknown): string {
  return JSON.stringify(value, (_, v: unknown) => v && typeof v === 'object' && !Array.isArray(v) ? Object.fromEntries(Object.entries(v).sort(([x], [y]) => x < y ? -1 : 1)) : v)
}

/** The steps of a chain that are on, in a few words. */
export function stepsInWords({ steps, from, to }: Chain): string {
  const names = steps.filter(step => step.on && !(step.kind === 'background' && step.rows.length === 0)).map(step => stepTitles[step.kind].toLowerCase())
  const span = from || to ? `, ${from ?? 'the beginning'} to ${to ?? 'the end'}` : ''
  return `${listed([...new Set(names)]) || 'none'}${span}`
}

/** The chain with some settings of one step changed. */
export function withStep(chain: Chain, at: number, part: Partial<ChainStep>): Chain {
  return { ...chain, steps: chain.steps.map((step, i) => i === at ? { ...step, ...part } as ChainStep : step) }
}

/** The chain with a step that subtracts a series of angular momentum, behind the excitation that it belongs to. */
export function withFluid(chain: Chain, correction: string): Chain {
  const at = 1 + Math.max(chain.steps.findIndex(step => step.kind === 'excitation'), chain.steps.findLastIndex(step => step.kind === 'angular-momentum'))
  return { ...chain, steps: chain.steps.toSpliced(at, 0, { kind: 'angular-momentum', on: true, correction, mass: true, motion: true, trend: false }) }
}

/** The chain without one of its steps. */
export function withoutStep(chain: Chain, at: number): Chain {
  return { ...chain, steps: chain.steps.toSpliced(at, 1) }
}

/** What is left after a reduction, in one sentence with its trends. */
export function reductionSentence(name: string, { steps, trends, noTrend }: Pick<PlainChainResult, 'steps' | 'trends' | 'noTrend'>): string {
  const on = steps.filter(step => step.on && step.panels.length > 0).length
  const { lod, chi1, chi2 } = trends
  const parts = [
    ...(lod ? [`the length of day changes by ${formatMeasured(lod.value * 1000, lod.sigma * 1000, { unit: 'µs per year' }).text}`] : []),
    ...(chi1 && chi2 ? [`the excitation of the pole drifts by ${formatMeasured(chi1.value, chi1.sigma).text} (χ₁) and ${formatMeasured(chi2.value, chi2.sigma).text} (χ₂) mas per year`] : []),
  ]
  const unquoted = noTrend.filter(({ quantity }) => quantity === 'lod' || quantity === 'chi1').map(({ quantity }) => quantity === 'lod' ? 'the length of day' : 'the excitation')
  const head = on === 0 ? `With nothing taken out of “${name}”` : `After ${counted(on, 'step')} of reduction, in “${name}”`
  const tail = unquoted.length > 0 ? `no trend of ${listed(unquoted)} is quoted` : ''
  return `${head}, ${parts.length > 0 ? `${parts.join(' and ')}${tail ? `; ${tail}` : ''}` : tail || 'too little is left for a trend'}.`
}

const words = { before: 'before', removed: 'removed', after: 'after' } as const
export type PanelPart = keyof typeof words

/** The three charts of a small multiple; where nothing is subtracted, the one in the middle is null. */
export function panelCharts(panel: PlainPanel, title: string): { part: PanelPart, data: SeriesData | null }[] {
  return (['before', 'removed', 'after'] as const).map((part) => {
    const track = panel[part]
    return { part, data: track && trackChart(track, panel.quantity, panel.unit, `${title}: ${quantityTexts[panel.quantity].name} ${words[part]}`, part === 'removed' ? 'residual' : 'observed', words[part]) }
  })
}

/** A chart of what a reduction left, with the time that it covers; beside the excitation of the pole, if asked for, the secular pole. */
export function afterChart(quantity: ChainQuantity, track: PlainTrack, secular = false): SeriesData {
  const unit = quantity === 'lod' || quantity === 'ut1' ? 'ms' : 'mas'
  const chart = trackChart(track, quantity, unit, `${quantityTexts[quantity].name}, after the last step`, 'observed', 'observed, reduced')
  const series = secular && (quantity === 'chi1' || quantity === 'chi2') ? [...chart.series, secularLine(quantity, track.mjd)] : chart.series
  return { ...chart, series }
}

function trackChart(track: PlainTrack, quantity: ChainQuantity, unit: string, title: string, role: FigureSeries['role'], label: string): SeriesData {
  const { symbol } = quantityTexts[quantity]
  return { title, unit: `${symbol}, ${unit}`, series: [{ label, role, mjd: track.mjd, value: track.value, maxGapDays: longestStep(track.mjd) }], coverage: [{ label: 'values', spans: coveredSpans(track) }] }
}
