/** Classes of equal width on both sides of zero: loss first, from the strongest on; the outermost are open. */
export interface GridClasses {
  /** Classes on each side. */
  each: number
  /** Bounds between neighbours, ascending, zero in the middle. */
  bounds: number[]
  decimals: number
  /** Class of a value; null for none. */
  of: (value: number | null) => number | null
}

const EACH = 4

/** Classes for values, by a round step that lets few of them into the open ends. */
export function classesOf(values: readonly (number | null)[], most?: number): GridClasses {
  const size = most ?? typicalMost(values)
  const step = roundStep(size / EACH)
  const bounds = Array.from({ length: 2 * EACH - 1 }, (_, i) => (i - EACH + 1) * step)
  return {
    each: EACH,
    bounds,
    decimals: Math.max(0, -Math.floor(Math.log10(step) + 1e-9)) + (Math.abs(step / 10 ** Math.floor(Math.log10(step) + 1e-9) - 2.5) < 1e-9 ? 1 : 0),
    of: value => value === null ? null : Math.min(2 * EACH - 1, Math.max(0, Math.floor(value / step) + EACH))
  }
}

/** The size that one value in fifty exceeds; 1 where all are zero or missing. */
export function typicalMost(values: readonly (number | null)[]): number {
  const sizes = values.filter(v => v !== null).map(Math.abs).sort((a, b) => a - b)
  return sizes[Math.ceil(0.98 * (sizes.length - 1))] || sizes.at(-1) || 1
}

/** 1, 2, 2.5 or 5 times a power of ten, at least x. */
function roundStep(x: number): number {
  const power = 10 ** Math.floor(Math.log10(x))
  return power * ([1, 2, 2.5, 5, 10].find(f => f * power >= x * (1 - 1e-9)) ?? 10)
}
