import type { ChainQuantity, ChainResult, StepPanel, StepResult, Track } from './chainTypes.ts'

/** A track as JSON: null where a value is missing. */
export interface PlainTrack { mjd: number[], value: (number | null)[] }
export type PlainPanel = Omit<StepPanel, 'before' | 'removed' | 'after'> & { before: PlainTrack, removed: PlainTrack | null, after: PlainTrack }
export type PlainChainResult = Omit<ChainResult, 'steps' | 'after'> & {
  steps: (Omit<StepResult, 'panels'> & { panels: PlainPanel[] })[]
  after: Partial<Record<ChainQuantity, PlainTrack>>
}

/**
 * A chain's result as plain JSON, its small multiples thinned to about `mostPoints` each: of every stretch the first, lowest, highest
 * and last value stay, so that the line looks the same. The quantities after the last step keep every epoch.
 */
export function plainChain(result: ChainResult, mostPoints = 1200): PlainChainResult {
  const thin = (track: Track): PlainTrack => plainTrack(thinned(track, mostPoints))
  return {
    ...result,
    steps: result.steps.map(step => ({
      ...step,
      panels: step.panels.map(panel => ({ ...panel, before: thin(panel.before), removed: panel.removed && thin(panel.removed), after: thin(panel.after) }))
    })),
    after: Object.fromEntries(Object.entries(result.after).map(([quantity, track]) => [quantity, plainTrack(track)]))
  }
}

/** At most about `mostPoints` of a track: of each stretch of equal time the first, lowest, highest and last value, and where a gap begins. */
export function thinned({ mjd, value }: Track, mostPoints: number): Track {
  if (mjd.length <= mostPoints || mostPoints < 8) return { mjd, value }
  const stretches = Math.floor(mostPoints / 4)
  const from = mjd[0]!
  const width = (mjd.at(-1)! - from) / stretches
  const kept: number[] = []
  for (let start = 0; start < mjd.length;) {
    const limit = from + width * (Math.floor((mjd[start]! - from) / width) + 1)
    let end = start + 1
    while (end < mjd.length && mjd[end]! < limit) end++
    let low = start
    let high = start
    let gap = -1
    for (let i = start; i < end; i++) {
      if (Number.isNaN(value[i]!)) gap = gap < 0 ? i : gap
      if (!(value[i]! >= value[low]!) && !Number.isNaN(value[i]!)) low = i
      if (!(value[i]! <= value[high]!) && !Number.isNaN(value[i]!)) high = i
    }
    kept.push(...[...new Set([start, low, high, end - 1, ...(gap < 0 ? [] : [gap])])].sort((a, b) => a - b))
    start = end
  }
  return { mjd: Float64Array.from(kept, i => mjd[i]!), value: Float64Array.from(kept, i => value[i]!) }
}

function plainTrack({ mjd, value }: Track): PlainTrack {
  return { mjd: Array.from(mjd), value: Array.from(value, v => Number.isNaN(v) ? null : v) }
}
