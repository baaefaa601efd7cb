import { describe, expect, it } from 'vitest'
import { can, writableKinds, type Action, type Principal } from '#shared/permissions'
import type { Role } from '#shared/types/domain'

const here = 'W1'
const somebody = (role: Role, operator = false): Principal => ({ userId: 'U1', name: '', email: '', operator, memberships: [{ workspaceId: here, agencyId: null, role }] })

describe('permissions', () => {
  it('lets specialists change their own scenarios only', () => {
    for (const role of ['hydrologist', 'glaciologist'] as const) {
      expect(can(somebody(role), 'scenario.write', { workspaceId: here, ownerId: 'U1' })).toBe(true)
      expect(can(somebody(role), 'scenario.write', { workspaceId: here, ownerId: 'U2' })).toBe(false)
      expect(can(somebody(role), 'run.create', { workspaceId: here, ownerId: null })).toBe(false)
    }
    expect(can(somebody('lead'), 'scenario.write', { workspaceId: here, ownerId: 'U2' })).toBe(true)
  })

  it('keeps water and ice apart', () => {
    expect(writableKinds(somebody('hydrologist'), here)).toEqual(['aquifer', 'basin', 'lake', 'reservoir', 'soil-water', 'snow-water'])
    expect(writableKinds(somebody('glaciologist'), here)).toEqual(['ice-sector', 'glacier-region'])
    expect(writableKinds(somebody('lead'), here)).toHaveLength(8)
    expect(writableKinds(somebody('reader'), here)).toEqual([])
  })

  it('does not make an operator a member, nor an administrator an operator', () => {
    expect(can({ ...somebody('reader', true), memberships: [] }, 'region.read', { workspaceId: here })).toBe(false)
    expect(can(somebody('administrator'), 'instance.operate')).toBe(false)
  })

  it('refuses every action in a workspace that is not theirs', () => {
    const actions: Action[] = ['workspace.read', 'region.read', 'region.write', 'scenario.read', 'run.read', 'member.manage', 'log.read', 'edition.publish', 'report.export']
    for (const action of actions) for (const role of ['administrator', 'lead', 'reader'] as const) {
      expect(can(somebody(role), action, { workspaceId: 'W2' })).toBe(false)
    }
  })
})
