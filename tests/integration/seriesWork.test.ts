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
