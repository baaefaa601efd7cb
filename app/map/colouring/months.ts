import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'
import { formatSigned, formatSignificant, monthNames } from '#shared/format/numbers'
import { lossHatch, tintOf, type RegionPaint } from './colouring'
import type { LegendEntry } from './legend'

export type RegionMonths = AnswerOf<typeof contracts.regionMonths>

/** `2007-05` as `May 2007`. */
export function monthText(month: string): string {
  const [year, number] = month.split('-')
  return `${monthNames[Number(number) - 1]} ${Number(year)}`
}

/** Where a month of the address stands among those that are held; the last where it is none of them. */
export function monthIndex(months: readonly string[], named: unknown): number {
  const at = months.indexOf(typeof named === 'string' ? named : '')
  return at < 0 ? months.length - 1 : at
}

/** Largest distance from its own mean that any region reaches, Gt. */
export function largestAnomaly({ regions }: RegionMonths): number {
  return regions.reduce((most, { massGt }) => massGt.reduce<number>((far, value) => Math.max(far, Math.abs(value ?? 0)), most), 0)
}

/** Mass of a region in a month, Gt from the mean of its months; null in a gap, undefined without a series. */
export function massInMonth({ regions }: RegionMonths, id: string, at: number): number | null | undefined {
  const row = regions.find(region => region.id === id)
  return row && (row.massGt[at - row.first] ?? null)
}

export function monthFigure(massGt: number | null | undefined): string {
  if (massGt === undefined) return 'no series'
  if (massGt === null) return 'no data this month'
  return `${formatSigned(massGt, Math.abs(massGt) < 10 ? 1 : 0)}\u00A0Gt`
}

/** A gap is drawn as one: its line alone, and said. */
export function monthPaint(massGt: number | null | undefined, largest: number): RegionPaint {
  const figure = monthFigure(massGt)
  if (massGt === null || massGt === undefined) return { tone: 'ink', tint: 0, pattern: '', figure }
  const below = massGt < 0
  return { tone: below ? 'loss' : 'gain', tint: tintOf(massGt, largest), pattern: below ? lossHatch : '', figure }
}

export function monthLegend(largest: number): LegendEntry[] {
  return [
    { tone: 'loss', tint: 0.3, pattern: lossHatch, text: 'less than its mean' },
    { tone: 'gain', tint: 0.3, pattern: '', text: 'more than its mean' },
    { tone: 'ink', tint: 0, pattern: '', text: `no data; darker is more, up to ${formatSignificant(largest, 2)}\u00A0Gt` },
  ]
}
