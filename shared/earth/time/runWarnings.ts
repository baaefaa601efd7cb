import { formatArea, formatShare } from '../../format/numbers.ts'
import type { Contour } from '../contour.ts'
import type { EarthModel } from '../earthModel.ts'
import { SEA_INSIDE_LIMIT } from '../evaluateWarnings.ts'
import { contourMeans } from '../gridStack.ts'
import { patternLeftOut } from '../../text/gridPattern.ts'
import type { RegionOverlap, RunInput, RunRegionInput, RunWarning } from '../../types/run.ts'
import type { TrendFit } from './trend.ts'

/** Part of the months below which a region's gaps are pointed out. */
const WELL_COVERED = 0.9

/** Every warning of a run, overlaps first: they are to be seen before any sum. */
export function runWarnings(
  input: RunInput, overlaps: readonly RegionOverlap[],
  fitted: readonly { region: RunRegionInput, contour: Contour, fit: TrendFit | null, coverage: number }[], model: EarthModel
): RunWarning[] {
  const active = fitted.filter(({ region }) => region.scale !== 0)
  return [
    ...overlapWarnings(input, overlaps),
    ...(input.settings.ocean === 'none'
      ? [{ code: 'mass-not-conserved', message: 'Without an ocean response mass is not conserved. This setting is a diagnostic, not a result.', regions: [] }]
      : []),
    ...seaWarnings(active, model),
    ...active.filter(({ region }) => region.patternLeftOut).map(({ region }) => ({ code: 'pattern-left-out', message: `“${region.name}”: ${patternLeftOut}`, regions: [region.key] })),
    ...fitWarnings(active),
    ...coverageWarnings(active),
    ...scatterWarning(active),
    ...coreWarnings(input)
  ]
}

function overlapWarnings(input: RunInput, overlaps: readonly RegionOverlap[]): RunWarning[] {
  const nameOf = (key: string): string => input.regions.find(region => region.key === key)?.name ?? key
  const unsettled = overlaps.filter(overlap => !overlap.settled).map(({ a, b, areaKm2, shareOfA, shareOfB }) => ({
    code: 'overlap',
    message: `“${nameOf(a)}” and “${nameOf(b)}” share ${formatArea(areaKm2)}, ${formatShare(shareOfA).replace('+', '')} of the first and ${formatShare(shareOfB).replace('+', '')} of the second: mass there may be counted twice.`,
    regions: [a, b]
  }))
  return [...unsettled, ...takenTwice(overlaps, nameOf)]
}

/** Three regions on common ground, each taken off the next and the smallest off the largest too: its mass is then taken off once too often. */
function takenTwice(overlaps: readonly RegionOverlap[], nameOf: (key: string) => string): RunWarning[] {
  const taken = overlaps.flatMap(({ a, b, settled }) => settled?.choice === 'subtract' ? [{ from: settled.from!, of: settled.from === a ? b : a }] : [])
  return taken.flatMap(outer => taken.filter(inner => inner.from === outer.of && taken.some(t => t.from === outer.from && t.of === inner.of)).map(inner => ({
    code: 'taken-twice',
    message: `“${nameOf(inner.of)}” is taken off both “${nameOf(inner.from)}” and “${nameOf(outer.from)}”, from which “${nameOf(inner.from)}” is taken as well: where all three share ground it is taken off once too often. Keep one of these pairs in full.`,
    regions: [outer.from, inner.from, inner.of]
  })))
}

function seaWarnings(active: readonly { region: RunRegionInput, contour: Contour }[], { oceanField }: EarthModel): RunWarning[] {
  if (!oceanField) return []
  return active
    .map(({ region, contour }) => ({ region, sea: contourMeans(oceanField, contour)[0]! }))
    .filter(({ sea }) => sea > SEA_INSIDE_LIMIT)
    .map(({ region, sea }) => ({
      code: 'ocean-inside',
      message: `${formatShare(sea).replace('+', '')} of the outline of “${region.name}” is sea in the ocean function: mass spread there is a load on the sea floor, not on land.`,
      regions: [region.key]
    }))
}

function fitWarnings(active: readonly { region: RunRegionInput, fit: TrendFit | null }[]): RunWarning[] {
  const byCode = new Map<string, RunWarning>()
  for (const { region, fit } of active) {
    for (const warning of fit?.warnings ?? []) {
      const known = byCode.get(warning.code)
      if (known) known.regions.push(region.key)
      else byCode.set(warning.code, { ...warning, regions: [region.key] })
    }
  }
  return [...byCode.values()]
}

function coverageWarnings(active: readonly { region: RunRegionInput, coverage: number }[]): RunWarning[] {
  const gappy = active.filter(({ coverage }) => coverage < WELL_COVERED)
  if (gappy.length === 0) return []
  return [{
    code: 'gaps',
    message: 'Some series leave more than a tenth of the months open. The sum over regions has no value in those months; trends are fitted to the epochs that exist.',
    regions: gappy.map(({ region }) => region.key)
  }]
}

function scatterWarning(active: readonly { region: RunRegionInput }[]): RunWarning[] {
  const without = active.filter(({ region }) => !region.series.sigmaGt)
  if (without.length === 0) return []
  return [{
    code: 'sigma-from-scatter',
    message: 'No one-sigma per epoch was given: the scatter about the fit stands for it in the error bands.',
    regions: without.map(({ region }) => region.key)
  }]
}

function coreWarnings(input: RunInput): RunWarning[] {
  const rows = [...input.background, ...(input.restOfWorld ? [input.restOfWorld] : [])].filter(row => row.lodMsPerCentury !== null)
  const other = rows.filter(row => row.core !== null && row.core !== input.settings.core)
  const unstated = rows.filter(row => row.core === null)
  const names = (list: typeof rows): string => list.map(row => `“${row.name}”`).join(', ')
  return [
    ...(other.length > 0
      ? [{
          code: 'core-convention',
          message: `${names(other)} assume${other.length === 1 ? 's' : ''} another coupling of the core than this run (${input.settings.core}). The two answers of the day to the same load differ by 21 %: compare before adding.`,
          regions: other.map(row => row.key)
        }]
      : []),
    ...(unstated.length > 0
      ? [{
          code: 'core-unstated',
          message: `${names(unstated)} do${unstated.length === 1 ? 'es' : ''} not say which coupling of the core ${unstated.length === 1 ? 'it assumes' : 'they assume'}; the length of day may be 21 % apart.`,
          regions: unstated.map(row => row.key)
        }]
      : [])
  ]
}
