import type { AnswerOf, BodyOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'
import { productQuestions, type GridProduct } from '#shared/series/gridProduct'
import { originToSend, type SeriesFacts } from '~/series/seriesDraft'

export type GridItem = AnswerOf<typeof contracts.gridList>['items'][number]
export type GridPreview = AnswerOf<typeof contracts.gridSeriesRead>
export type Candidate = GridItem['candidates'][number]

/** How series are to be taken, as it stands on the screen. Grids and variables in one text: `grid/variable`, the own grid without a name. */
export interface GridChoices {
  variable: string
  unit: string
  sea: 'engine' | 'none' | 'mask'
  mask: string
  maskOf: 'land' | 'sea'
  scale: string
  mostMissing: string
  leaveOutBadRows: boolean
}

export const firstChoices = (grid: Pick<GridItem, 'chosen' | 'candidates'>): GridChoices => ({
  variable: grid.chosen ?? grid.candidates.find(c => c.epochs > 0)?.name ?? '', unit: '', sea: 'engine', mask: '', maskOf: 'land', scale: '', mostMissing: '0', leaveOutBadRows: false,
})

export interface FurtherOption { value: string, label: string }

/** Variables that may be a mask or factors: those of this file, then those of the other grids. */
export function furtherOptions(own: GridItem, others: readonly GridItem[], heights: string): FurtherOption[] {
  return [
    ...own.candidates.filter(c => c.name !== heights).map(c => ({ value: `/${c.name}`, label: `${c.name}, in this file` })),
    ...others.filter(grid => grid.id !== own.id).flatMap(grid => grid.candidates.map(c => ({ value: `${grid.id}/${c.name}`, label: `${c.name}, in ${grid.name}` }))),
  ]
}

function furtherOf(value: string) {
  const at = value.indexOf('/')
  return { gridId: value.slice(0, at) || null, variable: value.slice(at + 1) }
}

/** The choices as they are sent; null where something is missing. */
export function requestOf(choices: GridChoices, regionIds: string[]): BodyOf<typeof contracts.gridSeries> | null {
  const mostMissing = Number(choices.mostMissing.trim().replace(',', '.')) / 100
  if (!choices.variable || regionIds.length === 0 || !(mostMissing >= 0 && mostMissing <= 1) || (choices.sea === 'mask' && !choices.mask)) return null
  return {
    regionIds, variable: choices.variable, ...(choices.unit.trim() ? { unit: choices.unit.trim() } : {}),
    sea: choices.sea === 'mask' ? { ...furtherOf(choices.mask), of: choices.maskOf } : choices.sea,
    scale: choices.scale ? furtherOf(choices.scale) : null, mostMissing, leaveOutBadRows: choices.leaveOutBadRows,
  }
}

export const blankProduct = (): GridProduct => Object.fromEntries(productQuestions.map(key => [key, { answer: 'unknown', note: '' }])) as unknown as GridProduct

/** What goes with the series as it is sent; a number that is none is named by `fault`. */
export function acceptanceOf(facts: SeriesFacts, product: GridProduct | null, sigma: string, regionIds: string[]): { body: BodyOf<typeof contracts.gridSeriesAccept> } | { fault: string } {
  const number = (text: string) => Number(text.trim().replace(',', '.').replace('−', '-'))
  const rates = facts.sharedRates.filter(rate => rate.source.trim() || rate.sigma.trim())
  if (sigma.trim() && !(number(sigma) >= 0)) return { fault: `“${sigma}” is no one-sigma in millimetres.` }
  const bad = rates.find(rate => !rate.source.trim() || !rate.sigma.trim() || !(number(rate.sigma) >= 0))
  if (bad) return { fault: bad.source.trim() ? `“${bad.sigma}” is no one-sigma for “${bad.source}”, in millimetres per year.` : 'A systematic error has no name.' }
  return {
    body: {
      regionIds, name: facts.name.trim(), reason: facts.reason.trim(), source: facts.source.trim(), licence: facts.licence.trim(), independence: facts.independence.trim(),
      facts: originToSend(facts.origin), product, sigmaMm: sigma.trim() ? number(sigma) : null,
      sharedRates: rates.map(rate => ({ source: rate.source.trim(), sigmaMmPerYear: number(rate.sigma) })),
    },
  }
}
