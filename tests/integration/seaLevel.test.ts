import { beforeAll, describe, expect, inject, it } from 'vitest'
import type { Client } from '../support/client'
import { addWorkspace, makeRegion, makeScenario, makeVersion, monthlyCsv, newcomer, runScenario, square, type Place } from '../support/world'

const url = inject('url')
const dataDir = inject('dataDir')
let place: Place
let lead: Client
let ice: { regionId: string, versionId: string, scale: number }
let basin: { regionId: string, versionId: string, scale: number }

beforeAll(async () => {
  place = addWorkspace(dataDir, 'Sea level')
  lead = await newcomer(url, dataDir, { place, role: 'lead' })
  const made = async (kind: 'ice-sector' | 'basin', lon: number, lat: number, rate: number) => {
    const { id } = await makeRegion(lead, place, kind, square(lon, lat, 3))
    return { regionId: id, versionId: (await makeVersion(lead, id, monthlyCsv(8, rate))).id, scale: 1 }
  }
  ice = await made('ice-sector', -40, 72, -200)
  basin = await made('basin', 20, 10, 30)
})

const runOf = async (regions: object[]) => (await runScenario(lead, await makeScenario(lead, place, regions as never))).runId
const at = '72,-40;-35,-140;38.7,-9.1'

describe('the sea level of a run', () => {
  it('falls beside melting ice and rises by more than the mean far away', async () => {
    const id = await runOf([ice])
    const answer = await lead.get('runSeaLevel', { params: { id }, query: { step: 5, at } })
    // 200 Gt over 362.9 Gt per mm.
    expect(answer.barystaticMm).toBeCloseTo(200 / 362.9, 2)
    expect(answer.unit).toBe('mm per year')
    const [beside, far, near] = answer.places
    expect(beside!.seaLevelMm).toBeLessThan(-1)
    expect(far!.relative).toBeGreaterThan(1.05)
    expect(near!.relative).toBeGreaterThan(0.3)
    expect(near!.relative).toBeLessThan(1)
    expect(answer.seaLevelMm.length).toBe(answer.latitudesDeg.length * answer.longitudesDeg.length)
    expect(answer.sea.length).toBe(answer.seaLevelMm.length)
  })

  it('differs with feedback by a few per cent, and keeps its mean', async () => {
    const id = await runOf([ice])
    const [on, off] = await Promise.all((['true', 'false'] as const).map(feedback => lead.get('runSeaLevel', { params: { id }, query: { step: 5, feedback, at } })))
    expect(off!.barystaticMm).toBe(on!.barystaticMm)
    const change = Math.abs(on!.places[1]!.relative! - off!.places[1]!.relative!)
    expect(change).toBeGreaterThan(0.002)
    expect(change).toBeLessThan(0.2)
  })

  it('counts only what reaches the sea where the rest goes to another region', async () => {
    const id = await runOf([{ ...ice, fractionToOcean: 0.25, restTo: basin.regionId }, { ...basin, scale: 0 }])
    const answer = await lead.get('runSeaLevel', { params: { id }, query: { step: 5 } })
    expect(answer.barystaticMm).toBeCloseTo(50 / 362.9, 2)
  })

  it('comes as a grid that says what it is', async () => {
    const id = await runOf([ice])
    const csv = (await lead.call('runSeaLevelCsv', { params: { id }, query: { step: 5 } })).text
    const [head, columns, ...rows] = csv.trim().split('\n')
    expect(head).toMatch(/^# Relative sea level, mm per year; .*feedback on\. Calculated: elastic Earth, fixed shorelines\.$/)
    expect(columns).toBe('latitude_deg,longitude_deg,sea_fraction,sea_level_mm,relative_to_mean')
    expect(rows.length).toBeGreaterThan(1500)
    for (const row of rows) expect(row.split(',').every(cell => Number.isFinite(Number(cell)))).toBe(true)
  })

  it('refuses places that are none, with the reason', async () => {
    const id = await runOf([ice])
    for (const bad of ['here', '95,0', '1;2', '1,2,3']) {
      const problem = await lead.refused('runSeaLevel', 422, { params: { id }, query: { at: bad } })
      expect(problem.issues![0]).toMatchObject({ path: 'at', code: 'place' })
    }
  })
})

describe('the sea level of a region', () => {
  it('is that of a hundred gigatonnes lost, as an answer and as a grid', async () => {
    const answer = await lead.get('regionSeaLevel', { params: { id: ice.regionId }, query: { step: 5, at } })
    expect(answer.unit).toBe('mm per 100 Gt lost')
    expect(answer.barystaticMm).toBeCloseTo(100 / 362.9, 3)
    expect(answer.places[0]!.seaLevelMm).toBeLessThan(0)
    const csv = (await lead.call('regionSeaLevelCsv', { params: { id: ice.regionId }, query: { step: 5, feedback: 'false' } })).text
    expect(csv).toMatch(/^# Relative sea level, mm per 100 Gt lost; .*feedback off/)
  })
})

describe('the effect of a region', () => {
  it('is told in both fingerprint modes with what derives from it, the default one as everywhere else', async () => {
    const { effects, perGt } = await lead.get('regionRead', { params: { id: ice.regionId } })
    expect(effects.map(({ ocean }) => ocean)).toEqual(['fingerprint', 'fingerprint-rotation'])
    const [plain, rotation] = effects
    for (const key of ['chi1Mas', 'chi2Mas', 'lodMicroseconds', 'barystaticMm', 'deltaJ2'] as const) expect(plain![key]).toBe(perGt[key])
    // The modes agree within some 2 % in χ and 0.1 % of scale in the day: feedback goes with the ocean-free factor.
    expect(Math.abs(Math.hypot(rotation!.chi1Mas, rotation!.chi2Mas) / Math.hypot(plain!.chi1Mas, plain!.chi2Mas) - 1)).toBeLessThan(0.03)
    expect(Math.abs(rotation!.lodMicroseconds / plain!.lodMicroseconds - 1)).toBeLessThan(0.01)
    // Mass gained in the far north moves the centre of mass north, against the centre of figure.
    expect(plain!.geocentreMm!.z).toBeGreaterThan(0)
  })
})
