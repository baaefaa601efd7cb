import { and, eq, isNull, sql } from 'drizzle-orm'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import type { Principal } from '#shared/permissions'
import { schema, type Reader } from '../database/client'
import { Problem } from '../utils/problem'
import { appendLog, change, newId } from './change'
import type { Context } from './context'
import { secretToken, sha256Hex } from './hash'
import { linkLetter } from './letters'

const inviteLifetimeMs = 7 * 24 * 3600 * 1000
const failures = { most: 8, windowMs: 10 * 60 * 1000 }

/** Counts failed sign-ins per address and account, so that passwords cannot be tried one after another. */
export function createThrottle(now: () => number = Date.now) {
  const seen = new Map<string, number[]>()
  const recent = (key: string) => (seen.get(key) ?? []).filter(at => now() - at < failures.windowMs)
  return {
    check(key: string) {
      if (recent(key).length >= failures.most) throw new Problem(429, 'too-many-tries', 'Too many failed tries for this account. Wait ten minutes and try again.')
    },
    fail(key: string) {
      if (seen.size > 10000) seen.clear()
      seen.set(key, [...recent(key), now()])
    },
    clear: (key: string) => void seen.delete(key),
  }
}
export type Throttle = ReturnType<typeof createThrottle>

export function userByEmail(context: { db: Reader }, email: string) {
  return context.db.select().from(schema.user).where(eq(sql`lower(${schema.user.email})`, email.trim().toLowerCase())).get()
}

/** Checks e-mail and password; the answer does not tell which of the two was wrong, and takes as long either way. */
export async function checkPassword(context: Context, throttle: Throttle, address: string, email: string, password: string) {
  const key = `${address} ${email.trim().toLowerCase()}`
  throttle.check(key)
  const user = userByEmail(context, email)
  const good = user ? await context.passwords.verify(user.passwordHash, password) : (await context.passwords.hash(password), false)
  if (!user || !good) {
    throttle.fail(key)
    throw new Problem(401, 'wrong-password', 'E-mail or password is wrong.')
  }
  throttle.clear(key)
  return user
}

interface Invite { kind: 'operator' | 'member' | 'password', email: string | null, workspaceId: string | null, agencyId: string | null, role: typeof schema.invitation.$inferInsert['role'] }

export function storeInvitation(context: Context, tx: Reader, invite: Invite, createdBy: string | null, lifetimeMs = inviteLifetimeMs) {
  const token = secretToken()
  const now = context.now()
  const expiresAt = new Date(Date.parse(now) + lifetimeMs).toISOString()
  tx.insert(schema.invitation).values({ hash: sha256Hex(token), ...invite, createdAt: now, createdBy, expiresAt }).run()
  return { token, expiresAt }
}

/** The link that makes the first operator of an instance without people; null where there are people. */
export function firstOperatorToken(context: Context): string | null {
  if (context.db.select({ id: schema.user.id }).from(schema.user).limit(1).get()) return null
  return context.db.transaction((tx) => {
    tx.delete(schema.invitation).where(eq(schema.invitation.kind, 'operator')).run()
    return storeInvitation(context, tx, { kind: 'operator', email: null, workspaceId: null, agencyId: null, role: null }, null).token
  })
}

export function openInvitation(context: Context, token: string) {
  const row = context.db.select().from(schema.invitation).where(eq(schema.invitation.hash, sha256Hex(token))).get()
  if (!row || row.usedAt) throw new Problem(404, 'invitation', 'This link was used already or never existed. Ask for a new one.')
  if (row.expiresAt < context.now()) throw new Problem(410, 'invitation', 'This link has run out. Ask for a new one.')
  return row
}

/** A link works once, however quickly it is opened twice. */
export function markUsed(context: Context, tx: Reader, hash: string) {
  const used = tx.update(schema.invitation).set({ usedAt: context.now() }).where(and(eq(schema.invitation.hash, hash), isNull(schema.invitation.usedAt))).run()
  if (used.changes !== 1) throw new Problem(404, 'invitation', 'This link was used already.')
}

export function invitationView(context: Context, token: string) {
  const row = openInvitation(context, token)
  const workspace = row.workspaceId ? context.db.select().from(schema.workspace).where(eq(schema.workspace.id, row.workspaceId)).get() : null
  return { kind: row.kind, email: row.email, workspaceName: workspace?.name ?? null, role: row.role, knownAccount: row.email ? Boolean(userByEmail(context, row.email)) : false }
}

