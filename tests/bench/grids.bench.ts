import { closeSync, mkdtempSync, openSync, rmSync, writeSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join } from 'node:path'
import { covarianceOf } from '../../shared/earth/time/covariance.ts'
import { trendWeights } from '../../shared/earth/time/covarianceTrend.ts'
import { monteCarlo } from '../../shared/earth/time/monteCarlo.ts'
import { openGrid } from '../../shared/grids/heightGrid.ts'
import { regionSeries } from '../../shared/grids/regionSeries.ts'
import { loadEarthModel } from '../../shared/earth/earthModel.ts'
import { openGridFile } from '../../server/workers/parts/openGridFile.ts'
import { wavy } from '../unit/grids/gridFixtures.ts'
import { fastest, type Figure } from './measure.ts'

const MONTHS = 240
const ROWS = 360
const COLUMNS = 720

/** A half-degree grid over twenty years as NetCDF (CDF-1, single precision, 249 MB), written as the format's specification has it. */
function writeGrid(path: string): void {
  const parts: Buffer[] = []
  const int = (...values: number[]): void => values.forEach((v) => {
    const bytes = Buffer.alloc(4)
    bytes.writeUInt32BE(v)
    parts.push(bytes)
  })
  const name = (text: string): void => {
    int(text.length)
    parts.push(Buffer.from(text.padEnd(4 * Math.ceil(text.length / 4), '\0')))
  }
  const units = (text: string): void => {
    int(12, 1)
    name('units')
    int(2)
    name(text)
  }
  const variables = [
    { name: 'time', dimensions: [0], units: 'days since 2002-01-01', type: 6, bytes: 8 * MONTHS }, { name: 'lat', dimensions: [1], units: 'degrees_north', type: 6, bytes: 8 * ROWS },
    { name: 'lon', dimensions: [2], units: 'degrees_east', type: 6, bytes: 8 * COLUMNS }, { name: 'lwe', dimensions: [0, 1, 2], units: 'cm', type: 5, bytes: 4 * MONTHS * ROWS * COLUMNS }
  ]
  const build = (header: number): void => {
    parts.length = 0
    parts.push(Buffer.from('CDF\x01', 'latin1'))
    int(0, 10, 3)
    for (const [dimension, size] of [['time', MONTHS], ['lat', ROWS], ['lon', COLUMNS]] as const) {
      name(dimension)
      int(size)
    }
    int(0, 0, 11, variables.length)
    let begin = header
    for (const variable of variables) {
      name(variable.name)
      int(variable.dimensions.length, ...variable.dimensions)
      units(variable.units)
      int(variable.type, variable.bytes, begin)
      begin += variable.bytes
    }
  }
  build(0)
  build(Buffer.concat(parts).length)
  const file = openSync(path, 'w')
  writeSync(file, Buffer.concat(parts))
  const doubles = (n: number, at: (i: number) => number): void => {
    const bytes = Buffer.alloc(8 * n)
    for (let i = 0; i < n; i++) bytes.writeDoubleBE(at(i), 8 * i)
    writeSync(file, bytes)
  }
  doubles(MONTHS, i => 15 + 30.4375 * i)
  doubles(ROWS, i => -89.75 + i / 2)
  doubles(COLUMNS, i => 0.25 + i / 2)
  const month = Buffer.alloc(4 * ROWS * COLUMNS)
  for (let t = 0; t < MONTHS; t++) {
    for (let k = 0; k < ROWS * COLUMNS; k++) month.writeFloatBE(10 * Math.fround((k % 97) / 97) + t, 4 * k)
    writeSync(file, month)
  }
  closeSync(file)
}

/** Grids to regions, and the Monte Carlo over regions. */
export async function run(): Promise<Figure[]> {
  const folder = mkdtempSync(join(tmpdir(), 'grid-bench-'))
  try {
    const path = join(folder, 'half-degree.nc')
    writeGrid(path)
    const { file, close } = await openGridFile(path)
    const grid = openGrid(file)
    const regions = Array.from({ length: 50 }, (_, i) => ({ id: `r${i}`, geometry: wavy(-170 + 34 * (i % 10), -50 + 25 * Math.floor(i / 10), 6, 200) }))
    const effect = { model: loadEarthModel(), settings: { ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled' } } as const
    const figures: Figure[] = [
      { name: 'grid of 0.5° × 240 months to one region, effect included', value: fastest(() => regionSeries(grid, regions.slice(0, 1), { effect }), 3), unit: 'ms', note: 'limit 3000 ms' },
      { name: 'grid of 0.5° × 240 months to 50 regions, effects included', value: fastest(() => regionSeries(grid, regions, { effect }), 2), unit: 'ms', note: 'limit 10 000 ms' },
      { name: 'Monte Carlo of 10 000 members over 50 regions × 240 epochs', value: fastest(() => monteCarlo(members()), 3), unit: 'ms', note: 'limit 2000 ms' }
    ]
    close()
    return figures
  } finally {
    rmSync(folder, { recursive: true })
  }
}

function members(): Parameters<typeof monteCarlo>[0] {
  const mjd = Array.from({ length: MONTHS }, (_, i) => 52275 + 30.4375 * i)
  const weights = trendWeights(mjd)
  const series = Array.from({ length: 50 }, (_, k) => ({
    key: `r${k}`, rate: -k, weights, perGt: { massGt: 1, chi1Mas: 0.01, chi2Mas: 0.005, lodMicroseconds: 0.01 },
    covariance: covarianceOf(mjd.map(() => 2), [{ source: `source ${k % 5}`, loading: mjd.map(t => (t - 55927) / 365.25) }])
  }))
  return { series, members: 10_000, seed: 1 }
}
