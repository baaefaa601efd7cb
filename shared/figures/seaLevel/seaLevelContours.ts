import { contourLines, zoneOf } from './contourLines.ts'
import { contourLevels } from './levels.ts'
import type { ContourLine, Zone } from './contourLines.ts'
import type { SeaLevelField } from './levels.ts'

/** A field as its map shows it: lines at round levels, the line of the mean, and ground where it falls or rises beyond the mean. */
export interface SeaLevelContours {
  lines: ContourLine[]
  /** Round levels that are drawn, from low to high. */
  levels: number[]
  /** Mean over the sea in the unit of the field; null where loads sum to no mass. */
  mean: number | null
  /** Below zero and below the mean. */
  low: Zone
  /** Above zero and above the mean. */
  high: Zone
}

/** Lines and zones of a field (mm, or parts of its mean). A round level that would run beside the mean's own line gives way to it. */
export function seaLevelContours(field: SeaLevelField, mean: number | null): SeaLevelContours {
  const round = contourLevels(field)
  const gap = (level: number) => Math.min(...round.filter(other => other !== level).map(other => Math.abs(other - level)))
  const levels = mean === null ? round : round.filter(level => level === 0 || Math.abs(level - mean) > 0.35 * gap(level))
  const drawn = mean === null || !round.length || levels.includes(mean) ? levels : [...levels, mean]
  return {
    lines: contourLines(field, drawn),
    levels,
    mean,
    low: round.length ? zoneOf(field, Math.min(0, mean ?? 0), 'below') : { rings: [] },
    high: round.length ? zoneOf(field, Math.max(0, mean ?? 0), 'above') : { rings: [] },
  }
}
