import { formatNumber, formatSignificant, hardSpace } from '../format/digits.ts'
import { formatMeasured } from '../format/measured.ts'
import { formatPosition } from '../format/places.ts'
import { listed } from './words.ts'
import type { PlacedValue, SeaLevelFacts } from '../figures/seaLevel/seaLevelFacts.ts'

/** What the map of the sea leaves out, always beside it. */
export const seaLevelCaution = 'Shorelines stay where they are and the Earth answers elastically: the slow flow of the mantle is not in it, nor is the expansion of warming water, wind or currents. '
  + 'It shows where reported mass change is calculated to raise or lower the sea against the ground, and is no forecast.'

/** Rotational feedback, on and off, and why χ never uses both. */
export const feedbackTexts = {
  on: 'The shift of the pole and the change of spin tilt the sea’s surface in turn, and that part is in the map. It goes with an excitation factor freed of the ocean (1.487 in place of 1.608), '
    + 'because 1.608 was found from an Earth whose sea already answers to the pole, and would count that answer twice.',
  off: 'The sea answers to gravity and to the ground’s yielding alone, as the default of every scenario does. The sea’s answer to the moving pole is then in the observed factor 1.608, and not in this map.',
} as const

export interface SeaLevelSentence {
  /** Begins the sentence: “For reported mass change in six regions, 2004–2024,”. */
  subject: string
  facts: SeaLevelFacts
  /** Unit of the facts, e.g. `mm per year`. */
  unit: string
  /** One-sigma of the mean, where it is known. */
  sigma: number | null
  /** The one region of the map, which the sentence has already named. */
  only?: string
}

/** Most regions that the sentence names. */
const most = 2

/** What the map says, in one sentence made of its own figures. */
export function seaLevelSentence({ subject, facts, unit, sigma, only }: SeaLevelSentence): string {
  const { mean, highest, lowest, against } = facts
  const size = (value: number) => `${formatSignificant(Math.abs(value), 2)}${hardSpace}${unit}`
  if (highest.value === 0 && lowest.value === 0) return `${subject} the sea is calculated to stay as it is.`
  if (mean === null) {
    return `${subject} the sea is calculated to keep its mean level, to rise most, by ${size(highest.value)}, ${near(highest)}, and to fall most, by ${size(lowest.value)}, ${near(lowest)}.`
  }
  const rises = mean > 0
  const [verb, opposite] = rises ? ['rise', 'fall'] : ['fall', 'rise']
  const top = rises ? highest : lowest
  const error = sigma !== null && sigma > 0
  const mid = `to ${verb} by ${formatMeasured(Math.abs(mean), sigma, { signed: false, significant: 3, unit }).text} on average${error ? ' (1σ)' : ''}`
  const beside = against.slice(0, most).map(({ name, reachKm }) => `${formatNumber(Math.max(100, Math.round(reachKm / 100) * 100))}${hardSpace}km from ${name === only ? 'it' : name}`)
  const turn = beside.length ? `, to ${opposite} as far as about ${listed(beside)}` : ''
  return `${subject} the sea is calculated ${mid}${turn}, and to ${verb} most, by ${size(top.value)}, ${near(top)}.`
}

function near({ position }: PlacedValue): string {
  return `near ${formatPosition(position, 0)}`
}
