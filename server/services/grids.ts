import { and, desc, eq, isNull } from 'drizzle-orm'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import { gridLimits } from '#shared/grids/limits'
import type { CsvGridOptions } from '#shared/grids/csvGrid'
import { monthMap } from '#shared/grids/monthMap'
import { can, type Principal } from '#shared/permissions'
import type { Issue } from '#shared/types/issue'
import { InputError } from '#shared/types/issue'
import { schema } from '../database/client'
import type { Upload } from '../utils/body'
import { Problem } from '../utils/problem'
import type { GridDescription, GridEpoch } from '../workers/grid'
import type { WorkerAnswer } from '../workers/parts/answer'
import { authorise, change, nameOfUser } from './change'
import type { Context } from './context'
import type { GridSource, OtherGrid } from './gridJobs'
import { resultOf, type JobView } from './jobs'
import { keepOriginal, originalPath } from './originals'
import { defaultSettings } from './predictions'
import { latestOutline, regionRow } from './regions'

export type GridRow = typeof schema.grid.$inferSelect
type Description = Omit<GridDescription, 'chosen'> & { chosen: { name: string, mjd: number[], calendar: string } | null, unusable: number }

export function gridRow(context: Context, id: string, { inBin = false } = {}): GridRow {
  const row = context.db.select().from(schema.grid).where(eq(schema.grid.id, id)).get()
  if (!row || (row.deletedAt && !inBin)) throw new Problem(404, 'not-found', 'There is no such grid.')
  return row
}

const descriptionOf = (row: GridRow) => JSON.parse(row.description) as Description
const csvOf = (row: GridRow) => JSON.parse(row.options) as CsvGridOptions

/** The parser of units is loaded when the first unit is asked for. */
async function unitReader() {
  const { understandUnit } = await import('#shared/series/quantities')
  return (text: string) => understandUnit(text, 'water-height')
}

export async function gridView(context: Context, principal: Principal | null, row: GridRow) {
  const { format, candidates, chosen, rowsRead, unusable } = descriptionOf(row)
  const read = await unitReader()
  const reading = (units: string | null, metres: number | null) => units === null || metres === null ? null : orNull(() => read(units).reading)
  return {
    id: row.id, revision: row.revision, name: row.name, originalName: row.originalName, originalSha256: row.originalSha256, bytes: row.bytes, format,
    createdAt: row.createdAt, createdBy: nameOfUser(context, row.createdBy), canWrite: can(principal, 'region.write', { workspaceId: row.workspaceId }),
    candidates: candidates.map(c => ({ ...c, reading: reading(c.units, c.metresPerUnit) })), chosen: chosen?.name ?? null,
    epochs: chosen?.mjd.length ?? 0, firstMjd: chosen ? Math.min(...chosen.mjd) : null, lastMjd: chosen ? Math.max(...chosen.mjd) : null, calendar: chosen?.calendar ?? null,
    rowsRead, unusable,
  }
}

function orNull<T>(read: () => T): T | null {
  try {
    return read()
  }
  catch {
    // A file’s own spelling that only the CF rules know needs no reading.
    return null
  }
}

export async function listGrids(context: Context, principal: Principal | null, workspaceId: string) {
  authorise(principal, 'region.read', { workspaceId })
  const rows = context.db.select().from(schema.grid).where(and(eq(schema.grid.workspaceId, workspaceId), isNull(schema.grid.deletedAt))).orderBy(desc(schema.grid.id)).all()
  return { items: await Promise.all(rows.map(row => gridView(context, principal, row))), nextCursor: null }
}

export async function readGrid(context: Context, principal: Principal | null, id: string) {
  const row = gridRow(context, id)
  authorise(principal, 'region.read', { workspaceId: row.workspaceId })
  const { attributes, chosen, issues } = descriptionOf(row)
  return {
    ...await gridView(context, principal, row),
    attributes: Object.entries(attributes).slice(0, 40).map(([name, value]) => ({ name, text: String(value).slice(0, 400) })),
    mjd: chosen?.mjd ?? [], issues,
  }
}

/** Keeps the file and reads it as a job: a grid is there when the job is done, and not before. */
export async function createGrid(context: Context, principal: Principal | null, workspaceId: string, upload: Upload, body: BodyOf<typeof contracts.gridCreate>): Promise<JobView> {
  const actor = authorise(principal, 'region.write', { workspaceId })
  await keepOriginal(context, upload)
  const { path: _, ...kept } = upload
  return context.jobs.start(actor, workspaceId, 'grid', { name: body.name, upload: kept, csv: body.csv as CsvGridOptions })
}

