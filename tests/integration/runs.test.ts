import { createHash } from 'node:crypto'
import canonicalize from 'canonicalize'
import { beforeAll, describe, expect, inject, it } from 'vitest'
import type { ScenarioDraft } from '#shared/api/schemas'
import type { Client } from '../support/client'
import { addWorkspace, draftOf, makeObserved, makeRegion, makeScenario, makeVersion, monthlyCsv, newcomer, orientationCsv, runScenario, square, withDatabase, type Place } from '../support/world'

const url = inject('url')
const dataDir = inject('dataDir')
let place: Place
let lead: Client
let regions: { regionId: string, versionId: string, scale: number }[]

beforeAll(async () => {
  place = addWorkspace(dataDir, 'Runs')
  lead = await newcomer(url, dataDir, { place, role: 'lead' })
  const aquifer = await makeRegion(lead, place, 'aquifer', square(77, 29))
  const ice = await makeRegion(lead, place, 'ice-sector', square(-40, 72, 3))
  const versions = [await makeVersion(lead, aquifer.id, monthlyCsv(8, -24)), await makeVersion(lead, ice.id, monthlyCsv(8, -200, 40))]
  regions = [{ regionId: aquifer.id, versionId: versions[0]!.id, scale: 1 }, { regionId: ice.id, versionId: versions[1]!.id, scale: 1 }]
})

describe('a run', () => {
  it('is a job that tells its state by events and by polling', async () => {
    const scenario = await makeScenario(lead, place, regions)
    const job = await lead.get('runCreate', { params: { id: scenario.id }, body: { revision: 1 } })
    expect(job.state).toMatch(/waiting|running/)
    const events = await fetch(`${url}/api/v1/jobs/${job.id}/events`, { headers: { cookie: lead.cookie } })
    expect(events.headers.get('content-type')).toContain('text/event-stream')
    // The stream ends by itself when the job has.
    const states = [...(await events.text()).matchAll(/^data: (.*)$/gm)].map(match => JSON.parse(match[1]!) as { state: string, answer: { runId: string } | null })
    expect(states.at(-1)).toMatchObject({ state: 'done' })
    const polled = await lead.get('jobRead', { params: { id: job.id } })
    expect(polled).toMatchObject({ state: 'done', progress: 1, answer: states.at(-1)!.answer, problem: null })
    expect((await lead.get('runRead', { params: { id: polled.answer!.runId } })).scenarioId).toBe(scenario.id)
  })

  it('of the same input gives the same hashes; of other settings others', async () => {
    const scenario = await makeScenario(lead, place, regions)
    const first = await lead.get('runRead', { params: { id: (await runScenario(lead, scenario)).runId } })
    const again = await lead.get('runRead', { params: { id: (await runScenario(lead, scenario)).runId } })
    const twin = await lead.get('runRead', { params: { id: (await runScenario(lead, await makeScenario(lead, place, regions))).runId } })
    expect([again.n, again.inputSha256, again.resultSha256]).toEqual([2, first.inputSha256, first.resultSha256])
    expect([twin.n, twin.inputSha256, twin.resultSha256]).toEqual([1, first.inputSha256, first.resultSha256])

    const changed = await lead.get('scenarioChange', { params: { id: scenario.id }, body: { revision: 1, draft: draftOf([{ ...regions[0]!, scale: 2 }, regions[1]!]) } })
    const third = await lead.get('runRead', { params: { id: (await runScenario(lead, changed)).runId } })
    expect(third.inputSha256).not.toBe(first.inputSha256)
    const rate = (run: typeof first, i: number) => run.result.regions[i]!.lodMicrosecondsPerYear!.value
    expect(rate(third, 0) / rate(first, 0)).toBeCloseTo(2, 9)
    expect(rate(third, 1)).toBe(rate(first, 1))
  })

  it('can be checked from its file: both hashes are those of the canonical JSON inside', async () => {
    const { runId } = await runScenario(lead, await makeScenario(lead, place, regions))
    const file = JSON.parse((await lead.call('runFile', { params: { id: runId, file: 'run.json' } })).text) as { input: unknown, result: unknown, run: { inputSha256: string, resultSha256: string } }
    const hash = (value: unknown) => createHash('sha256').update(canonicalize(value)!).digest('hex')
    expect(hash(file.input)).toBe(file.run.inputSha256)
    expect(hash(file.result)).toBe(file.run.resultSha256)
    expect(JSON.stringify(file.input)).not.toMatch(/createdAt|@|walk/)
  })

  it('never changes: the database itself refuses', async () => {
    const { runId } = await runScenario(lead, await makeScenario(lead, place, regions))
    withDatabase(dataDir, (db) => {
      expect(() => db.prepare('update run set name = ? where id = ?').run('Another', runId)).toThrow(/immutable/)
      expect(() => db.prepare('delete from run where id = ?').run(runId)).toThrow(/immutable/)
      const version = regions[0]!.versionId
      expect(() => db.prepare('update series_data set value = zeroblob(8) where versionId = ?').run(version)).toThrow(/immutable/)
    })
  })

  it('stands still when its region and series change afterwards', async () => {
    const scenario = await makeScenario(lead, place, regions)
    const { runId } = await runScenario(lead, scenario)
    const before = await lead.get('runRead', { params: { id: runId } })
    await makeVersion(lead, regions[0]!.regionId, monthlyCsv(8, 50))
    const { revision } = await lead.get('regionRead', { params: { id: regions[0]!.regionId } })
    await lead.get('regionChange', { params: { id: regions[0]!.regionId }, body: { revision, geometry: square(70, 20) } })
    expect(await lead.get('runRead', { params: { id: runId } })).toEqual(before)
    const { revision: next } = await lead.get('regionRead', { params: { id: regions[0]!.regionId } })
    await lead.get('regionChange', { params: { id: regions[0]!.regionId }, body: { revision: next, geometry: square(77, 29) } })
  })

  it('of a scenario that somebody changed meanwhile is refused', async () => {
    const scenario = await makeScenario(lead, place, regions)
    await lead.get('scenarioChange', { params: { id: scenario.id }, body: { revision: 1, name: 'Moved on' } })
    await lead.refused('runCreate', 409, { params: { id: scenario.id }, body: { revision: 1 } })
  })

  it('needs at least one region that is switched on', async () => {
    await lead.refused('runCreate', 422, { params: { id: (await makeScenario(lead, place, [])).id }, body: { revision: 1 } })
    await lead.refused('runCreate', 422, { params: { id: (await makeScenario(lead, place, regions.map(r => ({ ...r, scale: 0 })))).id }, body: { revision: 1 } })
  })

  it('has a total that its regions add up to', async () => {
    const { runId } = await runScenario(lead, await makeScenario(lead, place, regions))
    const { result } = await lead.get('runRead', { params: { id: runId } })
    for (const key of ['massGtPerYear', 'lodMicrosecondsPerYear', 'chi1MasPerYear', 'chi2MasPerYear', 'barystaticMmPerYear'] as const) {
      const sum = result.regions.reduce((total, row) => total + row[key]!.value, 0)
      expect(result.total[key]!.value / sum, key).toBeCloseTo(1, 9)
    }
    expect(Math.abs(result.total.massGtPerYear!.value + 224)).toBeLessThan(1)
    expect(result.regions.reduce((total, row) => total + row.shareOfModelLod!, 0)).toBeCloseTo(1, 9)
  })
})

