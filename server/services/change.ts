import { desc, eq, sql } from 'drizzle-orm'
import { ulid } from 'ulid'
import { can, type Action, type Principal, type Resource } from '#shared/permissions'
import { schema, type Db, type Reader } from '../database/client'
import { prepared } from '../database/prepared'
import { Problem } from '../utils/problem'
import type { Context } from './context'
import { canonicalJson, sha256Hex } from './hash'

/** Refuses with 404 where the workspace is not the principal's, with 403 where the role does not reach. */
export function authorise(principal: Principal | null, action: Action, resource: Resource = {}): Principal {
  if (!principal) throw new Problem(401, 'sign-in', 'This needs an account: sign in first.')
  if (resource.workspaceId && !principal.memberships.some(m => m.workspaceId === resource.workspaceId)) {
    throw new Problem(404, 'not-found', 'There is no such thing here.')
  }
  if (!can(principal, action, resource)) throw new Problem(403, 'role', 'Your role in this workspace does not allow this.')
  return principal
}

export interface ChangeTarget {
  action: Action
  /** What is logged: a verb in the past tense, e.g. `outline changed`. */
  verb: string
  entity: string
  id: string
  workspaceId: string | null
  resource?: Resource
  /** The row as it stands, where one does, and the revision that the caller saw. */
  row?: { revision: number }
  revision?: number
}

export interface ChangeAnswer<T> { result: T, before?: unknown, after?: unknown }

/**
 * The only way to write: permission, revision check, write and log entry in one transaction. `fn` gets the
 * transaction; what it returns as before and after goes to the log.
 */
export function change<T>(context: Context, principal: Principal | null, target: ChangeTarget, fn: (tx: Reader) => ChangeAnswer<T>): T {
  const actor = authorise(principal, target.action, { ...target.resource, ...(target.workspaceId ? { workspaceId: target.workspaceId } : {}) })
  return context.db.transaction((tx) => {
    if (target.row && target.revision !== undefined && target.row.revision !== target.revision) {
      throw new Problem(409, 'revision', `Somebody changed this meanwhile: it is at revision ${target.row.revision}, you had ${target.revision}. Load it again; what you entered is still on your screen.`)
    }
    const { result, before, after } = fn(tx)
    appendLog(context, tx, { actorId: actor.userId, actor: actorName(actor), target, before, after })
    return result
  }, { behavior: 'immediate' })
}

const actorName = ({ name, token }: Principal) => token ? `${name}, token “${token.name}”` : name

interface LogEntry { actorId: string | null, actor: string, target: Omit<ChangeTarget, 'action'>, before?: unknown, after?: unknown }

/** Adds one entry to the hash chain; `change` calls it, and so do the first start and sign-up, which have no principal yet. */
export function appendLog(context: Context, tx: Reader, { actorId, actor, target, before, after }: LogEntry) {
  const last = tx.select({ hash: schema.log.hash }).from(schema.log).orderBy(desc(schema.log.seq)).limit(1).get()
  const entry = {
    at: context.now(), workspaceId: target.workspaceId, actorId, actor,
    action: target.verb, entity: target.entity, entityId: target.id,
    before: before === undefined ? null : canonicalJson(before),
    after: after === undefined ? null : canonicalJson(after),
    previousHash: last?.hash ?? '0'.repeat(64),
  }
  tx.insert(schema.log).values({ ...entry, hash: sha256Hex(canonicalJson(entry)) }).run()
}

/** Whether every entry of the log still hashes to what the next one says. */
export function verifyLog(context: Context): boolean {
  let previous = '0'.repeat(64)
  for (const row of context.db.select().from(schema.log).orderBy(schema.log.seq).all()) {
    const { seq: _, hash, ...entry } = row
    if (entry.previousHash !== previous || sha256Hex(canonicalJson(entry)) !== hash) return false
    previous = hash
  }
  return true
}

export function newId(): string {
  return ulid()
}

const nameStatement = (db: Db) => db.select({ name: schema.user.name }).from(schema.user).where(eq(schema.user.id, sql.placeholder('id'))).prepare()

export function nameOfUser(context: Context, id: string | null): string | null {
  if (!id) return null
  return prepared(context.db, nameStatement).get({ id })?.name ?? null
}
