import { beforeAll, describe, expect, inject, it } from 'vitest'
import type { Client } from '../support/client'
import { addWorkspace, makeObserved, makeRegion, makeScenario, makeVersion, monthlyCsv, newcomer, orientationCsv, runScenario, seriesFacts, square, type Place } from '../support/world'
import reference from '../fixtures/series/fit-reference.json'

const url = inject('url')
const dataDir = inject('dataDir')
let place: Place
let lead: Client
let regionId: string

beforeAll(async () => {
  place = addWorkspace(dataDir, 'Series work')
  lead = await newcomer(url, dataDir, { place, role: 'lead' })
  regionId = (await makeRegion(lead, place, 'basin', square(0, 10))).id
})

describe('a fit over the API', () => {
  beforeAll(() => makeVersion(lead, regionId, `mjd,mass (Gt),sigma (Gt)\n${reference.mjd.map((t, i) => `${t},${reference.massGt[i]},${reference.sigmaGt[i]}`).join('\n')}\n`))
  const query = { acceleration: 'true', alias: 'true', step: '2009-06-18', maxGap: 100 }

  it('is that of numpy, with the gravimetry gap left open', async () => {
    const fit = await lead.get('regionFit', { params: { id: regionId }, query })
    expect(fit.settings.stepsMjd).toEqual([reference.stepMjd])
    expect(fit.terms.map(t => t.kind)).toEqual(['trend', 'acceleration', 'annual', 'semiannual', 'alias', 'step'])
    expect(fit.terms[0]!.under[0]!.value / reference.coefficients[1]!).toBeCloseTo(1, 9)
    expect(fit.terms[0]!.under[0]!.sigma / reference.sigmas[1]!).toBeCloseTo(1, 9)
    expect(fit.gaps).toEqual([expect.objectContaining({ days: 365 })])
    expect(fit.mjd).toEqual(reference.mjd)
  })

  it('refuses what it cannot make, with the reason', async () => {
    const outside = await lead.refused('regionFit', 422, { params: { id: regionId }, query: { step: '1990-01-01' } })
    expect(outside.issues).toEqual([expect.objectContaining({ path: 'step/0' })])
    await lead.refused('regionFit', 422, { params: { id: regionId }, query: { from: '2010-01-01', to: '2009-01-01' } })
    await lead.refused('regionFit', 422, { params: { id: regionId }, query: { step: '2009-02-30' } })
    await lead.refused('regionFit', 422, { params: { id: regionId }, query: { from: '2010-01-01', to: '2010-02-20' } })
    const bare = await makeRegion(lead, place, 'lake')
    await lead.refused('regionFit', 404, { params: { id: bare.id } })
  })
})

describe('another series that is taken off', () => {
  it('is a step with its version and hash, by which the values can be made again', async () => {
    const [whole, lake] = [await makeRegion(lead, place, 'basin', square(40, 10)), await makeRegion(lead, place, 'lake', square(40, 10, 0.2))]
    const other = await makeVersion(lead, lake.id, monthlyCsv(3, -2, 0))
    const conversion = { quantity: 'mass', unit: 'Gt', subtract: [{ what: 'surface-water', versionId: other.id }] }
    const version = await lead.get('seriesCreate', { params: { id: whole.id }, body: { ...seriesFacts, columns: {}, conversion }, file: { name: 'mass.csv', content: monthlyCsv(4, -12, 0) } })
    // Three years of the other series: the fourth year is left out, and the trend is −12 − (−2).
    const { massGt, sigmaGt, recipe } = await lead.get('seriesVersionRead', { params: { id: version.id } })
    expect(version.count).toBe(36)
    expect((massGt.at(-1)! - massGt[0]!) / (35 / 12)).toBeCloseTo(-10, 2)
    expect(sigmaGt![0]).toBeCloseTo(Math.hypot(2, 2), 12)
    const steps = (recipe.options as { recipe: { steps: { kind: string, of?: object }[] } }).recipe.steps
    expect(steps.at(-1)).toMatchObject({ kind: 'subtract-series', of: { versionId: other.id, dataSha256: other.dataSha256 } })
    expect((recipe.leftOutBySteps as unknown[]).length).toBe(12)

    const off = await lead.get('seriesCreate', { params: { id: whole.id }, body: { ...seriesFacts, columns: {}, conversion: { ...conversion, subtract: [{ ...conversion.subtract[0], on: false }] } }, file: { name: 'mass.csv', content: monthlyCsv(4, -12, 0) } })
    expect(off.count).toBe(48)
  })

  it('of another account is not there', async () => {
    const elsewhere = addWorkspace(dataDir, 'Elsewhere')
    const stranger = await newcomer(url, dataDir, { place: elsewhere, role: 'lead' })
    const theirs = await makeVersion(stranger, (await makeRegion(stranger, elsewhere, 'lake')).id)
    const conversion = { quantity: 'mass', unit: 'Gt', subtract: [{ what: 'snow', versionId: theirs.id }] }
    const problem = await lead.refused('seriesCreate', 422, { params: { id: regionId }, body: { ...seriesFacts, columns: {}, conversion }, file: { name: 'mass.csv', content: monthlyCsv(3, 1) } })
    expect(problem.issues).toEqual([expect.objectContaining({ path: 'subtract/0' })])
  })
})

