import { formatSignificant } from '#shared/format/numbers'
import { kindTexts } from '#shared/text/kinds'
import { regionKinds } from '#shared/types/domain'
import { stands } from '~/regions/sentences'
import type { RegionItem } from '~/regions/types'
import { colouringTexts, kindPattern, largestOf, lossHatch, modelHatch, quantityOf, type Colouring, type RegionPaint } from './colouring'

export interface LegendEntry extends Omit<RegionPaint, 'figure'> { text: string }

/** What the colours and patterns on the map mean: of kinds and of regions without a figure only what is there. */
export function legendOf(regions: readonly RegionItem[], colouring: Exclude<Colouring, 'month'>): LegendEntry[] {
  if (colouring === 'kind') {
    return regionKinds.filter(kind => regions.some(region => region.kind === kind))
      .map(kind => ({ tone: 'ink', tint: 0.08, pattern: kindPattern(kind), text: kindTexts[kind] }))
  }
  const open: LegendEntry[] = regions.some((region) => {
    const value = quantityOf(region, colouring)
    return !value || !stands(value)
  })
    ? [{ tone: 'ink', tint: 0.1, pattern: '', text: 'no trend that stands out, or no series' }]
    : []
  if (colouring === 'mass') {
    return [
      { tone: 'loss', tint: 0.22, pattern: lossHatch, text: 'mass lost' },
      { tone: 'gain', tint: 0.34, pattern: '', text: 'mass gained' },
      ...open,
    ]
  }
  const signs: LegendEntry[] = colouring === 'day'
    ? [{ tone: 'model', tint: 0.35, pattern: '', text: 'a longer day' }, { tone: 'model', tint: 0.35, pattern: modelHatch, text: 'a shorter day' }]
    : [{ tone: 'model', tint: 0.35, pattern: '', text: 'moves the pole' }]
  return [...signs, ...open]
}

/** How the tint is scaled, in words; empty where it is not. */
export function scaleWords(regions: readonly RegionItem[], colouring: Colouring): string {
  const largest = largestOf(regions, colouring)
  if (largest === 0 || colouring === 'mass') return ''
  return `darker is more, up to ${formatSignificant(largest, 2)}\u00A0${colouringTexts[colouring].unit}`
}
