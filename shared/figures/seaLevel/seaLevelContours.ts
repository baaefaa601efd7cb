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

/**
 * Lines and zones of a field (mm, or parts of its mean). A round level that would run beside the mean's own line gives way to it.
 * Lines are those of the smoothed field: what ripples from node to node is the end of the series and no sea level.
 */
export function seaLevelContours(raw: SeaLevelField, mean: number | null): SeaLevelContours {
  const round = contourLevels(raw)
  const field = smoothed(raw)
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

/** Each node's value as the mean of it and its neighbours with weights 1, 2, 1 both ways; poles stay, longitudes close. */
export function smoothed(field: SeaLevelField): SeaLevelField {
  const { latitudesDeg, longitudesDeg, value } = field
  const [rows, columns] = [latitudesDeg.length, longitudesDeg.length]
  const around = columns - 1
  const along = value.map((own, at) => {
    const [row, j] = [Math.floor(at / columns) * columns, at % columns % around]
    return (value[row + (j + around - 1) % around]! + 2 * own + value[row + (j + 1) % around]!) / 4
  })
  return {
    ...field,
    value: along.map((own, at) => {
      const i = Math.floor(at / columns)
      return i === 0 || i === rows - 1 ? own : (along[at - columns]! + 2 * own + along[at + columns]!) / 4
    }),
  }
}
