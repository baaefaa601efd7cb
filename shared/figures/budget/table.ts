import { formatMeasured, measuredDecimals } from '../../format/measured.ts'
import { formatShare, noFigure } from '../../format/digits.ts'
import { formatDirection } from '../../format/places.ts'
import { driftOf } from '../drift/vector.ts'
import { aligned } from './aligned.ts'
import type { Measured } from '../../types/domain.ts'
import type { BudgetRow, Comparison, RunRegionResult, RunResult } from '../../types/run.ts'
import type { AlignedText } from './aligned.ts'

export interface BudgetColumn {
  id: 'mass' | 'lod' | 'lodCentury' | 'chi1' | 'chi2' | 'drift' | 'direction' | 'shareLod' | 'sharePole'
  name: string
  unit: string
}

/** The columns of the budget table, name and unit. */
export const budgetColumns: readonly BudgetColumn[] = [
  { id: 'mass', name: 'mass', unit: 'Gt/yr' },
  { id: 'lod', name: 'ΔLOD', unit: 'µs/yr' },
  { id: 'lodCentury', name: 'ΔLOD', unit: 'ms/century' },
  { id: 'chi1', name: 'χ₁', unit: 'mas/yr' },
  { id: 'chi2', name: 'χ₂', unit: 'mas/yr' },
  { id: 'drift', name: 'drift', unit: 'cm/yr' },
  { id: 'direction', name: 'towards', unit: 'longitude' },
  { id: 'shareLod', name: 'day', unit: '% of model' },
  { id: 'sharePole', name: 'pole', unit: '% of model' },
]

/** One cell: figure and uncertainty, each with what fills it up to the decimal sign of its column. */
export interface BudgetCell { value: AlignedText, sigma: AlignedText }

/** What a row stands for; groups are set apart by a rule. */
export type BudgetRowKind = 'region' | 'model' | 'background' | 'rest' | 'observed' | 'residual'

export interface BudgetTableRow {
  key: string
  kind: BudgetRowKind
  name: string
  /** A word under the name where the row needs one: switched off, scaled, empty. */
  note: string | null
  cells: BudgetCell[]
}

type Raw = { value: string, sigma: string }
interface RawRow { key: string, kind: BudgetRowKind, name: string, note: string | null, raw: Raw[] }

const none: Raw = { value: noFigure, sigma: '' }
const plain = (value: string): Raw => ({ value, sigma: '' })

type MeasuredColumn = 'mass' | 'lod' | 'lodCentury' | 'chi1' | 'chi2' | 'drift'

function measuredOf(row: BudgetRow): Record<MeasuredColumn, Measured | null> {
  return {
    mass: row.massGtPerYear,
    lod: row.lodMicrosecondsPerYear,
    lodCentury: row.lodMsPerCentury,
    chi1: row.chi1MasPerYear,
    chi2: row.chi2MasPerYear,
    drift: row.driftCmPerYear,
  }
}

/** Decimals of each column: one more than its sum deserves, but not more than three for that, so that small rows do not run on. */
function decimalsOf(total: BudgetRow): Record<MeasuredColumn, number> {
  const deserved = (measured: Measured | null) => {
    const own = measured ? measuredDecimals(measured.value, measured.sigma) : 2
    return Math.max(own, Math.min(own + 1, 3))
  }
  const { mass, lod, lodCentury, chi1, chi2, drift } = measuredOf(total)
  const pole = Math.max(deserved(chi1), deserved(chi2))
  return { mass: deserved(mass), lod: deserved(lod), lodCentury: deserved(lodCentury), chi1: pole, chi2: pole, drift: deserved(drift) }
}

function rawOf(row: BudgetRow, decimals: Record<MeasuredColumn, number>): Raw[] {
  const measured = measuredOf(row)
  const cell = (id: MeasuredColumn) => {
    const value = measured[id]
    return value ? formatMeasured(value.value, value.sigma, { signed: id !== 'drift', decimals: decimals[id] }) : none
  }
  const cells: Record<BudgetColumn['id'], Raw> = {
    mass: cell('mass'),
    lod: cell('lod'),
    lodCentury: cell('lodCentury'),
    chi1: cell('chi1'),
    chi2: cell('chi2'),
    drift: cell('drift'),
    direction: plain(row.directionDegEast ? formatDirection(row.directionDegEast) : noFigure),
    shareLod: plain(shareText(row.shareOfModelLod)),
    sharePole: plain(shareText(row.shareOfModelPole)),
  }
  return budgetColumns.map(({ id }) => cells[id])
}

