import { eq } from 'drizzle-orm'
import type { Contract } from '#shared/api/contract'
import { schema } from '../database/client'
import { Problem } from '../utils/problem'
import type { Context } from './context'

type Place = { workspaceId: string | null } | undefined
type Params = Record<string, string>

/** By collection, as the path names it: where a row lies. */
const places: Record<string, (context: Context, params: Params) => Place> = {
  'members': ({ db }, { id }) => db.select({ workspaceId: schema.membership.workspaceId }).from(schema.membership).where(eq(schema.membership.id, id!)).get(),
  'regions': ({ db }, { id }) => db.select({ workspaceId: schema.region.workspaceId }).from(schema.region).where(eq(schema.region.id, id!)).get(),
  'series-versions': ({ db }, { id }) => db.select({ workspaceId: schema.series.workspaceId }).from(schema.seriesVersion)
    .innerJoin(schema.series, eq(schema.series.id, schema.seriesVersion.seriesId)).where(eq(schema.seriesVersion.id, id!)).get(),
  'grids': ({ db }, { id }) => db.select({ workspaceId: schema.grid.workspaceId }).from(schema.grid).where(eq(schema.grid.id, id!)).get(),
  'observed': ({ db }, { id }) => db.select({ workspaceId: schema.series.workspaceId }).from(schema.series).where(eq(schema.series.id, id!)).get(),
  'chains': ({ db }, { id }) => db.select({ workspaceId: schema.chain.workspaceId }).from(schema.chain).where(eq(schema.chain.id, id!)).get(),
  'scenarios': ({ db }, { id }) => db.select({ workspaceId: schema.scenario.workspaceId }).from(schema.scenario).where(eq(schema.scenario.id, id!)).get(),
  'jobs': ({ db }, { id }) => db.select({ workspaceId: schema.job.workspaceId }).from(schema.job).where(eq(schema.job.id, id!)).get(),
  'runs': ({ db }, { id }) => db.select({ workspaceId: schema.run.workspaceId }).from(schema.run).where(eq(schema.run.id, id!)).get(),
  'editions': ({ db }, { slug }) => db.select({ workspaceId: schema.edition.workspaceId }).from(schema.edition).where(eq(schema.edition.slug, slug!)).limit(1).get(),
}

/**
 * The workspace that a route touches: the one its path names, or the one of the row it names. Undefined for routes
 * outside every workspace; 404 for a row that does not exist, as for one of somebody else's workspace.
 */
export function workspaceOfRoute(context: Context, contract: Contract, params: Params = {}): string | undefined {
  if (params.workspace) return params.workspace
  if (contract.action === 'public.read' || contract.action.startsWith('account.') || !contract.params) return undefined
  const collection = contract.path.split('/')[3]!
  const place = places[collection]
  if (!place) throw new Error(`${contract.id}: nothing says in which workspace a row of /${collection} lies`)
  const workspaceId = place(context, params)?.workspaceId
  if (!workspaceId) throw new Problem(404, 'not-found', 'There is no such thing here.')
  return workspaceId
}
