import { PNG } from 'pngjs'
import { beforeAll, describe, expect, inject, it } from 'vitest'
import { Client } from '../support/client'
import { addWorkspace, makeObserved, makeRegion, makeScenario, makeVersion, monthlyCsv, newcomer, orientationCsv, runScenario, square, withDatabase, type Place } from '../support/world'

const url = inject('url')
const dataDir = inject('dataDir')
const visitor = new Client(url)
const secretNote = 'for the office only, not for the public'
let place: Place
let lead: Client
let runId: string
let regionId: string
let versionId: string
let scenarioId: string
let observedId: string

beforeAll(async () => {
  place = addWorkspace(dataDir, 'Publications')
  lead = await newcomer(url, dataDir, { place, role: 'lead' })
  const region = await makeRegion(lead, place, 'ice-sector', square(-40, 72, 3))
  await lead.get('regionChange', { params: { id: region.id }, body: { revision: 1, note: secretNote } })
  regionId = region.id
  versionId = (await makeVersion(lead, region.id, monthlyCsv(8, -200, 40))).id
  observedId = (await makeObserved(lead, place, orientationCsv(2500))).id
  const scenario = await makeScenario(lead, place, [{ regionId, versionId, scale: 1 }])
  scenarioId = scenario.id
  runId = (await runScenario(lead, scenario)).runId
})

const publish = (slug: string, more: object = {}) => lead.get('editionCreate', { params: { id: runId }, body: { slug, title: 'Ice of the test', licence: 'CC BY 4.0', observedId, ...more } })

