import { formatNumber, hardSpace } from '../format/digits.ts'

/** How much of a region's mass change counts, and where its water goes. */
export interface WaterWay {
  /** Part that reaches the sea, 0 to 1; absent: all of it. */
  fractionToOcean?: number
  /** What the rest goes to; null or absent: land elsewhere, evenly. */
  restTo?: string | null
  /** Part of an ice region's mass change that is grounded above flotation; absent: all of it. */
  groundedFraction?: number
}

const percent = (part: number) => `${formatNumber(part * 100, Number.isInteger(Math.round(part * 1e6) / 1e4) ? 0 : 1)}${hardSpace}%`

/** The way of a region's water in words; empty where all of it counts and reaches the sea. */
export function waterWaySentences({ fractionToOcean = 1, restTo, groundedFraction = 1 }: WaterWay, nameOf: (key: string) => string): string[] {
  const sentences: string[] = []
  if (groundedFraction < 1) sentences.push(`${percent(groundedFraction)} of the ice is grounded above flotation and counts; the rest floats or lies below flotation and changes no load.`)
  if (fractionToOcean < 1) sentences.push(`${percent(fractionToOcean)} reaches the sea, the rest goes to ${restTo ? nameOf(restTo) : 'land elsewhere, evenly'}.`)
  return sentences
}

/** What the note beside the grounded part says. */
export const groundedNote = 'Only ice that rests on the ground above flotation loads the Earth. Floating ice, and the ice of a grounded column that is needed to bring it to flotation, already displaces its own weight of water: when it melts, neither land nor sea changes load.'

/** What the note beside the part to the sea says. */
export const toSeaNote = 'Water that is stored, diverted or moved to another basin does not reach the sea. The part that stays on land is counted where it goes, as a row of its own.'
