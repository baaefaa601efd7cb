import { and, eq, gt, isNull, ne } from 'drizzle-orm'
import type { z } from 'zod'
import type { me } from '#shared/api/schemas'
import type { Principal } from '#shared/permissions'
import { schema, type Reader } from '../database/client'
import type { Context } from './context'
import { secretToken, sha256Hex } from './hash'

const lifetimeMs = 14 * 24 * 3600 * 1000
const seenEveryMs = 5 * 60 * 1000

/** Starts a session and returns the secret that its cookie carries; only its hash is stored. */
export function startSession(context: Context, userId: string): string {
  const token = secretToken()
  const now = context.now()
  context.db.insert(schema.session).values({
    hash: sha256Hex(token), userId, createdAt: now, lastSeenAt: now, expiresAt: new Date(Date.parse(now) + lifetimeMs).toISOString(),
  }).run()
  return token
}

export function endSession(context: Context, token: string) {
  context.db.delete(schema.session).where(eq(schema.session.hash, sha256Hex(token))).run()
}

/** Sets a password and ends the person's sessions, all but the one whose secret is given. */
export function setPassword(tx: Reader, userId: string, passwordHash: string, keepSession: string | null = null) {
  tx.update(schema.user).set({ passwordHash }).where(eq(schema.user.id, userId)).run()
  const others = keepSession ? ne(schema.session.hash, sha256Hex(keepSession)) : undefined
  tx.delete(schema.session).where(and(eq(schema.session.userId, userId), others)).run()
}

/** Who a session's secret stands for; null when it ended, ran out or never was. */
export function principalOfSession(context: Context, token: string): Principal | null {
  const now = context.now()
  const hash = sha256Hex(token)
  const row = context.db.select({ user: schema.user, session: schema.session }).from(schema.session)
    .innerJoin(schema.user, eq(schema.user.id, schema.session.userId))
    .where(and(eq(schema.session.hash, hash), gt(schema.session.expiresAt, now))).get()
  if (!row) return null
  if (Date.parse(now) - Date.parse(row.session.lastSeenAt) > seenEveryMs) {
    context.db.update(schema.session).set({ lastSeenAt: now, expiresAt: new Date(Date.parse(now) + lifetimeMs).toISOString() })
      .where(eq(schema.session.hash, hash)).run()
  }
  return principalOfUser(context, row.user)
}

export function principalOfUser(context: Context, user: { id: string, name: string, email: string, operator: boolean }): Principal {
  const memberships = context.db.select({
    workspaceId: schema.membership.workspaceId, agencyId: schema.membership.agencyId, role: schema.membership.role,
  }).from(schema.membership).where(and(eq(schema.membership.userId, user.id), isNull(schema.membership.deletedAt))).all()
  return { userId: user.id, name: user.name, email: user.email, operator: user.operator, memberships }
}

export function meView(context: Context, principal: Principal | null): z.output<typeof me> {
  if (!principal) return { user: null, memberships: [], demo: context.demo }
  const workspaces = new Map(context.db.select().from(schema.workspace).all().map(w => [w.id, w]))
  const agencies = new Map(context.db.select().from(schema.agency).all().map(a => [a.id, a]))
  return {
    user: { id: principal.userId, name: principal.name, email: principal.email, operator: principal.operator },
    memberships: principal.memberships.map(m => ({
      workspaceId: m.workspaceId,
      workspaceName: workspaces.get(m.workspaceId)?.name ?? '',
      invented: workspaces.get(m.workspaceId)?.invented ?? false,
      agencyId: m.agencyId,
      agencyName: m.agencyId ? agencies.get(m.agencyId)?.name ?? null : null,
      role: m.role,
    })),
    demo: context.demo,
  }
}
