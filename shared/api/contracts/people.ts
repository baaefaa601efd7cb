import { z } from 'zod'
import { tokenScopes } from '../../permissions.ts'
import { contract } from '../contract.ts'
import { agency, listOf, me, name, page, revision, role, sha256, ulid } from '../schemas.ts'
import { inWorkspace, byId, changed, nothing } from './common.ts'

const password = z.string().min(10, 'must have at least 10 characters').max(200)
const oneTimeLink = z.object({ link: z.string(), expiresAt: z.string() })
/** `mailed`: the link is on its way by mail as well. */
const invited = oneTimeLink.extend({ mailed: z.boolean() })
const token = z.object({ id: ulid, name: z.string(), scope: z.enum(tokenScopes), createdAt: z.string(), expiresAt: z.string(), lastUsedAt: z.string().nullable() })

/** Sessions, people and their tokens, agencies, the change log. */
export const peopleContracts = {
  sessionRead: contract({ id: 'sessionRead', method: 'GET', path: '/api/v1/session', action: 'public.read', summary: 'Who is signed in', answer: me }),
  sessionCreate: contract({
    id: 'sessionCreate', method: 'POST', path: '/api/v1/session', action: 'public.read', summary: 'Sign in',
    body: z.object({ email: z.string().min(1).max(254), password: z.string().min(1).max(200) }), answer: me,
  }),
  sessionDelete: contract({ id: 'sessionDelete', method: 'DELETE', path: '/api/v1/session', action: 'public.read', summary: 'Sign out', answer: nothing, status: 204 }),
  invitationRead: contract({
    id: 'invitationRead', method: 'GET', path: '/api/v1/invitations/{token}', action: 'public.read', summary: 'What a one-time link is for',
    params: z.object({ token: z.string().max(100) }),
    answer: z.object({ kind: z.enum(['operator', 'member', 'password']), email: z.string().nullable(), workspaceName: z.string().nullable(), role: role.nullable(), knownAccount: z.boolean() }),
  }),
  invitationAccept: contract({
    id: 'invitationAccept', method: 'POST', path: '/api/v1/invitations/{token}', action: 'public.read', summary: 'Use a one-time link',
    params: z.object({ token: z.string().max(100) }),
    body: z.object({ email: z.email().max(254).optional(), name: name.optional(), password: password.optional(), workspaceName: name.optional(), agencyName: name.optional() }),
    answer: me,
  }),
  passwordForgotten: contract({
    id: 'passwordForgotten', method: 'POST', path: '/api/v1/password-resets', action: 'public.read',
    summary: 'Ask for a one-time link to a new password by mail; the answer is the same whether or not there is such an account',
    body: z.object({ email: z.email().max(254) }), answer: z.object({ mail: z.boolean() }),
  }),
  passwordChange: contract({
    id: 'passwordChange', method: 'POST', path: '/api/v1/account/password', action: 'account.manage', summary: 'Change one’s own password; ends all other sessions',
    body: z.object({ current: z.string().min(1).max(200), password }), answer: nothing, status: 204,
  }),
  tokenList: contract({ id: 'tokenList', method: 'GET', path: '/api/v1/tokens', action: 'account.manage', summary: 'One’s own tokens', answer: listOf(token) }),
  tokenCreate: contract({
    id: 'tokenCreate', method: 'POST', path: '/api/v1/tokens', action: 'account.manage', summary: 'Make a token for a program; its secret is in this answer and nowhere else',
    body: z.object({ name, scope: z.enum(tokenScopes), days: z.int().min(1).max(366) }), answer: token.extend({ secret: z.string() }), status: 201, secret: true,
  }),
  tokenRevoke: contract({
    id: 'tokenRevoke', method: 'DELETE', path: '/api/v1/tokens/{id}', action: 'account.manage', summary: 'Revoke one of one’s own tokens', params: byId, answer: nothing, status: 204,
  }),
  invitationList: contract({
    id: 'invitationList', method: 'GET', path: '/api/v1/workspaces/{workspace}/invitations', action: 'member.manage', summary: 'Invitations that nobody used yet', params: inWorkspace,
    answer: listOf(z.object({ id: sha256, email: z.string(), role, agencyName: z.string().nullable(), createdAt: z.string(), createdBy: z.string().nullable(), expiresAt: z.string() })),
  }),
  invitationWithdraw: contract({
    id: 'invitationWithdraw', method: 'DELETE', path: '/api/v1/workspaces/{workspace}/invitations/{id}', action: 'member.manage', summary: 'Withdraw an invitation: its link no longer works',
    params: z.object({ workspace: ulid, id: sha256 }), answer: nothing, status: 204,
  }),
  memberList: contract({
    id: 'memberList', method: 'GET', path: '/api/v1/workspaces/{workspace}/members', action: 'member.manage', summary: 'People of a workspace', params: inWorkspace,
    answer: listOf(z.object({ id: ulid, revision, userId: ulid, name: z.string(), email: z.string(), role, agencyId: ulid.nullable(), agencyName: z.string().nullable() })),
  }),
  memberInvite: contract({
    id: 'memberInvite', method: 'POST', path: '/api/v1/workspaces/{workspace}/members', action: 'member.manage', summary: 'Ask somebody in by a one-time link', params: inWorkspace,
    body: z.object({ email: z.email().max(254), role, agencyId: ulid.nullable() }), answer: invited, status: 201, secret: true,
  }),
  memberChange: contract({
    id: 'memberChange', method: 'PATCH', path: '/api/v1/members/{id}', action: 'member.manage', summary: 'Change a role', params: byId,
    body: z.object({ revision, role, agencyId: ulid.nullable() }), answer: changed,
  }),
  memberPasswordLink: contract({
    id: 'memberPasswordLink', method: 'POST', path: '/api/v1/members/{id}/password-link', action: 'member.manage',
    summary: 'Make a one-time link to a new password for a member who belongs to no other workspace', params: byId, answer: oneTimeLink, status: 201, secret: true,
  }),
  memberRemove: contract({
    id: 'memberRemove', method: 'DELETE', path: '/api/v1/members/{id}', action: 'member.manage', summary: 'Remove somebody from a workspace', params: byId,
    query: z.object({ revision: z.coerce.number().int() }), answer: nothing, status: 204,
  }),
  agencyList: contract({
    id: 'agencyList', method: 'GET', path: '/api/v1/workspaces/{workspace}/agencies', action: 'workspace.read', summary: 'Agencies of a workspace', params: inWorkspace, answer: listOf(agency),
  }),
  agencyCreate: contract({
    id: 'agencyCreate', method: 'POST', path: '/api/v1/workspaces/{workspace}/agencies', action: 'member.manage', summary: 'Add an agency', params: inWorkspace,
    body: z.object({ name }), answer: agency, status: 201,
  }),
  logList: contract({
    id: 'logList', method: 'GET', path: '/api/v1/workspaces/{workspace}/log', action: 'log.read', summary: 'Change log, newest first, with its hash chain', params: inWorkspace, query: page,
    answer: listOf(z.object({
      seq: z.int(), at: z.string(), actor: z.string(), action: z.string(), entity: z.string(), entityId: z.string(),
      before: z.unknown(), after: z.unknown(), hash: sha256,
    })).extend({ chainIntact: z.boolean() }),
  }),
}
