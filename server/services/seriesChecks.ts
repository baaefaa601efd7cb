import { and, eq, isNull, ne } from 'drizzle-orm'
import { overlapsWith } from '#shared/geo/overlap'
import type { OtherSeries } from '#shared/series/agreement'
import { checkSeries, settleMarks, type MarkDecision } from '#shared/series/checks'
import type { MassSeriesReading } from '#shared/series/readMassSeries'
import { earlierVersions, onSameGround } from '#shared/series/others'
import { schema } from '../database/client'
import type { Context } from './context'
import { latestOutline, regionRow, seriesOfRegion } from './regions'
import { massSeries, versionsOf } from './seriesStore'

/** Findings that are kept with a version; their count is kept whole. */
const mostKept = 500

/**
 * What checks find in a series that is about to be stored, held against earlier versions and regions on the same ground, with the decisions that were taken.
 * A decision whose finding is gone was a correction; open findings are kept as open.
 */
export function checksOf(context: Context, regionId: string, read: Pick<MassSeriesReading, 'mjd' | 'massGt' | 'sigmaGt'> & { lineOf: number[] | null }, areaM2: number, decisions: readonly MarkDecision[]) {
  const others = [...earlierOf(context, regionId), ...sameGroundOf(context, regionId)]
  const { marks, gone } = settleMarks(checkSeries({ mjd: read.mjd, massGt: read.massGt, sigmaGt: read.sigmaGt, rows: read.lineOf, areaM2, others }), decisions)
  const kept = marks.slice(0, mostKept).map(mark => ({ ...mark, rows: mark.rows.slice(0, 20) }))
  return {
    found: marks.length, open: marks.filter(mark => mark.state === 'open').length, marks: kept,
    corrected: gone.filter(decision => decision.choice === 'corrected').map(({ id, note }) => ({ id, note })),
  }
}

function earlierOf(context: Context, regionId: string): OtherSeries[] {
  const series = seriesOfRegion(context, regionId)
  return series ? earlierVersions(versionsOf(context, series.id)).map(version => ({ name: `version ${version.n}`, ...massSeries(context, version.id) })) : []
}

/** Newest series of the regions whose outlines are nearly the same. */
function sameGroundOf(context: Context, regionId: string): OtherSeries[] {
  const { workspaceId } = regionRow(context, regionId)
  const rows = context.db.select().from(schema.region).where(and(eq(schema.region.workspaceId, workspaceId), ne(schema.region.id, regionId), isNull(schema.region.deletedAt))).all()
  const others = rows.map(({ id, name }) => ({ id, name, geometry: latestOutline(context, id).geometry }))
  return overlapsWith({ id: regionId, geometry: latestOutline(context, regionId).geometry }, others).filter(o => onSameGround(o.shareOfA, o.shareOfB)).flatMap(({ b }) => {
    const series = seriesOfRegion(context, b)
    const last = series && versionsOf(context, series.id)[0]
    return last ? [{ name: rows.find(({ id }) => id === b)!.name, ...massSeries(context, last.id) }] : []
  })
}
