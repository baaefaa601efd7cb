import { and, desc, eq, isNull, sql } from 'drizzle-orm'
import type { SeriesFacts } from '#shared/series/facts'
import type { MassSeries } from '#shared/types/run'
import { schema, type Db, type Reader } from '../database/client'
import { prepared } from '../database/prepared'
import { Problem } from '../utils/problem'
import { nameOfUser } from './change'
import type { Context } from './context'

export type VersionRow = typeof schema.seriesVersion.$inferSelect

export function floats(values: ArrayLike<number>): Buffer {
  const copy = Float64Array.from(values)
  return Buffer.from(copy.buffer, copy.byteOffset, copy.byteLength)
}

export function fromFloats(bytes: Buffer): Float64Array {
  const copy = new Uint8Array(bytes.byteLength)
  copy.set(bytes)
  return new Float64Array(copy.buffer)
}

export function versionRow(context: Context, id: string): VersionRow {
  const row = context.db.select().from(schema.seriesVersion).where(eq(schema.seriesVersion.id, id)).get()
  if (!row) throw new Problem(404, 'not-found', 'There is no such series version.')
  return row
}

export function versionsOf(context: Context, seriesId: string): VersionRow[] {
  return context.db.select().from(schema.seriesVersion).where(eq(schema.seriesVersion.seriesId, seriesId)).orderBy(desc(schema.seriesVersion.n)).all()
}

const latestStatement = (db: Db) => db.select().from(schema.seriesVersion).where(eq(schema.seriesVersion.seriesId, sql.placeholder('seriesId')))
  .orderBy(desc(schema.seriesVersion.n)).limit(1).prepare()

export function latestVersion(context: Context, seriesId: string): VersionRow | null {
  return prepared(context.db, latestStatement).get({ seriesId }) ?? null
}

export function factsOf({ facts }: Pick<VersionRow, 'facts'>): SeriesFacts | null {
  return facts ? JSON.parse(facts) as SeriesFacts : null
}

export function versionView(context: Context, row: VersionRow) {
  return {
    id: row.id, n: row.n, reason: row.reason, source: row.source, licence: row.licence, independence: row.independence, facts: factsOf(row),
    originalName: row.originalName, originalSha256: row.originalSha256, dataSha256: row.dataSha256,
    firstMjd: row.firstMjd, lastMjd: row.lastMjd, count: row.count, createdAt: row.createdAt, createdBy: nameOfUser(context, row.createdBy),
  }
}

/** Versions of every mass series of a workspace, for regions and series that are not in the bin; newest first. */
export function listVersions(context: Context, workspaceId: string) {
  const rows = context.db.select({ version: schema.seriesVersion, regionId: schema.region.id }).from(schema.seriesVersion)
    .innerJoin(schema.series, eq(schema.series.id, schema.seriesVersion.seriesId))
    .innerJoin(schema.region, eq(schema.region.id, schema.series.regionId))
    .where(and(eq(schema.region.workspaceId, workspaceId), isNull(schema.series.deletedAt), isNull(schema.region.deletedAt)))
    .orderBy(desc(schema.seriesVersion.id)).all()
  return { items: rows.map(({ version, regionId }) => ({ ...versionView(context, version), regionId })), nextCursor: null }
}

export function sharedRatesOf(context: Context, versionId: string) {
  return context.db.select({ source: schema.errorSource.name, sigmaGtPerYear: schema.seriesError.sigmaGtPerYear }).from(schema.seriesError)
    .innerJoin(schema.errorSource, eq(schema.errorSource.id, schema.seriesError.sourceId))
    .where(eq(schema.seriesError.versionId, versionId)).orderBy(schema.errorSource.name).all()
}

/** A mass series version as the engine takes it. */
export function massSeries(context: Context, versionId: string): MassSeries {
  const data = context.db.select().from(schema.seriesData).where(eq(schema.seriesData.versionId, versionId)).get()
  if (!data) throw new Problem(404, 'not-found', 'This version has no stored values.')
  return {
    mjd: [...fromFloats(data.mjd)],
    massGt: [...fromFloats(data.value)],
    sigmaGt: data.sigma ? [...fromFloats(data.sigma)] : null,
    sharedRates: sharedRatesOf(context, versionId),
  }
}

/** Number of the next version of a series; the unique index catches two at once. */
export function nextVersion(tx: Reader, seriesId: string): number {
  const last = tx.select({ n: schema.seriesVersion.n }).from(schema.seriesVersion).where(eq(schema.seriesVersion.seriesId, seriesId)).orderBy(desc(schema.seriesVersion.n)).limit(1).get()
  return (last?.n ?? 0) + 1
}
