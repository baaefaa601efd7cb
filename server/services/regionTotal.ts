import { and, eq, isNull } from 'drizzle-orm'
import { overlapsOf, type OutlineOverlap } from '#shared/geo/overlap'
import type { Measured, Outline } from '#shared/types/domain'
import { schema } from '../database/client'
import type { Context } from './context'
import { derivedOfRegion, latestOutline, seriesOfRegion } from './regions'
import { latestVersion } from './seriesStore'

/** One region's trend of mass with the parts of its error, and what a gigatonne of it does to the quantity that is summed. */
export interface TrendPart {
  massGtPerYear: Measured
  /** One-sigma of this series alone, Gt per year, under the quoted noise model. */
  ownSigma: number
  sharedRates: { source: string, sigmaGtPerYear: number }[]
  /** Quantity per gigatonne; 1 for the mass itself. */
  perGt: number
}

/**
 * Sum of trends in units of `perGt` × Gt per year. Each series' own error is independent of the others'; a source that
 * several share is one and the same error, so it adds linearly and with the sign of the effect.
 */
export function sumOfTrends(parts: readonly TrendPart[]): Measured {
  let value = 0
  let white = 0
  let own = 0
  const shared = new Map<string, number>()
  for (const { massGtPerYear, ownSigma, sharedRates, perGt } of parts) {
    value += massGtPerYear.value * perGt
    white += (massGtPerYear.sigmaWhite * perGt) ** 2
    own += (ownSigma * perGt) ** 2
    for (const { source, sigmaGtPerYear } of sharedRates) shared.set(source, (shared.get(source) ?? 0) + sigmaGtPerYear * perGt)
  }
  const systematic = [...shared.values()].reduce((sum, s) => sum + s * s, 0)
  return { value, sigmaWhite: Math.sqrt(white), sigma: Math.sqrt(own + systematic) }
}

const overlapCache = new WeakMap<Context, { key: string, overlaps: OutlineOverlap[] }>()

function overlapsAmong(context: Context, outlines: { id: string, sha256: string, geometry: Outline }[]): OutlineOverlap[] {
  const key = outlines.map(o => `${o.id} ${o.sha256}`).join('\n')
  const known = overlapCache.get(context)
  if (known?.key === key) return known.overlaps
  const overlaps = overlapsOf(outlines)
  overlapCache.set(context, { key, overlaps })
  return overlaps
}

/** What all regions of a workspace add up to, from their latest series, with the overlaps among their outlines. */
export function regionTotal(context: Context, workspaceId: string) {
  const rows = context.db.select().from(schema.region).where(and(eq(schema.region.workspaceId, workspaceId), isNull(schema.region.deletedAt))).orderBy(schema.region.id).all()
  const regions = rows.map((row) => {
    const outline = latestOutline(context, row.id)
    const series = seriesOfRegion(context, row.id)
    const version = series ? latestVersion(context, series.id) : null
    return { row, outline, hasSeries: Boolean(version), ...derivedOfRegion(context, outline, version?.id ?? null) }
  })
  const trends = regions.flatMap(({ trend, perGt }) => trend ? [{ ...trend, perGt }] : [])
  const spans = trends.map(t => [t.fromMjd, t.toMjd] as const)
  const onGround = (id: string, share: number) => {
    const mass = regions.find(({ row }) => row.id === id)?.trend?.massGtPerYear
    return mass ? { value: mass.value * share, sigma: mass.sigma * share } : null
  }
  const names = new Map(rows.map(row => [row.id, row.name]))
  return {
    regions: rows.length,
    withTrend: trends.length,
    withoutSeries: regions.filter(r => !r.hasSeries).length,
    massGtPerYear: trends.length ? sumOfTrends(trends.map(t => ({ ...t, perGt: 1 }))) : null,
    lodMicrosecondsPerYear: trends.length ? sumOfTrends(trends.map(t => ({ ...t, perGt: t.perGt.lodMicroseconds }))) : null,
    fromMjd: spans.length ? Math.min(...spans.map(s => s[0])) : null,
    toMjd: spans.length ? Math.max(...spans.map(s => s[1])) : null,
    // Spans that differ by less than a month are one span to a reader.
    oneSpan: spans.every(s => Math.abs(s[0] - spans[0]![0]) < 31 && Math.abs(s[1] - spans[0]![1]) < 31),
    overlaps: overlapsAmong(context, regions.map(({ row, outline }) => ({ id: row.id, sha256: outline.sha256, geometry: outline.geometry })))
      .map(o => ({
        ...o, aName: names.get(o.a) ?? '', bName: names.get(o.b) ?? '',
        onGroundGtPerYear: { a: onGround(o.a, o.shareOfA), b: onGround(o.b, o.shareOfB) },
      })),
  }
}