function shareText(share: number | null): string {
  return formatShare(share, share !== null && Math.abs(share) < 0.0995 ? 1 : 0).replace('\u00a0%', '')
}

/** Trends of a comparison as a budget row. */
function comparedRow(comparison: Comparison, which: 'observed' | 'residual', name: string): BudgetRow {
  const scaled = (measured: Measured, factor: number): Measured => ({
    value: measured.value * factor, sigmaWhite: measured.sigmaWhite * factor, sigma: measured.sigma * factor,
  })
  const lod = comparison.lod?.trends[which] ?? null
  const [chi1, chi2] = [comparison.chi1?.trends[which] ?? null, comparison.chi2?.trends[which] ?? null]
  const drift = chi1 && chi2 ? driftOf(chi1, chi2) : null
  return {
    key: which, name, massGtPerYear: null, chi1MasPerYear: chi1, chi2MasPerYear: chi2, driftCovariance: null, barystaticMmPerYear: null, deltaJ2PerYear: null,
    lodMicrosecondsPerYear: lod && scaled(lod, 1000),
    lodMsPerCentury: lod && scaled(lod, 100),
    driftMasPerYear: drift?.mas ?? null,
    driftCmPerYear: drift?.cm ?? null,
    directionDegEast: drift?.direction ?? null,
    shareOfModelLod: null,
    shareOfModelPole: null,
  }
}

function isEmpty(row: BudgetRow): boolean {
  return [row.massGtPerYear, row.lodMicrosecondsPerYear, row.chi1MasPerYear, row.chi2MasPerYear].every(value => value === null)
}

/** Rows of the budget: regions by their effect on the day, the model, background, rest of the world; then what was observed. */
export function budgetTable(result: RunResult, comparison: Comparison | null = null): BudgetTableRow[] {
  const size = (row: BudgetRow) => Math.abs(row.lodMicrosecondsPerYear?.value ?? 0)
  const decimals = decimalsOf(result.total)
  const raw = (kind: BudgetRowKind, row: BudgetRow, note: string | null = null): RawRow => ({ key: `${kind}-${row.key}`, kind, name: row.name, note, raw: rawOf(row, decimals) })
  const rows: RawRow[] = [
    ...result.regions.filter(region => !region.keptFrom).sort((a, b) => size(b) - size(a)).flatMap(region => [
      raw('region', region, region.scale === 0 ? 'switched off' : region.scale === 1 ? null : `mass × ${region.scale}`),
      // What does not reach the sea stands below the region that it comes from, what is counted elsewhere below the one that it is taken off.
      ...result.regions.filter(({ keptFrom, takenFrom }) => (takenFrom ?? keptFrom) === region.key).map(row => raw('region', row, noteOfPart(row, region.scale))),
    ]),
    raw('model', { ...result.total, name: 'Model', shareOfModelLod: shareOfItself(result.total.lodMicrosecondsPerYear), shareOfModelPole: shareOfItself(result.total.driftCmPerYear) }),
    ...result.background.map(row => raw('background', row, 'background')),
    ...(result.background.length ? [] : [{ key: 'background', kind: 'background' as const, name: 'Background', note: 'not entered', raw: budgetColumns.map(() => none) }]),
    raw('rest', result.restOfWorld, isEmpty(result.restOfWorld) ? 'not entered' : null),
    ...(comparison ? [raw('observed', comparedRow(comparison, 'observed', 'Observed')), raw('residual', comparedRow(comparison, 'residual', 'Residual'), 'observed − model')] : []),
  ]
  const columns = budgetColumns.map((_, c) => ({
    value: aligned(rows.map(row => row.raw[c]!.value)),
    sigma: aligned(rows.map(row => row.raw[c]!.sigma)),
  }))
  return rows.map(({ key, kind, name, note }, r) => ({
    key, kind, name, note, cells: columns.map(column => ({ value: column.value[r]!, sigma: column.sigma[r]! })),
  }))
}

function noteOfPart(row: RunRegionResult, scale: number): string {
  if (scale === 0) return 'switched off'
  return row.takenFrom ? 'taken off the region above, since it is counted with its own' : 'the part of the row above that does not reach the sea'
}

function shareOfItself(measured: Measured | null): number | null {
  return measured && measured.value !== 0 ? 1 : null
}
