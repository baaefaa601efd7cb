import type { Answer, SeriesFacts, WaterKind } from '../series/facts.ts'
import { listed } from './words.ts'

export const waterNames: Record<WaterKind, string> = {
  'all': 'all water of the column', 'groundwater': 'groundwater', 'soil-water': 'soil water', 'surface-water': 'surface water', 'snow': 'snow', 'ice': 'ice',
}
export const answerNames: Record<Answer, string> = { yes: 'yes', no: 'no', unknown: 'not said' }

export const independenceQuestions = [
  { key: 'gravimetry', question: 'Made from gravimetry?', yes: 'made from gravimetry', no: 'not from gravimetry' },
  { key: 'pole', question: 'Adjusted to the observed pole?', yes: 'adjusted to the observed pole', no: 'not adjusted to the pole' },
  { key: 'lengthOfDay', question: 'Adjusted to the observed length of day?', yes: 'adjusted to the observed length of day', no: 'not adjusted to the length of day' },
] as const

/** What a series holds, in words; empty where it is not said. */
export function containsText(contains: readonly WaterKind[]): string {
  return listed(contains.map(kind => waterNames[kind]))
}

/** The fields of a version that say something, with their names. */
export function factRows(facts: SeriesFacts | null | undefined): { name: string, text: string }[] {
  if (!facts) return []
  const answered = independenceQuestions.flatMap(({ key, yes, no }) => facts[key] === 'unknown' ? [] : [facts[key] === 'yes' ? yes : no])
  return [
    { name: 'citation', text: facts.citation }, { name: 'method', text: facts.method }, { name: 'instrument', text: facts.instrument },
    { name: 'holds', text: containsText(facts.contains) }, { name: 'made', text: listed(answered) },
  ].filter(({ text }) => text !== '')
}
