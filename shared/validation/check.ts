/** How far a computed figure may be from its reference, and in which measure. */
export type Tolerance =
  | { kind: 'relative', within: number }
  /** A part of a scale that does not vanish where a component does. */
  | { kind: 'scale', within: number, scale: number }
  | { kind: 'absolute', within: number }
  /** A reference of one digit or on crude outlines: within this factor either way. */
  | { kind: 'factor', within: number }

/** One figure of the engine beside one from outside. */
export interface ReferenceCheck {
  id: string
  group: string
  title: string
  unit: string
  computed: number
  reference: number
  tolerance: Tolerance
  /** Where the reference comes from. */
  source: string
  origin: 'published' | 'independent' | 'arithmetic'
  /** Why the two need not agree to the last digit. */
  cause: string
}

export interface Verdict { ratio: number | null, deviation: number, within: boolean }

/**
 * The one comparison that both the tests and the validation page use. `deviation` is in the measure of the tolerance: a ratio
 * minus one, a part of the scale, a difference, or a factor.
 */
export function compare({ computed, reference, tolerance }: Pick<ReferenceCheck, 'computed' | 'reference' | 'tolerance'>): Verdict {
  const ratio = reference === 0 ? null : computed / reference
  const difference = Math.abs(computed - reference)
  switch (tolerance.kind) {
    case 'relative': return judged(ratio, reference === 0 ? difference : difference / Math.abs(reference), tolerance.within)
    case 'scale': return judged(ratio, difference / tolerance.scale, tolerance.within)
    case 'absolute': return judged(ratio, difference, tolerance.within)
    case 'factor': {
      const factor = ratio === null || ratio <= 0 ? Infinity : Math.max(ratio, 1 / ratio)
      return judged(ratio, factor, tolerance.within)
    }
  }
}

function judged(ratio: number | null, deviation: number, limit: number): Verdict {
  return { ratio, deviation, within: Number.isFinite(deviation) && deviation <= limit }
}
