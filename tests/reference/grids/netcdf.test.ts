import { readFileSync } from 'node:fs'
import { ready, File as Hdf5File } from 'h5wasm/node'
import { NetCDFReader } from 'netcdfjs'
import { beforeAll, describe, expect, it } from 'vitest'
import { mjdFromIsoDate } from '../../../shared/earth/time/epochs.ts'
import { allValues } from '../../../shared/grids/axes.ts'
import { cfTimeUnits, mjdFromCf } from '../../../shared/grids/cfTime.ts'
import { sourceOf, type GridFile } from '../../../shared/grids/gridFile.ts'
import { gridCandidates, openGrid, staticValues, valuesAtEpoch } from '../../../shared/grids/heightGrid.ts'
import { isHdf5, openNetcdf4 } from '../../../shared/grids/netcdf4.ts'
import { isNetcdfClassic, openNetcdfClassic } from '../../../shared/grids/netcdfClassic.ts'
import { InputError } from '../../../shared/types/issue.ts'

const path = (name: string): string => `tests/fixtures/grids/${name}`
const bytes = (name: string): Uint8Array => new Uint8Array(readFileSync(path(name)))
const classic = (name: string): GridFile => openNetcdfClassic(sourceOf(bytes(name)))

/** The numbers of a variable as they stand in the text that ncgen read. */
function inText(variable: string): number[] {
  const text = readFileSync(path('packed.cdl'), 'utf8')
  const data = new RegExp(`^ ${variable} =([^;]*);`, 'm').exec(text.slice(text.indexOf('data:')))![1]!
  return data.split(',').map(Number)
}

// Written by ncgen of Debian's netcdf-bin 4.9.0 from packed.cdl, in its four formats.
describe.each(['nc3', 'nc6', 'nc5', 'nc4'])('a grid that ncgen wrote as %s', (kind) => {
  let file: GridFile
  beforeAll(async () => {
    await ready
    file = kind === 'nc4' ? openNetcdf4(new Hdf5File(path('packed.nc4.nc'), 'r')) : classic(`packed.${kind}.nc`)
  })

  it('holds every raw value to the digit', () => {
    for (const name of ['time', 'time_bnds', 'lat', 'lon', 'lwe_thickness', 'land_mask']) {
      const variable = file.variables.find(v => v.name === name)!
      const sizes = variable.dimensions.map(d => d.size)
      expect(Array.from(variable.read(sizes.map(() => 0), sizes)), name).toEqual(inText(name))
    }
  })

  it('gives any block of a variable', () => {
    const variable = file.variables.find(v => v.name === 'lwe_thickness')!
    const all = inText('lwe_thickness')
    for (const [start, count] of [[[1, 1, 3], [2, 2, 4]], [[0, 0, 0], [3, 1, 8]], [[2, 3, 7], [1, 1, 1]], [[0, 1, 2], [3, 3, 1]], [[1, 0, 0], [1, 4, 8]], [[0, 0, 0], [0, 4, 8]]] as const) {
      const expected: number[] = []
      for (let t = 0; t < count[0]; t++) for (let i = 0; i < count[1]; i++) for (let j = 0; j < count[2]; j++) expected.push(all[(start[0] + t) * 32 + (start[1] + i) * 8 + start[2] + j]!)
      expect(Array.from(variable.read([...start], [...count]))).toEqual(expected)
    }
    expect(() => variable.read([0, 0, 1], [3, 4, 8])).toThrow('must lie in 3 × 4 × 8 values')
  })

  it('is understood by the CF conventions', () => {
    expect(gridCandidates(file).map(({ name, epochs, rows, columns, metresPerUnit }) => [name, epochs, rows, columns, metresPerUnit])).toEqual([
      ['lwe_thickness', 3, 4, 8, 0.01], ['land_mask', 0, 4, 8, null]
    ])
    const grid = openGrid(file)
    expect(grid.candidate.longName).toBe('Liquid_Water_Equivalent_Thickness')
    expect(grid.latitude.rising).toBe(false)
    expect([...grid.latitude.edgesDeg]).toEqual([-90, -45, 0, 45, 90])
    expect(grid.longitude).toMatchObject({ westDeg: 0, stepDeg: 45, circle: 8 })
    expect([...grid.time!.mjd]).toEqual(['2002-01-16T12:00', '2002-02-15', '2002-03-16T12:00'].map(mjdFromIsoDate))
    expect([...grid.time!.startMjd!]).toEqual(['2002-01-01', '2002-02-01', '2002-03-01'].map(mjdFromIsoDate))
    // 0.25 × packed + 10, and the fill value is missing: worked out by hand.
    const second = valuesAtEpoch(grid, 1)
    expect(second[0]).toBe(35)
    expect(second[2 * 8 + 3]).toBeNaN()
    expect(second.filter(Number.isNaN)).toHaveLength(1)
    expect(valuesAtEpoch(grid, 2)[31]).toBe(0.25 * 32766 + 10)
    expect([...staticValues(openGrid(file, 'land_mask'))]).toEqual(inText('land_mask'))
    expect(file.attributes.title).toBe('invented grid of water-equivalent height')
  })
})

