import { decimalsFor, formatLongitude, formatPosition, formatSigned, formatSignificant, withUnit } from '#shared/format/numbers'
import type { Position } from '#shared/types/domain'
import { overlayTexts, type Overlay } from './overlay'
import type { SensitivityLines } from './sensitivityLines'

/** What the map shows, in one sentence from its own figures. */
export function overlaySentence(overlay: Overlay, { highest, lowest }: Pick<SensitivityLines, 'highest' | 'lowest'>): string {
  const { raises, lowers, nothing, unit } = overlayTexts(overlay)
  const most = ({ value, position }: { value: number, position: Position }, does: string) =>
    `${does} most ${placeText(position)}, by ${formatSignificant(Math.abs(value), 2)} ${unit}`
  if (highest.value <= 0 && lowest.value >= 0) return `A gigatonne gained ${nothing} anywhere.`
  if (lowest.value >= 0) return `A gigatonne gained ${most(highest, raises)}, and nowhere does it the other way.`
  if (highest.value <= 0) return `A gigatonne gained ${most(lowest, lowers)}, and nowhere does it the other way.`
  return `A gigatonne gained ${most(highest, raises)}, and ${most(lowest, lowers)}; along the heavy line it ${nothing}.`
}

/** The effect at a place with sign and unit. */
export function effectText(overlay: Overlay, value: number): string {
  return withUnit(formatSigned(value, Math.min(6, decimalsFor(value, 3))), overlayTexts(overlay).unit)
}

function placeText(position: Position): string {
  if (Math.abs(position[1]) >= 89.5) return `at the ${position[1] > 0 ? 'north' : 'south'} pole`
  if (position[1] === 0) return `on the equator at ${formatLongitude(position[0])}`
  return `at ${formatPosition(position, 0)}`
}
