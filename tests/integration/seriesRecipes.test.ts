import { beforeAll, describe, expect, inject, it } from 'vitest'
import type { Client } from '../support/client'
import { addWorkspace, makeRegion, newcomer, seriesFacts, square, type Place } from '../support/world'

const url = inject('url')
const dataDir = inject('dataDir')
let place: Place
let hydrologist: Client
let regionId: string
let areaKm2: number

beforeAll(async () => {
  place = addWorkspace(dataDir, 'Recipes')
  hydrologist = await newcomer(url, dataDir, { place, role: 'hydrologist' })
  const region = await makeRegion(hydrologist, place, 'aquifer', square(31, 27))
  regionId = region.id
  areaKm2 = region.outline.areaKm2
})

const send = (content: string | Uint8Array, body: object, name = 'values.csv') => ({ params: { id: regionId }, body: { ...seriesFacts, columns: {}, ...body }, file: { name, content } })
const store = async (content: string | Uint8Array, body: object, name?: string) => {
  const version = await hydrologist.get('seriesCreate', send(content, body, name))
  return hydrologist.get('seriesVersionRead', { params: { id: version.id } })
}
const latest = async () => (await hydrologist.get('regionRead', { params: { id: regionId } })).versions[0]?.n ?? 0

const heads = 'date,head (m)\n2010-01-15,0\n2011-01-15,-1\n2012-01-15,-2\n2013-01-15,-3\n'
const specificYield = { coefficient: 'specific-yield', value: 0.1, sigma: 0.02, source: 'pumping tests' }

describe('a conversion', () => {
  it('turns heads into gigatonnes, with each step kept and shown', async () => {
    const { massGt, recipe } = await store(heads, { conversion: { quantity: 'head', unit: 'm', storage: specificYield } })
    // 1 m × 0.1 of fresh water (1000 kg/m³) over A km² is A/10 000 Gt.
    massGt.forEach((mass, i) => expect(mass / (areaKm2 / 1e4)).toBeCloseTo(-i, 9))
    expect((recipe.stepsDone as { kind: string }[]).map(step => step.kind)).toEqual(['unit', 'storage', 'area'])
    expect(recipe.conversion).toMatchObject({ quantity: 'head', unit: 'm', storage: specificYield })
    expect((recipe.steps as string[]).join(' ')).toContain('specific yield 0.100 ± 0.020')
  })

  it('makes the error of a parameter a named error of the trend, one with that of the same name', async () => {
    const { sharedRates, mjd } = await store(heads, { conversion: { quantity: 'head', unit: 'm', storage: specificYield }, sharedRates: [{ source: 'pumping tests', sigmaGtPerYear: 1 }] })
    expect(sharedRates.map(rate => rate.source)).toEqual(['pumping tests'])
    // Heads fall by 1 m a year: the relative error of the yield, 0.2, is that of the trend, which has its sign.
    const years = (mjd.at(-1)! - mjd[0]!) / 365.25
    expect((sharedRates[0]!.sigmaGtPerYear - 1) / (-0.2 * 3 / years * areaKm2 / 1e4)).toBeCloseTo(1, 2)
  })

  it('reads acre-feet by their definition', async () => {
    const { massGt } = await store('date,storage\n2010-01-15,0\n2010-02-15,1000000\n', { conversion: { quantity: 'volume', unit: 'acre-feet', density: { material: 'water', value: 1000 } } })
    // NIST Handbook 44, appendix C: one acre-foot is 43 560 cubic feet of 0.3048 m, 1233.481 837 547 52 m³.
    expect(massGt[1]!).toBeCloseTo(1.23348183754752, 12)
  })

  it('sums rates over the periods of their rows', async () => {
    const { massGt, mjd } = await store('from,to,rate\n2010-01-01,2011-01-01,-3\n2011-01-01,2012-01-01,5\n', { conversion: { quantity: 'mass-rate', unit: 'Gt/yr' }, columns: { epochColumn: 0, endColumn: 1, valueColumn: 2 } })
    // MJD 55197, 55562 and 55927 are 1 January 2010, 2011 and 2012 (IERS).
    expect(mjd).toEqual([55197, 55562, 55927])
    const sums = [0, -3, 2]
    massGt.forEach((mass, i) => expect(mass).toBeCloseTo(sums[i]!, 12))
  })

  it.each([
    ['a unit of another dimension', { quantity: 'head', unit: 'km³', storage: specificYield }, 'unit-wrong-dimension'],
    ['a text that is no unit', { quantity: 'mass', unit: 'furlongs of rain' }, 'unit-unknown'],
    ['a head without a storage', { quantity: 'head', unit: 'm' }, 'storage-missing'],
    ['thickness without a density', { quantity: 'ice-thickness', unit: 'm' }, 'density-missing'],
    ['a rate without periods', { quantity: 'mass-rate', unit: 'Gt/yr' }, 'periods-missing'],
  ])('is refused for %s, and nothing is stored', async (_, conversion, code) => {
    const before = await latest()
    const problem = await hydrologist.refused('seriesCreate', 422, send(heads, { conversion }))
    expect(problem.issues!.map(issue => issue.code)).toEqual([code])
    expect(await latest()).toBe(before)
  })
})
