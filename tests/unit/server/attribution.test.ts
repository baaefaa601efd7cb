import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { computeRun } from '#shared/earth/time/run'
import { schema } from '../../../server/database/client'
import { attributionOfRun } from '../../../server/services/attribution'
import { newId } from '../../../server/services/change'
import { sha256Hex } from '../../../server/services/hash'
import { storeRun } from '../../../server/services/runStore'
import { createObserved } from '../../../server/services/observed'
import attribution from '../../../server/workers/attribution'
import { populate, temporaryContext } from '../../support/context'
import { box, everyMonth, region, runInput } from '../time/runFixtures'

const context = temporaryContext()
const workers = { calls: 0, compute: async (_: string, task: never) => (workers.calls++, attribution(structuredClone(task))) }
Object.defineProperty(context, 'jobs', { value: workers })
const here = populate(context, ['lead', 'reader', 'administrator'])
const elsewhere = populate(context, ['lead'], 'Elsewhere')
const { lead, reader, administrator } = here.people
let runId = ''
let observed = ''
let foreign = ''

async function store(place: typeof here | typeof elsewhere): Promise<string> {
  const rows = Array.from({ length: 1900 }, (_, i) => `${52300 + i},${(40 * Math.cos(i / 69)).toFixed(3)},${(300 - 40 * Math.sin(i / 69)).toFixed(3)},${(0.8 + 0.2 * Math.sin(i / 58)).toFixed(5)}`)
  const path = join(context.dataDir, newId())
  const text = `mjd,x_mas,y_mas,lod_ms\n${rows.join('\n')}\n`
  writeFileSync(path, text)
  const { id } = await createObserved(context, place.people.lead, place.workspaceId, { path, name: 'eop.csv', type: 'text/csv', bytes: text.length, sha256: sha256Hex(text) },
    { name: 'Made', reason: '', source: 'test', licence: '', independence: '', leaveOutBadRows: false })
  return id
}

beforeAll(async () => {
  const [regionId, seriesId, scenarioId] = [newId(), newId(), newId()]
  const made = { createdAt: context.now(), createdBy: lead.userId }
  context.db.insert(schema.region).values({ id: regionId, workspaceId: here.workspaceId, agencyId: here.agencyId, kind: 'ice-sector', name: 'A', note: '', ...made }).run()
  context.db.insert(schema.series).values({ id: seriesId, workspaceId: here.workspaceId, regionId, quantity: 'mass', name: 'A', ...made }).run()
  const input = runInput([region('r1', box(-50, 65, -40, 75), -200, { seriesSha256: 'a'.repeat(64) }), region('r2', box(70, 25, 80, 32), -40, { seriesSha256: 'b'.repeat(64) })])
  const result = computeRun({ ...input, regions: input.regions.map(r => ({ ...r, series: { ...r.series, mjd: everyMonth(61) } })) }, context.earth)
  context.db.insert(schema.original).values({ sha256: 'c'.repeat(64), bytes: 1, type: 'text/csv', createdAt: context.now() }).run()
  context.db.insert(schema.seriesVersion).values({
    id: newId(), seriesId, n: 1, originalSha256: 'c'.repeat(64), originalName: 'a.csv', dataSha256: 'a'.repeat(64), recipe: '{}', reason: '', source: 'radar', licence: '',
    independence: 'Adjusted to the observed polar motion', firstMjd: 52300, lastMjd: 54100, count: 61, ...made,
  }).run()
  context.db.insert(schema.scenario).values({ id: scenarioId, workspaceId: here.workspaceId, name: 'S', draft: '{}', ...made }).run()
  runId = storeRun(context, here.workspaceId, { scenarioId, name: 'S', actor: { id: lead.userId, name: lead.name }, input }, result)
  observed = await store(here)
  foreign = await store(elsewhere)
})
afterAll(() => context.dispose())

describe('a stored run attributed to a stored series', () => {
  it('answers with every part, once for the same question', async () => {
    const report = await attributionOfRun(context, reader, runId, { observed, prior: 0.5 })
    expect(report.budget.rows.map(row => row.key)).toEqual(['r1', 'r2'])
    expect(Object.keys(report.compared)).toEqual(['lod', 'chi1', 'chi2'])
    expect(report.forward.stretches.length).toBeGreaterThan(0)
    const { calls } = workers
    await attributionOfRun(context, reader, runId, { observed, prior: 0.5 })
    expect(workers.calls).toBe(calls)
    const wider = await attributionOfRun(context, reader, runId, { observed, prior: 2 })
    expect(wider.scaling.interannual.scaling!.factors[0]!.prior.sigma).toBe(2)
  })

  it('warns by the note on the very version that the run froze, and of no other region', async () => {
    const { circularity } = await attributionOfRun(context, reader, runId, { observed, prior: 0.5 })
    expect(circularity).toMatchObject([{ code: 'circular-pole', regions: ['r1'] }])
  })

  it('keeps to its workspace and to those who may read', async () => {
    await expect(attributionOfRun(context, lead, runId, { observed: foreign, prior: 0.5 })).rejects.toMatchObject({ status: 404 })
    await expect(attributionOfRun(context, administrator, runId, { observed, prior: 0.5 })).rejects.toMatchObject({ status: 403 })
    await expect(attributionOfRun(context, elsewhere.people.lead, runId, { observed, prior: 0.5 })).rejects.toMatchObject({ status: 404 })
    await expect(attributionOfRun(context, null, runId, { observed, prior: 0.5 })).rejects.toMatchObject({ status: 401 })
  })

  it('names what is wrong with a chain', async () => {
    await expect(attributionOfRun(context, lead, runId, { observed, prior: 0.5, chain: '{"schemaVersion":2}' })).rejects.toMatchObject({ issues: [{ path: 'schemaVersion' }, {}] })
  })
})
