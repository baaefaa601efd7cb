import { mkdtempSync, rmSync, writeFileSync } from 'node:fs'
import { tmpdir } from 'node:os'
import { join, resolve } from 'node:path'
import { MessageChannel } from 'node:worker_threads'
import { build } from 'esbuild'
import Piscina from 'piscina'
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest'
import { monteCarlo } from '../../../shared/earth/time/monteCarlo.ts'
import type { MonteCarloResult } from '../../../shared/earth/time/monteCarlo.ts'
import { covarianceOf } from '../../../shared/earth/time/covariance.ts'
import { trendWeights } from '../../../shared/earth/time/covarianceTrend.ts'
import type { RegionGridSeries } from '../../../shared/grids/regionSeries.ts'
import type { GridDescription, GridEpoch, GridTask } from '../../../server/workers/grid.ts'
import type { WorkerAnswer } from '../../../server/workers/parts/answer.ts'
import { InputError } from '../../../shared/types/issue.ts'
import { box } from './gridFixtures.ts'

// The workers as the build bundles them, in threads of their own.
const folder = mkdtempSync(join(tmpdir(), 'grid-workers-'))
let grids: Piscina
let members: Piscina

beforeAll(async () => {
  await build({
    entryPoints: ['server/workers/grid.ts', 'server/workers/monteCarlo.ts'], outdir: folder, outExtension: { '.js': '.mjs' }, bundle: true, alias: { '#shared': resolve('shared') },
    platform: 'node', format: 'esm', target: 'node20', logLevel: 'error',
    banner: { js: 'import { createRequire as __createRequire } from "node:module"; const require = __createRequire(import.meta.url);' }
  })
  grids = new Piscina({ filename: join(folder, 'grid.mjs'), maxThreads: 1 })
  members = new Piscina({ filename: join(folder, 'monteCarlo.mjs'), maxThreads: 1 })
}, 120_000)
afterAll(async () => {
  await Promise.all([grids.destroy(), members.destroy()])
  rmSync(folder, { recursive: true })
})

/** The result of a task; its fault as an error. */
async function ask<T>(task: GridTask): Promise<T> {
  const answer = await grids.run(task) as WorkerAnswer<T>
  if ('fault' in answer) throw new InputError(answer.fault.message, answer.fault.issues, answer.fault.status)
  return answer.result
}
const file = (kind: string): string => resolve(`tests/fixtures/grids/packed.${kind}.nc`)

