import { writeFileSync } from 'node:fs'
import { join } from 'node:path'
import { afterAll, describe, expect, it } from 'vitest'
import type { Chain } from '#shared/observed/chainTypes'
import { defaultChain, titleOfChain } from '#shared/observed/readChain'
import { computeRun } from '#shared/earth/time/run'
import { schema } from '../../../server/database/client'
import { binChain, changeChain, createChain, listChains, namedChain } from '../../../server/services/chains'
import { newId } from '../../../server/services/change'
import { compareWith, readComparison } from '../../../server/services/comparisons'
import { sha256Hex } from '../../../server/services/hash'
import { storeRun } from '../../../server/services/runStore'
import { createObserved } from '../../../server/services/observed'
import { runRow } from '../../../server/services/runs'
import comparison from '../../../server/workers/comparison'
import { populate, temporaryContext } from '../../support/context'
import { box, everyMonth, region, runInput } from '../time/runFixtures'

const context = temporaryContext()
Object.defineProperty(context, 'jobs', { value: { compute: async (_: string, task: never) => comparison(structuredClone(task)) } })
const { workspaceId, people } = populate(context, ['lead', 'reader', 'administrator'])
const elsewhere = populate(context, ['lead'], 'Elsewhere')
afterAll(() => context.dispose())

const unseasoned: Chain = { ...defaultChain(), steps: defaultChain().steps.map(step => step.kind === 'seasons' ? { ...step, on: true } : step) }
const asBody = (chain: Chain) => structuredClone(chain) as unknown as Record<string, unknown>

describe('a chain that is kept under a name', () => {
  it('is found by its id and by what it says, whatever the order of its settings', () => {
    const kept = createChain(context, people.lead, workspaceId, { name: 'Without seasons', chain: asBody(unseasoned) })
    expect(kept).toMatchObject({ name: 'Without seasons', revision: 1, canWrite: true })
    const turned = Object.fromEntries(Object.entries(unseasoned).reverse())
    for (const text of [kept.id, JSON.stringify(turned)]) expect(namedChain(context, workspaceId, text)).toEqual({ name: 'Without seasons', chain: unseasoned })
    expect(namedChain(context, workspaceId, undefined)).toEqual({ name: null, chain: defaultChain() })
    expect(() => namedChain(context, elsewhere.workspaceId, kept.id)).toThrow(/no such chain/)
    expect(listChains(context, people.reader, workspaceId).items).toMatchObject([{ name: 'Without seasons', canWrite: false }])
  })

  it('is changed at its revision, kept once under a name, and goes into the bin and out of it', () => {
    const { id } = listChains(context, people.lead, workspaceId).items[0]!
    expect(() => createChain(context, people.lead, workspaceId, { name: 'Without seasons', chain: asBody(defaultChain()) })).toThrow(/already/)
    expect(() => createChain(context, people.lead, workspaceId, { name: 'Other', chain: { schemaVersion: 1, steps: [{ kind: 'wash', on: true }] } })).toThrow(/does not hold/)
    expect(changeChain(context, people.lead, id, { revision: 1, name: 'No seasons' })).toMatchObject({ revision: 2, name: 'No seasons' })
    expect(() => changeChain(context, people.lead, id, { revision: 1, name: 'Late' })).toThrow(/revision 2/)
    expect(() => changeChain(context, people.reader, id, { revision: 2, name: 'Late' })).toThrow(/role/)
    expect(binChain(context, people.lead, id, 2)).toEqual({ revision: 3 })
    expect(listChains(context, people.lead, workspaceId).items).toEqual([])
    expect(() => namedChain(context, workspaceId, id)).toThrow(/no such chain/)
    binChain(context, people.lead, id, 3, true)
    expect(listChains(context, people.reader, workspaceId).items).toMatchObject([{ name: 'No seasons', revision: 4 }])
  })
})

describe('a comparison with a reduced series', () => {
  it('states the chain by its name and steps, and takes the seasons off both sides', async () => {
    const scenarioId = newId()
    context.db.insert(schema.scenario).values({ id: scenarioId, workspaceId, name: 'S', draft: '{}', createdAt: context.now(), createdBy: people.lead.userId }).run()
    const input = runInput([region('r1', box(-50, 65, -40, 75), -200, { seriesSha256: 'a'.repeat(64) })])
    const result = computeRun({ ...input, regions: input.regions.map(r => ({ ...r, series: { ...r.series, mjd: everyMonth(61) } })) }, context.earth)
    const runId = storeRun(context, workspaceId, { scenarioId, name: 'S', actor: { id: people.lead.userId, name: people.lead.name }, input }, result)
    // A season of 0.4 ms on a rate of 0.02 ms a year.
    const rows = Array.from({ length: 1900 }, (_, i) => `${52300 + i},${(0.8 + 0.02 * i / 365.25 + 0.4 * Math.cos(2 * Math.PI * i / 365.25)).toFixed(6)}`)
    const text = `mjd,lod_ms\n${rows.join('\n')}\n`
    const path = join(context.dataDir, newId())
    writeFileSync(path, text)
    const { id: observed } = await createObserved(context, people.lead, workspaceId, { path, name: 'eop.csv', type: 'text/csv', bytes: text.length, sha256: sha256Hex(text) },
      { name: 'Made', reason: '', source: 'test', licence: '', independence: '', leaveOutBadRows: false })
    const bare: Chain = { ...defaultChain(), steps: [{ kind: 'seasons', on: true }, { kind: 'monthly', on: true }] }
    const { id } = createChain(context, people.lead, workspaceId, { name: 'Season out', chain: asBody(bare) })

    const plain = await compareWith(context, runRow(context, runId), { observed })
    const compared = await readComparison(context, people.reader, runId, { observed, chain: id })
    expect(plain.reduction).toBeUndefined()
    expect(compared.reduction).toMatchObject({ name: 'Season out', chain: bare, chartNote: expect.stringContaining('seasons removed') as string })
    expect(compared.reduction!.steps.map(step => step.title)).toEqual(['Seasons', 'Monthly means'])
    expect([titleOfChain(compared.reduction!), titleOfChain({ name: null, chain: bare }), titleOfChain({ name: null, chain: { ...defaultChain(), steps: [...defaultChain().steps, { kind: 'detrend', on: false }] } })])
      .toEqual(['the chain “Season out”', 'a chain without a name', 'the usual chain'])
    // The rms of 0.4 ms amplitude is 0.28 ms; of 0.02 ms a year over five years, 0.03 ms.
    expect(plain.lod!.rmsObserved).toBeGreaterThan(0.27)
    expect(compared.lod!.rmsObserved).toBeLessThan(0.04)
    expect(compared.lod!.trends.observed.value).toBeCloseTo(0.02, 3)
    // Months of the run are the same on both ways.
    expect(compared.epochsMjd).toEqual(plain.epochsMjd)

    const short = JSON.stringify({ ...bare, steps: [{ kind: 'zonal-tides', on: true, set: 'under-35-days' }] })
    const barred = await compareWith(context, runRow(context, runId), { observed, chain: short })
    expect(barred.lod).toBeNull()
    expect(barred.warnings.map(({ code }) => code)).toContain('no-trend')
    await expect(readComparison(context, people.administrator, runId, { observed, chain: id })).rejects.toMatchObject({ status: 403 })
  })
})
