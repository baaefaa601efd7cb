import { and, eq, isNull } from 'drizzle-orm'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import { can, type Principal } from '#shared/permissions'
import { schema, type Reader } from '../database/client'
import { Problem } from '../utils/problem'
import { appendLog, change } from './change'
import type { Context } from './context'
import { linkLetter } from './letters'
import { checkPassword, markUsed, membershipRow, openInvitation, storeInvitation, userByEmail } from './people'
import { setPassword } from './sessions'

const mailedMs = 3600 * 1000
const handedMs = 24 * 3600 * 1000

/** Changes one's own password; the present one is asked for, so that an unattended screen is not enough. */
export async function changePassword(context: Context, principal: Principal | null, address: string, session: string | null, body: BodyOf<typeof contracts.passwordChange>) {
  const user = await checkPassword(context, context.throttle, address, principal!.email, body.current).catch((error: Problem) => {
    throw error.status === 401 ? new Problem(422, 'wrong-password', 'The present password is wrong.', [{ path: 'current', code: 'wrong', message: 'is wrong' }]) : error
  })
  const passwordHash = await context.passwords.hash(body.password)
  change(context, principal, { action: 'account.manage', verb: 'password changed', entity: 'user', id: user.id, workspaceId: null }, (tx) => {
    setPassword(tx, user.id, passwordHash, session)
    return { result: undefined }
  })
}

function storeLink(context: Context, tx: Reader, email: string, lifetimeMs: number, createdBy: string | null) {
  // An older link ends when a newer one is made.
  tx.delete(schema.invitation).where(and(eq(schema.invitation.kind, 'password'), eq(schema.invitation.email, email), isNull(schema.invitation.usedAt))).run()
  return storeInvitation(context, tx, { kind: 'password', email, workspaceId: null, agencyId: null, role: null }, createdBy, lifetimeMs)
}

/** Sends a link to a new password where there is such an account. What is answered does not tell whether there is. */
export function forgotPassword(context: Context, address: string, email: string): { mail: boolean } {
  const { mail } = context
  if (!mail) return { mail: false }
  const key = `reset ${address}`
  context.throttle.check(key)
  context.throttle.fail(key)
  const user = userByEmail(context, email)
  if (user) {
    context.db.transaction((tx) => {
      const { token, expiresAt } = storeLink(context, tx, user.email, mailedMs, null)
      mail.put(tx, linkLetter('password', user.email, `${mail.site}/invitation/${token}`, expiresAt))
    }, { behavior: 'immediate' })
    void mail.send()
  }
  return { mail: true }
}

/**
 * A link to a new password that an administrator hands over. Whoever holds it takes the account, so it is made only for people whom
 * this administrator administers wholly: members of no workspace of others, and no operators.
 */
export function memberPasswordLink(context: Context, principal: Principal | null, id: string, origin: string) {
  const row = membershipRow(context, id)
  const user = context.db.select().from(schema.user).where(eq(schema.user.id, row.userId)).get()!
  return change(context, principal, { action: 'member.manage', verb: 'password link made', entity: 'member', id, workspaceId: row.workspaceId }, (tx) => {
    const theirs = tx.select({ workspaceId: schema.membership.workspaceId }).from(schema.membership).where(and(eq(schema.membership.userId, user.id), isNull(schema.membership.deletedAt))).all()
    const beyond = theirs.some(({ workspaceId }) => !can(principal, 'member.manage', { workspaceId }))
    if (beyond || (user.operator && !principal!.operator)) {
      throw new Problem(422, 'beyond', `${user.name} belongs to a workspace that you do not administer, or operates this instance. Only they can change their password.`)
    }
    const { token, expiresAt } = storeLink(context, tx, user.email, handedMs, principal!.userId)
    return { result: { link: `${origin}/invitation/${token}`, expiresAt }, after: { email: user.email } }
  })
}

/** Sets the password that a one-time link is for; all sessions of the account end. Returns the user’s id. */
export async function acceptPasswordLink(context: Context, secret: string, password: string | undefined): Promise<string> {
  const link = openInvitation(context, secret)
  const user = userByEmail(context, link.email!)
  if (!user) throw new Problem(404, 'invitation', 'There is no such account any more.')
  if (!password) throw new Problem(422, 'invalid', 'password is needed.', [{ path: 'password', code: 'missing', message: 'is needed' }])
  const passwordHash = await context.passwords.hash(password)
  return context.db.transaction((tx) => {
    markUsed(context, tx, link.hash)
    setPassword(tx, user.id, passwordHash)
    appendLog(context, tx, { actorId: user.id, actor: user.name, target: { verb: 'password set by a link', entity: 'user', id: user.id, workspaceId: null } })
    return user.id
  }, { behavior: 'immediate' })
}
