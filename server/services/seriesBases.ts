import { and, eq, inArray } from 'drizzle-orm'
import type { Basis } from '#shared/observed/circularity'
import { basesOfVersion } from '#shared/series/facts'
import type { RunInput } from '#shared/types/run'
import { schema } from '../database/client'
import type { Context } from './context'
import { factsOf } from './seriesStore'

/** What the masses were made from, as fields and notes of the very series versions say that the run froze. */
export function basesOfRegions(context: Context, workspaceId: string, { regions }: RunInput): { key: string, name: string, bases: Basis[] }[] {
  const versions = context.db.select({ sha256: schema.seriesVersion.dataSha256, independence: schema.seriesVersion.independence, source: schema.seriesVersion.source, facts: schema.seriesVersion.facts })
    .from(schema.seriesVersion).innerJoin(schema.series, eq(schema.series.id, schema.seriesVersion.seriesId))
    .where(and(eq(schema.series.workspaceId, workspaceId), inArray(schema.seriesVersion.dataSha256, regions.map(region => region.seriesSha256)))).all()
  return regions.filter(region => region.scale !== 0).map(({ key, name, seriesSha256 }) => ({
    key, name, bases: [...new Set(versions.filter(version => version.sha256 === seriesSha256).flatMap(version => basesOfVersion({ ...version, facts: factsOf(version) })))],
  }))
}
