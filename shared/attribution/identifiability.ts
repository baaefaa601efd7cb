import { dot, singularValues } from './linearAlgebra.ts'
import type { SingularValues } from './linearAlgebra.ts'
import { lowRankWhitening } from './metric.ts'
import { identifiabilitySentences } from './identifiabilityTexts.ts'
import { LEAST_ANGLE_DEG, LEAST_SEPARATION } from './identifiabilityTypes.ts'
import type { GroupPair, Identifiability, ObservableSet, PairAngle, SetSpectrum } from './identifiabilityTypes.ts'
import type { Signatures } from './signatures.ts'
import type { RotationQuantity } from './types.ts'

const members: Readonly<Record<ObservableSet, readonly RotationQuantity[]>> = { pole: ['chi1', 'chi2'], day: ['lod'], all: ['lod', 'chi1', 'chi2'] }
const RANK_TOLERANCE = 1e-9

/**
 * Which groups rotation could tell apart at all: angles between their signatures over the whole of space and time, singular values and
 * combinations, in the metric of the covariance of the observations. Angles are those of the pole alone, the day alone, and both.
 */
export function identifiability(signatures: Signatures): Identifiability {
  const sets = (['pole', 'day', 'all'] as const).flatMap((set) => {
    const columns = columnsOf(signatures, set)
    return columns ? [{ set, columns }] : []
  })
  const all = sets.find(({ set }) => set === 'all')
  if (!all) throw new RangeError('signatures must hold at least one observable')
  const angles = new Map(sets.map(({ set, columns }) => [set, anglesOf(columns)]))
  const pairs: GroupPair[] = []
  signatures.groups.forEach(({ key: a }, i) => signatures.groups.forEach(({ key: b }, j) => {
    // A group without any effect has no angle to another.
    const whole = j > i ? angles.get('all')!(i, j) : null
    if (whole) pairs.push({ a, b, pole: angles.get('pole')?.(i, j) ?? null, day: angles.get('day')?.(i, j) ?? null, all: whole })
  }))
  const strong = singularValues(all.columns)
  const result = {
    groups: signatures.groups.map(({ key, name }, g) => ({ key, name, strength: Math.sqrt(dot(all.columns[g]!, all.columns[g]!)), resolution: resolutionOf(strong, g) })),
    pairs,
    spectra: sets.map(({ set, columns }) => spectrumOf(set, columns))
  }
  return { ...result, sentences: identifiabilitySentences(result) }
}

/** Coordinates of all blocks of a set after one another, shared errors in the metric; null where none of them is observed. */
function columnsOf({ groups, blocks }: Signatures, set: ObservableSet): Float64Array[] | null {
  const used = blocks.filter(({ quantity }) => members[set].includes(quantity))
  if (used.length === 0) return null
  const size = used.reduce((sum, block) => sum + (block.columns[0]?.length ?? 0), 0)
  const joined = (pick: (block: Signatures['blocks'][number]) => Float64Array): Float64Array => {
    const whole = new Float64Array(size)
    let at = 0
    for (const block of used) {
      whole.set(pick(block), at)
      at += pick(block).length
    }
    return whole
  }
  const root = lowRankWhitening(used[0]!.sources.map((_, s) => joined(block => block.sources[s]!)))
  return groups.map((_, g) => root(joined(block => block.columns[g]!)))
}

function anglesOf(columns: readonly Float64Array[]): (i: number, j: number) => PairAngle | null {
  const size = columns.map(column => Math.sqrt(dot(column, column)))
  return (i, j) => {
    const [a, b] = [size[i]!, size[j]!]
    if (!(a > 0) || !(b > 0)) return null
    // Half angles of unit vectors keep small ones to their digits (Kahan 2006).
    const [x, y] = [columns[i]!, columns[j]!]
    let [difference, sum] = [0, 0]
    for (let k = 0; k < x.length; k++) {
      const [p, q] = [x[k]! / a, y[k]! / b]
      difference += (p - q) * (p - q)
      sum += (p + q) * (p + q)
    }
    const angle = 2 * Math.atan2(Math.sqrt(difference), Math.sqrt(sum))
    const folded = Math.min(angle, Math.PI - angle)
    const separation = Math.min(a, b) * Math.sin(folded)
    const foldedDeg = folded * 180 / Math.PI
    return { angleDeg: angle * 180 / Math.PI, foldedDeg, separation, told: foldedDeg >= LEAST_ANGLE_DEG && separation >= LEAST_SEPARATION }
  }
}

function spectrumOf(set: ObservableSet, columns: readonly Float64Array[]): SetSpectrum {
  const unit = columns.map((column) => {
    const size = Math.sqrt(dot(column, column))
    return size > 0 ? column.map(v => v / size) : column
  })
  const { values, vectors } = singularValues(unit)
  const largest = values[0] ?? 0
  return {
    set,
    values: Array.from(values),
    vectors: vectors.map(v => Array.from(v)),
    rank: values.filter(v => v > RANK_TOLERANCE * largest).length,
    seen: singularValues(columns).values.filter(v => v > 1).length
  }
}

/** Diagonal of the resolution V s²/(s² + 1) Vᵀ: factors with a prior of one sigma = 1. */
function resolutionOf({ values, vectors }: SingularValues, g: number): number {
  return values.reduce((sum, s, k) => sum + vectors[k]![g]! ** 2 * s * s / (s * s + 1), 0)
}

export type { GroupPair, Identifiability, ObservableSet, PairAngle, SetSpectrum } from './identifiabilityTypes.ts'
