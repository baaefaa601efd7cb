import { and, desc, eq, lt } from 'drizzle-orm'
import { schema } from '../database/client'
import { verifyLog } from './change'
import type { Context } from './context'

const read = (text: string | null): unknown => text === null ? null : JSON.parse(text)

/** A page of the change log, newest first; the cursor is the sequence number. */
export function listLog(context: Context, workspaceId: string, { limit, cursor }: { limit: number, cursor?: string }) {
  const rows = context.db.select().from(schema.log)
    .where(and(eq(schema.log.workspaceId, workspaceId), cursor ? lt(schema.log.seq, Number(cursor) || 0) : undefined))
    .orderBy(desc(schema.log.seq)).limit(limit + 1).all()
  const items = rows.slice(0, limit)
  return {
    items: items.map(({ seq, at, actor, action, entity, entityId, before, after, hash }) => ({ seq, at, actor, action, entity, entityId, before: read(before), after: read(after), hash })),
    nextCursor: rows.length > limit ? String(items.at(-1)!.seq) : null,
    chainIntact: verifyLog(context),
  }
}