describe('the grid worker', () => {
  it.each(['nc3', 'nc5', 'nc4'])('describes and maps a file of kind %s', async (kind) => {
    const description = await ask<GridDescription>({ path: file(kind), ask: 'describe' })
    expect(description).toMatchObject({ format: kind === 'nc4' ? 'netcdf-4' : 'netcdf-classic', chosen: { name: 'lwe_thickness', calendar: 'standard' } })
    expect(description.candidates.map(c => c.name)).toEqual(['lwe_thickness', 'land_mask'])
    const epoch = await ask<GridEpoch>({ path: file(kind), ask: 'epoch', epoch: 0 })
    // The southernmost row of the text comes first: packed 30 … 37.
    expect([...epoch.values.subarray(0, 8)]).toEqual([30, 31, 32, 33, 34, 35, 36, 37].map(v => 0.25 * v + 10))
    expect([...epoch.latEdgesDeg]).toEqual([-90, -45, 0, 45, 90])
  })

  it('gives the same series of a region from all of them, masked by the file, with the effect', async () => {
    const task = (kind: string): GridTask => ({
      path: file(kind), ask: 'series', regions: [{ id: 'a', geometry: box(0, -45, 180, 45) }], sea: { variable: 'land_mask', of: 'land' },
      effect: { settings: { ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled' }, fieldsPath: null }
    })
    const [first] = await ask<RegionGridSeries[]>(task('nc3'))
    expect(first!.cells).toBe(7)
    // The one missing value of the second month lies in the region.
    expect(first!.issues).toMatchObject([{ row: 2, code: 'cells-missing' }])
    expect(first!.effect!.pattern.chi1Mas).toHaveLength(2)
    for (const kind of ['nc6', 'nc5', 'nc4']) {
      const [other] = await ask<RegionGridSeries[]>(task(kind))
      // Pieces of the file are summed in another order.
      first!.massGt.forEach((mass, t) => expect(Math.abs(other!.massGt[t]! / mass - 1)).toBeLessThan(1e-14))
      first!.effect!.pattern.lodMicroseconds.forEach((lod, t) => expect(Math.abs(other!.effect!.pattern.lodMicroseconds[t]! / lod - 1)).toBeLessThan(1e-13))
      expect({ ...other, massGt: 0, heightM: 0, effect: 0 }).toEqual({ ...first, massGt: 0, heightM: 0, effect: 0 })
    }
  })

  it('reads tables, and hands errors out with their issues', async () => {
    const path = join(folder, 'grid.csv')
    writeFileSync(path, `lon,lat,month,height_m\n${[15, 45].flatMap(lon => [-15, 15].map(lat => `${lon},${lat},2003-05,${lon / 15}`)).join('\n')}\nx,1,2003-05,2\n`)
    const description = await ask<GridDescription>({ path, ask: 'describe' })
    expect(description).toMatchObject({ format: 'csv', rowsRead: 5, issues: [{ row: 6, code: 'not-a-number' }] })
    const [series] = await ask<RegionGridSeries[]>({ path, ask: 'series', sea: 'none', regions: [{ id: 'a', geometry: box(0, -30, 30, 30) }] })
    expect(series!.heightM[0]).toBeCloseTo(1, 12)
    await expect(ask({ path, ask: 'series', sea: 'none', regions: [{ id: 'far', geometry: box(100, 40, 110, 50) }] })).rejects.toMatchObject({ issues: [{ code: 'not-covered' }] })
  })

  it('says how far it is and stops when it is told to', async () => {
    const { port1, port2 } = new MessageChannel()
    const heard: unknown[] = []
    port2.on('message', message => heard.push(message))
    await grids.run({ path: file('nc3'), ask: 'series', sea: 'none', regions: [{ id: 'a', geometry: box(0, 0, 90, 45) }], port: port1 } satisfies GridTask, { transferList: [port1] })
    await vi.waitFor(() => expect(heard.at(-1)).toEqual({ progress: 1 }), 5000)
    port2.close()

    const second = new MessageChannel()
    second.port2.postMessage('cancel')
    const regions = Array.from({ length: 50 }, (_, i) => ({ id: `r${i}`, geometry: box(0, 0, 10 + i, 45) }))
    await expect(grids.run({ path: file('nc3'), ask: 'series', sea: 'none', regions, port: second.port1 } satisfies GridTask, { transferList: [second.port1] })).rejects.toThrow('cancelled')
    second.port2.close()
  })
})

describe('the Monte Carlo worker', () => {
  const mjd = Array.from({ length: 40 }, (_, i) => 52000 + 30 * i)
  const series = [{ key: 'a', rate: -5, weights: trendWeights(mjd), covariance: covarianceOf(mjd.map(() => 2), [{ source: 's', loading: mjd.map((_, i) => i / 12) }]), perGt: { massGt: 1, chi1Mas: 0.01, chi2Mas: 0.003, lodMicroseconds: 0.01 } }]

  it('gives what the core gives, and can be cancelled', async () => {
    const input = { series, members: 2000, seed: 5 }
    expect(await members.run({ ask: 'trends', input }) as WorkerAnswer<MonteCarloResult>).toEqual({ result: monteCarlo(input) })
    const { port1, port2 } = new MessageChannel()
    port2.postMessage('cancel')
    await expect(members.run({ ask: 'trends', input: { ...input, members: 100_000 }, port: port1 }, { transferList: [port1] })).rejects.toThrow('cancelled')
    port2.close()
  })
})
