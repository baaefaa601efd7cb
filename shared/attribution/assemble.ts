import { JULIAN_YEAR_DAYS } from '../earth/time/epochs.ts'
import { medianStep } from '../earth/time/monthlyMeans.ts'
import { InputError } from '../types/issue.ts'
import type { BackgroundRow, RunInput, RunResult } from '../types/run.ts'
import { netRegions } from './netRegions.ts'
import type { AttributionData, Group, ObservedBlock, RotationQuantity, SourceLoading } from './types.ts'
import { rotationQuantities } from './types.ts'

/** Monthly observed rotation after its reduction, on the run's months or others; null where missing. ms and mas. */
export interface ObservedMonths { mjd: ArrayLike<number>, lodMs?: ArrayLike<number | null> | null, chi1Mas?: ArrayLike<number | null> | null, chi2Mas?: ArrayLike<number | null> | null }

export interface AssembleOptions {
  /** Part of the run's span, MJD. */
  span?: { fromMjd: number, toMjd: number } | null
  /** Regions taken together under one name; those in none stand for themselves. */
  groups?: { key: string, name: string, regions: string[] }[]
  quantities?: readonly RotationQuantity[]
}

/** Fewest months of a quantity that an attribution is made of. */
export const LEAST_ATTRIBUTION_MONTHS = 24


/**
 * A run beside observed rotation as the estimates of attribution take it: observed less background and rest of the world, the
 * signature of every group, and the systematic errors that regions and background share by name. Months are those where every region
 * that is switched on has a mass; quantities with fewer than 24 of them are left out.
 *
 * @throws InputError when nothing is left, or for a group with an unknown region
 */
export function assembleAttribution(input: RunInput, result: RunResult, observed: ObservedMonths, options: AssembleOptions = {}): AttributionData {
  const active = netRegions(result).filter(region => region.scale !== 0)
  const groups = groupsOf(active.map(({ key, name }) => ({ key, name })), options.groups ?? [])
  const usable = result.epochsMjd.map((t, j) => active.every(region => region.massGt[j] !== null)
    && (!options.span || (t >= options.span.fromMjd && t <= options.span.toMjd)))
  const rows = [...input.background, ...(input.restOfWorld ? [input.restOfWorld] : [])]
  const seen = observedByMonth(observed)
  const blocks: ObservedBlock[] = []
  const signatures: Float64Array[][] = groups.map(() => [])
  const indices: number[][] = []
  for (const quantity of options.quantities ?? rotationQuantities) {
    const kept = result.epochsMjd.map((_, j) => j).filter(j => usable[j] && seen.get(result.epochsMjd[j]!)?.[quantity] !== undefined)
    if (kept.length < LEAST_ATTRIBUTION_MONTHS) continue
    const mjd = Float64Array.from(kept, j => result.epochsMjd[j]!)
    const middle = (mjd[0]! + mjd.at(-1)!) / 2
    const background = rows.reduce((sum, row) => sum + (rateOf(row, quantity)?.value ?? 0), 0)
    blocks.push({ quantity, mjd, value: mjd.map(t => seen.get(t)![quantity]! - background * (t - middle) / JULIAN_YEAR_DAYS) })
    indices.push(kept)
    groups.forEach(({ regions }, g) => signatures[g]!.push(Float64Array.from(kept, j => active
      .filter(region => regions.includes(region.key))
      .reduce((sum, region) => sum + perGt(region, quantity) * region.massGt[j]!, 0))))
  }
  if (blocks.length === 0) {
    throw new InputError('There is nothing to attribute', [{
      code: 'too-few-months', message: `Run and observed rotation need at least ${LEAST_ATTRIBUTION_MONTHS} months in common in one quantity.`
    }])
  }
  return {
    blocks,
    groups: groups.map(({ key, name }, g): Group => ({ key, name, signatures: signatures[g]! })),
    sources: sourcesOf(input, active, blocks, rows),
    stepDays: medianStep(result.epochsMjd)
  }
}

type ActiveRegion = RunResult['regions'][number]

