import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
import { createFluid, listFluids } from '../../../server/services/angularMomentum'
import { newId } from '../../../server/services/change'
import { sha256Hex } from '../../../server/services/hash'
import { binObserved, createObserved, listObserved } from '../../../server/services/observed'
import { readChainOfObserved } from '../../../server/services/observedChain'
import chain from '../../../server/workers/chain'
import type { AngularMomentumFields } from '#shared/observed/angularMomentumTypes'
import { populate, temporaryContext } from '../../support/context'

const context = temporaryContext()
Object.defineProperty(context, 'jobs', { value: { compute: async (_: string, task: never) => chain(structuredClone(task)) } })
const { workspaceId, people } = populate(context, ['lead', 'reader'])
const elsewhere = populate(context, ['lead'], 'Elsewhere')
afterAll(() => context.dispose())

const days = Array.from({ length: 400 }, (_, i) => 55197 + i)
function upload(text: string) {
  const path = join(context.dataDir, newId())
  writeFileSync(path, text)
  return { path, name: 'file.txt', type: 'text/plain', bytes: text.length, sha256: sha256Hex(text) }
}
const fields: AngularMomentumFields = { component: 'atmosphere', model: 'invented', pairedWith: null, invertedBarometer: 'yes', coefficients: 'gross-2007', subtracted: '', barystatic: 'no' }
/** χ₃ of the motion term that is a wave of 0.2 ms in the length of day. */
const wave = (t: number) => 0.2 * Math.sin(2 * Math.PI * t / 90)
const air = () => days.map((t) => {
  const date = new Date(Date.UTC(1858, 10, 17) + t * 86400000)
  return `${date.getUTCFullYear()} ${date.getUTCMonth() + 1} ${date.getUTCDate()} 0 ${t}.0 0 0 0 0 0 ${(wave(t) / 1000 / 86400).toExponential(9)}`
}).join('\n')
const rotation = () => `mjd,lod_ms\n${days.map(t => `${t},${(1 + wave(t)).toFixed(9)}`).join('\n')}\n`
const body = { name: 'Air', source: 'test', licence: '', fields, leaveOutBadRows: false }

describe('a series of angular momentum', () => {
  it('is stored with its answers, and a chain subtracts it to the digit', async () => {
    const fluid = await createFluid(context, people.lead, workspaceId, upload(`${air()}\n`), body)
    expect(fluid).toMatchObject({ name: 'Air', fields, stepDays: 1, latest: { count: 400, firstMjd: 55197 } })
    const { id } = await createObserved(context, people.lead, workspaceId, upload(rotation()), { name: 'Day', reason: '', source: 'test', licence: '', independence: '', leaveOutBadRows: false })
    const text = (correction: string) => JSON.stringify({ schemaVersion: 1, from: null, to: null, includePredictions: false, steps: [{ kind: 'angular-momentum', on: true, correction, mass: true, motion: true, trend: true }] })
    const reduced = await readChainOfObserved(context, people.reader, id, { chain: text(fluid.id), points: 5000 })
    const left = reduced.after.lod!.value
    expect(Math.max(...left.map(v => v!)) - Math.min(...left.map(v => v!))).toBeLessThan(1e-6)
    expect(reduced.steps[0]!.sentence).toContain('“Air” (atmosphere)')

    // Neither an observed series to compare with, nor to be had from another workspace, nor from the bin.
    expect(listObserved(context, people.lead, workspaceId, { limit: 10 }).items.map(item => item.name)).toEqual(['Day'])
    expect(listFluids(context, elsewhere.people.lead, elsewhere.workspaceId).items).toEqual([])
    binObserved(context, people.lead, fluid.id, fluid.revision)
    expect(listFluids(context, people.reader, workspaceId).items).toEqual([])
    await expect(readChainOfObserved(context, people.reader, id, { chain: text(fluid.id), points: 5000 })).rejects.toMatchObject({ issues: [{ code: 'no-series' }] })
    binObserved(context, people.lead, fluid.id, fluid.revision + 1, true)
    expect(listFluids(context, people.reader, workspaceId).items).toMatchObject([{ name: 'Air', canWrite: false }])
  })

  it('is refused with its bad rows, and to those who may not write', async () => {
    const bad = `${air()}\n2011 2 5 0 55597.0 0 0 zero 0 0 0\n`
    await expect(createFluid(context, people.lead, workspaceId, upload(bad), body)).rejects.toMatchObject({ issues: [{ row: 401 }] })
    await expect(createFluid(context, people.reader, workspaceId, upload(air()), body)).rejects.toMatchObject({ status: 403 })
    expect(() => listFluids(context, null, workspaceId)).toThrow()
  })
})
