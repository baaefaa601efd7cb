import { and, desc, eq, lt } from 'drizzle-orm'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import type { Principal } from '#shared/permissions'
import { findingSentence, remainderSentences } from '#shared/text/finding'
import type { Comparison } from '#shared/types/run'
import { schema } from '../database/client'
import { Problem } from '../utils/problem'
import { authorise, change, nameOfUser, newId } from './change'
import { compareWith } from './comparisons'
import type { Context } from './context'
import { observedLabelOf } from './observed'
import { pageOf } from './paging'
import { runInputOf, runResultOf, runRow, sourcesOf } from './runs'

export type EditionRow = typeof schema.edition.$inferSelect

/** What an edition froze besides its run. */
export interface EditionContent {
  sentence: string
  unexplained: string | null
  observed: { name: string, source: string, originalSha256: string } | null
  comparison: Comparison | null
}

export const contentOf = (row: EditionRow) => JSON.parse(row.content) as EditionContent

function editionsOfSlug(context: Context, slug: string): EditionRow[] {
  return context.db.select().from(schema.edition).where(eq(schema.edition.slug, slug)).orderBy(desc(schema.edition.n)).all()
}

export function editionsOfRun(context: Context, runId: string): EditionRow[] {
  return context.db.select().from(schema.edition).where(eq(schema.edition.runId, runId)).orderBy(desc(schema.edition.id)).all()
}

export function editionRow(context: Context, slug: string, n?: number): EditionRow {
  const rows = editionsOfSlug(context, slug)
  const row = n === undefined ? rows[0] : rows.find(r => r.n === n)
  if (!row) throw new Problem(404, 'not-found', 'Nothing is published under this link.')
  return row
}

function withdrawalOf(context: Context, id: string) {
  return context.db.select().from(schema.withdrawal).where(eq(schema.withdrawal.editionId, id)).get() ?? null
}

export function editionView(context: Context, row: EditionRow) {
  const workspace = context.db.select().from(schema.workspace).where(eq(schema.workspace.id, row.workspaceId)).get()!
  const withdrawn = withdrawalOf(context, row.id)
  return {
    id: row.id, slug: row.slug, n: row.n, title: row.title, licence: row.licence, workspaceName: workspace.name, invented: workspace.invented,
    runId: row.runId, createdAt: row.createdAt, publishedBy: nameOfUser(context, row.createdBy),
    withdrawn: withdrawn && { reason: withdrawn.reason, at: withdrawn.createdAt },
    latest: editionsOfSlug(context, row.slug)[0]!.n === row.n,
  }
}

export async function publish(context: Context, principal: Principal | null, runId: string, body: BodyOf<typeof contracts.editionCreate>) {
  const run = runRow(context, runId)
  const actor = authorise(principal, 'edition.publish', { workspaceId: run.workspaceId })
  const taken = editionsOfSlug(context, body.slug)
  if (taken.some(e => e.workspaceId !== run.workspaceId)) {
    throw new Problem(422, 'invalid', 'This link is taken.', [{ path: 'slug', code: 'taken', message: 'is used by another publication' }])
  }
  const result = runResultOf(run)
  const comparison = body.observedId ? await compareWith(context, run, { observed: body.observedId, zonalTides: body.zonalTides, chain: body.chain }) : null
  const content: EditionContent = {
    sentence: findingSentence(result),
    unexplained: comparison ? remainderSentences(comparison).join(' ') || null : null,
    observed: body.observedId ? observedLabelOf(context, body.observedId) : null,
    comparison,
  }
  const id = newId()
  change(context, principal, { action: 'edition.publish', verb: 'published', entity: 'edition', id, workspaceId: run.workspaceId }, (tx) => {
    const n = (taken[0]?.n ?? 0) + 1
    tx.insert(schema.edition).values({
      id, workspaceId: run.workspaceId, runId, slug: body.slug, n, title: body.title, content: JSON.stringify(content), licence: body.licence,
      createdAt: context.now(), createdBy: actor.userId,
    }).run()
    return { result: undefined, after: { slug: body.slug, n, title: body.title, resultSha256: run.resultSha256 } }
  })
  return editionView(context, context.db.select().from(schema.edition).where(eq(schema.edition.id, id)).get()!)
}

export function withdraw(context: Context, principal: Principal | null, slug: string, n: number, reason: string) {
  const row = editionRow(context, slug, n)
  const actor = authorise(principal, 'edition.publish', { workspaceId: row.workspaceId })
  if (withdrawalOf(context, row.id)) throw new Problem(409, 'withdrawn', 'This edition is withdrawn already.')
  change(context, principal, { action: 'edition.publish', verb: 'withdrawn', entity: 'edition', id: row.id, workspaceId: row.workspaceId }, (tx) => {
    tx.insert(schema.withdrawal).values({ editionId: row.id, reason, createdAt: context.now(), createdBy: actor.userId }).run()
    return { result: undefined, after: { slug, n, reason } }
  })
  return editionView(context, row)
}

export function listEditions(context: Context, workspaceId: string, { limit, cursor }: { limit: number, cursor?: string }) {
  const rows = context.db.select().from(schema.edition).where(and(eq(schema.edition.workspaceId, workspaceId), cursor ? lt(schema.edition.id, cursor) : undefined))
    .orderBy(desc(schema.edition.id)).limit(limit + 1).all()
  return pageOf(rows, limit, row => editionView(context, row))
}

/** What the front page shows to everybody: the newest edition of each link that is not withdrawn. */
export function publicIndex(context: Context) {
  const rows = context.db.select().from(schema.edition).orderBy(desc(schema.edition.id)).all()
  const items = rows.map(row => ({ ...editionView(context, row), sentence: contentOf(row).sentence })).filter(e => e.latest && !e.withdrawn)
  return { items: items.slice(0, 50), nextCursor: null }
}

/** Everything a public page shows; nothing of the workspace beyond the run that the edition froze. */
export function readEdition(context: Context, slug: string, n?: number) {
  const row = editionRow(context, slug, n)
  const run = runRow(context, row.runId)
  return {
    ...editionView(context, row), ...contentOf(row),
    run: { inputSha256: run.inputSha256, resultSha256: run.resultSha256, engine: run.engine, node: run.node, createdAt: run.createdAt, n: run.n },
    result: runResultOf(run), sources: sourcesOf(runInputOf(run)),
    editions: editionsOfSlug(context, slug).map(e => ({ n: e.n, createdAt: e.createdAt, withdrawn: Boolean(withdrawalOf(context, e.id)) })),
  }
}
