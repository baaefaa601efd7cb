import { and, desc, eq, gt } from 'drizzle-orm'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import type { Principal } from '#shared/permissions'
import { schema } from '../database/client'
import { Problem } from '../utils/problem'
import { change, newId } from './change'
import type { Context } from './context'
import { secretToken, sha256Hex } from './hash'
import { principalOfUser } from './sessions'

const dayMs = 24 * 3600 * 1000
const seenEveryMs = 5 * 60 * 1000
const mostTokens = 50
/** Tells what it is to whoever finds it in a file. */
const prefix = 'cpt_'

type TokenRow = typeof schema.token.$inferSelect
const view = ({ id, name, scope, createdAt, expiresAt, lastUsedAt }: TokenRow) => ({ id, name, scope, createdAt, expiresAt, lastUsedAt })

/** Who a token's secret stands for, with its scope; null when it was revoked, ran out or never was. */
export function principalOfToken(context: Context, secret: string): Principal | null {
  if (!secret.startsWith(prefix)) return null
  const now = context.now()
  const row = context.db.select({ user: schema.user, token: schema.token }).from(schema.token)
    .innerJoin(schema.user, eq(schema.user.id, schema.token.userId))
    .where(and(eq(schema.token.hash, sha256Hex(secret)), gt(schema.token.expiresAt, now))).get()
  if (!row) return null
  const { id, name, scope, lastUsedAt } = row.token
  if (!lastUsedAt || Date.parse(now) - Date.parse(lastUsedAt) > seenEveryMs) {
    context.db.update(schema.token).set({ lastUsedAt: now }).where(eq(schema.token.id, id)).run()
  }
  return { ...principalOfUser(context, row.user), token: { name, scope } }
}

export function listTokens(context: Context, userId: string) {
  const rows = context.db.select().from(schema.token).where(eq(schema.token.userId, userId)).orderBy(desc(schema.token.id)).all()
  return { items: rows.map(view), nextCursor: null }
}

/** Makes a token; the secret is in the answer and nowhere else. */
export function createToken(context: Context, principal: Principal | null, { name, scope, days }: BodyOf<typeof contracts.tokenCreate>) {
  const id = newId()
  return change(context, principal, { action: 'account.manage', verb: 'token made', entity: 'token', id, workspaceId: null }, (tx) => {
    const userId = principal!.userId
    if (tx.select({ id: schema.token.id }).from(schema.token).where(eq(schema.token.userId, userId)).all().length >= mostTokens) {
      throw new Problem(422, 'too-many-tokens', `There are ${mostTokens} tokens already. Revoke those that are not used.`)
    }
    const secret = `${prefix}${secretToken()}`
    const createdAt = context.now()
    const expiresAt = new Date(Date.parse(createdAt) + days * dayMs).toISOString()
    const row = { id, hash: sha256Hex(secret), userId, name, scope, createdAt, expiresAt, lastUsedAt: null }
    tx.insert(schema.token).values(row).run()
    return { result: { ...view(row), secret }, after: { name, scope, expiresAt } }
  })
}

export function revokeToken(context: Context, principal: Principal | null, id: string) {
  const row = context.db.select().from(schema.token).where(and(eq(schema.token.id, id), eq(schema.token.userId, principal!.userId))).get()
  if (!row) throw new Problem(404, 'not-found', 'There is no such token.')
  change(context, principal, { action: 'account.manage', verb: 'token revoked', entity: 'token', id, workspaceId: null }, (tx) => {
    tx.delete(schema.token).where(eq(schema.token.id, id)).run()
    return { result: undefined, before: { name: row.name, scope: row.scope } }
  })
}
