import { iceKinds, liquidKinds, type RegionKind, type Role } from './types/domain.ts'

/** What can be done. The table below is the only place that says by whom. */
export const actions = [
  'public.read',
  'account.read', 'account.manage',
  'evaluate',
  'workspace.read',
  'region.read', 'region.write',
  'observed.read', 'observed.write',
  'scenario.read', 'scenario.write',
  'run.read', 'run.create',
  'report.export',
  'edition.list', 'edition.publish',
  'member.manage', 'log.read',
  'instance.operate',
] as const
export type Action = typeof actions[number]

/** What the check may need to know of the row that is touched. */
export interface Resource {
  workspaceId?: string
  kind?: RegionKind
  /** Who made the row: scenarios of specialists are their own. */
  ownerId?: string | null
}

export interface Membership { workspaceId: string, agencyId: string | null, role: Role }

/** What a token may do: read, or all that its person may. */
export const tokenScopes = ['read', 'write'] as const
export type TokenScope = typeof tokenScopes[number]

/** Who asks: a person through a session, or a program through a token of that person. */
export interface Principal {
  userId: string
  name: string
  email: string
  operator: boolean
  memberships: Membership[]
  /** Set where a token asks. */
  token?: { name: string, scope: TokenScope }
}

type Rule = 'yes' | 'own' | 'liquid' | 'ice'
const everyone: Partial<Record<Role, Rule>> = { lead: 'yes', hydrologist: 'yes', glaciologist: 'yes', reader: 'yes' }

/** Rules inside a workspace: role × action. What is not listed is refused. */
const table: Partial<Record<Action, Partial<Record<Role, Rule>>>> = {
  'workspace.read': { administrator: 'yes', ...everyone },
  'region.read': everyone,
  'region.write': { lead: 'yes', hydrologist: 'liquid', glaciologist: 'ice' },
  'observed.read': everyone,
  'observed.write': { lead: 'yes' },
  'scenario.read': everyone,
  'scenario.write': { lead: 'yes', hydrologist: 'own', glaciologist: 'own' },
  'run.read': everyone,
  'run.create': { lead: 'yes', hydrologist: 'own', glaciologist: 'own' },
  'report.export': { administrator: 'yes', ...everyone },
  'edition.list': { administrator: 'yes', ...everyone },
  'edition.publish': { lead: 'yes' },
  'member.manage': { administrator: 'yes' },
  'log.read': { administrator: 'yes', lead: 'yes' },
}

const anyone: readonly Action[] = ['public.read']
const signedIn: readonly Action[] = ['account.read', 'account.manage', 'evaluate']
/** Actions that store nothing: all that a token for reading may. */
const reading: readonly Action[] = actions.filter(action => /\.(?:read|list|export)$/.test(action) || action === 'evaluate')

/** A token never reaches further than its scope, nor to the account that it belongs to: it makes no tokens and changes no password. */
function tokenReaches({ scope }: { scope: TokenScope }, action: Action): boolean {
  return action !== 'account.manage' && (scope === 'write' || reading.includes(action))
}

function holds(rule: Rule | undefined, principal: Principal, resource: Resource): boolean {
  switch (rule) {
    case 'yes': return true
    // Without a row yet (a list, a new one of their own) the row's owner is the person who asks.
    case 'own': return resource.ownerId === undefined || resource.ownerId === principal.userId
    case 'liquid': return resource.kind === undefined || (liquidKinds as readonly string[]).includes(resource.kind)
    case 'ice': return resource.kind === undefined || (iceKinds as readonly string[]).includes(resource.kind)
    default: return false
  }
}

/**
 * Whether somebody may do something. Pure; the server asks it for every route, the pages ask it only to leave out
 * what would be refused. A resource of a workspace that the principal does not belong to is refused.
 */
export function can(principal: Principal | null, action: Action, resource: Resource = {}): boolean {
  if (anyone.includes(action)) return true
  if (!principal || (principal.token && !tokenReaches(principal.token, action))) return false
  if (signedIn.includes(action)) return true
  if (action === 'instance.operate') return principal.operator
  return principal.memberships
    .filter(m => resource.workspaceId === undefined || m.workspaceId === resource.workspaceId)
    .some(m => holds(table[action]?.[m.role], principal, resource))
}

/** The kinds of region that somebody may write in a workspace. */
export function writableKinds(principal: Principal | null, workspaceId: string): RegionKind[] {
  return [...liquidKinds, ...iceKinds].filter(kind => can(principal, 'region.write', { workspaceId, kind }))
}
