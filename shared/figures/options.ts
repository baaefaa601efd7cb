import { live, palettes } from '../design/tokens.ts'
import type { Palette, ThemeName } from '../design/tokens.ts'

export interface FigureOptions {
  /** px */
  width: number
  /** `live` draws with CSS variables, so that the figure follows the page's theme. */
  theme: ThemeName | 'live'
  /** Prefix of the ids inside the figure; must be unique in the document. */
  id: string
}

/** The narrowest and widest figure that is drawn; what lies beyond is held there. */
export const widthLimits = { narrowest: 280, widest: 2000 } as const

export function figureWidth(width: number): number {
  return Number.isFinite(width) ? Math.min(widthLimits.widest, Math.max(widthLimits.narrowest, Math.round(width))) : 640
}

export function paletteOf(theme: FigureOptions['theme']): Palette {
  return theme === 'live' ? live : palettes[theme]
}
