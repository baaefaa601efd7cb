import { formatLongitude, foldLongitude } from '#shared/format/numbers'
import type { ResponsePerGt } from '#shared/earth/response'

export const overlayKinds = ['day', 'pole', 'chi1', 'chi2'] as const
export type OverlayKind = typeof overlayKinds[number]

/** What the lines on the map show: the effect of a gigatonne gained on the day, or on the pole along a direction. */
export interface Overlay {
  kind: OverlayKind
  /** East longitude that the shift of the pole is measured towards, degrees in (−180, 180]; 0 for χ₁, 90 for χ₂, of no meaning for the day. */
  towardsDeg: number
}

export const firstTowardsDeg = -40

export function isOverlayKind(value: unknown): value is OverlayKind {
  return overlayKinds.includes(value as OverlayKind)
}

/** The overlay that an address names; null where it names none. */
export function overlayOf(kind: unknown, towards: unknown): Overlay | null {
  if (!isOverlayKind(kind)) return null
  if (kind !== 'pole') return { kind, towardsDeg: kind === 'chi2' ? 90 : 0 }
  const degrees = typeof towards === 'string' && towards.trim() !== '' ? Number(towards) : Number.NaN
  return { kind, towardsDeg: Number.isFinite(degrees) ? foldLongitude(Math.round(degrees)) : firstTowardsDeg }
}

/** Effect of a gigatonne gained, µs for the day and µas for the pole. */
export function effectOf({ kind, towardsDeg }: Overlay, response: Pick<ResponsePerGt, 'lodMicroseconds' | 'chi1Mas' | 'chi2Mas'>): number {
  if (kind === 'day') return response.lodMicroseconds
  const towards = towardsDeg * Math.PI / 180
  return 1000 * (response.chi1Mas * Math.cos(towards) + response.chi2Mas * Math.sin(towards))
}

export interface OverlayTexts {
  title: string
  unit: 'µs' | 'µas'
  /** What a solid and a dashed line mean. */
  solid: string
  dashed: string
  /** Completes “a gigatonne gained … most at”. */
  raises: string
  lowers: string
  /** Completes “along the heavy line it …”. */
  nothing: string
}

/** The words of an overlay, signs as on the result pages: χ₁ towards Greenwich, χ₂ towards 90° E. */
export function overlayTexts({ kind, towardsDeg }: Overlay): OverlayTexts {
  if (kind === 'day') {
    return {
      title: 'Effect on the length of day', unit: 'µs', solid: 'the day grows longer', dashed: 'it grows shorter',
      raises: 'lengthens the day', lowers: 'shortens it', nothing: 'leaves the day as it is',
    }
  }
  const symbol = kind === 'chi1' ? ' (χ₁)' : kind === 'chi2' ? ' (χ₂)' : ''
  const towards = formatLongitude(towardsDeg)
  return {
    title: `Effect on the pole towards ${towards}${symbol}`, unit: 'µas', solid: `the pole moves towards ${towards}`, dashed: 'it moves away',
    raises: `moves the pole towards ${towards}`, lowers: 'moves it away', nothing: 'moves it neither way',
  }
}
