import { createHash } from 'node:crypto'
import { readdirSync } from 'node:fs'
import { join } from 'node:path'
import { beforeAll, describe, expect, inject, it } from 'vitest'
import type { Client } from '../support/client'
import { addWorkspace, makeRegion, makeVersion, monthlyCsv, newcomer, seriesFacts, square, type Place } from '../support/world'

const url = inject('url')
const dataDir = inject('dataDir')
let place: Place
let hydrologist: Client
let regionId: string
let areaKm2: number

beforeAll(async () => {
  place = addWorkspace(dataDir, 'Series')
  hydrologist = await newcomer(url, dataDir, { place, role: 'hydrologist' })
  const region = await makeRegion(hydrologist, place, 'aquifer', square(77, 29))
  regionId = region.id
  areaKm2 = region.outline.areaKm2
})

const send = (content: string | Uint8Array, body: object = {}) => ({ params: { id: regionId }, body: { ...seriesFacts, columns: {}, ...body }, file: { name: 'mass.csv', content } })
const versions = async () => (await hydrologist.get('regionRead', { params: { id: regionId } })).versions

describe('a file with rows that cannot be used', () => {
  const bad = ['date,mass (Gt),sigma (Gt)', '2010-01-15,1.5,0.5', '2010-02-30,2.0,0.5', '2010-03-15,many,0.5', '2010-04-15,3.0,0.5', '2010-04-15,3.1,0.5', '2010-05-15,2.5,-1', '2010-06-15,2.2,0.5'].join('\n')

  it('is refused with each bad row’s number and reason, and nothing is stored', async () => {
    const problem = await hydrologist.refused('seriesCreate', 422, send(bad))
    expect(problem.issues!.map(i => i.row)).toEqual([3, 4, 6, 7])
    for (const issue of problem.issues!) {
      expect(issue.column).toBeDefined()
      expect(issue.message.length).toBeGreaterThan(10)
    }
    expect(problem.detail).toMatch(/4 of 7 rows.*Nothing was stored/)
    expect(await versions()).toEqual([])
    expect(readdirSync(join(dataDir, 'incoming'))).toEqual([])
  })

  it('is stored without them when the person decides so, and the recipe says what was left out', async () => {
    const version = await hydrologist.get('seriesCreate', send(bad, { leaveOutBadRows: true, reason: 'four bad rows left out' }))
    expect(version).toMatchObject({ n: 1, count: 3, reason: 'four bad rows left out' })
    const { massGt, sigmaGt, mjd, recipe } = await hydrologist.get('seriesVersionRead', { params: { id: version.id } })
    expect(massGt).toEqual([1.5, 3, 2.2])
    expect(sigmaGt).toEqual([0.5, 0.5, 0.5])
    // MJD 55197 is 1 January 2010 (IERS).
    expect(mjd[0]).toBe(55197 + 14)
    expect(recipe).toMatchObject({ rowsRead: 7, rowsStored: 3, leftOutCount: 4 })
  })

  it('has no row that holds at all: refused even then', async () => {
    await hydrologist.refused('seriesCreate', 422, send('date,mass (Gt)\nsoon,much\nlater,more\n', { leaveOutBadRows: true }))
    await hydrologist.refused('seriesCreate', 422, send(''))
  })
})