export function binGrid(context: Context, principal: Principal | null, id: string, revision: number, restore = false) {
  const row = gridRow(context, id, { inBin: restore })
  const next = row.revision + 1
  return change(context, principal, { action: 'region.write', verb: restore ? 'taken out of the bin' : 'put in the bin', entity: 'grid', id, workspaceId: row.workspaceId, row, revision }, (tx) => {
    tx.update(schema.grid).set({ deletedAt: restore ? null : context.now(), revision: next }).where(eq(schema.grid.id, id)).run()
    return { result: { revision: next }, before: { name: row.name }, after: { inBin: !restore } }
  })
}

/** One month for the map, about the regions that are named, else whole. */
export async function readMonth(context: Context, principal: Principal | null, id: string, n: number, query: { variable?: string, regions?: string }) {
  const row = gridRow(context, id)
  authorise(principal, 'region.read', { workspaceId: row.workspaceId })
  const { candidates, chosen } = descriptionOf(row)
  const variable = candidates.find(c => c.name === (query.variable ?? chosen?.name))
  if (!variable) throw new Problem(404, 'not-found', 'The grid has no such variable.')
  if (n >= Math.max(1, variable.epochs)) throw new Problem(404, 'not-found', `The grid has ${variable.epochs} epochs.`)
  const outlines = (query.regions ?? '').split(',').filter(Boolean).map((regionId) => {
    const region = regionRow(context, regionId)
    authorise(principal, 'region.read', { workspaceId: region.workspaceId })
    return latestOutline(context, regionId).geometry
  })
  const epoch = resultOf(await context.jobs.compute<WorkerAnswer<GridEpoch>>('grid', { ask: 'epoch', path: originalPath(context.dataDir, row.originalSha256), csv: csvOf(row), variable: variable.name, epoch: n }))
  return { mjd: Number.isFinite(epoch.mjd) ? epoch.mjd : 0, unit: variable.units ?? '', metresPerUnit: variable.metresPerUnit, ...monthMap(epoch, outlines, gridLimits.mapCells) }
}

/** Freezes what the series depend on and takes them as a job. */
export async function startGridSeries(context: Context, principal: Principal | null, id: string, body: BodyOf<typeof contracts.gridSeries>): Promise<JobView> {
  const row = gridRow(context, id)
  const issues: Issue[] = []
  const regions = [...new Set(body.regionIds)].map((regionId, i) => {
    const region = regionRow(context, regionId)
    if (region.workspaceId !== row.workspaceId) throw new Problem(404, 'not-found', `There is no such region: regionIds/${i}.`)
    authorise(principal, 'region.write', { workspaceId: region.workspaceId, kind: region.kind })
    const outline = latestOutline(context, regionId)
    return { id: region.id, name: region.name, geometry: outline.geometry, outlineSha256: outline.sha256 }
  })
  const actor = authorise(principal, 'region.write', { workspaceId: row.workspaceId })
  const { candidates, unusable } = descriptionOf(row)
  const variable = candidates.find(c => c.name === body.variable)
  if (!variable || variable.epochs === 0) issues.push({ path: 'variable', code: 'no-grid', message: `The file holds no grid “${body.variable}” over time.` })
  if (unusable > 0 && !body.leaveOutBadRows) issues.push({ path: 'leaveOutBadRows', code: 'bad-rows', message: `${unusable} rows of the table cannot be used: say that they are left out.` })
  const unit = body.unit ? (await unitReader())(body.unit) : null
  const metresPerUnit = unit?.factor ?? variable?.metresPerUnit ?? null
  if (variable && metresPerUnit === null) issues.push({ path: 'unit', code: 'no-unit', message: `The unit of “${variable.name}”${variable.units ? `, “${variable.units}”,` : ''} is not one of water-equivalent height: say what it is.` })
  if (issues.length > 0) throw new InputError(issues[0]!.message, issues)
  const source: GridSource = {
    sha256: row.originalSha256, csv: csvOf(row), variable: body.variable, metresPerUnit: metresPerUnit!, unitReading: unit?.reading ?? null,
    sea: typeof body.sea === 'string' ? body.sea : { ...otherGrid(context, row, body.sea), of: body.sea.of },
    scale: body.scale && otherGrid(context, row, body.scale), mostMissing: body.mostMissing,
  }
  return context.jobs.start(actor, row.workspaceId, 'grid-series', { gridId: row.id, source, regions, settings: defaultSettings(context) })
}

function otherGrid(context: Context, row: GridRow, { gridId, variable }: { gridId: string | null, variable: string }): OtherGrid {
  if (gridId === null || gridId === row.id) return { sha256: null, variable, name: null }
  const other = gridRow(context, gridId)
  if (other.workspaceId !== row.workspaceId) throw new Problem(404, 'not-found', 'There is no such grid.')
  return { sha256: other.originalSha256, variable, name: other.name }
}