function perGt({ perGt: response }: ActiveRegion, quantity: RotationQuantity): number {
  return quantity === 'lod' ? response.lodMicroseconds : quantity === 'chi1' ? response.chi1Mas : response.chi2Mas
}

/** Rate of a row in the quantity's unit per Julian year: µs or mas; null where it says nothing. */
export function rateOf(row: BackgroundRow, quantity: RotationQuantity): { value: number, sigma: number } | null {
  // 1 ms per century is 10 µs per year.
  if (quantity === 'lod') return row.lodMsPerCentury && { value: row.lodMsPerCentury.value * 10, sigma: row.lodMsPerCentury.sigma * 10 }
  return quantity === 'chi1' ? row.chi1MasPerYear : row.chi2MasPerYear
}

function groupsOf(regions: { key: string, name: string }[], wanted: NonNullable<AssembleOptions['groups']>): { key: string, name: string, regions: string[] }[] {
  const taken = new Set<string>()
  const issues = wanted.flatMap((group, i) => group.regions.flatMap((key) => {
    const twice = taken.has(key)
    taken.add(key)
    return !regions.some(region => region.key === key)
      ? [{ path: `groups/${i}`, code: 'unknown-region', message: `“${group.name}” holds “${key}”, which is no region of the run that is switched on.` }]
      : twice ? [{ path: `groups/${i}`, code: 'twice', message: `“${key}” is in two groups.` }] : []
  }))
  if (issues.length > 0) throw new InputError('The groups do not hold', issues)
  return [...wanted.filter(group => group.regions.length > 0), ...regions.filter(({ key }) => !taken.has(key)).map(({ key, name }) => ({ key, name, regions: [key] }))]
}

function observedByMonth({ mjd, lodMs, chi1Mas, chi2Mas }: ObservedMonths): Map<number, Partial<Record<RotationQuantity, number>>> {
  const months = new Map<number, Partial<Record<RotationQuantity, number>>>()
  const put = (column: ArrayLike<number | null> | null | undefined, quantity: RotationQuantity, factor: number): void => {
    if (!column) return
    for (let i = 0; i < mjd.length; i++) {
      const value = column[i]
      if (value === null || value === undefined || Number.isNaN(value)) continue
      months.set(mjd[i]!, { ...months.get(mjd[i]!), [quantity]: value * factor })
    }
  }
  put(lodMs, 'lod', 1000)
  put(chi1Mas, 'chi1', 1)
  put(chi2Mas, 'chi2', 1)
  return months
}

/** Systematic rates of regions by source, with those of background rows that name the same source; other rows each by themselves. */
function sourcesOf(input: RunInput, active: readonly ActiveRegion[], blocks: readonly ObservedBlock[], rows: readonly BackgroundRow[]): SourceLoading[] {
  const list: SourceLoading[] = []
  const add = (source: string, b: number, ratePerYear: number): void => {
    let entry = list.find(known => known.source === source)
    if (!entry) {
      entry = { source, loadings: blocks.map(({ mjd }) => new Float64Array(mjd.length)) }
      list.push(entry)
    }
    const { mjd } = blocks[b]!
    const middle = (mjd[0]! + mjd.at(-1)!) / 2
    const loading = entry.loadings[b]!
    mjd.forEach((t, k) => { loading[k] = loading[k]! + ratePerYear * (t - middle) / JULIAN_YEAR_DAYS })
  }
  const named = new Set<string>()
  for (const region of active) {
    const { series, scale } = input.regions.find(({ key }) => key === region.key)!
    for (const { source, sigmaGtPerYear } of series.sharedRates) {
      named.add(source)
      blocks.forEach(({ quantity }, b) => add(source, b, scale * sigmaGtPerYear * perGt(region, quantity)))
    }
  }
  for (const row of rows) {
    const shared = named.has(row.source) ? row.source : named.has(row.name) ? row.name : null
    blocks.forEach(({ quantity }, b) => {
      const sigma = rateOf(row, quantity)?.sigma ?? 0
      if (sigma > 0) add(shared ?? `${row.name}, ${quantity}`, b, sigma)
    })
  }
  return list
}

