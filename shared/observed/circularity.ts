import type { RunWarning } from '../types/run.ts'

/** What a series was made from, as far as it matters for comparing it: its mass from gravimetry, or adjusted to rotation itself. */
export const bases = ['gravimetry', 'pole', 'length-of-day'] as const
export type Basis = typeof bases[number]

/** What is being compared with: the observed pole and day, or gravity coefficients. */
export type ObservedKind = 'rotation' | 'gravity'

/** The bases that a note on independence speaks of, read word by word; a note that says “independent of …” names none. */
export function basesOf(note: string): Basis[] {
  const found: Basis[] = []
  for (const clause of note.toLowerCase().split(/[.;]/)) {
    if (/independent of|not (?:from|based|tuned|adjusted)|no gravi/.test(clause)) continue
    if (/gravimetr|gravity|mascon|\bgrace\b/.test(clause)) found.push('gravimetry')
    if (/(tuned|adjusted|fitted|scaled|constrained)[^,]*\b(pole|polar motion)/.test(clause)) found.push('pole')
    if (/(tuned|adjusted|fitted|scaled|constrained)[^,]*(length of day|\blod\b)/.test(clause)) found.push('length-of-day')
  }
  return [...new Set(found)]
}

/** Warnings for a comparison that is not one of independent things, with the regions that it concerns. */
export function circularityWarnings(observed: ObservedKind, regions: readonly { key: string, name: string, bases: readonly Basis[] }[]): RunWarning[] {
  const having = (basis: Basis): { key: string, name: string }[] => regions.filter(region => region.bases.includes(basis))
  const names = (list: { name: string }[]): string => list.map(({ name }) => `“${name}”`).join(', ')
  const warn = (basis: Basis, code: string, message: (names: string) => string): RunWarning[] => {
    const list = having(basis)
    return list.length === 0 ? [] : [{ code, message: message(names(list)), regions: list.map(({ key }) => key) }]
  }
  if (observed === 'gravity') {
    return warn('gravimetry', 'circular-gravity', who => `The mass of ${who} comes from gravimetry, which sees the same field as these coefficients: their agreement is no independent confirmation.`)
  }
  return [
    ...warn('pole', 'circular-pole', who => `The mass of ${who} was adjusted to the pole: its agreement with the pole is no independent confirmation.`),
    ...warn('length-of-day', 'circular-lod', who => `The mass of ${who} was adjusted to the length of day: its agreement with it is no independent confirmation.`)
  ]
}
