import { beforeAll, describe, expect, inject, it } from 'vitest'
import type { Position } from '#shared/types/domain'
import { demo, type Client } from '../support/client'
import { addWorkspace, makeRegion, makeVersion, newcomer, square, type Place } from '../support/world'

const url = inject('url')
let place: Place
let lead: Client

beforeAll(async () => {
  place = addWorkspace(inject('dataDir'), 'Regions')
  lead = await newcomer(url, inject('dataDir'), { place, role: 'lead' })
})

const create = (geometry: unknown, more: object = {}) => ({ params: { workspace: place.workspaceId }, body: { name: 'Refused', kind: 'basin', agencyId: place.agencyId, geometry, ...more } })

describe('a region', () => {
  it('is stored with its ellipsoidal area and found again as it was sent', async () => {
    const geometry = square(20, 30)
    const region = await makeRegion(lead, place, 'basin', geometry)
    // Closed form for parallels and meridians on WGS 84 (Snyder 1987, eq. 3-12): 42 780.78773 km².
    expect(region.outline.areaKm2).toBeCloseTo(42_780.788, 2)
    expect(region.outline.centroid[0]).toBeCloseTo(20, 9)
    expect(region.outline.centroid[1]).toBeCloseTo(30, 1)
    expect(region).toMatchObject({ revision: 1, kind: 'basin', geometry, series: null, trend: null, canWrite: true, agency: { id: place.agencyId } })
    const read = await lead.get('regionRead', { params: { id: region.id } })
    expect(read).toMatchObject({ geometry, outlines: [{ n: 1, sha256: region.outline.sha256 }], versions: [], overlaps: [] })
    expect(Math.abs(read.perGt.lodMicroseconds)).toBeLessThan(0.0254)
  })

  it('is changed by who saw its latest revision, and by nobody else', async () => {
    const { id } = await makeRegion(lead, place, 'lake')
    const second = await lead.get('regionChange', { params: { id }, body: { revision: 1, name: 'Renamed lake', note: 'with a note' } })
    expect(second).toMatchObject({ revision: 2, name: 'Renamed lake', note: 'with a note' })
    const problem = await lead.refused('regionChange', 409, { params: { id }, body: { revision: 1, name: 'Too late' } })
    expect(problem).toMatchObject({ code: 'revision' })
    expect(problem.detail).toMatch(/revision 2, you had 1/)
    await lead.refused('regionRemove', 409, { params: { id }, query: { revision: 1 } })
    expect((await lead.get('regionRead', { params: { id } })).name).toBe('Renamed lake')
  })

  it('takes the revision from If-Match too, and gives it as ETag', async () => {
    const { id } = await makeRegion(lead, place, 'lake')
    const answer = await lead.call('regionChange', { params: { id }, body: { note: 'by tag' }, headers: { 'if-match': '"1"' } })
    expect(answer.status).toBe(200)
    expect(answer.headers.get('etag')).toBe('"2"')
    await lead.refused('regionChange', 409, { params: { id }, body: { note: 'stale' }, headers: { 'if-match': '"1"' } })
    await lead.refused('regionChange', 422, { params: { id }, body: { note: 'no revision at all' } })
  })

  it('keeps every outline it had', async () => {
    const { id, outline } = await makeRegion(lead, place, 'aquifer')
    await lead.get('regionChange', { params: { id }, body: { revision: 1, geometry: square(21, 31) } })
    const { outlines, geometry } = await lead.get('regionRead', { params: { id } })
    expect(outlines.map(o => o.n)).toEqual([2, 1])
    expect(outlines[1]!.sha256).toBe(outline.sha256)
    expect(geometry).toEqual(square(21, 31))
  })

  it('goes to the bin and comes back', async () => {
    const { id } = await makeRegion(lead, place, 'aquifer')
    const { revision } = await lead.get('regionRemove', { params: { id }, query: { revision: 1 } })
    await lead.refused('regionRead', 404, { params: { id } })
    expect((await lead.get('regionList', { params: { workspace: place.workspaceId } })).items.map(r => r.id)).not.toContain(id)
    await lead.get('regionRestore', { params: { id }, body: { revision } })
    expect((await lead.get('regionRead', { params: { id } })).id).toBe(id)
  })

  it('that shares ground with another says so, with the area', async () => {
    const here = await makeRegion(lead, place, 'basin', square(-60, -10))
    const other = await makeRegion(lead, place, 'basin', square(-59, -10))
    const { overlaps } = await lead.get('regionRead', { params: { id: here.id } })
    expect(overlaps).toEqual([expect.objectContaining({ id: other.id, name: other.name })])
    expect(overlaps[0]!.areaKm2 / here.outline.areaKm2).toBeCloseTo(0.5, 3)
  })

  it('of an agency elsewhere is refused', async () => {
    const elsewhere = addWorkspace(inject('dataDir'), 'Elsewhere')
    const problem = await lead.refused('regionCreate', 422, create(square(0, 0), { agencyId: elsewhere.agencyId }))
    expect(problem.issues).toEqual([expect.objectContaining({ path: 'agencyId' })])
  })
})