// Written by scipy.io.netcdf_file of scipy 1.17.1; the values are those of the script in the fixtures' README.
describe('a grid that scipy wrote', () => {
  const file = classic('heights.scipy.nc')

  it('holds every value to the digit, between two record variables', () => {
    for (let t = 0; t < 4; t++) {
      const values = valuesAtEpoch(openGrid(file), t)
      for (let k = 0; k < 18; k++) {
        // numpy works out (k + 1)·π·(t + 1) − 7 in this order.
        const expected = (k + 1) * Math.PI * (t + 1) - 7
        if (t === 2 && k === 9) expect(values[k]).toBeNaN()
        else expect(values[k]).toBe(expected)
      }
    }
    expect([...allValues(file.variables.find(v => v.name === 'flag')!)]).toEqual([0, 1, 2, 3])
  })

  it('is understood: kg m-2, hours since, columns from −180°', () => {
    const grid = openGrid(file)
    expect(grid.candidate.metresPerUnit).toBe(1e-3)
    expect([...grid.latitude.edgesDeg]).toEqual([-90, -30, 30, 90])
    expect(grid.longitude).toMatchObject({ westDeg: -180, stepDeg: 60, circle: 6 })
    expect([...grid.time!.mjd]).toEqual(['2004-02-29T12:00', '2004-03-01T12:00', '2004-03-02T12:00', '2004-03-03T12:00'].map(mjdFromIsoDate))
  })
})

describe('another reader of the classic formats', () => {
  // netcdfjs 4.0.0, an independent implementation.
  it.each(['packed.nc3.nc', 'packed.nc6.nc', 'heights.scipy.nc'])('finds the same in %s', (name) => {
    const other = new NetCDFReader(bytes(name))
    const file = classic(name)
    expect(file.variables.map(v => v.name)).toEqual(other.variables.map(v => v.name))
    // It takes the padding behind a record of two bytes for values, so `flag` is left to the reader's own test.
    for (const variable of file.variables.filter(v => v.numeric && v.name !== 'flag')) {
      const sizes = variable.dimensions.map(d => d.size)
      expect(Array.from(variable.read(sizes.map(() => 0), sizes)), variable.name).toEqual((other.getDataVariable(variable.name) as (number | number[])[]).flat())
    }
  })
})

describe('files that are none', () => {
  const refused = (run: () => unknown): string => {
    try {
      run()
    } catch (error) {
      if (error instanceof InputError) return error.issues[0]!.message
      throw error
    }
    return ''
  }

  it('are told by their first bytes', () => {
    expect([isNetcdfClassic(bytes('packed.nc3.nc')), isNetcdfClassic(bytes('packed.nc4.nc')), isHdf5(bytes('packed.nc4.nc')), isHdf5(bytes('packed.nc5.nc'))]).toEqual([true, false, true, false])
  })

  it('are refused where they are cut off or damaged, wherever', () => {
    const whole = bytes('packed.nc3.nc')
    expect(refused(() => openNetcdfClassic(sourceOf(whole.slice(0, whole.length - 40))))).toContain('it is cut off: the variable')
    for (let length = 0; length < 900; length += 7) expect(refused(() => openNetcdfClassic(sourceOf(whole.slice(0, length)))), `cut at ${length}`).toContain('not a NetCDF file')
    for (let at = 0; at < 400; at++) {
      const damaged = whole.slice()
      damaged[at] = damaged[at]! ^ 0xff
      try {
        openNetcdfClassic(sourceOf(damaged))
      } catch (error) {
        expect(error, `damaged at ${at}`).toBeInstanceOf(InputError)
      }
    }
  })
})

