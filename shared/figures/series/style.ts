import type { Palette } from '../../design/tokens.ts'
import type { SeriesRole } from './data.ts'

export interface LineStyle { stroke: string, width: number, dashes?: string }

/** Line of each role: apart by colour and by weight, and each is named beside its end. */
export function lineStyle(role: SeriesRole, palette: Palette): LineStyle {
  switch (role) {
    case 'model': return { stroke: palette.model, width: 2.25 }
    case 'observed': return { stroke: palette.observed, width: 1.25 }
    case 'residual': return { stroke: palette.residual, width: 1 }
    case 'loss': return { stroke: palette.loss, width: 1.75 }
    case 'gain': return { stroke: palette.gain, width: 1.75 }
    case 'neutral': return { stroke: palette.ink, width: 1.5 }
    case 'secular': return { stroke: palette.soft, width: 1.25, dashes: '1.5 3' }
  }
}