describe('an edition', () => {
  it('is read by anybody: sentence, figures, comparison, sources, hashes', async () => {
    const { n } = await publish('ice-of-the-test')
    expect(n).toBe(1)
    const edition = await visitor.get('editionRead', { params: { slug: 'ice-of-the-test' } })
    expect(edition.sentence).toMatch(/calculated to lengthen the day by .*±.*µs per year \(1σ\)/)
    expect(edition.unexplained).toBeTruthy()
    expect(edition.result.regions).toHaveLength(1)
    expect(edition.comparison!.lod).not.toBeNull()
    const run = await lead.get('runRead', { params: { id: runId } })
    expect(edition.run).toMatchObject({ inputSha256: run.inputSha256, resultSha256: run.resultSha256 })
    expect((await visitor.get('editionIndex')).items.map(e => e.slug)).toContain('ice-of-the-test')
  })

  it('opens as a page without an account, the sentence already in what the server sends', async () => {
    const { sentence } = await visitor.get('editionRead', { params: { slug: 'ice-of-the-test' } })
    const page = await visitor.send('GET', '/p/ice-of-the-test')
    expect(page.status).toBe(200)
    const text = page.text.replace(/<[^>]+>/g, '').replace(/\s+/g, ' ')
    expect(text).toContain(sentence.replace(/\s+/g, ' ').slice(0, 60))
  })

  it('names its map as the picture for messages, and gives everybody the map of the sea that the run has', async () => {
    const page = await visitor.send('GET', '/p/ice-of-the-test')
    const meta = (name: string) => new RegExp(`<meta (?:property|name)="${name}" content="([^"]*)">`).exec(page.text)?.[1]
    expect(meta('og:image')).toMatch(/^http:\/\/[^"]+\/api\/v1\/editions\/ice-of-the-test\/1\/map\.png$/)
    expect(['og:image:type', 'og:image:width', 'og:image:height', 'twitter:card', 'twitter:image'].map(meta)).toEqual(['image/png', '1200', '630', 'summary_large_image', meta('og:image')])
    expect(meta('og:image:alt')).toMatch(/^Map of the regions: /)
    const [open, own] = await Promise.all([
      visitor.get('editionSeaLevel', { params: { slug: 'ice-of-the-test', n: 1 } }), lead.get('runSeaLevel', { params: { id: runId }, query: { step: 2 } }),
    ])
    expect(open).toEqual(own)
    expect(open.unit).toBe('mm per year')
  })

  it.each([
    ['budget.csv', 'text/csv', /^# Counterpoise.*\n# Span 2004.*\n(# Model uncertainty, not in any sigma: .*\n){3,5}row,name,mass_Gt_per_year,/],
    ['series.csv', 'text/csv', /\nmjd,date,lod_microseconds,/],
    ['regions.geojson', 'application/geo+json', /^\{"type":"FeatureCollection"/],
    ['map.svg', 'image/svg+xml', /^<svg xmlns="http:\/\/www\.w3\.org\/2000\/svg"(?!.*(?:<script|href=))/s],
    ['run.json', 'application/json', /"resultSha256"/],
    ['report.pdf', 'application/pdf', /^%PDF-1\./],
  ])('is downloaded as %s', async (file, type, start) => {
    const answer = await visitor.call('editionFile', { params: { slug: 'ice-of-the-test', n: 1, file } })
    expect(answer.status).toBe(200)
    expect(answer.headers.get('content-type')).toContain(type)
    expect(answer.headers.get('content-disposition')).toContain(`ice-of-the-test-1-${file}`)
    expect(answer.text).toMatch(start)
  })

  it('has its picture as PNG, drawn once and for good', async () => {
    const path = '/api/v1/editions/ice-of-the-test/1/map.png'
    const [first, again] = await Promise.all([fetch(`${url}${path}`), fetch(`${url}${path}`)])
    expect(first.headers.get('content-type')).toBe('image/png')
    const bytes = Buffer.from(await first.arrayBuffer())
    const { width, height, data } = PNG.sync.read(bytes)
    expect([width, height]).toEqual([1200, 630])
    expect(new Set(data).size).toBeGreaterThan(50)
    expect(Buffer.from(await again.arrayBuffer()).equals(bytes)).toBe(true)
    const own = await lead.call('runFile', { params: { id: runId, file: 'map.png' } })
    expect([own.status, own.headers.get('content-type')]).toEqual([200, 'image/png'])
  })

  it('tells nothing else of the workspace', async () => {
    const files = await Promise.all(['budget.csv', 'series.csv', 'regions.geojson', 'map.svg', 'run.json'].map(file => visitor.call('editionFile', { params: { slug: 'ice-of-the-test', n: 1, file } })))
    const { text } = await visitor.call('editionRead', { params: { slug: 'ice-of-the-test' } })
    const page = await visitor.send('GET', '/p/ice-of-the-test')
    for (const shown of [text, page.text, ...files.map(f => f.text)]) {
      expect(shown).not.toContain(secretNote)
      for (const id of [place.workspaceId, place.agencyId, regionId, versionId, scenarioId, observedId]) expect(shown).not.toContain(id)
      expect(shown).not.toContain('@test.example')
    }
  })

  it('is all that a visitor reaches', async () => {
    for (const [id, params] of [
      ['runRead', { id: runId }], ['runFile', { id: runId, file: 'run.json' }], ['regionRead', { id: regionId }], ['seriesVersionRead', { id: versionId }], ['originalRead', { id: versionId }],
      ['scenarioRead', { id: scenarioId }], ['observedRead', { id: observedId }], ['regionList', { workspace: place.workspaceId }], ['editionList', { workspace: place.workspaceId }],
    ] as const) await visitor.refused(id, 401, { params })
  })

  it('never changes: the next one takes the next number, and the first stays', async () => {
    const first = await visitor.get('editionRead', { params: { slug: 'ice-of-the-test' }, query: { n: 1 } })
    const second = await publish('ice-of-the-test', { title: 'Ice of the test, corrected' })
    expect(second.n).toBe(2)
    const { latest: _, editions: __, ...before } = first
    const { latest, editions, ...after } = await visitor.get('editionRead', { params: { slug: 'ice-of-the-test' }, query: { n: 1 } })
    expect(after).toEqual(before)
    expect(latest).toBe(false)
    expect(editions.map(e => e.n)).toEqual([2, 1])
    expect((await visitor.get('editionRead', { params: { slug: 'ice-of-the-test' } })).n).toBe(2)
    withDatabase(dataDir, db => expect(() => db.prepare('update edition set title = ?').run('Another')).toThrow(/immutable/))
  })

  it('that is withdrawn stays to be read and says why', async () => {
    await publish('soon-withdrawn')
    await lead.get('editionWithdraw', { params: { slug: 'soon-withdrawn', n: 1 }, body: { reason: 'The density was wrong.' } })
    expect((await visitor.get('editionRead', { params: { slug: 'soon-withdrawn' } })).withdrawn).toMatchObject({ reason: 'The density was wrong.' })
    expect((await visitor.get('editionIndex')).items.map(e => e.slug)).not.toContain('soon-withdrawn')
    await lead.refused('editionWithdraw', 409, { params: { slug: 'soon-withdrawn', n: 1 }, body: { reason: 'Again' } })
  })

  it('cannot take a link that another workspace uses, nor one that is no link', async () => {
    const elsewhere = addWorkspace(dataDir, 'Elsewhere')
    const other = await newcomer(url, dataDir, { place: elsewhere, role: 'lead' })
    const region = await makeRegion(other, elsewhere, 'lake')
    const version = await makeVersion(other, region.id)
    const theirs = await runScenario(other, await makeScenario(other, elsewhere, [{ regionId: region.id, versionId: version.id, scale: 1 }]))
    const body = { title: 'Taken', licence: '', observedId: null }
    await other.refused('editionCreate', 422, { params: { id: theirs.runId }, body: { ...body, slug: 'ice-of-the-test' } })
    for (const slug of ['../etc', 'Upper', 'a', 'two--hyphens', 'with space']) await other.refused('editionCreate', 422, { params: { id: theirs.runId }, body: { ...body, slug } })
  })
})
