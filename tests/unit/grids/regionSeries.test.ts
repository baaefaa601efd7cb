import fc from 'fast-check'
import { describe, expect, it } from 'vitest'
import { contourOf } from '../../../shared/earth/contour.ts'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { responseOf } from '../../../shared/earth/response.ts'
import { loadOceanCells } from '../../../shared/earth/detailedEarthModel.ts'
import { calendarMonth, mjdFromIsoDate } from '../../../shared/earth/time/epochs.ts'
import { monthlyWeights } from '../../../shared/earth/time/monthly.ts'
import { readCsvGrid } from '../../../shared/grids/csvGrid.ts'
import type { GridFile } from '../../../shared/grids/gridFile.ts'
import { metresPerUnit, openGrid, unpacker } from '../../../shared/grids/heightGrid.ts'
import { regionSeries, regionSeriesPaced } from '../../../shared/grids/regionSeries.ts'
import { scaleFactors, seaOfCells, seaOfMask } from '../../../shared/grids/seaMask.ts'
import type { PhysicsSettings } from '../../../shared/types/domain.ts'
import { InputError } from '../../../shared/types/issue.ts'
import { box, madeGrid, middles, wavy, type MadeGrid } from './gridFixtures.ts'

const settings: PhysicsSettings = { ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled' }
const model = loadEarthModel()
const days = Array.from({ length: 24 }, (_, i) => 15 + 30.4375 * i)
const global: MadeGrid = { lat: middles(-90, 90, 1), lon: middles(0, 360, 1), days: [15, 45, 74], height: () => 1 }
const region = (id: string, geometry = wavy(21, 45, 4)) => ({ id, geometry })

function codes(run: () => unknown): string[] {
  try {
    run()
  } catch (error) {
    if (error instanceof InputError) return error.issues.map(issue => issue.code)
    throw error
  }
  return []
}

describe('series of a region from a grid', () => {
  it('is the height times the ellipsoidal area where the height is everywhere the same', () => {
    const [series] = regionSeries(openGrid(madeGrid({ ...global, height: (_, __, t) => 0.1 * (t + 1) })), [region('a')])
    const areaM2 = contourOf(region('a').geometry).areaM2
    series!.massGt.forEach((mass, t) => expect(Math.abs(mass / (0.1 * (t + 1) * areaM2 * 1e-9) - 1)).toBeLessThan(1e-10))
    expect(series!.heightM[1]).toBeCloseTo(0.2, 12)
    expect(series!.mjd).toEqual([15, 45, 74].map(d => mjdFromIsoDate('2002-01-01') + d))
    expect(series!.steps[1]).toMatch(/^\d+ cells of 1\.00° are weighted with their area inside the outline/)
    expect(series!.effect).toBeNull()
  })

  it('is the sum over parts: two boxes, each with its own height', () => {
    const grid = openGrid(madeGrid({ ...global, height: (_, lon) => lon < 10 ? 2 : -1 }))
    const [series] = regionSeries(grid, [region('both', box(0, 40, 20, 50))])
    const [west, east] = [box(0, 40, 10, 50), box(10, 40, 20, 50)].map(b => contourOf(b).areaM2)
    expect(Math.abs(series!.massGt[0]! / ((2 * west! - east!) * 1e-9) - 1)).toBeLessThan(1e-10)
  })

  it('is the same for 0 to 360 and ±180, rising and falling, any order of dimensions, any cut into blocks', () => {
    const height = (lat: number, lon: number, t: number): number => Math.sin(lat / 9) + Math.cos((lon + 720) % 360 / 7) * (t + 1)
    const first = regionSeries(openGrid(madeGrid({ ...global, height })), [region('a'), region('b', wavy(179, -20, 6))])
    const others: MadeGrid[] = [
      { ...global, height, lon: middles(-180, 180, 1) }, { ...global, height, lat: [...global.lat].reverse(), lon: middles(-180, 180, 1).reverse() },
      { ...global, height, order: ['lat', 'lon', 'time'] }, { ...global, height, order: ['lon', 'lat', 'time'] }, { ...global, height, lon: [...global.lon, 360.5] }
    ]
    for (const made of others) {
      const file = madeGrid(made)
      file.variables.find(v => v.name === 'height')!.chunks = made.order ? [7, 7, 3] : null
      regionSeries(openGrid(file), [region('a'), region('b', wavy(179, -20, 6))]).forEach((series, r) => series.massGt.forEach((mass, t) =>
        expect(Math.abs(mass - first[r]!.massGt[t]!)).toBeLessThan(1e-9 * Math.abs(first[r]!.massGt[t]!))))
    }
  })

  it('scales with the unit: cm, mm and kg/m² of the same heights', () => {
    const mass = (units: string, factor: number): number => regionSeries(openGrid(madeGrid({ ...global, units, height: () => factor })), [region('a')])[0]!.massGt[0]!
    const metres = mass('m', 1)
    for (const [units, factor] of [['cm', 100], ['mm', 1000], ['kg m-2', 1000], ['kg m**-2', 1000], ['mm w.e.', 1000]] as const) expect(Math.abs(mass(units, factor) / metres - 1)).toBeLessThan(1e-12)
    expect(metresPerUnit('K')).toBeNull()
    expect(metresPerUnit('m of ice')).toBeNull()
    expect(codes(() => regionSeries(openGrid(madeGrid({ ...global, units: 'K' })), [region('a')]))).toEqual(['no-unit'])
    expect(regionSeries(openGrid(madeGrid({ ...global, units: 'furlongs' })), [region('a')], { metresPerUnit: 201.168 })[0]!.heightM[0]).toBeCloseTo(201.168, 9)
  })

  it('leaves out a month in which cells lack values, and counts cells that never have one as no part of it', () => {
    const grid = openGrid(madeGrid({ ...global, height: (lat, lon, t) => lon < 19 ? Number.NaN : t === 1 && lat > 45 ? Number.NaN : 1 }))
    const [series] = regionSeries(grid, [region('a', box(18, 40, 24, 50))])
    expect(series!.mjd).toHaveLength(2)
    expect(series!.issues).toMatchObject([{ row: 2, code: 'cells-missing' }])
    expect(series!.issues[0]!.message).toContain('of the region has no value at this epoch; it is left out.')
    expect(series!.usedM2 + series!.missingM2 + series!.seaM2 + series!.outsideM2).toBeCloseTo(series!.areaM2, -2)
    expect(Math.abs(series!.missingM2 / contourOf(box(18, 40, 19, 50)).areaM2 - 1)).toBeLessThan(1e-9)
    expect(series!.steps.join(' ')).toContain('have no value in the grid and count nothing')
    expect(regionSeries(grid, [region('a', box(18, 40, 24, 50))], { mostMissing: 0.6 })[0]!.mjd).toHaveLength(3)
  })

  it('masks cells of the sea, by the engine’s own ocean or by a mask in a file, and says so', () => {
    const grid = openGrid(madeGrid(global))
    const coast = region('a', box(-20, 10, -5, 20))
    const sea = seaOfCells(loadOceanCells(), grid)
    const [masked] = regionSeries(grid, [coast], { sea })
    const [whole] = regionSeries(grid, [coast])
    expect(masked!.seaM2).toBeGreaterThan(1e11)
    expect(masked!.usedM2 + masked!.seaM2).toBeCloseTo(whole!.usedM2, -3)
    expect(masked!.massGt[0]).toBeCloseTo(whole!.massGt[0]! - masked!.seaM2 * 1e-9, 6)
    expect(masked!.steps.join(' ')).toContain('half or more is sea are left out')
    const mask = openGrid(madeGrid({ ...global, days: [0], lon: middles(-180, 180, 1), height: (_, lon) => lon < -16 ? 0 : 1 }), 'height')
    const [byFile] = regionSeries(grid, [coast], { sea: seaOfMask(mask, grid) })
    expect(Math.abs(byFile!.seaM2 / contourOf(box(-20, 10, -16, 20)).areaM2 - 1)).toBeLessThan(1e-9)
    const percent = openGrid(madeGrid({ ...global, days: [0], height: () => 100 }), 'height')
    expect(codes(() => seaOfMask(percent, grid))).toEqual(['bad-mask'])
  })

  it('multiplies by scale factors of the same cells, and refuses those of others', () => {
    const grid = openGrid(madeGrid(global))
    const factors = openGrid(madeGrid({ ...global, days: [0], lon: middles(-180, 180, 1), height: lat => lat > 45 ? 1.5 : 0.5 }), 'height')
    const scale = scaleFactors(factors, grid)
    const [series] = regionSeries(grid, [region('a', box(0, 40, 10, 50))], { scale })
    const [south, north] = [contourOf(box(0, 40, 10, 45)).areaM2, contourOf(box(0, 45, 10, 50)).areaM2]
    expect(Math.abs(series!.massGt[0]! / ((0.5 * south + 1.5 * north) * 1e-9) - 1)).toBeLessThan(1e-10)
    const coarse = openGrid(madeGrid({ ...global, days: [0], lat: middles(-90, 90, 2), lon: middles(0, 360, 2) }), 'height')
    expect(codes(() => scaleFactors(coarse, grid))).toEqual(['other-grid'])
  })

  it('says what a region lies outside of', () => {
    const regional = openGrid(madeGrid({ ...global, lat: middles(20, 40, 0.5), lon: middles(0, 20, 0.5) }))
    const [series] = regionSeries(regional, [region('a', box(10, 30, 30, 40))])
    expect(series!.steps.at(-1)).toContain('lie outside the grid and count nothing')
    expect(codes(() => regionSeries(regional, [region('a', box(50, 30, 60, 40))]))).toEqual(['not-covered'])
    expect(codes(() => regionSeries(openGrid(madeGrid({ ...global, height: () => Number.NaN })), [region('a')]))).toEqual(['not-covered'])
  })

  it('keeps a gap of the grid a gap: no month is made up between June 2017 and June 2018', () => {
    // The months between the two gravimetry missions; the grid has none, the series has none, and months are not bridged.
    const months = [[2017, 4], [2017, 5], [2017, 6], [2018, 6], [2018, 7]].map(([year, month]) => calendarMonth(year!, month!))
    const grid = openGrid(madeGrid({ ...global, days: months.map(m => m.middleMjd - mjdFromIsoDate('2002-01-01')) }))
    const [series] = regionSeries(grid, [region('a')])
    expect(series!.mjd).toHaveLength(5)
    const wanted = Array.from({ length: 16 }, (_, i) => calendarMonth(2017 + Math.floor((3 + i) / 12), (3 + i) % 12 + 1))
    const present = monthlyWeights(series!.mjd, wanted, 92).map(w => w !== null)
    expect(present).toEqual(wanted.map((_, i) => i < 3 || i >= 14))
  })

  it('reads in steps with progress, and can be ended', async () => {
    const grid = openGrid(madeGrid(global))
    const progress: number[] = []
    const read = await regionSeriesPaced(grid, [region('a'), region('b', box(0, 0, 5, 5))], {}, { pause: async () => {}, onProgress: done => progress.push(done) })
    expect(read).toEqual(regionSeries(grid, [region('a'), region('b', box(0, 0, 5, 5))]))
    expect(progress.at(-1)).toBe(1)
    const end = new AbortController()
    end.abort(new Error('enough'))
    await expect(regionSeriesPaced(grid, [region('a')], {}, { pause: async () => {}, signal: end.signal })).rejects.toThrow('enough')
  })
})

describe('effect with the grid’s own pattern', () => {
  const sized = (effect: { chi1Mas: number, chi2Mas: number }): number => Math.hypot(effect.chi1Mas, effect.chi2Mas)

  it('is that of an even spread where the heights are the same everywhere', () => {
    const [series] = regionSeries(openGrid(madeGrid(global)), [region('a', wavy(100, 60, 12))], { effect: { model, settings } })
    const { pattern, even } = series!.effect!
    for (const name of ['chi1Mas', 'chi2Mas', 'lodMicroseconds', 'deltaJ2'] as const) expect(Math.abs(pattern[name][0]! / even[name][0]! - 1)).toBeLessThan(1e-9)
  })

  it('is that of the part that holds the mass, and differs from an even spread', () => {
    const whole = box(0, 20, 60, 60)
    const part = box(40, 40, 60, 60)
    const grid = openGrid(madeGrid({ ...global, days, height: (lat, lon, t) => lat > 40 && lon > 40 && lon < 60 ? t + 1 : 0 }))
    const [series] = regionSeries(grid, [region('a', whole)], { effect: { model, settings } })
    const response = responseOf(contourOf(part), model, settings)
    const mass = series!.massGt[5]!
    const { pattern, even } = series!.effect!
    const expected = { chi1Mas: response.chi1Mas * mass, chi2Mas: response.chi2Mas * mass }
    // Mass is even per area of the sphere in an outline and of the ellipsoid in a grid: some 1e-3 over 20° of latitude.
    expect(Math.hypot(pattern.chi1Mas[5]! - expected.chi1Mas, pattern.chi2Mas[5]! - expected.chi2Mas)).toBeLessThan(2e-3 * sized(expected))
    expect(Math.abs(pattern.lodMicroseconds[5]! / (response.lodMicroseconds * mass) - 1)).toBeLessThan(3e-3)
    expect(Math.hypot(pattern.chi1Mas[5]! - even.chi1Mas[5]!, pattern.chi2Mas[5]! - even.chi2Mas[5]!)).toBeGreaterThan(0.1 * sized(expected))
  })

  it('is there where the masses cancel and an even spread has none', () => {
    const grid = openGrid(madeGrid({ ...global, height: lat => lat > 0 ? 1 : -1 }))
    const [series] = regionSeries(grid, [region('a', box(10, -30, 40, 30))], { effect: { model, settings } })
    expect(Math.abs(series!.massGt[0]!)).toBeLessThan(1e-6)
    expect(Math.abs(series!.effect!.even.chi1Mas[0]!)).toBeLessThan(1e-9)
    expect(Math.abs(series!.effect!.pattern.chi1Mas[0]!)).toBeGreaterThan(1)
  })
})

describe('packed and missing values', () => {
  it('are missing by fill value, missing value, valid range, and by what NetCDF fills with', () => {
    const unpack = unpacker({ attributes: { _FillValue: -99, missing_value: [1e20, -5], valid_range: [-1000, 1e30], scale_factor: 0.5, add_offset: 3 } })
    expect([4, -99, -5, 1e20, Math.fround(1e20), -1001, Number.NaN].map(unpack)).toEqual([5, NaN, NaN, NaN, NaN, NaN, NaN])
    const bare = unpacker({ attributes: {} })
    expect([1, 9.969209968386869e36, -32767, -9999].map(bare)).toEqual([1, NaN, NaN, -9999])
  })
})

describe('grids as tables', () => {
  const text = `lon,lat,time,lwe_cm\n${[0, 1].flatMap(t => [10.5, 11.5].flatMap(lat => [20.5, 21.5, 22.5].map(lon => `${lon},${lat},2002-0${t + 1}-15,${10 * lat + lon + 100 * t}`))).join('\n')}\n`

  it('become the same grid', () => {
    const read = readCsvGrid(text)
    expect(read).toMatchObject({ rowsRead: 12, rowsStored: 12, issues: [], chosen: { lonColumn: 0, latColumn: 1, timeColumn: 2, valueColumn: 3, epochFormat: 'iso-date', units: 'cm' } })
    const grid = openGrid(read.file)
    expect(grid.candidate).toMatchObject({ epochs: 2, rows: 2, columns: 3, metresPerUnit: 0.01 })
    const [series] = regionSeries(grid, [region('a', box(21, 11, 22, 12))])
    expect(series!.mjd).toEqual([mjdFromIsoDate('2002-01-15'), mjdFromIsoDate('2002-02-15')])
    expect(series!.heightM[0]).toBeCloseTo(1.365, 9)
  })

  it('account for every row', () => {
    const cell = fc.constantFrom('0.5', '1.5', '2.5', '-0.5', '2002-01-15', '2002-02-15', '', 'x', '95', '"')
    fc.assert(fc.property(fc.array(fc.array(cell, { minLength: 1, maxLength: 5 }), { maxLength: 30 }), (rows) => {
      let read
      try {
        read = readCsvGrid(`lon,lat,time,height\n${rows.map(row => row.join(',')).join('\n')}`, { header: true, delimiter: ',', epochFormat: 'iso-date' })
      } catch (error) {
        expect(error).toBeInstanceOf(InputError)
        return
      }
      expect(read.rowsStored + read.issues.length).toBe(read.rowsRead)
      const stored = read.file.variables.find(v => v.name === 'height')!
      const sizes = stored.dimensions.map(d => d.size)
      expect(Array.from(stored.read(sizes.map(() => 0), sizes)).filter(v => !Number.isNaN(v))).toHaveLength(read.rowsStored)
    }), { numRuns: 300 })
  })

  it('refuse scattered places and tables without the columns', () => {
    const scattered = `lon,lat,time,height\n${Array.from({ length: 6000 }, (_, i) => `${i / 100},${i / 100},2002-01-15,1`).join('\n')}`
    expect(codes(() => readCsvGrid(scattered))).toEqual(['not-a-grid'])
    expect(codes(() => readCsvGrid('lon,lat,height\n1,2,3\n'))).toEqual(['no-grid'])
  })
})

describe('axes that do not hold', () => {
  const refused = (made: Partial<MadeGrid>): string[] => codes(() => openGrid(madeGrid({ ...global, ...made })))
  it('are refused with the reason', () => {
    expect(refused({ lat: [0, 10, 5] })).toEqual(['bad-axis'])
    expect(refused({ lat: [80, 100] })).toEqual(['bad-axis'])
    expect(refused({ lon: [0, 7, 15] })).toEqual(['bad-axis'])
    expect(refused({ lon: [0, 1, 2.5] })).toEqual(['bad-axis'])
    expect(refused({ lat: [3] })).toEqual(['bad-axis'])
    const file: GridFile = madeGrid(global)
    file.variables[0]!.attributes.units = 'days after'
    expect(codes(() => openGrid(file))).not.toEqual([])
    expect(codes(() => openGrid({ ...file, variables: [] }))).toEqual(['no-grid'])
    expect(codes(() => openGrid(madeGrid(global), 'depth'))).toEqual(['no-grid'])
  })
})
