import { formatNumber } from '../format/numbers.ts'
import { LEAST_ANGLE_DEG } from './identifiabilityTypes.ts'
import type { GroupPair, Identifiability, PairAngle, SetSpectrum } from './identifiabilityTypes.ts'

/** Most pairs that are told in words. */
const MOST_PAIRS = 6

/** In words: pairs that the pole, the day or neither can tell apart, what is weakest, and how many combinations are seen. */
export function identifiabilitySentences({ groups, pairs, spectra }: Omit<Identifiability, 'sentences'>): string[] {
  const name = (key: string): string => `“${groups.find(group => group.key === key)!.name}”`
  const told = pairs
    .map(pair => ({ pair, text: pairSentence(pair, name(pair.a), name(pair.b)) }))
    .filter(({ text }) => text !== null)
    .sort((x, y) => leastAngle(x.pair) - leastAngle(y.pair))
  return [
    ...told.slice(0, MOST_PAIRS).map(({ text }) => text!),
    ...(told.length > MOST_PAIRS ? [`${told.length - MOST_PAIRS} more pairs are as close.`] : []),
    ...(told.length === 0 && pairs.length > 0 ? ['Pole and day can each tell every pair of groups apart.'] : []),
    ...groups.filter(group => group.strength < 1).map(group => `${name(group.key)} does less to the pole and the day than their noise (${formatNumber(group.strength, 1)} σ): no factor can be read from them.`),
    ...weakest(spectra, groups)
  ]
}

function leastAngle({ pole, day, all }: GroupPair): number {
  return Math.min(all.foldedDeg, pole?.foldedDeg ?? 90, day?.foldedDeg ?? 90)
}

/** One pair in words; null where pole and day each tell it apart, or where only one of them is observed and does. */
function pairSentence({ pole, day, all }: GroupPair, a: string, b: string): string | null {
  const how = ({ foldedDeg, separation }: PairAngle): string => foldedDeg < LEAST_ANGLE_DEG ? `${formatNumber(foldedDeg, 1)}°` : `${formatNumber(foldedDeg)}° apart, but ${separation < 0.05 ? 'less than 0.1' : `only ${formatNumber(separation, 1)}`} σ`
  if (!all.told) return `Nothing observed here can tell ${a} from ${b} (${how(all)}).`
  if (pole && !pole.told && day) return `The pole cannot tell ${a} from ${b} (${how(pole)}); the day can.`
  // The day alone has one number at a time: groups of one shape differ in it by their size alone, which the pole then decides.
  if (day && !day.told && pole) return `The day cannot tell ${a} from ${b} (${how(day)}); the pole can.`
  return null
}

function weakest(spectra: readonly SetSpectrum[], groups: Identifiability['groups']): string[] {
  const all = spectra.find(({ set }) => set === 'all')!
  const n = groups.length
  if (n < 2) return []
  const count = all.seen < n ? [`Of ${n} combinations of groups, ${all.seen} stand${all.seen === 1 ? 's' : ''} above the noise.`] : []
  const last = all.values.at(-1)!
  if (last > 0.3) return count
  const parts = all.vectors.at(-1)!
    .map((weight, g) => ({ weight, name: groups[g]!.name }))
    .filter(({ weight }) => Math.abs(weight) >= 0.25)
    .sort((x, y) => Math.abs(y.weight) - Math.abs(x.weight))
  const sign = Math.sign(parts[0]?.weight ?? 1)
  const text = parts.map(({ weight, name }, i) => `${weight * sign < 0 ? '\u2212 ' : i > 0 ? '+ ' : ''}${formatNumber(Math.abs(weight), 2)} × ${name}`).join(' ')
  return [...count, `The combination seen worst is ${text}: its mark is ${formatNumber(last, last < 0.01 ? 4 : 2)} of a single group’s.`]
}