/** Makes the account (or signs the known one in) and the membership that the link stands for. Returns the user's id. */
export async function acceptInvitation(context: Context, throttle: Throttle, address: string, token: string, body: BodyOf<typeof contracts.invitationAccept>): Promise<string> {
  const invitation = openInvitation(context, token)
  const email = invitation.email ?? body.email
  if (!email) throw missing('email', 'is needed')
  if (!body.password) throw missing('password', 'is needed')
  const known = userByEmail(context, email)
  if (known) await checkPassword(context, throttle, address, email, body.password)
  else if (!body.name) throw missing('name', 'is needed')
  if (invitation.kind === 'operator' && !(body.workspaceName && body.agencyName)) throw missing('workspaceName', 'and agencyName are needed')
  const passwordHash = known?.passwordHash ?? await context.passwords.hash(body.password)

  return context.db.transaction((tx) => {
    markUsed(context, tx, invitation.hash)
    const userId = known?.id ?? newId()
    const name = known?.name ?? body.name!
    if (!known) {
      tx.insert(schema.user).values({ id: userId, email, name, passwordHash, operator: invitation.kind === 'operator', createdAt: context.now() }).run()
    }
    const place = invitation.kind === 'operator'
      ? createWorkspace(context, tx, { name: body.workspaceName!, agencyName: body.agencyName!, invented: false })
      : { workspaceId: invitation.workspaceId!, agencyId: invitation.agencyId }
    const roles = invitation.kind === 'operator' ? ['administrator', 'lead'] as const : [invitation.role!]
    for (const role of roles) addMembership(context, tx, { ...place, userId, role })
    appendLog(context, tx, {
      actorId: userId, actor: name, after: { email, roles: [...roles] },
      target: { verb: 'joined', entity: 'member', id: userId, workspaceId: place.workspaceId },
    })
    return userId
  }, { behavior: 'immediate' })
}

function missing(path: string, message: string) {
  return new Problem(422, 'invalid', `${path} ${message}.`, [{ path, code: 'missing', message }])
}

export function createWorkspace(context: Context, tx: Reader, { name, agencyName, invented }: { name: string, agencyName: string, invented: boolean }) {
  const workspaceId = newId()
  const agencyId = newId()
  tx.insert(schema.workspace).values({ id: workspaceId, name, invented, createdAt: context.now() }).run()
  tx.insert(schema.agency).values({ id: agencyId, workspaceId, name: agencyName, createdAt: context.now() }).run()
  return { workspaceId, agencyId }
}

export function addMembership(context: Context, tx: Reader, row: { workspaceId: string, agencyId: string | null, userId: string, role: NonNullable<Invite['role']> }) {
  tx.insert(schema.membership).values({ id: newId(), ...row, createdAt: context.now(), createdBy: row.userId }).onConflictDoNothing().run()
}

export function listMembers(context: Context, workspaceId: string) {
  const rows = context.db.select({ m: schema.membership, user: schema.user, agencyName: schema.agency.name }).from(schema.membership)
    .innerJoin(schema.user, eq(schema.user.id, schema.membership.userId))
    .leftJoin(schema.agency, eq(schema.agency.id, schema.membership.agencyId))
    .where(and(eq(schema.membership.workspaceId, workspaceId), isNull(schema.membership.deletedAt)))
    .orderBy(schema.user.name, schema.membership.id).all()
  return {
    items: rows.map(({ m, user, agencyName }) => ({
      id: m.id, revision: m.revision, userId: user.id, name: user.name, email: user.email, role: m.role, agencyId: m.agencyId, agencyName,
    })),
    nextCursor: null,
  }
}

export function listAgencies(context: Context, workspaceId: string) {
  const items = context.db.select({ id: schema.agency.id, name: schema.agency.name }).from(schema.agency)
    .where(eq(schema.agency.workspaceId, workspaceId)).orderBy(schema.agency.name).all()
  return { items, nextCursor: null }
}