describe('a scenario', () => {
  it('that names regions, versions or series of others is refused with each', async () => {
    const elsewhere = addWorkspace(dataDir, 'Elsewhere')
    const other = await newcomer(url, dataDir, { place: elsewhere, role: 'lead' })
    const theirs = await makeRegion(other, elsewhere, 'lake')
    const version = await makeVersion(other, theirs.id)
    const observed = await makeObserved(other, elsewhere, orientationCsv(40))
    const draft = draftOf([{ regionId: theirs.id, versionId: version.id, scale: 1 }, { ...regions[0]!, versionId: regions[1]!.versionId }, regions[0]!], { observedId: observed.id })
    const problem = await lead.refused('scenarioCreate', 422, { params: { workspace: place.workspaceId }, body: { name: 'Theirs', draft } })
    expect(problem.issues!.map(i => i.path).sort()).toEqual(['draft/observedId', 'draft/regions/0/regionId', 'draft/regions/1/versionId', 'draft/regions/2/regionId'])
  })

  it('reports overlaps before any sum', async () => {
    const other = await makeRegion(lead, place, 'basin', square(78, 29))
    const version = await makeVersion(lead, other.id)
    const scenario = await makeScenario(lead, place, [...regions, { regionId: other.id, versionId: version.id, scale: 1 }])
    const { overlaps } = await lead.get('scenarioRead', { params: { id: scenario.id } })
    expect(overlaps).toHaveLength(1)
    expect([overlaps[0]!.a, overlaps[0]!.b].sort()).toEqual([regions[0]!.regionId, other.id].sort())
    expect(overlaps[0]).toMatchObject({ settled: null, onGroundGtPerYear: { a: { value: expect.any(Number) as number }, b: { value: expect.any(Number) as number } } })
    const problem = await lead.refused('runCreate', 422, { params: { id: scenario.id }, body: { revision: scenario.revision } })
    expect(problem.issues).toEqual([expect.objectContaining({ path: 'draft/overlaps', code: 'overlap-unsettled' })])

    const { a, b } = overlaps[0]!
    const settle = (choice: Partial<NonNullable<ScenarioDraft['overlaps']>[number]>) => ({ ...scenario.draft, overlaps: [{ a, b, choice: 'keep' as const, from: null, reason: '', ...choice }] })
    const unreasoned = await lead.refused('scenarioChange', 422, { params: { id: scenario.id }, body: { revision: 1, draft: settle({}) } })
    expect(unreasoned.issues![0]!.path).toBe('draft/overlaps/0/reason')
    await lead.refused('scenarioChange', 422, { params: { id: scenario.id }, body: { revision: 1, draft: settle({ choice: 'subtract' }) } })

    const kept = await lead.get('scenarioChange', { params: { id: scenario.id }, body: { revision: 1, draft: settle({ reason: 'Groundwater and surface water.' }) } })
    const both = (await lead.get('runRead', { params: { id: (await runScenario(lead, kept)).runId } })).result
    expect(both.overlaps[0]).toMatchObject({ settled: { choice: 'keep', reason: 'Groundwater and surface water.' } })
    const less = await lead.get('scenarioChange', { params: { id: scenario.id }, body: { revision: 2, draft: settle({ choice: 'subtract', from: a }) } })
    const once = (await lead.get('runRead', { params: { id: (await runScenario(lead, less)).runId } })).result
    expect(once.overlaps[0]).toMatchObject({ settled: { choice: 'subtract' } })
    // Half of each square is common ground: half of what the other square holds is taken off.
    const taken = once.regions.find(row => row.takenFrom)!
    const giver = once.regions.find(row => row.key === taken.keptFrom)!
    expect(taken.massGtPerYear!.value / giver.massGtPerYear!.value).toBeCloseTo(-0.5, 6)
    expect(once.total.massGtPerYear!.value).toBeCloseTo(both.total.massGtPerYear!.value + taken.massGtPerYear!.value, 9)
  })
})

