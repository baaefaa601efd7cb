import { beforeAll, describe, expect, inject, it } from 'vitest'
import { defaultChain } from '#shared/observed/readChain'
import { Client } from '../support/client'
import { addWorkspace, makeObserved, makeRegion, makeScenario, makeVersion, monthlyCsv, newcomer, orientationCsv, runScenario, seriesFacts, square, type Place } from '../support/world'

const url = inject('url')
const dataDir = inject('dataDir')
const visitor = new Client(url)
let place: Place
let lead: Client
let runId: string
let observed: string
let chainId: string
const name = 'Seasons taken out'
const chain = { ...defaultChain(), steps: defaultChain().steps.map(step => step.kind === 'seasons' ? { ...step, on: true } : step) }

beforeAll(async () => {
  place = addWorkspace(dataDir, 'Chains')
  lead = await newcomer(url, dataDir, { place, role: 'lead' })
  const region = await makeRegion(lead, place, 'ice-sector', square(-40, 72, 3))
  const version = await makeVersion(lead, region.id, monthlyCsv(8, -200, 40))
  observed = (await makeObserved(lead, place, orientationCsv(2500))).id
  runId = (await runScenario(lead, await makeScenario(lead, place, [{ regionId: region.id, versionId: version.id, scale: 1 }]))).runId
  chainId = (await lead.get('chainCreate', { params: { workspace: place.workspaceId }, body: { name, chain } })).id
})

describe('a chain under a name', () => {
  it('is chosen by its id beside a run, and the comparison says what it did', async () => {
    const plain = await lead.get('runComparison', { params: { id: runId }, query: { observed } })
    const reduced = await lead.get('runComparison', { params: { id: runId }, query: { observed, chain: chainId } })
    expect(plain.reduction).toBeUndefined()
    expect(reduced.reduction).toMatchObject({ name, chain })
    expect(reduced.reduction!.steps.map(step => step.title)).toContain('Seasons')
    const attribution = await lead.get('runAttribution', { params: { id: runId }, query: { observed, chain: chainId } })
    expect(attribution).toMatchObject({ chainName: name, chain })
    const [problem] = (await lead.refused('runComparison', 422, { params: { id: runId }, query: { observed, chain: '{"schemaVersion":1,"steps":[{"kind":"wash","on":true}]}' } })).issues!
    expect(problem).toMatchObject({ path: 'steps/0', code: 'unknown-step' })
  })

  it('stands in the package, in the report and on the public page', async () => {
    const json = await lead.call('runFile', { params: { id: runId, file: 'run.json' }, query: { observed, chain: chainId } })
    expect((json.json as { comparison: { reduction: unknown } }).comparison.reduction).toMatchObject({ name, chain })
    const report = await lead.call('runFile', { params: { id: runId, file: 'report.pdf' }, query: { observed, chain: chainId } })
    expect([report.status, report.text.slice(0, 5)]).toEqual([200, '%PDF-'])
    await lead.get('editionCreate', { params: { id: runId }, body: { slug: 'reduced-by-a-chain', title: 'Reduced', licence: '', observedId: observed, chain: chainId } })
    // What is published stays, whatever becomes of the chain.
    const { revision } = await lead.get('chainChange', { params: { id: chainId }, body: { revision: 1, name: 'Renamed' } })
    await lead.get('chainRemove', { params: { id: chainId }, query: { revision } })
    expect((await visitor.get('editionRead', { params: { slug: 'reduced-by-a-chain' } })).comparison!.reduction).toMatchObject({ name, chain })
    const page = await visitor.send('GET', '/p/reduced-by-a-chain')
    expect(page.text.replace(/<[^>]+>/g, '')).toContain(`the chain “${name}”`)
    expect((await lead.refused('runComparison', 404, { params: { id: runId }, query: { observed, chain: chainId } })).detail).toMatch(/no such chain/)
  })
})

describe('gravity coefficients', () => {
  const fields = { solidPoleTide: 'removed', oceanPoleTide: 'removed', permanentTide: 'zero-tide', meanPole: 'secular-2018', radiusM: 6378136.3, dealiasing: 'restored', axialLoadFactor: 0.695 }
  const rows = Array.from({ length: 96 }, (_, i) => `${53019 + 30.4375 * i},${(-2e-12 * i).toExponential(3)},1e-12,2e-12`)
  const file = { name: 'degree2.csv', content: `mjd,dC20,dC21,dS21\n${rows.join('\n')}\n` }

  it('are stored with their answers, held against a run, and warned of where the mass has the same origin', async () => {
    const stored = await lead.get('gravityCreate', { params: { workspace: place.workspaceId }, file, body: { name: 'Gravity', source: 'made by the test', fields } })
    expect(stored).toMatchObject({ format: 'gravity', has: { lod: true, pole: false, excitation: true }, gravity: { fields } })
    expect((await lead.get('observedRead', { params: { id: stored.id } })).coefficients!.s21[0]).toBe(2e-12)
    const compared = await lead.get('runComparison', { params: { id: runId }, query: { observed: stored.id } })
    expect(compared.lod!.trends.observed.value).toBeGreaterThan(0)
    expect(compared.warnings.map(({ code }) => code)).not.toContain('circular-gravity')

    const region = await makeRegion(lead, place, 'basin', square(20, 10, 3))
    const version = await lead.get('seriesCreate', { params: { id: region.id }, body: { ...seriesFacts, independence: 'From satellite gravimetry', columns: {} }, file: { name: 'mass.csv', content: monthlyCsv(8, -20) } })
    const other = await runScenario(lead, await makeScenario(lead, place, [{ regionId: region.id, versionId: version.id, scale: 1 }]))
    expect((await lead.get('runComparison', { params: { id: other.runId }, query: { observed: stored.id } })).warnings.map(({ code }) => code)).toContain('circular-gravity')
    expect((await lead.get('runAttribution', { params: { id: other.runId }, query: { observed: stored.id } })).circularity.map(({ code }) => code)).toEqual(['circular-gravity'])
  })

  it('are refused without their answers, or with numbers that cannot be', async () => {
    const params = { workspace: place.workspaceId }
    const open = await lead.refused('gravityCreate', 422, { params, file, body: { name: 'Gravity', source: '', fields: { ...fields, radiusM: 6378 } } })
    expect(open.issues).toMatchObject([{ path: 'fields/radiusM' }])
    const unit = await lead.refused('gravityCreate', 422, { params, file: { ...file, content: file.content.replaceAll('e-12', '') }, body: { name: 'Gravity', source: '', fields } })
    expect(unit.issues![0]!.message).toMatch(/power of ten/)
  })
})
