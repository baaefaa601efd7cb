import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import { limits } from '#shared/geo/outline'
import { countPositions } from '#shared/geo/checkShape'
import type { Principal } from '#shared/permissions'
import { InputError, type Issue } from '#shared/types/issue'
import { Problem } from '../utils/problem'
import type { Context } from './context'
import { binRegion, createRegion, regionRow } from './regions'

/** Stores the regions of a file in one transaction, each with its own entry in the log. Where one is refused, none is stored. */
export function createRegions(context: Context, principal: Principal | null, workspaceId: string, { agencyId, regions }: BodyOf<typeof contracts.regionCreateMany>) {
  const vertices = regions.reduce((sum, { geometry }) => sum + countPositions(geometry.coordinates, limits.vertices), 0)
  if (vertices > limits.vertices) throw new InputError('Together the outlines have over 200 000 vertices. Simplify them, or store them in parts.', [], 413)
  const items = context.db.transaction(() => regions.map((region, k) => {
    const { id, revision, name } = inPlace(k, region.name, () => createRegion(context, principal, workspaceId, { ...region, agencyId }))
    return { id, revision, name }
  }), { behavior: 'immediate' })
  return { items, nextCursor: null }
}

/** Puts several regions of one workspace in the bin, all or none. */
export function binRegions(context: Context, principal: Principal | null, workspaceId: string, { regions }: BodyOf<typeof contracts.regionRemoveMany>) {
  const items = context.db.transaction(() => regions.map(({ id, revision }) => {
    if (regionRow(context, id).workspaceId !== workspaceId) throw new Problem(404, 'not-found', 'There is no such region.')
    return { id, revision: binRegion(context, principal, id, revision, false).revision }
  }), { behavior: 'immediate' })
  return { items, nextCursor: null }
}

/** Says of which region of the list a refusal is. */
function inPlace<T>(k: number, name: string, work: () => T): T {
  try {
    return work()
  }
  catch (error) {
    const within = (issues: readonly Issue[]) => issues.map(issue => ({ ...issue, path: `regions/${k}${issue.path ? `/${issue.path}` : ''}` }))
    const text = (message: string) => `Nothing was stored. Region ${k + 1}, “${name}”: ${message}`
    if (error instanceof InputError) throw new InputError(text(error.message), within(error.issues), error.status)
    if (error instanceof Problem) throw new Problem(error.status, error.code, text(error.message), within(error.issues))
    throw error
  }
}