export function createAgency(context: Context, principal: Principal | null, workspaceId: string, name: string) {
  const id = newId()
  return change(context, principal, { action: 'member.manage', verb: 'agency added', entity: 'agency', id, workspaceId }, (tx) => {
    tx.insert(schema.agency).values({ id, workspaceId, name, createdAt: context.now() }).run()
    return { result: { id, name }, after: { name } }
  })
}

export function requireAgency(context: Context, workspaceId: string, agencyId: string) {
  const row = context.db.select().from(schema.agency).where(and(eq(schema.agency.id, agencyId), eq(schema.agency.workspaceId, workspaceId))).get()
  if (!row) throw new Problem(422, 'invalid', 'There is no such agency in this workspace.', [{ path: 'agencyId', code: 'unknown', message: 'is not an agency of this workspace' }])
  return row
}

export function inviteMember(context: Context, principal: Principal | null, workspaceId: string, body: BodyOf<typeof contracts.memberInvite>, origin: string) {
  if (body.agencyId) requireAgency(context, workspaceId, body.agencyId)
  const { mail } = context
  const answer = change(context, principal, { action: 'member.manage', verb: 'asked in', entity: 'member', id: body.email, workspaceId }, (tx) => {
    const { token, expiresAt } = storeInvitation(context, tx, { kind: 'member', email: body.email, workspaceId, agencyId: body.agencyId, role: body.role }, principal!.userId)
    const link = `${mail?.site ?? origin}/invitation/${token}`
    const workspace = tx.select().from(schema.workspace).where(eq(schema.workspace.id, workspaceId)).get()!
    mail?.put(tx, linkLetter('member', body.email, link, expiresAt, `${workspace.name}, as ${body.role}, by ${principal!.name}.`))
    return { result: { link, expiresAt, mailed: mail !== null }, after: { email: body.email, role: body.role } }
  })
  void mail?.send()
  return answer
}

export function membershipRow(context: Context, id: string) {
  const row = context.db.select().from(schema.membership).where(and(eq(schema.membership.id, id), isNull(schema.membership.deletedAt))).get()
  if (!row) throw new Problem(404, 'not-found', 'There is no such member.')
  return row
}

/** A workspace must keep somebody who can manage its people. */
function keepOneAdministrator(tx: Reader, workspaceId: string) {
  const left = tx.select({ id: schema.membership.id }).from(schema.membership)
    .where(and(eq(schema.membership.workspaceId, workspaceId), eq(schema.membership.role, 'administrator'), isNull(schema.membership.deletedAt))).limit(1).get()
  if (!left) throw new Problem(422, 'last-administrator', 'This is the workspace’s last administrator. Name another one first.')
}

export function changeMember(context: Context, principal: Principal | null, id: string, body: BodyOf<typeof contracts.memberChange>) {
  const row = membershipRow(context, id)
  if (body.agencyId) requireAgency(context, row.workspaceId, body.agencyId)
  return change(context, principal, { action: 'member.manage', verb: 'role changed', entity: 'member', id, workspaceId: row.workspaceId, row, revision: body.revision }, (tx) => {
    const twin = tx.select({ id: schema.membership.id }).from(schema.membership)
      .where(and(eq(schema.membership.workspaceId, row.workspaceId), eq(schema.membership.userId, row.userId), eq(schema.membership.role, body.role), isNull(schema.membership.deletedAt))).get()
    if (twin && twin.id !== id) throw new Problem(422, 'role-held', 'This person holds that role already.')
    const revision = row.revision + 1
    tx.update(schema.membership).set({ role: body.role, agencyId: body.agencyId, revision }).where(eq(schema.membership.id, id)).run()
    keepOneAdministrator(tx, row.workspaceId)
    return { result: { revision }, before: { role: row.role, agencyId: row.agencyId }, after: { role: body.role, agencyId: body.agencyId } }
  })
}

export function removeMember(context: Context, principal: Principal | null, id: string, revision: number) {
  const row = membershipRow(context, id)
  change(context, principal, { action: 'member.manage', verb: 'removed', entity: 'member', id, workspaceId: row.workspaceId, row, revision }, (tx) => {
    tx.update(schema.membership).set({ deletedAt: context.now(), revision: row.revision + 1 }).where(eq(schema.membership.id, id)).run()
    keepOneAdministrator(tx, row.workspaceId)
    return { result: undefined, before: { role: row.role, userId: row.userId } }
  })
}