describe('times of the CF conventions', () => {
  // Dates by cftime 1.6.2 (Debian python3-cftime), in five units and six calendars.
  const cases = JSON.parse(readFileSync(path('cf-times.json'), 'utf8')) as [string, string, number, string][]

  it.each(['standard', 'proleptic_gregorian'])('are the dates of cftime in the calendar %s', (calendar) => {
    const own = cases.filter(c => c[1] === calendar)
    expect(own.length).toBeGreaterThan(20)
    for (const [units, , value, date] of own) {
      // The dates are cut to whole seconds.
      const seconds = (mjdFromCf(value, cfTimeUnits(units, calendar)) - mjdFromIsoDate(date)) * 86_400
      expect(seconds, `${value} ${units}`).toBeGreaterThan(-0.01)
      expect(seconds, `${value} ${units}`).toBeLessThan(1.01)
    }
  })

  it.each(['noleap', 'all_leap', '360_day'])('are the dates of cftime in the calendar %s, put on the Gregorian one', (calendar) => {
    const own = cases.filter(c => c[1] === calendar)
    expect(own.length).toBeGreaterThan(15)
    for (const [units, , value, date] of own) {
      const mjd = mjdFromCf(value, cfTimeUnits(units, calendar))
      const [year, month, day] = date.slice(0, 10).split('-').map(Number) as [number, number, number]
      const exists = day <= new Date(Date.UTC(year, month, 0)).getUTCDate()
      // A year of 360 days is stretched over the true one: up to six days from the date of the same name.
      const days = exists ? mjd - mjdFromIsoDate(date) : mjd - mjdFromIsoDate(`${date.slice(0, 7)}-28`) - 1
      expect(Math.abs(days), `${value} ${units} ${calendar}`).toBeLessThan(calendar === '360_day' ? 6 : 1.01 / 86_400 + (exists ? 0 : 2))
    }
  })

  it('are those of the Julian calendar, 13 days behind since 1900', () => {
    const own = cases.filter(c => c[1] === 'julian' && !c[0].includes('0001') && Number(c[3].slice(0, 4)) < 2100)
    expect(own.length).toBeGreaterThan(10)
    for (const [units, , value, date] of own) {
      if (date.includes('02-29')) continue
      const seconds = (mjdFromCf(value, cfTimeUnits(units, 'julian')) - mjdFromIsoDate(date) - 13) * 86_400
      const early = Number(date.slice(0, 4)) < 1900 || date < '1900-03-01'
      expect(Math.abs(seconds + (early ? 86_400 : 0)), `${value} ${units}`).toBeLessThan(1.01)
    }
  })

  it('of months and years are calendar months and years', () => {
    expect(mjdFromCf(3, cfTimeUnits('months since 2002-01-15', 'standard'))).toBe(mjdFromIsoDate('2002-04-15'))
    expect(mjdFromCf(0.5, cfTimeUnits('years since 2003-01-01', null))).toBe(mjdFromIsoDate('2003-07-01'))
    expect(mjdFromCf(1, cfTimeUnits('days since 2003-01-01 00:00:00 +05:30', null))).toBeCloseTo(mjdFromIsoDate('2003-01-01T18:30'), 9)
  })

  it('are refused in units and calendars that are not understood', () => {
    expect(() => cfTimeUnits('fortnights since 2002-01-01', null)).toThrow('got “fortnights”')
    expect(() => cfTimeUnits('days after the flood', null)).toThrow('must be like')
    expect(() => cfTimeUnits('days since 2002-01-01', 'mayan')).toThrow('got “mayan”')
  })
})
