import { basesOf } from '../observed/circularity.ts'
import type { Basis } from '../observed/circularity.ts'

/** Kinds of water that a mass series may hold; `all` is the whole column, as gravimetry sees it. */
export const waterKinds = ['all', 'groundwater', 'soil-water', 'surface-water', 'snow', 'ice'] as const
export type WaterKind = typeof waterKinds[number]

export const answers = ['yes', 'no', 'unknown'] as const
export type Answer = typeof answers[number]

/** What is known of a version besides its values, in fields that report, comparison and overlaps can read. */
export interface SeriesFacts {
  citation: string
  method: string
  instrument: string
  /** Empty: not said. */
  contains: WaterKind[]
  /** Whether the mass comes from gravimetry, or was adjusted to the observed pole or length of day. */
  gravimetry: Answer
  pole: Answer
  lengthOfDay: Answer
}

/** What a version was made from: by its fields where they answer, else read from the note on independence and the source. */
export function basesOfVersion({ facts, independence, source }: { facts: SeriesFacts | null, independence: string, source: string }): Basis[] {
  const read = basesOf(`${independence}. ${source}`)
  const answer: Record<Basis, Answer> = { 'gravimetry': facts?.gravimetry ?? 'unknown', 'pole': facts?.pole ?? 'unknown', 'length-of-day': facts?.lengthOfDay ?? 'unknown' }
  return (Object.keys(answer) as Basis[]).filter(basis => answer[basis] === 'yes' || (answer[basis] === 'unknown' && read.includes(basis)))
}

/** How the waters of two series stand to each other: no part in common, one holding all of the other, or some; null where one does not say. */
export function watersInCommon(a: readonly WaterKind[], b: readonly WaterKind[]): 'none' | 'all' | 'some' | null {
  if (a.length === 0 || b.length === 0) return null
  if (a.includes('all') || b.includes('all')) return 'all'
  const common = a.filter(kind => b.includes(kind)).length
  return common === 0 ? 'none' : common === Math.min(a.length, b.length) ? 'all' : 'some'
}
