import { and, eq, isNull } from 'drizzle-orm'
import { monthsBetween } from '#shared/earth/time/epochs'
import { DEFAULT_MAX_GAP_DAYS, monthlyMass, type MonthlyMass } from '#shared/earth/time/monthlyMass'
import { schema } from '../database/client'
import type { Context } from './context'
import { seriesOfRegion } from './regions'
import { massSeries, versionsOf } from './seriesStore'

const monthlyCache = new WeakMap<Context, Map<string, MonthlyMass>>()

/** Versions do not change, so what follows from one is kept. */
function monthlyOfVersion(context: Context, versionId: string): MonthlyMass {
  const cache = monthlyCache.get(context) ?? new Map<string, MonthlyMass>()
  monthlyCache.set(context, cache)
  const known = cache.get(versionId)
  if (known) return known
  const fresh = monthlyMass(massSeries(context, versionId))
  if (cache.size > 2000) cache.clear()
  cache.set(versionId, fresh)
  return fresh
}

const nameOf = ({ year, month }: { year: number, month: number }) => `${String(year).padStart(4, '0')}-${String(month).padStart(2, '0')}`

/** Monthly mass anomalies of every region of a workspace that has a series, on one row of calendar months. */
export function regionMonths(context: Context, workspaceId: string) {
  const rows = context.db.select({ id: schema.region.id }).from(schema.region).where(and(eq(schema.region.workspaceId, workspaceId), isNull(schema.region.deletedAt))).orderBy(schema.region.id).all()
  const found = rows.flatMap(({ id }) => {
    const series = seriesOfRegion(context, id)
    const version = series ? versionsOf(context, series.id)[0] : undefined
    const monthly = version && monthlyOfVersion(context, version.id)
    return monthly?.months.length ? [{ id, ...monthly }] : []
  })
  const first = Math.min(...found.map(({ months }) => months[0]!.middleMjd))
  const last = Math.max(...found.map(({ months }) => months.at(-1)!.middleMjd))
  const months = found.length ? monthsBetween(first, last).map(nameOf) : []
  const at = new Map(months.map((name, i) => [name, i]))
  return {
    maxGapDays: DEFAULT_MAX_GAP_DAYS,
    months,
    regions: found.map(({ id, months: own, massGt, sigmaGt }) => ({ id, first: at.get(nameOf(own[0]!))!, massGt, sigmaGt })),
  }
}
