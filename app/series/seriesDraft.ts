import { answers, waterKinds, type SeriesFacts as OriginFacts } from '#shared/series/facts'
import type { MarkDecision } from '#shared/series/checks'
import { decisionsOfDraft } from './marks'
import { fieldsOfDraft, type ConversionFields } from './conversionFields'
import type { ColumnChoices } from './preview'

export interface SharedRateField { source: string, sigma: string }
export interface SeriesFacts {
  name: string
  reason: string
  source: string
  licence: string
  independence: string
  sharedRates: SharedRateField[]
  origin: OriginFacts
}

/** Nothing said yet. */
export const noOrigin = (): OriginFacts => ({ citation: '', method: '', instrument: '', contains: [], gravimetry: 'unknown', pole: 'unknown', lengthOfDay: 'unknown' })

/** The fields as they are sent; null where none says anything. */
export function originToSend(origin: OriginFacts): OriginFacts | null {
  const sent = { ...origin, citation: origin.citation.trim(), method: origin.method.trim(), instrument: origin.instrument.trim() }
  return JSON.stringify(sent) === JSON.stringify(noOrigin()) ? null : sent
}

/** Fields of a kept draft; a draft from before they were asked for has none. */
function originOfDraft(value: unknown): OriginFacts {
  const kept = typeof value === 'object' && value !== null ? value as Partial<Record<keyof OriginFacts, unknown>> : {}
  const word = (key: 'citation' | 'method' | 'instrument') => typeof kept[key] === 'string' ? kept[key] : ''
  const answer = (key: 'gravimetry' | 'pole' | 'lengthOfDay') => answers.find(each => each === kept[key]) ?? 'unknown'
  return {
    citation: word('citation'), method: word('method'), instrument: word('instrument'),
    contains: waterKinds.filter(kind => Array.isArray(kept.contains) && kept.contains.includes(kind)),
    gravimetry: answer('gravimetry'), pole: answer('pole'), lengthOfDay: answer('lengthOfDay'),
  }
}
/** What somebody has entered so far. */
export interface SeriesDraft { text: string, fileName: string | null, choices: ColumnChoices, conversion: ConversionFields | null, decisions: MarkDecision[], facts: SeriesFacts }

/** Browsers hold some five million characters for a tab; a longer text is left out and has to be chosen again. */
export const longestDraftText = 1_500_000

export function writeDraft(draft: SeriesDraft): string {
  return JSON.stringify({ ...draft, text: draft.text.length > longestDraftText ? '' : draft.text })
}

const isText = (value: unknown): value is string => typeof value === 'string'

/** A kept draft; null where there is none or it is not one. */
export function readDraft(kept: string | null): SeriesDraft | null {
  if (!kept) return null
  let value: Partial<SeriesDraft>
  try {
    value = JSON.parse(kept) as Partial<SeriesDraft>
  }
  catch {
    return null
  }
  const facts = value?.facts
  if (!isText(value?.text) || typeof value.choices !== 'object' || value.choices === null || !facts) return null
  if (![facts.name, facts.reason, facts.source, facts.licence, facts.independence].every(isText) || !Array.isArray(facts.sharedRates)) return null
  return {
    text: value.text, fileName: isText(value.fileName) ? value.fileName : null, choices: value.choices, conversion: fieldsOfDraft(value.conversion), decisions: decisionsOfDraft(value.decisions),
    facts: { ...facts, origin: originOfDraft(facts.origin), sharedRates: facts.sharedRates.filter(rate => isText(rate?.source) && isText(rate?.sigma)) },
  }
}

/** Systematic rates as typed, read for sending; a fault names the line. Empty lines are passed over. */
export function readSharedRates(fields: readonly SharedRateField[], readNumber: (text: string) => number | null): { rates: { source: string, sigmaGtPerYear: number }[], faults: (string | null)[] } {
  const rates: { source: string, sigmaGtPerYear: number }[] = []
  const seen = new Set<string>()
  const faults = fields.map(({ source, sigma }) => {
    const name = source.trim()
    const value = readNumber(sigma)
    if (name === '' && value === null) return null
    if (name === '') return 'Name the source of this error.'
    if (seen.has(name)) return 'This source is named above already.'
    if (value === null) return 'The rate is missing.'
    if (!Number.isFinite(value)) return `“${sigma.trim()}” is not a number.`
    if (value < 0) return 'A one-sigma is not negative.'
    seen.add(name)
    rates.push({ source: name, sigmaGtPerYear: value })
    return null
  })
  return { rates, faults }
}

/** Name of a file's text after it was changed on the screen: `wells.csv` becomes `wells-mended.csv`. */
export function mendedName(name: string): string {
  if (/-mended(\.\w{1,5})?$/.test(name)) return name
  return name.replace(/(\.\w{1,5})?$/, ending => `-mended${ending}`)
}
