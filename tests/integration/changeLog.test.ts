import { createHash } from 'node:crypto'
import canonicalize from 'canonicalize'
import { describe, expect, inject, it } from 'vitest'
import { addWorkspace, makeRegion, newcomer, withDatabase } from '../support/world'

const url = inject('url')
const dataDir = inject('dataDir')

interface Row { seq: number, hash: string, previousHash: string, [column: string]: unknown }
const rows = () => withDatabase(dataDir, db => db.prepare('select * from log order by seq').all() as Row[])

describe('the change log', () => {
  it('has who, what, before and after of each change, newest first', async () => {
    const place = addWorkspace(dataDir, 'Log')
    const lead = await newcomer(url, dataDir, { place, role: 'lead' })
    const { id, name } = await makeRegion(lead, place, 'lake')
    await lead.get('regionChange', { params: { id }, body: { revision: 1, name: 'A better name' } })
    const { items, chainIntact } = await lead.get('logList', { params: { workspace: place.workspaceId } })
    expect(chainIntact).toBe(true)
    expect(items.map(e => [e.action, e.entityId])).toEqual([['region changed', id], ['region added', id]])
    expect(items[0]).toMatchObject({ before: { name }, after: { name: 'A better name' } })
    expect(items[0]!.actor).toBe((await lead.get('sessionRead')).user!.name)
  })

  it('is a chain that anybody can recompute: each hash covers the entry and the hash before it', () => {
    const all = rows()
    expect(all.length).toBeGreaterThan(10)
    let previous = '0'.repeat(64)
    for (const { seq, hash, ...entry } of all) {
      expect(entry.previousHash, `entry ${seq}`).toBe(previous)
      expect(createHash('sha256').update(canonicalize(entry)!).digest('hex'), `entry ${seq}`).toBe(hash)
      previous = hash
    }
  })

  it('cannot be changed in the database, and says so when somebody forced it', async () => {
    const place = addWorkspace(dataDir, 'Forced')
    const lead = await newcomer(url, dataDir, { place, role: 'lead' })
    await makeRegion(lead, place, 'lake')
    const chain = async () => (await lead.get('logList', { params: { workspace: place.workspaceId } })).chainIntact
    const last = rows().at(-1)!
    const trigger = withDatabase(dataDir, (db) => {
      expect(() => db.prepare('update log set actor = ? where seq = ?').run('Somebody else', last.seq)).toThrow(/immutable/)
      expect(() => db.prepare('delete from log where seq = ?').run(last.seq)).toThrow(/immutable/)
      return db.prepare('select sql from sqlite_master where name = ?').pluck().get('log_no_update') as string
    })
    const force = (actor: unknown) => withDatabase(dataDir, (db) => {
      db.exec('drop trigger log_no_update')
      db.prepare('update log set actor = ? where seq = ?').run(actor, last.seq)
      db.exec(trigger)
    })
    force('Somebody else')
    expect(await chain()).toBe(false)
    force(last.actor)
    expect(await chain()).toBe(true)
  })

  it('pages by sequence number', async () => {
    const place = addWorkspace(dataDir, 'Pages')
    const lead = await newcomer(url, dataDir, { place, role: 'lead' })
    for (let i = 0; i < 5; i++) await makeRegion(lead, place, 'lake')
    const params = { workspace: place.workspaceId }
    const first = await lead.get('logList', { params, query: { limit: 3 } })
    const second = await lead.get('logList', { params, query: { limit: 3, cursor: first.nextCursor! } })
    expect([...first.items, ...second.items].map(e => e.seq)).toEqual((await lead.get('logList', { params })).items.map(e => e.seq))
    expect(second.nextCursor).toBeNull()
  })
})