describe('one table for several regions', () => {
  const table = `date,East,East sigma,West\n${Array.from({ length: 24 }, (_, i) => `${2004 + Math.floor(i / 12)}-${String(i % 12 + 1).padStart(2, '0')}-15,${-i},1,${2 * i}`).join('\n')}\n`
  const two = async () => Promise.all([makeRegion(lead, place, 'basin', square(60, 10)), makeRegion(lead, place, 'ice-sector', square(-40, 75))])
  const send = (series: object[], content = table, more: object = {}) => ({ params: { workspace: place.workspaceId }, body: { ...seriesFacts, columns: {}, series, ...more }, file: { name: 'wide.csv', content } })

  it('makes a version of each from its own column, of one file', async () => {
    const [east, west] = await two()
    const { items } = await lead.get('seriesTableCreate', send([{ regionId: west!.id, valueColumn: 3 }, { regionId: east!.id, valueColumn: 1, sigmaColumn: 2 }]))
    expect(items.map(item => [item.regionId, item.n, item.count])).toEqual([[west!.id, 1, 24], [east!.id, 1, 24]])
    expect(items[0]!.originalSha256).toBe(items[1]!.originalSha256)
    const [w, e] = await Promise.all(items.map(item => lead.get('seriesVersionRead', { params: { id: item.id } })))
    expect([w!.massGt[5], w!.sigmaGt, e!.massGt[5], e!.sigmaGt![5]]).toEqual([10, null, -5, 1])
  })

  it('stores all or none, and says which column has what wrong', async () => {
    const [east, west] = await two()
    const gappy = table.replace(',4\n', ',\n')
    const both = [{ regionId: east!.id, valueColumn: 1 }, { regionId: west!.id, valueColumn: 3 }]
    const problem = await lead.refused('seriesTableCreate', 422, send(both, gappy))
    expect(problem.issues).toEqual([expect.objectContaining({ row: 4, column: 'West', code: 'missing-value' })])
    expect((await lead.get('regionRead', { params: { id: east!.id } })).versions).toEqual([])
    const { items } = await lead.get('seriesTableCreate', send(both, gappy, { leaveOutBadRows: true }))
    expect(items.map(item => item.count)).toEqual([24, 23])
    await lead.refused('seriesTableCreate', 422, send([both[0]!, both[0]!]))
    // A hydrologist may not bring ice: nothing of the table is stored.
    const hydrologist = await newcomer(url, dataDir, { place, role: 'hydrologist' })
    await hydrologist.refused('seriesTableCreate', 403, send(both))
    expect((await lead.get('regionRead', { params: { id: east!.id } })).versions).toHaveLength(1)
  })
})

describe('fields of a version', () => {
  const facts = { citation: 'A made-up report (2020)', method: 'mascons', instrument: 'ranging', contains: ['all'], gravimetry: 'yes', pole: 'yes', lengthOfDay: 'no' }

  it('are kept, go into the run and its sources, and warn in a comparison', async () => {
    const region = await makeRegion(lead, place, 'aquifer', square(100, 30))
    const version = await lead.get('seriesCreate', { params: { id: region.id }, body: { ...seriesFacts, facts, columns: {} }, file: { name: 'mass.csv', content: monthlyCsv(6, -9) } })
    expect(version.facts).toEqual(facts)
    const { runId } = await runScenario(lead, await makeScenario(lead, place, [{ regionId: region.id, versionId: version.id, scale: 1 }]))
    expect((await lead.get('runRead', { params: { id: runId } })).sources[0]!.facts).toEqual(facts)
    const observed = await makeObserved(lead, place, orientationCsv(1500))
    const { warnings } = await lead.get('runComparison', { params: { id: runId }, query: { observed: observed.id } })
    expect(warnings.filter(w => w.code.startsWith('circular'))).toMatchObject([{ code: 'circular-pole', regions: ['r1'] }])
  })

  it('may be left out, and are refused where they are none', async () => {
    expect((await makeVersion(lead, regionId)).facts).toBeNull()
    await lead.refused('seriesCreate', 422, { params: { id: regionId }, body: { ...seriesFacts, facts: { ...facts, contains: ['air'] }, columns: {} }, file: { name: 'mass.csv', content: monthlyCsv(3, 1) } })
  })
})
