import { afterEach, beforeEach, describe, expect, it } from 'vitest'
import { eq } from 'drizzle-orm'
import { schema } from '../../../server/database/client'
import { verifyLog } from '../../../server/services/change'
import { listLog } from '../../../server/services/log'
import { changeMember, createAgency, listMembers, removeMember } from '../../../server/services/people'
import { changeRegion, createRegion } from '../../../server/services/regions'
import { populate, temporaryContext } from '../../support/context'

const square = { type: 'Polygon' as const, coordinates: [[[10, 10], [12, 10], [12, 12], [10, 12], [10, 10]]] }
let context: ReturnType<typeof temporaryContext>
beforeEach(() => { context = temporaryContext() })
afterEach(() => context.dispose())

describe('change', () => {
  it('refuses a stale revision, writes nothing and logs nothing', () => {
    const { workspaceId, agencyId, people } = populate(context, ['lead'])
    const region = createRegion(context, people.lead, workspaceId, { name: 'Basin', kind: 'basin', agencyId, note: '', geometry: square })
    changeRegion(context, people.lead, region.id, { revision: 1, name: 'Renamed' })
    const entries = context.db.select().from(schema.log).all().length
    expect(() => changeRegion(context, people.lead, region.id, { revision: 1, name: 'Lost update' })).toThrow(/at revision 2, you had 1/)
    expect(context.db.select().from(schema.region).where(eq(schema.region.id, region.id)).get()?.name).toBe('Renamed')
    expect(context.db.select().from(schema.log).all()).toHaveLength(entries)
  })

  it('rolls the log entry back with the write that failed', () => {
    const { workspaceId, people } = populate(context, ['administrator'])
    const [member] = listMembers(context, workspaceId).items
    expect(() => removeMember(context, people.administrator, member!.id, member!.revision)).toThrow(/last administrator/)
    expect(context.db.select().from(schema.log).all()).toHaveLength(0)
    expect(listMembers(context, workspaceId).items).toHaveLength(1)
  })

  it('answers 404 for another workspace and 403 for the wrong role', () => {
    const here = populate(context, ['glaciologist', 'hydrologist'])
    const there = populate(context, ['lead'], 'Elsewhere')
    const body = { name: 'Basin', kind: 'basin' as const, agencyId: here.agencyId, note: '', geometry: square }
    expect(() => createRegion(context, here.people.glaciologist, here.workspaceId, body)).toThrow(expect.objectContaining({ status: 403 }))
    expect(() => createRegion(context, there.people.lead, here.workspaceId, body)).toThrow(expect.objectContaining({ status: 404 }))
    expect(() => createRegion(context, null, here.workspaceId, body)).toThrow(expect.objectContaining({ status: 401 }))
    const region = createRegion(context, here.people.hydrologist, here.workspaceId, body)
    // A basin cannot be turned into ice by somebody who may only write water.
    expect(() => changeRegion(context, here.people.hydrologist, region.id, { revision: 1, kind: 'ice-sector' })).toThrow(expect.objectContaining({ status: 403 }))
  })

  it('keeps one administrator when roles change', () => {
    const { workspaceId, people } = populate(context, ['administrator'])
    const [member] = listMembers(context, workspaceId).items
    expect(() => changeMember(context, people.administrator, member!.id, { revision: 1, role: 'reader', agencyId: null })).toThrow(/last administrator/)
    expect(listMembers(context, workspaceId).items[0]!.role).toBe('administrator')
  })
})

describe('change log', () => {
  it('chains its entries and notices a forged one', () => {
    const { workspaceId, people } = populate(context, ['administrator'])
    for (const name of ['First', 'Second', 'Third']) createAgency(context, people.administrator, workspaceId, name)
    expect(verifyLog(context)).toBe(true)
    const page = listLog(context, workspaceId, { limit: 2 })
    expect(page.items.map(e => e.after)).toEqual([{ name: 'Third' }, { name: 'Second' }])
    expect(listLog(context, workspaceId, { limit: 2, cursor: page.nextCursor! }).items.map(e => e.after)).toEqual([{ name: 'First' }])
    expect(() => context.sqlite.exec('UPDATE log SET actor = \'somebody else\'')).toThrow(/immutable/)
    context.sqlite.exec('DROP TRIGGER log_no_update; UPDATE log SET actor = \'somebody else\' WHERE seq = 2')
    expect(verifyLog(context)).toBe(false)
  })
})
