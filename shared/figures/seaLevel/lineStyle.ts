import { formatNumber, formatSignificant } from '../../format/digits.ts'
import type { Palette } from '../../design/tokens.ts'

/** What a contour line stands for. */
export type LineKind = 'rise' | 'fall' | 'zero' | 'mean'

export function lineKind(level: number, mean: number | null): LineKind {
  if (level === mean) return 'mean'
  return level === 0 ? 'zero' : level > 0 ? 'rise' : 'fall'
}

/** Solid where the sea rises, dashed where it falls, heavier at zero, in the model's colour at the mean. */
export function lineStyle(palette: Palette, kind: LineKind) {
  const isMain = kind === 'mean' || kind === 'zero'
  return {
    'stroke': kind === 'mean' ? palette.model : palette.ink,
    'stroke-width': isMain ? 1.8 : 0.8,
    'stroke-opacity': isMain ? 1 : 0.75,
    'stroke-dasharray': kind === 'fall' ? '4 2.5' : undefined,
    'stroke-linejoin': 'round',
  }
}

/** A level as its label writes it: round ones with the decimals they need, the mean with three digits. */
export function levelText(level: number, mean: number | null): string {
  if (level !== mean) return formatNumber(level, decimalsOf(level))
  const text = Number.isInteger(level) ? formatNumber(level) : formatSignificant(level, 3)
  return `mean ${text}`
}

/** Decimals that write a round number out. */
function decimalsOf(level: number): number {
  const [mantissa, exponent] = level.toExponential().split('e') as [string, string]
  return Math.max(0, (mantissa.split('.')[1]?.length ?? 0) - Number(exponent))
}
