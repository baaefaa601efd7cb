import { readFileSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import { beforeAll, describe, expect, inject, it } from 'vitest'
import type { Client } from '../support/client'
import { addWorkspace, makeObserved, newcomer, seriesFacts, type Place } from '../support/world'

// The fixtures are cuts of files of the International Earth Rotation and Reference Systems Service; see tests/fixtures/README.md.

const url = inject('url')
let place: Place
let lead: Client

beforeAll(async () => {
  place = addWorkspace(inject('dataDir'), 'Observed')
  lead = await newcomer(url, inject('dataDir'), { place, role: 'lead' })
})

const fixture = (name: string) => readFileSync(`tests/fixtures/${name}`)

describe('EOP 14 C04', () => {
  it('is recognised and read to the digit, days that are missing between included', async () => {
    const summary = await makeObserved(lead, place, fixture('eop14c04_cut.txt').toString('latin1'))
    expect(summary).toMatchObject({ format: 'eop14c04', has: { pole: true, lod: true }, predictedRows: 0, emptyRows: 0, canWrite: true })
    const read = await lead.get('observedRead', { params: { id: summary.id } })
    expect(read.mjd).toHaveLength(159)
    // First row: 1962 1 1 37665 −0.012700 0.213000 … 0.0017230, errors 0.030000 0.030000 … 0.0014000; last: 59912 0.149881 0.189736 … 0.0000128.
    expect([read.mjd[0], read.xMas[0], read.yMas[0], read.lodMs[0], read.sigmaXMas[0], read.sigmaLodMs[0]]).toEqual([37665, -12.7, 213, 1.723, 30, 1.4])
    expect([read.mjd[158], read.xMas[158], read.yMas[158], read.lodMs[158]]).toEqual([59912, 149.881, 189.736, 0.0128])
  })

  it('of sixty years is stored and read back whole', async () => {
    const started = performance.now()
    const summary = await makeObserved(lead, place, gunzipSync(fixture('eop14c04_1962_2022.txt.gz')).toString('latin1'))
    const seconds = (performance.now() - started) / 1000
    expect(summary.latest.count).toBe(22248)
    // Generous against a busy machine; `npm run bench` measures it against its limit of 1 s.
    expect(seconds).toBeLessThan(10)
    const read = await lead.get('observedRead', { params: { id: summary.id } })
    expect(read.mjd.at(-1)! - read.mjd[0]! + 1).toBe(22248)
    expect(read.lodMs.every(v => v !== null)).toBe(true)
  })
})

describe('finals2000A', () => {
  it('keeps predictions apart', async () => {
    const summary = await makeObserved(lead, place, fixture('finals2000A_excerpt.txt').toString('latin1'))
    expect(summary.format).toBe('finals2000a')
    const read = await lead.get('observedRead', { params: { id: summary.id } })
    expect(summary.predictedRows).toBeGreaterThanOrEqual(7)
    expect(read.predicted.map((flag, i) => flag ? i : -1).filter(i => i >= 0)).toEqual(Array.from({ length: summary.predictedRows }, (_, i) => read.mjd.length - summary.predictedRows + i))
  })
})

describe('a file that is none', () => {
  it('is answered with what was wrong, and nothing is stored', async () => {
    const before = (await lead.get('observedList', { params: { workspace: place.workspaceId } })).items.length
    for (const content of ['', 'Dear sirs, please find no data here.\n', 'mjd,x_mas,y_mas,lod_ms\n50000,1,2,three\n']) {
      const problem = await lead.refused('observedCreate', 422, { params: { workspace: place.workspaceId }, body: seriesFacts, file: { name: 'letter.txt', content } })
      expect(problem.detail.length).toBeGreaterThan(10)
    }
    expect((await lead.get('observedList', { params: { workspace: place.workspaceId } })).items.length).toBe(before)
  })

  it('is no file at all, or no multipart body', async () => {
    const path = `/api/v1/workspaces/${place.workspaceId}/observed`
    expect((await lead.send('POST', path, { body: seriesFacts })).status).toBe(415)
    const form = new FormData()
    form.set('options', JSON.stringify(seriesFacts))
    const answer = await fetch(`${url}${path}`, { method: 'POST', body: form, headers: { cookie: lead.cookie } })
    expect(answer.status).toBe(422)
  })
})
