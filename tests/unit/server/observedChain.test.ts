import { copyFileSync, readFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, beforeAll, describe, expect, it } from 'vitest'
import { parseObserved } from '#shared/observed/parse'
import { InputError } from '#shared/types/issue'
import { createObserved, loadObserved } from '../../../server/services/observed'
import { chainOfText } from '../../../server/services/chains'
import { readChainOfObserved } from '../../../server/services/observedChain'
import { sha256Hex } from '../../../server/services/hash'
import chain from '../../../server/workers/chain'
import { populate, temporaryContext } from '../../support/context'

// A cut of EOP 14 C04; see tests/fixtures/README.md.
const fixture = 'tests/fixtures/eop14c04_cut.txt'
const context = temporaryContext()
const workers = { calls: 0, compute: async (_: string, task: never) => (workers.calls++, chain(structuredClone(task))) }
Object.defineProperty(context, 'jobs', { value: workers })
const { workspaceId, people } = populate(context, ['lead', 'reader', 'administrator'])
let id = ''

beforeAll(async () => {
  const path = join(context.dataDir, 'upload')
  copyFileSync(fixture, path)
  const sent = readFileSync(fixture)
  const stored = await createObserved(context, people.lead, workspaceId, { path, name: 'eop14c04_cut.txt', type: 'text/plain', bytes: sent.length, sha256: sha256Hex(sent) },
    { name: 'C04', reason: '', source: 'test', licence: '', independence: '', leaveOutBadRows: false })
  id = stored.id
})
afterAll(() => context.dispose())

describe('a stored series of observed rotation', () => {
  it('loses nothing on the way, UT1 − TAI included', () => {
    const parsed = parseObserved(readFileSync(fixture, 'latin1'))
    const loaded = loadObserved(context, id)
    expect(parsed.ut1MinusTaiMs!.some(Number.isFinite)).toBe(true)
    for (const column of ['mjd', 'xMas', 'yMas', 'lodMs', 'sigmaXMas', 'sigmaYMas', 'sigmaLodMs', 'ut1MinusTaiMs'] as const) {
      expect(Array.from(loaded[column]!), column).toEqual(Array.from(parsed[column]!))
    }
    expect(loaded.chi1Mas).toBeUndefined()
  })
})

describe('its reduction', () => {
  it('gives every step of the usual chain, and is made once', async () => {
    const answer = await readChainOfObserved(context, people.reader, id, { points: 100 })
    expect(answer.steps.map(step => step.kind)).toEqual(['zonal-tides', 'excitation', 'background', 'seasons', 'monthly'])
    const tides = answer.steps[0]!.panels.find(({ quantity }) => quantity === 'lod')!
    const at = tides.before.mjd.indexOf(tides.after.mjd[0]!)
    expect(tides.before.value[at]! - tides.removed!.value[0]!).toBeCloseTo(tides.after.value[0]!, 12)
    const { calls } = workers
    await readChainOfObserved(context, people.reader, id, { points: 100 })
    expect(workers.calls).toBe(calls)
  })

  it('quotes no trend with only the tides under 35 days removed', async () => {
    const text = JSON.stringify({ schemaVersion: 1, from: null, to: null, includePredictions: false, steps: [{ kind: 'zonal-tides', on: true, set: 'under-35-days' }] })
    const answer = await readChainOfObserved(context, people.reader, id, { chain: text, points: 100 })
    expect(answer.trends.lod).toBeNull()
    expect(answer.noTrend).toEqual([{ quantity: 'lod', reason: expect.stringMatching(/18\.6-year/) as string }])
  })

  it('names what is wrong with a chain, from the address or from the worker', async () => {
    expect(() => chainOfText('{')).toThrow(InputError)
    await expect(readChainOfObserved(context, people.reader, id, { chain: '{"schemaVersion":1,"steps":[{"kind":"wash","on":true}]}', points: 100 })).rejects.toMatchObject({ issues: [{ path: 'steps/0', code: 'unknown-step' }] })
    const outside = JSON.stringify({ schemaVersion: 1, from: '1901-01-01', to: '1902-01-01', steps: [] })
    await expect(readChainOfObserved(context, people.reader, id, { chain: outside, points: 100 })).rejects.toBeInstanceOf(InputError)
  })

  it('is refused to those who may not read observations', async () => {
    await expect(readChainOfObserved(context, people.administrator, id, { points: 100 })).rejects.toMatchObject({ status: 403 })
    await expect(readChainOfObserved(context, null, id, { points: 100 })).rejects.toMatchObject({ status: 401 })
  })
})
