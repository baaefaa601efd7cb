import { readFileSync } from 'node:fs'
import { beforeAll, describe, expect, inject, it } from 'vitest'
import type { Client } from '../support/client'
import { addWorkspace, gridCsv, jobDone, makeGrid, makeRegion, makeScenario, newcomer, runScenario, square, withDatabase, type Place } from '../support/world'

const fixture = (name: string) => new Uint8Array(readFileSync(`tests/fixtures/grids/${name}`))
const unsaid = { answer: 'unknown', note: '' } as const
const product = { degreeOne: { answer: 'yes', note: 'invented series' }, c20: { answer: 'no', note: '' }, c30: unsaid, isostatic: unsaid, leakage: unsaid } as const
const facts = { name: 'From a grid', source: 'made by the test', reason: 'first', product }

let place: Place
let lead: Client

beforeAll(async () => {
  place = addWorkspace(inject('dataDir'), 'Grids')
  lead = await newcomer(inject('url'), inject('dataDir'), { place, role: 'lead' })
})

async function take(grid: string, regionIds: string[], more: object = {}) {
  const { id } = await lead.get('gridSeries', { params: { id: grid }, body: { regionIds, variable: 'height', sea: 'none', ...more } })
  await jobDone(lead, id)
  return id
}

describe('a grid', () => {
  it('of NetCDF is read, described and mapped, and its original is kept', async () => {
    const id = await makeGrid(lead, place, fixture('packed.nc4.nc'), 'packed.nc4.nc')
    const grid = await lead.get('gridRead', { params: { id } })
    // The values of tests/fixtures/grids/packed.cdl, which Debian's ncgen wrote the file from.
    expect(grid).toMatchObject({ format: 'netcdf-4', epochs: 3, chosen: grid.candidates[0]!.name, unusable: 0 })
    expect(grid.candidates[0]!.reading).toMatch(/is read as/)
    const month = await lead.get('gridMonth', { params: { id, n: 1 } })
    expect(month.values.filter(v => v === null).length).toBeGreaterThan(0)
    expect(month.values).toHaveLength((month.latEdgesDeg.length - 1) * month.columns)
    await lead.refused('gridMonth', 404, { params: { id, n: 3 } })
  })

  it('that is damaged is refused by what and where, and leaves nothing', async () => {
    const before = (await lead.get('gridList', { params: { workspace: place.workspaceId } })).items.length
    for (const [name, content, code] of [['cut.nc', fixture('packed.nc3.nc').slice(0, 60), 'not-a-grid'], ['cut.nc4', fixture('packed.nc4.nc').slice(0, 600), 'damaged'], ['words.csv', new TextEncoder().encode('a,b\n1,2\n'), 'no-grid']] as const) {
      const { id } = await lead.get('gridCreate', { params: { workspace: place.workspaceId }, body: { name }, file: { name, content } })
      await expect.poll(async () => (await lead.get('jobRead', { params: { id } })).state, { timeout: 20_000 }).toBe('failed')
      const { problem } = await lead.get('jobRead', { params: { id } })
      expect(problem).toMatchObject({ status: 422, issues: [{ code }] })
    }
    expect((await lead.get('gridList', { params: { workspace: place.workspaceId } })).items).toHaveLength(before)
  })

  it('becomes series of regions, all or none, with the steps, the product and the original; the same recipe gives the same values', async () => {
    const grid = await makeGrid(lead, place, gridCsv({ months: 30 }))
    const regions = await Promise.all([makeRegion(lead, place, 'aquifer', square(20, 22, 3)), makeRegion(lead, place, 'basin', square(-60, -8, 4))])
    const job = await take(grid, regions.map(r => r.id))
    const preview = await lead.get('gridSeriesRead', { params: { id: job } })
    for (const [i, { massGt }] of preview.regions.entries()) {
      // An even height times the area of the ellipsoid: 1 m over 1000 km² is 1 Gt.
      massGt.forEach((mass, t) => expect(mass).toBeCloseTo(-0.01 * t * regions[i]!.outline.areaKm2 / 1000, 8))
    }
    expect(preview.regions[0]!.trend!.value).toBeCloseTo(-0.12 * regions[0]!.outline.areaKm2 / 1000, 0)
    expect(preview.regions[0]!.pattern!.movedPart).toBeLessThan(1e-6)

    const { items } = await lead.get('gridSeriesAccept', { params: { id: job }, body: { ...facts, sigmaMm: 20, sharedRates: [{ source: 'isostatic', sigmaMmPerYear: 2 }] } })
    const version = await lead.get('seriesVersionRead', { params: { id: items[0]!.id } })
    expect(version.massGt).toEqual(preview.regions.find(r => r.regionId === version.regionId)!.massGt)
    const area = regions.find(r => r.id === version.regionId)!.outline.areaKm2
    expect(version.sigmaGt![3]).toBeCloseTo(0.02 * area / 1000, 8)
    expect(version.sharedRates).toMatchObject([{ source: 'isostatic' }])
    expect(version.recipe.steps).toEqual(expect.arrayContaining(['Degree 1 is put in (invented series).', 'C₂₀ is not replaced.', expect.stringContaining('weighted with their area inside the outline'), expect.stringContaining('One pattern stands for all months')]))
    expect((await lead.call('originalRead', { params: { id: version.id } })).text).toBe(gridCsv({ months: 30 }))
    await lead.refused('gridSeriesAccept', 409, { params: { id: job }, body: facts })

    const again = await take(grid, [version.regionId])
    const second = await lead.get('gridSeriesAccept', { params: { id: again }, body: { ...facts, sigmaMm: 20, sharedRates: [{ source: 'isostatic', sigmaMmPerYear: 2 }] } })
    expect(second.items[0]).toMatchObject({ n: 2, dataSha256: version.dataSha256 })
  })

  it('says what is missing before a job starts, and stores nothing for an outline that was changed meanwhile', async () => {
    const grid = await makeGrid(lead, place, gridCsv())
    const region = await makeRegion(lead, place, 'lake', square(20, 22, 3))
    const ask = (body: object) => ({ params: { id: grid }, body: { regionIds: [region.id], variable: 'height', sea: 'none', ...body } })
    expect(await lead.refused('gridSeries', 422, ask({ unit: 'km³' }))).toMatchObject({ issues: [{ code: 'unit-wrong-dimension' }] })
    expect(await lead.refused('gridSeries', 422, ask({ variable: 'depth' }))).toMatchObject({ issues: [{ code: 'no-grid' }] })
    const job = await take(grid, [region.id], { unit: 'inches' })
    expect((await lead.get('gridSeriesRead', { params: { id: job } })).regions[0]!.steps[0]).toContain('0.0254')
    await lead.get('regionChange', { params: { id: region.id }, body: { revision: 1, geometry: square(21, 22, 3) } })
    expect(await lead.refused('gridSeriesAccept', 422, { params: { id: job }, body: facts })).toMatchObject({ issues: [{ code: 'outline-changed' }] })
    expect((await lead.get('regionRead', { params: { id: region.id } })).versions).toEqual([])
  })

  it('is masked by the engine’s own sea, and a job that waits can be cancelled', async () => {
    const grid = await makeGrid(lead, place, gridCsv())
    const coast = await makeRegion(lead, place, 'basin', square(-80, 0, 8))
    const { id } = await lead.get('gridSeries', { params: { id: grid }, body: { regionIds: [coast.id], variable: 'height' } })
    const others = await Promise.all([1, 2, 3].map(() => lead.get('gridSeries', { params: { id: grid }, body: { regionIds: [coast.id], variable: 'height' } })))
    expect(await lead.get('jobCancel', { params: { id: others[2]!.id } })).toMatchObject({ state: 'cancelled' })
    await jobDone(lead, id)
    const [region] = (await lead.get('gridSeriesRead', { params: { id } })).regions
    expect(region!.seaM2).toBeGreaterThan(1e11)
    expect(Math.abs((region!.usedM2 + region!.seaM2 + region!.missingM2 + region!.outsideM2) / region!.areaM2 - 1)).toBeLessThan(1e-9)
    expect(region!.steps.join(' ')).toContain('the sea’s part is computed here from the mass itself')
    expect(await lead.get('jobRead', { params: { id: others[2]!.id } })).toMatchObject({ state: 'cancelled', progress: expect.any(Number) })
    await lead.refused('gridSeriesRead', 409, { params: { id: others[2]!.id } })
  })

  it('goes into a run with its pattern, frozen and hashed, beside the even spread', async () => {
    // Loss grows to the north.
    const grid = await makeGrid(lead, place, gridCsv({ months: 36, height: (t, lat) => -0.002 * t * Math.max(0, lat - 10) }))
    const region = await makeRegion(lead, place, 'aquifer', square(20, 25, 10))
    const { items } = await lead.get('gridSeriesAccept', { params: { id: await take(grid, [region.id]) }, body: { ...facts, product: null } })
    const prediction = await lead.get('regionPrediction', { params: { id: region.id } })
    expect(prediction.evenSpread).toMatchObject({ basis: 'trend' })
    expect(prediction.evenSpread!.movedPart).toBeGreaterThan(0.1)
    const scenario = await makeScenario(lead, place, [{ regionId: region.id, versionId: items[0]!.id, scale: 1 }])
    const { runId } = await runScenario(lead, scenario)
    const run = await lead.get('runRead', { params: { id: runId } })
    const row = run.result.regions[0]!
    // Nearer the axis, a gigatonne gained shortens the day by more: ∂ΔLOD goes with cos² of latitude.
    expect(row.perGt.lodMicroseconds).toBeLessThan(row.evenSpread!.perGt.lodMicroseconds)
    const input = withDatabase(inject('dataDir'), db => db.prepare('select input from run where id = ?').pluck().get(runId) as string)
    const { pattern } = (JSON.parse(input) as { input: { regions: { pattern: { excess: number[], gridSha256: string } }[] } }).input.regions[0]!
    expect(Math.abs(pattern.excess.reduce((sum, e) => sum + e, 0))).toBeLessThan(1e-12)

    const { id } = await lead.get('runMonteCarlo', { params: { id: runId }, body: { members: 2000, seed: 3 } })
    await jobDone(lead, id)
    const { latest } = await lead.get('runMonteCarloRead', { params: { id: runId } })
    expect(latest).toMatchObject({ members: 2000, seed: 3, regions: [{ key: 'r1', name: region.name }] })
    // Mean of the members within five standard errors of the run's own trend.
    const { linear, sampled } = latest!.total.massGt
    expect(Math.abs(sampled.mean - linear.value)).toBeLessThan(5 * sampled.sigma / Math.sqrt(2000) + 1e-9 * Math.abs(linear.value))
  })
})
