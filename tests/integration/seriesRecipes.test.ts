import { createHash } from 'node:crypto'
import { readFileSync } from 'node:fs'
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
    expect((recipe.steps as string[]).join(' ')).toMatch(/specific yield 0\.100\s±\s0\.020/)
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

describe('rows corrected by hand', () => {
  const table = 'date,mass (Gt)\n2010-01-15,1\n2010-02-30,2\n2010-03-15,x\n2010-04-15,4\n'

  it('are read as corrected or left out with their reason, and the original stays', async () => {
    const version = await hydrologist.get('seriesCreate', send(table, { columns: { edits: [{ row: 3, column: 0, text: '2010-02-28' }], leaveOut: [{ row: 4, reason: 'instrument out of order' }] } }))
    const { massGt, recipe } = await hydrologist.get('seriesVersionRead', { params: { id: version.id } })
    expect(massGt).toEqual([1, 2, 4])
    expect(recipe.edited).toEqual([{ row: 3, column: 0, text: '2010-02-28', was: '2010-02-30' }])
    expect(recipe.leftOutOnPurpose).toMatchObject([{ row: 4, reason: 'instrument out of order' }])
    expect(recipe).toMatchObject({ leftOutCount: 0, rowsRead: 4, rowsStored: 3 })
    const response = await fetch(`${url}/api/v1/series-versions/${version.id}/original`, { headers: { cookie: hydrologist.cookie } })
    expect(await response.text()).toBe(table)
  })

  it('must be in the file', async () => {
    const problem = await hydrologist.refused('seriesCreate', 422, send(table, { columns: { leaveOut: [{ row: 99, reason: '' }] } }))
    expect(problem.issues).toMatchObject([{ row: 99, code: 'no-such-row' }])
  })
})

describe('checks of a version', () => {
  const rows = Array.from({ length: 36 }, (_, i) => `${2010 + Math.floor(i / 12)}-${String(i % 12 + 1).padStart(2, '0')}-15,${i === 18 ? 90 : (((i * 7) % 11 - 5) / 10).toFixed(2)}`)
  const table = `date,mass (Gt)\n${rows.join('\n')}\n`
  interface Checks { found: number, open: number, marks: { id: string, kind: string, state: string, note?: string, rows: number[] }[], corrected: { id: string }[] }

  it('are kept with what was found, open until somebody decides', async () => {
    const checks = (await store(table, {})).recipe.checks as Checks
    const outlier = checks.marks.find(mark => mark.kind === 'outlier')!
    expect(outlier).toMatchObject({ state: 'open', rows: [20] })
    const again = (await store(table, { decisions: [{ id: outlier.id, choice: 'accepted', note: 'a flood' }] })).recipe.checks as Checks
    expect(again.marks.find(mark => mark.id === outlier.id)).toMatchObject({ state: 'accepted', note: 'a flood' })
    expect(again.open).toBe(again.found - 1)
  })

  it('count a finding that is gone as corrected, never one that still stands', async () => {
    const first = (await store(table, {})).recipe.checks as Checks
    const id = first.marks.find(mark => mark.kind === 'outlier')!.id
    const decisions = [{ id, choice: 'corrected', note: 'row 20' }]
    const standing = (await store(table, { decisions })).recipe.checks as Checks
    expect(standing.corrected).toEqual([])
    expect(standing.marks.find(mark => mark.id === id)).toMatchObject({ state: 'open' })
    const corrected = (await store(table, { decisions, columns: { edits: [{ row: 20, column: 1, text: '0.9' }] } })).recipe.checks as Checks
    expect(corrected.corrected).toEqual([{ id, note: 'row 20' }])
  })
})

// Written by openpyxl, another implementation of the format: tests/fixtures/series/README.md.
describe('a workbook', () => {
  const workbook = new Uint8Array(readFileSync('tests/fixtures/series/invented.xlsx'))
  const conversion = { quantity: 'head', unit: 'm', storage: { ...specificYield, sigma: 0 } }

  it('is read from the sheet and column that are chosen, and kept byte for byte', async () => {
    const version = await hydrologist.get('seriesCreate', send(workbook, { columns: { sheet: 'heads', valueColumn: 1 }, conversion }, 'wells.xlsx'))
    const { massGt, recipe } = await hydrologist.get('seriesVersionRead', { params: { id: version.id } })
    // 12.5 m × 0.1 over A km² is 1.25 A/1000 Gt.
    expect(massGt[0]! / (1.25 * areaKm2 / 1000)).toBeCloseTo(1, 9)
    expect(recipe.sheet).toBe('heads')
    expect(version.originalSha256).toBe(createHash('sha256').update(workbook).digest('hex'))
  })

  it('is refused by name for a sheet that it does not have', async () => {
    const problem = await hydrologist.refused('seriesCreate', 422, send(workbook, { columns: { sheet: 'rain' } }, 'wells.xlsx'))
    expect(problem.issues).toMatchObject([{ code: 'no-such-sheet' }])
    expect(problem.detail).toContain('“heads”')
  })
})
