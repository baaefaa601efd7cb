import { and, desc, eq, isNull, lt } from 'drizzle-orm'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import type { ScenarioDraft } from '#shared/api/schemas'
import { can, type Principal } from '#shared/permissions'
import { InputError, type Issue } from '#shared/types/issue'
import type { RunInput } from '#shared/types/run'
import { schema } from '../database/client'
import { Problem } from '../utils/problem'
import { authorise, change, nameOfUser, newId } from './change'
import type { Context } from './context'
import { patternIsOfOtherOutline, patternOfVersion } from './gridPatterns'
import { faultsOfChoices, overlapsOfDraft, settledOverlaps } from './overlaps'
import { pageOf } from './paging'
import { latestOutline, seriesOfRegion } from './regions'
import { factsOf, massSeries } from './seriesStore'

export type ScenarioRow = typeof schema.scenario.$inferSelect

export function scenarioRow(context: Context, id: string, { inBin = false } = {}): ScenarioRow {
  const row = context.db.select().from(schema.scenario).where(eq(schema.scenario.id, id)).get()
  if (!row || (row.deletedAt && !inBin)) throw new Problem(404, 'not-found', 'There is no such scenario.')
  return row
}

export function runSummaryView(context: Context, row: Omit<typeof schema.run.$inferSelect, 'input' | 'result'>) {
  return {
    id: row.id, scenarioId: row.scenarioId, n: row.n, name: row.name, inputSha256: row.inputSha256, resultSha256: row.resultSha256,
    engine: row.engine, createdAt: row.createdAt, createdBy: nameOfUser(context, row.createdBy),
  }
}

/** Runs of a scenario, newest first, without their bulky input and result. */
export function runsOf(context: Context, scenarioId: string) {
  return context.db.select({
    id: schema.run.id, scenarioId: schema.run.scenarioId, workspaceId: schema.run.workspaceId, n: schema.run.n, name: schema.run.name,
    inputSha256: schema.run.inputSha256, resultSha256: schema.run.resultSha256, engine: schema.run.engine, node: schema.run.node,
    createdAt: schema.run.createdAt, createdBy: schema.run.createdBy,
  }).from(schema.run).where(eq(schema.run.scenarioId, scenarioId)).orderBy(desc(schema.run.n)).all()
}

export function scenarioView(context: Context, principal: Principal | null, row: ScenarioRow) {
  const latest = runsOf(context, row.id)[0]
  return {
    id: row.id, revision: row.revision, name: row.name, draft: JSON.parse(row.draft) as ScenarioDraft,
    createdAt: row.createdAt, createdBy: nameOfUser(context, row.createdBy),
    canWrite: can(principal, 'scenario.write', { workspaceId: row.workspaceId, ownerId: row.createdBy }),
    latestRun: latest ? runSummaryView(context, latest) : null,
  }
}

export function listScenarios(context: Context, principal: Principal | null, workspaceId: string, { limit, cursor }: { limit: number, cursor?: string }) {
  const rows = context.db.select().from(schema.scenario)
    .where(and(eq(schema.scenario.workspaceId, workspaceId), isNull(schema.scenario.deletedAt), cursor ? lt(schema.scenario.id, cursor) : undefined))
    .orderBy(desc(schema.scenario.id)).limit(limit + 1).all()
  return pageOf(rows, limit, row => scenarioView(context, principal, row))
}

/** Faults of a draft: regions, versions and observed series that are not of this workspace, or named twice. */
function checkDraft(context: Context, workspaceId: string, draft: ScenarioDraft) {
  const issues: Issue[] = []
  const seen = new Set<string>()
  draft.regions.forEach((choice, i) => {
    const region = context.db.select().from(schema.region).where(and(eq(schema.region.id, choice.regionId), eq(schema.region.workspaceId, workspaceId), isNull(schema.region.deletedAt))).get()
    const series = region && seriesOfRegion(context, region.id)
    const version = series && context.db.select().from(schema.seriesVersion).where(and(eq(schema.seriesVersion.id, choice.versionId), eq(schema.seriesVersion.seriesId, series.id))).get()
    if (!region) issues.push({ path: `draft/regions/${i}/regionId`, code: 'unknown', message: 'is not a region of this workspace, or is in the bin' })
    else if (!version) issues.push({ path: `draft/regions/${i}/versionId`, code: 'unknown', message: `is not a version of ${region.name}’s series` })
    if (seen.has(choice.regionId)) issues.push({ path: `draft/regions/${i}/regionId`, code: 'duplicate', message: 'is named twice' })
    seen.add(choice.regionId)
    if (choice.restTo && (choice.restTo === choice.regionId || !draft.regions.some(other => other.regionId === choice.restTo))) {
      issues.push({ path: `draft/regions/${i}/restTo`, code: 'unknown', message: 'is not another region of this scenario' })
    }
  })
  issues.push(...faultsOfChoices(draft))
  const { fromMjd, toMjd } = draft.settings
  if (fromMjd !== null && toMjd !== null && fromMjd >= toMjd) issues.push({ path: 'draft/settings/toMjd', code: 'order', message: 'must be later than the first day' })
  if (draft.observedId) {
    const known = context.db.select().from(schema.series).where(and(eq(schema.series.id, draft.observedId), eq(schema.series.workspaceId, workspaceId))).get()
    if (!known) issues.push({ path: 'draft/observedId', code: 'unknown', message: 'is not an observed series of this workspace' })
  }
  if (issues.length) throw new InputError('The scenario refers to things that do not fit.', issues)
}

