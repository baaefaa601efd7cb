import { beforeAll, describe, expect, inject, it } from 'vitest'
import { signIn, type Client } from '../support/client'
import { addPerson, addWorkspace, square, type Place } from '../support/world'

// The regions of one file: stored together or not at all, and taken back together.

const url = inject('url')
const dataDir = inject('dataDir')
let place: Place
let lead: Client
let hydrologist: Client
const params = () => ({ workspace: place.workspaceId })
const names = async () => (await lead.get('regionList', { params: params() })).items.map(region => region.name).sort()
const item = (name: string, x: number, kind = 'basin', geometry: unknown = square(x, 10)) => ({ name, kind, geometry })

beforeAll(async () => {
  place = addWorkspace(dataDir, 'Batch')
  for (const role of ['lead', 'hydrologist'] as const) addPerson(dataDir, `${role}@batch.example`, { place, role })
  lead = await signIn(url, 'lead@batch.example')
  hydrologist = await signIn(url, 'hydrologist@batch.example')
})

describe('several regions at once', () => {
  it('are stored with an entry in the log each, and put in the bin together', async () => {
    const { items } = await lead.get('regionCreateMany', { params: params(), body: { agencyId: place.agencyId, regions: [item('One', 0), item('Two', 30), item('Three', 60, 'lake')] } })
    expect(items.map(({ name, revision }) => [name, revision])).toEqual([['One', 1], ['Two', 1], ['Three', 1]])
    expect(await names()).toEqual(['One', 'Three', 'Two'])
    const [one] = items
    const region = await lead.get('regionRead', { params: { id: one!.id } })
    expect(region.outline.areaKm2).toBeGreaterThan(0)

    const log = await lead.get('logList', { params: params() })
    expect(log.items.filter(entry => entry.action === 'region added').map(entry => entry.entityId).sort()).toEqual(items.map(({ id }) => id).sort())
    expect(log.chainIntact).toBe(true)

    await lead.refused('regionRemoveMany', 409, { params: params(), body: { regions: items.map(({ id, revision }, k) => ({ id, revision: revision + k })) } })
    expect(await names()).toHaveLength(3)
    await lead.get('regionRemoveMany', { params: params(), body: { regions: items.map(({ id, revision }) => ({ id, revision })) } })
    expect(await names()).toEqual([])
  })

  it('are refused whole where one does not hold, with its place in the list', async () => {
    const bowTie = { type: 'Polygon', coordinates: [[[0, 0], [1, 1], [1, 0], [0, 1], [0, 0]]] }
    const problem = await lead.refused('regionCreateMany', 422, { params: params(), body: { agencyId: place.agencyId, regions: [item('Good', 0), item('Crossed', 0, 'basin', bowTie)] } })
    expect(problem.detail).toContain('Nothing was stored. Region 2, “Crossed”')
    expect(problem.issues![0]!.path).toMatch(/^regions\/1\/geometry/)
    expect(await names()).toEqual([])
  })

  it('are refused whole where the role does not reach one of them', async () => {
    const problem = await hydrologist.refused('regionCreateMany', 403, { params: params(), body: { agencyId: place.agencyId, regions: [item('Water', 0), item('Ice', 30, 'ice-sector')] } })
    expect(problem.detail).toContain('Region 2')
    expect(await names()).toEqual([])
  })

  it('of another workspace cannot be put in the bin through one’s own', async () => {
    const foreign = addWorkspace(dataDir, 'Batch elsewhere')
    addPerson(dataDir, 'lead@elsewhere.batch.example', { place: foreign, role: 'lead' })
    const other = await signIn(url, 'lead@elsewhere.batch.example')
    const { items: [region] } = await lead.get('regionCreateMany', { params: params(), body: { agencyId: place.agencyId, regions: [item('Kept', 0)] } })
    await other.refused('regionRemoveMany', 404, { params: { workspace: foreign.workspaceId }, body: { regions: [{ id: region!.id, revision: 1 }] } })
    expect(await names()).toEqual(['Kept'])
  })
})