describe('a stored version', () => {
  it('keeps the original byte for byte, whatever its name and encoding', async () => {
    const original = Buffer.concat([Buffer.from([0xEF, 0xBB, 0xBF]), Buffer.from(monthlyCsv(3, -7).replaceAll('\n', '\r\n'), 'utf8')])
    const version = await hydrologist.get('seriesCreate', { ...send(original), file: { name: 'Größe Übersicht.csv', content: original } })
    expect(version.originalSha256).toBe(createHash('sha256').update(original).digest('hex'))
    expect(version.originalName).toBe('Größe Übersicht.csv')
    const response = await fetch(`${url}/api/v1/series-versions/${version.id}/original`, { headers: { cookie: hydrologist.cookie } })
    expect(Buffer.from(await response.arrayBuffer()).equals(original)).toBe(true)
    expect(response.headers.get('content-disposition')).toContain(`filename*=UTF-8''${encodeURIComponent('Größe Übersicht.csv')}`)
    expect(response.headers.get('content-type')).toBe('application/octet-stream')
  })

  it('gets the next number, and the one before stays as it was', async () => {
    const before = await versions()
    const next = await makeVersion(hydrologist, regionId, monthlyCsv(5, -20))
    const after = await versions()
    expect(next.n).toBe(before[0]!.n + 1)
    expect(after.slice(1)).toEqual(before)
  })

  it('from water equivalent over the ellipsoidal area is mass', async () => {
    const version = await hydrologist.get('seriesCreate', send('date,water equivalent (cm)\n2010-01-15,1\n2010-02-15,-2\n2010-03-15,0\n'))
    const { massGt } = await hydrologist.get('seriesVersionRead', { params: { id: version.id } })
    // 1 cm of fresh water (1000 kg/m³) over A km² is A/100 000 Gt.
    expect(massGt[0]! / (areaKm2 / 1e5)).toBeCloseTo(1, 9)
    expect(massGt[1]!).toBeCloseTo(-2 * massGt[0]!, 9)
  })

  it('has columns and unit as chosen where recognition would take others', async () => {
    const text = 'when;a;b\n2010,5;1;10\n2011,5;2;20\n2012,5;3;30\n'
    const version = await hydrologist.get('seriesCreate', send(text, { columns: { epochColumn: 0, valueColumn: 2, sigmaColumn: null, unit: 'Gt', epochFormat: 'decimal-year', delimiter: ';', decimalComma: true, header: true } }))
    const { massGt, sigmaGt, mjd } = await hydrologist.get('seriesVersionRead', { params: { id: version.id } })
    expect(massGt).toEqual([10, 20, 30])
    expect(sigmaGt).toBeNull()
    // The middle of the calendar year 2010: MJD 55197 + 182.5.
    expect(mjd[0]).toBe(55197 + 182.5)
  })

  it('carries systematic trend errors by source', async () => {
    const version = await hydrologist.get('seriesCreate', send(monthlyCsv(4, -3), { sharedRates: [{ source: 'degree-1', sigmaGtPerYear: 1.5 }] }))
    expect((await hydrologist.get('seriesVersionRead', { params: { id: version.id } })).sharedRates).toEqual([{ source: 'degree-1', sigmaGtPerYear: 1.5 }])
  })
})

describe('a region’s prediction', () => {
  it('is its mass times its response, with the trend that went in', async () => {
    await makeVersion(hydrologist, regionId, monthlyCsv(10, -24))
    const prediction = await hydrologist.get('regionPrediction', { params: { id: regionId }, query: { ocean: 'uniform' } })
    const mean = prediction.massGt.reduce((sum, m) => sum + m, 0) / prediction.massGt.length
    prediction.lodMicroseconds.forEach((lod, i) => expect(lod).toBeCloseTo((prediction.massGt[i]! - mean) * prediction.perGt.lodMicroseconds, 9))
    const trend = prediction.trend!
    expect(Math.abs(trend.massGtPerYear.value + 24)).toBeLessThan(0.1)
    expect(trend.massGtPerYear.sigma).toBeGreaterThan(0)
    // Independent reference, uniform ocean: 100 Gt lost at 29° N 77° E shorten the day by 0.2899 µs and move the pole 4.84 cm towards 75.8° E.
    expect(trend.lodMicrosecondsPerYear.value / trend.massGtPerYear.value / (0.2899 / 100)).toBeCloseTo(1, 2)
    expect(trend.driftCmPerYear.value / -trend.massGtPerYear.value / (4.84 / 100)).toBeCloseTo(1, 2)
    expect(trend.directionDegEast).toBeCloseTo(75.8, 0)
  })
})