export function createScenario(context: Context, principal: Principal | null, workspaceId: string, body: BodyOf<typeof contracts.scenarioCreate>) {
  const actor = authorise(principal, 'scenario.write', { workspaceId })
  checkDraft(context, workspaceId, body.draft)
  const id = newId()
  change(context, principal, { action: 'scenario.write', verb: 'scenario added', entity: 'scenario', id, workspaceId }, (tx) => {
    tx.insert(schema.scenario).values({ id, workspaceId, name: body.name, draft: JSON.stringify(body.draft), createdAt: context.now(), createdBy: actor.userId }).run()
    return { result: undefined, after: { name: body.name } }
  })
  return scenarioView(context, principal, scenarioRow(context, id))
}

export function readScenario(context: Context, principal: Principal | null, id: string) {
  const row = scenarioRow(context, id)
  authorise(principal, 'scenario.read', { workspaceId: row.workspaceId })
  const view = scenarioView(context, principal, row)
  const overlaps = overlapsOfDraft(context, { ...view.draft, regions: view.draft.regions.filter(r => regionExists(context, r.regionId)) })
  return {
    ...view,
    runs: runsOf(context, id).map(run => runSummaryView(context, run)),
    overlaps,
  }
}

function regionExists(context: Context, id: string) {
  return Boolean(context.db.select({ id: schema.region.id }).from(schema.region).where(and(eq(schema.region.id, id), isNull(schema.region.deletedAt))).get())
}

export function changeScenario(context: Context, principal: Principal | null, id: string, body: BodyOf<typeof contracts.scenarioChange>) {
  const row = scenarioRow(context, id)
  authorise(principal, 'scenario.write', { workspaceId: row.workspaceId, ownerId: row.createdBy })
  if (body.draft) checkDraft(context, row.workspaceId, body.draft)
  change(context, principal, { action: 'scenario.write', verb: 'scenario changed', entity: 'scenario', id, workspaceId: row.workspaceId, resource: { ownerId: row.createdBy }, row, revision: body.revision }, (tx) => {
    const draft = body.draft ? JSON.stringify(body.draft) : row.draft
    tx.update(schema.scenario).set({ name: body.name ?? row.name, draft, revision: row.revision + 1 }).where(eq(schema.scenario.id, id)).run()
    return { result: undefined, before: { name: row.name, draft: JSON.parse(row.draft) as unknown }, after: { name: body.name ?? row.name, draft: JSON.parse(draft) as unknown } }
  })
  return scenarioView(context, principal, scenarioRow(context, id))
}

export function binScenario(context: Context, principal: Principal | null, id: string, revision: number, restore = false) {
  const row = scenarioRow(context, id, { inBin: restore })
  const next = row.revision + 1
  return change(context, principal, { action: 'scenario.write', verb: restore ? 'taken out of the bin' : 'put in the bin', entity: 'scenario', id, workspaceId: row.workspaceId, resource: { ownerId: row.createdBy }, row, revision }, (tx) => {
    tx.update(schema.scenario).set({ deletedAt: restore ? null : context.now(), revision: next }).where(eq(schema.scenario.id, id)).run()
    return { result: { revision: next }, before: { name: row.name }, after: { inBin: !restore } }
  })
}

function keyOf(draft: ScenarioDraft, regionId: string): string {
  return `r${draft.regions.findIndex(r => r.regionId === regionId) + 1}`
}

/** Everything that a run of this draft depends on, copied out of the account: no ids, no clock times. */
export function freezeInput(context: Context, row: ScenarioRow): RunInput {
  const draft = JSON.parse(row.draft) as ScenarioDraft
  checkDraft(context, row.workspaceId, draft)
  const used = draft.regions.filter(r => r.scale !== 0)
  const overlapChoices = settledOverlaps(context, draft)
  if (!used.length) throw new InputError('A run needs at least one region with a series.', [{ path: 'draft/regions', code: 'empty', message: 'no region is switched on' }])
  return {
    schemaVersion: 1,
    settings: draft.settings,
    regions: draft.regions.map((choice, i) => {
      const region = context.db.select().from(schema.region).where(eq(schema.region.id, choice.regionId)).get()!
      const agency = context.db.select().from(schema.agency).where(eq(schema.agency.id, region.agencyId)).get()!
      const version = context.db.select().from(schema.seriesVersion).where(eq(schema.seriesVersion.id, choice.versionId)).get()!
      const outline = latestOutline(context, region.id)
      const pattern = patternOfVersion(context, version.id, outline.sha256)
      return {
        key: `r${i + 1}`, name: region.name, kind: region.kind, agency: agency.name,
        geometry: outline.geometry, outlineSha256: outline.sha256,
        seriesVersion: version.n, seriesSha256: version.dataSha256, source: version.source, ...(version.facts ? { facts: factsOf(version)! } : {}),
        series: massSeries(context, version.id), scale: choice.scale, ...(pattern ? { pattern } : {}),
        ...(patternIsOfOtherOutline(context, version.id, outline.sha256) ? { patternLeftOut: true as const } : {}),
        ...(choice.fractionToOcean !== undefined && choice.fractionToOcean < 1
          ? { fractionToOcean: choice.fractionToOcean, restTo: choice.restTo ? keyOf(draft, choice.restTo) : null }
          : {}),
        ...(choice.groundedFraction !== undefined && choice.groundedFraction < 1 ? { groundedFraction: choice.groundedFraction } : {}),
      }
    }),
    background: draft.background,
    restOfWorld: draft.restOfWorld,
    ...(overlapChoices.length ? { overlapChoices: overlapChoices.map(({ a, b, choice, from, reason }) => ({ a: keyOf(draft, a), b: keyOf(draft, b), choice, from: from && keyOf(draft, from), reason })) } : {}),
  }
}
