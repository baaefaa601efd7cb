import { and, desc, eq, inArray, isNull } from 'drizzle-orm'
import type { ScenarioDraft } from '#shared/api/schemas'
import { can, type Principal } from '#shared/permissions'
import { schema } from '../database/client'
import { authorise } from './change'
import type { Context } from './context'
import { editionsOfRun, editionView } from './editions'
import { runInputOf, runResultOf, runRow, sourcesOf } from './runs'
import { runSummaryView } from './scenarios'

export function readRun(context: Context, principal: Principal | null, id: string) {
  const row = runRow(context, id)
  authorise(principal, 'run.read', { workspaceId: row.workspaceId })
  const workspace = context.db.select().from(schema.workspace).where(eq(schema.workspace.id, row.workspaceId)).get()!
  const scenario = context.db.select().from(schema.scenario).where(eq(schema.scenario.id, row.scenarioId)).get()!
  return {
    ...runSummaryView(context, row), scenarioName: scenario.name, workspaceId: row.workspaceId, workspaceName: workspace.name, invented: workspace.invented,
    node: row.node, result: runResultOf(row), sources: sourcesOf(runInputOf(row)),
    observedId: openingObserved(context, row.workspaceId, (JSON.parse(scenario.draft) as ScenarioDraft).observedId),
    editions: editionsOfRun(context, id).map(e => editionView(context, e)),
    canPublish: can(principal, 'edition.publish', { workspaceId: row.workspaceId }),
  }
}

/** The observed series that a result opens with: the scenario's choice, else the newest of rotation that is there. */
function openingObserved(context: Context, workspaceId: string, chosen: string | null): string | null {
  const present = context.db.select({ id: schema.series.id, quantity: schema.series.quantity }).from(schema.series)
    .where(and(eq(schema.series.workspaceId, workspaceId), inArray(schema.series.quantity, ['earth-orientation', 'gravity']), isNull(schema.series.deletedAt)))
    .orderBy(desc(schema.series.id)).all()
  return (present.find(s => s.id === chosen) ?? present.find(s => s.quantity === 'earth-orientation'))?.id ?? null
}
