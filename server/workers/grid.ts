import type { MessagePort } from 'node:worker_threads'
import { loadOceanCells } from '#shared/earth/detailedEarthModel'
import type { EarthModel } from '#shared/earth/earthModel'
import type { CsvGridOptions } from '#shared/grids/csvGrid'
import type { AttributeValue, GridFile } from '#shared/grids/gridFile'
import { gridCandidates, openGrid, valuesAtEpoch, type GridCandidate, type OpenGrid } from '#shared/grids/heightGrid'
import { regionSeriesPaced, type GridRegion, type RegionGridSeries } from '#shared/grids/regionSeries'
import { scaleFactors, seaOfCells, seaOfMask } from '#shared/grids/seaMask'
import type { PhysicsSettings } from '#shared/types/domain'
import { InputError, type Issue } from '#shared/types/issue'
import { earthModelFrom } from '../services/earthModelFile'
import { answerOf, type WorkerAnswer } from './parts/answer'
import { openGridFile, type OpenedGridFile } from './parts/openGridFile'
import { paceOf } from './parts/pace'

/** A grid in a file of its own, or in the file of the heights (`path` left out). */
export interface FurtherGrid { path?: string, variable: string }

interface GridSource { path: string, variable?: string, csv?: CsvGridOptions }

export type GridTask = GridSource & { port?: MessagePort } & (
  | { ask: 'describe' }
  | { ask: 'epoch', epoch: number }
  | {
    ask: 'series', regions: GridRegion[], metresPerUnit?: number, mostMissing?: number
    /** Which cells are sea: by the engine's own ocean (default), by a mask, or none is left out. */
    sea?: 'engine' | 'none' | (FurtherGrid & { of: 'land' | 'sea' })
    scale?: FurtherGrid | null
    /** Computes the effect with the grid's pattern as well. */
    effect?: { settings: PhysicsSettings, fieldsPath: string | null } | null
    pattern?: { gridSha256: string }
  }
)

export interface GridDescription {
  format: GridFile['format']
  attributes: Record<string, AttributeValue>
  candidates: GridCandidate[]
  chosen: { name: string, mjd: Float64Array, startMjd: Float64Array | null, endMjd: Float64Array | null, calendar: string } | null
  issues: Issue[]
  rowsRead: number | null
}

/** One epoch for the map: heights row by row from the south, columns of the full circle that the file holds, from `westDeg` on. */
export interface GridEpoch { mjd: number, latEdgesDeg: Float64Array, westDeg: number, stepDeg: number, columns: number, values: Float64Array }

// One Earth model for the life of the thread: reading the fields takes longer than most grids.
let earth: { path: string | null, model: Promise<EarthModel> } | undefined

/** Work on a grid, away from the thread that answers requests. Gets and returns plain data; knows no database. */
export default function grid(task: GridTask): Promise<WorkerAnswer<GridDescription | GridEpoch | RegionGridSeries[]>> {
  return answerOf(() => work(task))
}

async function work(task: GridTask): Promise<GridDescription | GridEpoch | RegionGridSeries[]> {
  const pace = paceOf(task.port)
  let opened: OpenedGridFile | undefined
  try {
    opened = await readable(() => openGridFile(task.path, task.csv))
    const { file } = opened
    const source = opened
    if (task.ask === 'describe') return await readable(async () => describe(file, task.variable, source))
    const heights = openGrid(file, task.variable)
    if (task.ask === 'epoch') return epochOf(heights, task.epoch)
    const { sea = 'engine', effect } = task
    return await regionSeriesPaced(heights, task.regions, {
      metresPerUnit: task.metresPerUnit,
      mostMissing: task.mostMissing,
      sea: sea === 'none' ? null : sea === 'engine' ? seaOfCells(loadOceanCells(), heights) : await further(sea, file, mask => seaOfMask(mask, heights, sea.of)),
      scale: task.scale ? await further(task.scale, file, factors => scaleFactors(factors, heights)) : null,
      pattern: task.pattern,
      effect: effect ? { settings: effect.settings, model: await modelFrom(effect.fieldsPath) } : undefined,
    }, pace)
  }
  finally {
    opened?.close()
    pace.done()
  }
}

/** A file that is damaged or cut short fails in many ways inside; whoever sent it is told that it cannot be read, and where. */
async function readable<T>(read: () => Promise<T>): Promise<T> {
  try {
    return await read()
  }
  catch (error) {
    if (error instanceof InputError) throw error
    const message = error instanceof RangeError ? `The file is damaged or was cut short: ${error.message}.` : 'The file begins like NetCDF-4 but cannot be read: it is damaged or was cut short.'
    throw new InputError('The grid cannot be read', [{ path: 'file', code: 'damaged', message }])
  }
}

function describe(file: GridFile, variable: string | undefined, { issues, rowsRead }: { issues: Issue[], rowsRead: number | null }): GridDescription {
  const candidates = gridCandidates(file)
  const name = variable ?? candidates.find(candidate => candidate.epochs > 0)?.name
  const heights = name === undefined ? null : openGrid(file, name)
  return {
    format: file.format, attributes: file.attributes, candidates, issues, rowsRead,
    chosen: heights?.time ? { name: heights.variable.name, ...heights.time } : null,
  }
}

function epochOf(heights: OpenGrid, epoch: number): GridEpoch {
  const { latitude, longitude, time } = heights
  const values = valuesAtEpoch(heights, epoch)
  const rows = latitude.edgesDeg.length - 1
  const out = new Float64Array(rows * longitude.circle).fill(Number.NaN)
  for (let row = 0; row < rows; row++) {
    const from = (latitude.rising ? row : rows - 1 - row) * longitude.column.length
    longitude.column.forEach((column, j) => {
      if (column >= 0) out[row * longitude.circle + column] = values[from + j]!
    })
  }
  return { mjd: time?.mjd[epoch] ?? Number.NaN, latEdgesDeg: latitude.edgesDeg, westDeg: longitude.westDeg, stepDeg: longitude.stepDeg, columns: longitude.circle, values: out }
}

async function further<T>({ path, variable }: FurtherGrid, file: GridFile, use: (grid: OpenGrid) => T): Promise<T> {
  if (path === undefined) return use(openGrid(file, variable))
  const opened = await openGridFile(path)
  try {
    return use(openGrid(opened.file, variable))
  }
  finally {
    opened.close()
  }
}

function modelFrom(path: string | null): Promise<EarthModel> {
  if (earth?.path !== path) earth = { path, model: earthModelFrom(path) }
  return earth!.model
}