describe('outlines that do not hold are answered with what and where', () => {
  const ring = (...points: Position[]) => ({ type: 'Polygon', coordinates: [[...points, points[0]!]] })

  it.each([
    ['crosses itself', ring([0, 0], [10, 10], [10, 0], [0, 10]), /self-crossing/, /coordinates\/0/],
    ['has a latitude over 90', ring([0, 80], [10, 91], [20, 80]), /latitude/, /coordinates\/0\/1/],
    ['is empty', { type: 'Polygon', coordinates: [] }, /./, /coordinates/],
    ['has a ring of two places', { type: 'Polygon', coordinates: [[[0, 0], [1, 1], [0, 0]]] }, /./, /coordinates\/0/],
    ['is not closed', { type: 'Polygon', coordinates: [[[0, 0], [1, 0], [1, 1], [0, 1]]] }, /./, /coordinates\/0/],
    ['has text for a number', { type: 'Polygon', coordinates: [[[0, 0], ['1', 0], [1, 1], [0, 0]]] }, /./, /coordinates\/0\/1/],
    ['encloses nothing', ring([0, 0], [1, 1], [2, 2]), /./, /coordinates\/0/],
    ['is a point', { type: 'Point', coordinates: [0, 0] }, /./, /geometry\/type|type/],
    ['is not GeoJSON', { shape: 'round' }, /./, /geometry/],
  ])('%s', async (_, geometry, code, path) => {
    const problem = await lead.refused('regionCreate', 422, create(geometry))
    const issue = problem.issues!.find(i => path.test(i.path ?? ''))
    expect(issue, JSON.stringify(problem)).toBeDefined()
    expect(issue!.code).toMatch(code)
    expect(issue!.message.length).toBeGreaterThan(10)
  })

  it('has more than 200 000 vertices', async () => {
    const points = Array.from({ length: 200_001 }, (_, i): Position => [Number((20 + 5 * Math.cos(i / 31831)).toFixed(6)), Number((5 * Math.sin(i / 31831)).toFixed(6))])
    const problem = await lead.refused('regionCreate', 413, create({ type: 'Polygon', coordinates: [[...points, points[0]!]] }))
    expect(problem.detail).toMatch(/200.?000/)
  })

  it('nothing of them was stored', async () => {
    const { items } = await lead.get('regionList', { params: { workspace: place.workspaceId } })
    expect(items.filter(r => r.name === 'Refused')).toEqual([])
  })
})

describe('the list', () => {
  it('comes in pages that hold everything once', async () => {
    const params = { workspace: place.workspaceId }
    const all = (await lead.get('regionList', { params })).items.map(r => r.id)
    const paged: string[] = []
    let cursor: string | null = null
    do {
      const page: { items: { id: string }[], nextCursor: string | null } = await lead.get('regionList', { params, query: { limit: 3, cursor: cursor ?? undefined } })
      expect(page.items.length).toBeLessThanOrEqual(3)
      paged.push(...page.items.map(r => r.id))
      cursor = page.nextCursor
    } while (cursor)
    expect(paged).toEqual(all)
    expect(all.length).toBeGreaterThan(4)
  })

  it('of the demo says of each region whether the person may write it', async () => {
    const hydrologist = await demo(url, 'hydrologist')
    const { memberships } = await hydrologist.get('sessionRead')
    const { items } = await hydrologist.get('regionList', { params: { workspace: memberships[0]!.workspaceId } })
    for (const region of items) expect(region.canWrite, region.name).toBe(region.kind !== 'ice-sector' && region.kind !== 'glacier-region')
    expect(items.length).toBe(6)
  })
})

describe('the months of the regions', () => {
  it('follow the series, with a gap where it has one and nothing for a region without', async () => {
    const own = addWorkspace(inject('dataDir'), 'Months')
    const client = await newcomer(url, inject('dataDir'), { place: own, role: 'lead' })
    const [{ id }] = [await makeRegion(client, own, 'basin', square(20, 30)), await makeRegion(client, own, 'lake', square(40, 30))]
    // A tenth of a gigatonne lost each day: between the middles of two months the mass falls by the days between them.
    const rows = Array.from({ length: 36 }, (_, i) => Date.UTC(2004, i, 15)).filter(time => time < Date.UTC(2005, 2, 1) || time > Date.UTC(2005, 8, 1))
      .map(time => `${new Date(time).toISOString().slice(0, 10)},${(-0.1 * (time - Date.UTC(2004, 0, 1)) / 864e5).toFixed(4)},1.0`)
    await makeVersion(client, id, `date,mass (Gt),sigma (Gt)\n${rows.join('\n')}\n`)
    const { months, regions, maxGapDays } = await client.get('regionMonths', { params: { workspace: own.workspaceId } })
    expect(maxGapDays).toBe(62)
    // The middle of December 2006 lies after the last epoch: nothing is carried beyond the data.
    expect([months[0], months.at(-1), months.length, regions.length, regions[0]!.id]).toEqual(['2004-01', '2006-11', 35, 1, id])
    const { massGt } = regions[0]!
    expect(months.filter((_, i) => massGt[i] === null)).toEqual(['2005-03', '2005-04', '2005-05', '2005-06', '2005-07', '2005-08'])
    // June to July 2004: the middles are 30 and 31 days long months apart, 30.5 days.
    expect(massGt[6]! - massGt[5]!).toBeCloseTo(-3.05, 9)
    expect(massGt.reduce<number>((sum, value) => sum + (value ?? 0), 0)).toBeCloseTo(0, 9)
  })
})
