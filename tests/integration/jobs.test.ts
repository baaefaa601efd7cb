import { ulid } from 'ulid'
import { describe, expect, inject, it } from 'vitest'
import { Client, demo } from '../support/client'
import { startServer } from '../support/server'
import { addWorkspace, makeRegion, makeScenario, makeVersion, newcomer, runScenario, withDatabase } from '../support/world'

/** A second job with the input of one that was done, in a state that no worker has in hand. */
function copyJob(dataDir: string, of: string, state: 'waiting' | 'running'): string {
  const id = ulid()
  withDatabase(dataDir, db => db.prepare(
    'insert into job (id, workspaceId, kind, state, progress, input, createdAt, createdBy) select ?, workspaceId, kind, ?, 0, input, createdAt, createdBy from job where id = ?',
  ).run(id, state, of))
  return id
}

describe('a job', () => {
  it('that waits is cancelled, stores no run and stays cancelled', async () => {
    const dataDir = inject('dataDir')
    const place = addWorkspace(dataDir, 'Jobs')
    const lead = await newcomer(inject('url'), dataDir, { place, role: 'lead' })
    const region = await makeRegion(lead, place, 'lake')
    const version = await makeVersion(lead, region.id)
    const scenario = await makeScenario(lead, place, [{ regionId: region.id, versionId: version.id, scale: 1 }])
    const { jobId } = await runScenario(lead, scenario)
    const id = copyJob(dataDir, jobId, 'waiting')
    expect(await lead.get('jobCancel', { params: { id } })).toMatchObject({ state: 'cancelled', answer: null })
    expect(await lead.get('jobCancel', { params: { id } })).toMatchObject({ state: 'cancelled' })
    expect((await lead.get('scenarioRead', { params: { id: scenario.id } })).runs).toHaveLength(1)
    // One that is done stays done.
    expect(await lead.get('jobCancel', { params: { id: jobId } })).toMatchObject({ state: 'done' })
  })

  it('that a stopped server left half done is taken up again, with the same result to the digit', async () => {
    const first = await startServer()
    const lead = await demo(first.url, 'lead')
    const { workspaceId } = (await lead.get('sessionRead')).memberships[0]!
    const scenario = (await lead.get('scenarioList', { params: { workspace: workspaceId } })).items.find(s => s.latestRun)!
    const { jobId, runId } = await runScenario(lead, scenario)
    const before = await lead.get('runRead', { params: { id: runId } })
    await first.stop({ keepData: true })
    const left = copyJob(first.dataDir, jobId, 'running')

    const second = await startServer({}, first.dataDir)
    try {
      const again = new Client(second.url)
      again.cookie = lead.cookie
      await expect.poll(async () => (await again.get('jobRead', { params: { id: left } })).state, { timeout: 20_000 }).toBe('done')
      const job = await again.get('jobRead', { params: { id: left } })
      const after = await again.get('runRead', { params: { id: job.answer!.runId } })
      expect(after.n).toBe(before.n + 1)
      expect([after.inputSha256, after.resultSha256]).toEqual([before.inputSha256, before.resultSha256])
    }
    finally {
      await second.stop()
    }
  })
})
