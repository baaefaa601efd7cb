import { withPattern } from '#shared/earth/cellPattern'
import { contourOf } from '#shared/earth/contour'
import { responseOf } from '#shared/earth/response'
import type { CsvGridOptions } from '#shared/grids/csvGrid'
import { departureSentence, monthlyDeparture } from '#shared/grids/monthlyDeparture'
import type { RegionGridSeries } from '#shared/grids/regionSeries'
import type { Outline, PhysicsSettings } from '#shared/types/domain'
import { InputError } from '#shared/types/issue'
import { schema } from '../database/client'
import type { Upload } from '../utils/body'
import type { FurtherGrid, GridDescription, GridTask } from '../workers/grid'
import { appendLog, newId } from './change'
import type { Context } from './context'
import type { JobRow } from './jobs'
import { originalPath, rememberOriginal } from './originals'
import type { Actor } from './runStore'

/** A file that was kept and is to be read. */
export interface GridJobInput { actor: Actor, name: string, upload: Omit<Upload, 'path'>, csv: CsvGridOptions }

/** Everything that the series of regions depend on, frozen: outlines, and files by their checksum. */
export interface GridSeriesJobInput {
  actor: Actor
  gridId: string
  source: GridSource
  regions: { id: string, name: string, geometry: Outline, outlineSha256: string }[]
  settings: PhysicsSettings
}

/** How series are read from a grid: what is stored with each version as its recipe, and enough to read them again. */
export interface GridSource {
  sha256: string
  csv: CsvGridOptions
  variable: string
  metresPerUnit: number
  /** How the unit was understood, where one was typed. */
  unitReading: string | null
  sea: 'engine' | 'none' | (OtherGrid & { of: 'land' | 'sea' })
  scale: OtherGrid | null
  mostMissing: number
}

/** A mask or factors: a variable of the same file (`sha256` null) or of another one. */
export interface OtherGrid { sha256: string | null, variable: string, name: string | null }

export type GridSeriesResult = RegionGridSeries[]
export interface GridSeriesAnswer { regions: GridSeriesResult, accepted?: string[] }

export function describeGridTask(context: Context, { upload, csv }: GridJobInput): GridTask {
  return { ask: 'describe', path: originalPath(context.dataDir, upload.sha256), csv }
}

/** A grid that was read becomes a row, with the original that it refers to. */
export function storeGrid(context: Context, row: JobRow, { actor, name, upload, csv }: GridJobInput, described: GridDescription): { gridId: string } {
  if (described.candidates.length === 0) {
    throw new InputError('The file holds no grid. Nothing was stored.', [{ path: 'file', code: 'no-grid', message: 'No variable runs over latitude and longitude. By the CF conventions they are told by their units, degrees_north and degrees_east.' }])
  }
  const id = newId()
  const { issues, chosen, ...more } = described
  const kept = {
    ...more, issues: issues.slice(0, 200), unusable: issues.length,
    chosen: chosen && { name: chosen.name, mjd: [...chosen.mjd], calendar: chosen.calendar },
  }
  context.db.transaction((tx) => {
    rememberOriginal(context, tx, { ...upload, path: '' })
    tx.insert(schema.grid).values({
      id, workspaceId: row.workspaceId, name, originalSha256: upload.sha256, originalName: upload.name, bytes: upload.bytes,
      options: JSON.stringify(csv), description: JSON.stringify(kept), createdAt: context.now(), createdBy: actor.id,
    }).run()
    appendLog(context, tx, { actorId: actor.id, actor: actor.name, after: { name, originalSha256: upload.sha256 }, target: { verb: 'grid added', entity: 'grid', id, workspaceId: row.workspaceId } })
  }, { behavior: 'immediate' })
  return { gridId: id }
}

/** The worker’s task for series by a recipe: the same recipe on the same files gives the same values. */
export function seriesTaskOf(dataDir: string, source: GridSource, regions: { id: string, geometry: Outline }[]): GridTask & { ask: 'series' } {
  const other = ({ sha256, variable }: OtherGrid): FurtherGrid => ({ variable, ...(sha256 === null ? {} : { path: originalPath(dataDir, sha256) }) })
  const { sea, scale } = source
  return {
    ask: 'series', path: originalPath(dataDir, source.sha256), csv: source.csv, variable: source.variable, regions,
    metresPerUnit: source.metresPerUnit, mostMissing: source.mostMissing,
    sea: typeof sea === 'string' ? sea : { ...other(sea), of: sea.of }, scale: scale && other(scale),
    pattern: { gridSha256: source.sha256 },
  }
}

export function gridSeriesTask(context: Context, { source, regions, settings }: GridSeriesJobInput, fieldsPath: string | null): GridTask {
  return { ...seriesTaskOf(context.dataDir, source, regions.map(({ id, geometry }) => ({ id, geometry }))), effect: { settings, fieldsPath } }
}

export function keepGridSeries(context: Context, _row: JobRow, { source, regions: asked, settings }: GridSeriesJobInput, regions: GridSeriesResult): GridSeriesAnswer {
  return {
    regions: regions.map((region) => {
      const { geometry } = asked.find(({ id }) => id === region.id)!
      const departure = region.pattern && region.effect && monthlyDeparture(region.massGt, region.effect.pattern, responseOf(withPattern(contourOf(geometry), region.pattern.pattern), context.earth, settings))
      return {
        ...region, issues: region.issues.slice(0, 1000),
        steps: [...(source.unitReading ? [source.unitReading] : []), ...region.steps, ...(departure ? [departureSentence(departure)] : [])],
      }
    }),
  }
}
