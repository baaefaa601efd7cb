import { and, desc, eq, gt, isNull } from 'drizzle-orm'
import type { Principal } from '#shared/permissions'
import { schema } from '../database/client'
import { Problem } from '../utils/problem'
import { change, nameOfUser } from './change'
import type { Context } from './context'

const open = (context: Context, workspaceId: string) => and(
  eq(schema.invitation.kind, 'member'), eq(schema.invitation.workspaceId, workspaceId), isNull(schema.invitation.usedAt), gt(schema.invitation.expiresAt, context.now()),
)

/** Invitations that nobody used yet, newest first. They go by the checksum of their secret: the link itself is not kept. */
export function listInvitations(context: Context, workspaceId: string) {
  const rows = context.db.select({ invitation: schema.invitation, agencyName: schema.agency.name }).from(schema.invitation)
    .leftJoin(schema.agency, eq(schema.agency.id, schema.invitation.agencyId))
    .where(open(context, workspaceId)).orderBy(desc(schema.invitation.createdAt)).all()
  return {
    items: rows.map(({ invitation: { hash, email, role, createdAt, createdBy, expiresAt }, agencyName }) => ({
      id: hash, email: email!, role: role!, agencyName, createdAt, createdBy: nameOfUser(context, createdBy), expiresAt,
    })),
    nextCursor: null,
  }
}

export function withdrawInvitation(context: Context, principal: Principal | null, workspaceId: string, hash: string) {
  const row = context.db.select().from(schema.invitation).where(and(eq(schema.invitation.hash, hash), open(context, workspaceId))).get()
  if (!row) throw new Problem(404, 'not-found', 'This invitation was used, has run out, or is withdrawn already.')
  change(context, principal, { action: 'member.manage', verb: 'invitation withdrawn', entity: 'member', id: row.email!, workspaceId }, (tx) => {
    tx.delete(schema.invitation).where(eq(schema.invitation.hash, hash)).run()
    return { result: undefined, before: { email: row.email, role: row.role } }
  })
}
