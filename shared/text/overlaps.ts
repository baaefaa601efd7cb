import { formatArea, formatMeasured, formatNumber } from '../format/numbers.ts'
import { watersInCommon } from '../series/facts.ts'
import type { WaterKind } from '../series/facts.ts'
import { containsText } from './seriesFacts.ts'
import { hardSpace } from '../format/digits.ts'
import type { RegionOverlap, RunResult } from '../types/run.ts'

/** Two regions that share ground, with their names. */
export interface NamedPair extends Omit<RegionOverlap, 'onGroundGtPerYear' | 'settled'> {
  aName: string
  bName: string
  onGroundGtPerYear?: { a: { value: number, sigma: number } | null, b: { value: number, sigma: number } | null }
  settled?: RegionOverlap['settled'] | null
  /** What each series holds; empty where it is not said. */
  contains?: { a: readonly WaterKind[], b: readonly WaterKind[] }
}

const percent = (share: number) => `${share > 0 && share < 0.005 ? '<\u2009' : ''}${formatNumber(share > 0 && share < 0.005 ? 1 : share * 100)}${hardSpace}%`
const perYear = ({ value, sigma }: { value: number, sigma: number }) => formatMeasured(value, sigma, { significant: 3, unit: 'Gt/yr' }).text

/** How much ground two regions share. */
export function sharedGround({ aName, bName, areaKm2, shareOfA, shareOfB }: NamedPair): string {
  return `${aName} and ${bName} share ${formatArea(areaKm2)}, ${percent(shareOfA)} of the first and ${percent(shareOfB)} of the second.`
}

/** What each series holds on the common ground; empty where a trend is not known. */
export function massOnGround({ aName, bName, onGroundGtPerYear: on }: NamedPair): string {
  const known = [on?.a ? { name: aName, rate: on.a } : null, on?.b ? { name: bName, rate: on.b } : null].flatMap(part => part ?? [])
  return known.length > 0 ? `Spread evenly over its outline, ${known.map(({ name, rate }, i) => `${i === 0 ? 'the series of ' : 'that of '}${name}${i === 0 ? ' holds' : ''} ${perYear(rate)}`).join(', ')} on the common ground.` : ''
}

/** What each series holds, and whether that is the same water; empty where one does not say. */
export function waterOnGround({ aName, bName, contains }: NamedPair): string {
  const common = contains ? watersInCommon(contains.a, contains.b) : null
  if (!contains || !common) return ''
  const held = `${aName} holds ${containsText(contains.a)}, ${bName} ${containsText(contains.b)}`
  return `${held}: ${{ none: 'different water, which does not count twice', all: 'the same water, which counts twice', some: 'in part the same water' }[common]}.`
}

/** Why both count in full where they hold different water; null where they do not, or do not say. */
export function differentWater({ aName, bName, contains }: NamedPair): string | null {
  return contains && watersInCommon(contains.a, contains.b) === 'none' ? `Different water: ${containsText(contains.a)} in ${aName}, ${containsText(contains.b)} in ${bName}.` : null
}

/** What was decided of a pair; null where nothing was. */
export function settledSentence({ a, aName, bName, settled }: NamedPair): string | null {
  if (!settled) return null
  const reason = settled.reason ? ` ${ended(settled.reason)}` : ''
  if (settled.choice === 'keep') return `Both count in full.${reason}`
  const [less, full] = settled.from === a ? [aName, bName] : [bName, aName]
  return `Counted once: what the series of ${full} holds on the common ground is taken off ${less}.${reason}`
}

const ended = (text: string) => /[.!?]$/.test(text) ? text : `${text}.`

/** The overlaps of a run with the names of its regions. */
export function namedPairs(result: Pick<RunResult, 'overlaps' | 'regions'>): NamedPair[] {
  const nameOf = (key: string) => result.regions.find(region => region.key === key)?.name ?? key
  return result.overlaps.map(pair => ({ ...pair, aName: nameOf(pair.a), bName: nameOf(pair.b) }))
}

/** What an overlap without a decision means for a sum. */
export const unsettledNote = 'Not settled: mass there may be counted twice in every sum.'