describe('a comparison', () => {
  it('sets observed, model and residual side by side over the months that both have', async () => {
    const observed = await makeObserved(lead, place, orientationCsv(2500))
    const { runId } = await runScenario(lead, await makeScenario(lead, place, regions))
    const comparison = await lead.get('runComparison', { params: { id: runId }, query: { observed: observed.id } })
    expect(comparison.lod!.observed.length).toBe(comparison.epochsMjd.length)
    // 2500 days from 1 January 2004 hold 82 whole months.
    expect(comparison.epochsMjd.length).toBeGreaterThanOrEqual(81)
    expect(comparison.epochsMjd.length).toBeLessThanOrEqual(83)
    comparison.lod!.observed.forEach((value, i) => {
      if (value !== null) expect(comparison.lod!.residual[i]).toBeCloseTo(value - comparison.lod!.model[i]!, 9)
    })
    expect(comparison.notRemoved.length).toBeGreaterThan(0)
  })
})

describe('an idempotency key', () => {
  it('makes a repeated request once', async () => {
    const body = { name: 'Once', draft: draftOf(regions) }
    const call = { params: { workspace: place.workspaceId }, body, headers: { 'idempotency-key': 'once-and-for-all' } }
    const first = await lead.get('scenarioCreate', call)
    const again = await lead.get('scenarioCreate', call)
    expect(again).toEqual(first)
    const { items } = await lead.get('scenarioList', { params: { workspace: place.workspaceId } })
    expect(items.filter(s => s.name === 'Once')).toHaveLength(1)
    await lead.refused('scenarioCreate', 422, { ...call, body: { ...body, name: 'Twice' } })
  })

  it('of another person is another key', async () => {
    const hydrologist = await newcomer(url, dataDir, { place, role: 'hydrologist' })
    const call = { params: { workspace: place.workspaceId }, body: { name: 'Shared key', draft: draftOf(regions) }, headers: { 'idempotency-key': 'shared' } }
    expect((await hydrologist.get('scenarioCreate', call)).id).not.toBe((await lead.get('scenarioCreate', call)).id)
  })
})
