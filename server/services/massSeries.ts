import { createReadStream } from 'node:fs'
import { setImmediate } from 'node:timers/promises'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import type { Principal } from '#shared/permissions'
import type { StoredSeries } from '#shared/series/conversionChoice'
import { readMassSeriesPaced, type MassSeriesOptions, type MassSeriesReading } from '#shared/series/readMassSeries'
import { readMassTablePaced, type MassTableOptions } from '#shared/series/readMassTable'
import { systematicRates, type SystematicRate } from '#shared/series/uncertainty'
import { InputError, type Issue } from '#shared/types/issue'
import { eq } from 'drizzle-orm'
import { schema, type Reader } from '../database/client'
import type { Upload } from '../utils/body'
import { Problem } from '../utils/problem'
import { authorise, change, newId } from './change'
import type { Context } from './context'
import { canonicalJson, sha256Hex } from './hash'
import { keepOriginal, originalPath, rememberOriginal, uploadTable } from './originals'
import { latestOutline, regionRow, seriesOfRegion, type RegionRow } from './regions'
import { checksOf } from './seriesChecks'
import { floats, listVersions, massSeries, nextVersion, versionRow, versionView } from './seriesStore'

type NewSeries = BodyOf<typeof contracts.seriesCreate>
type NewTable = BodyOf<typeof contracts.seriesTableCreate>

/** Reads an uploaded file into a new version of a region's mass series. Either all of it is stored or nothing. */
export async function createSeriesVersion(context: Context, principal: Principal | null, regionId: string, upload: Upload, body: NewSeries) {
  const region = regionRow(context, regionId)
  authorise(principal, 'region.write', { workspaceId: region.workspaceId, kind: region.kind })
  const outline = latestOutline(context, regionId)
  const { sigmaColumn, sheet, ...columns } = body.columns
  const recipe = body.conversion && await recipeFor(body.conversion, outline.areaM2, columns.withdrawalPositive, storedSeries(context, region.workspaceId, body.conversion))
  const options = {
    ...columns, ...(sigmaColumn === undefined ? {} : { sigmaColumn }), areaM2: outline.areaM2, ...(recipe ? { recipe } : {}),
  } as MassSeriesOptions
  const read = await readMassSeriesPaced(await uploadTable(upload, sheet), options, { pause: () => setImmediate() })
  refuseBadRows(read.issues, read.rowsRead, body.leaveOutBadRows)
  if (read.mjd.length === 0) throw new InputError('No row of this file can be used. Nothing was stored.', read.issues)
  await keepOriginal(context, upload)
  return storeVersion(context, principal, { region, outline, read, options, upload, body })
}

/** Reads one table with a column for each of several regions into a new version of each. All of them are stored or none. */
export async function createSeriesTable(context: Context, principal: Principal | null, workspaceId: string, upload: Upload, body: NewTable) {
  const { sheet, sigmaColumn: _, valueColumn: __, ...columns } = body.columns
  const parts = await Promise.all(body.series.map(async ({ regionId, valueColumn, sigmaColumn, unit }, i) => {
    const region = regionRow(context, regionId)
    if (region.workspaceId !== workspaceId) throw new InputError('The table names a region that is not there.', [{ path: `series/${i}/regionId`, code: 'unknown', message: 'is not a region of this workspace' }])
    authorise(principal, 'region.write', { workspaceId, kind: region.kind })
    const outline = latestOutline(context, regionId)
    const recipe = body.conversion && await recipeFor(body.conversion, outline.areaM2, columns.withdrawalPositive, storedSeries(context, workspaceId, body.conversion))
    return { region, outline, options: { ...columns, valueColumn, sigmaColumn, unit: unit ?? columns.unit, areaM2: outline.areaM2, ...(recipe ? { recipe } : {}) } as MassSeriesOptions & { valueColumn: number } }
  }))
  refuseDoubles(body.series)
  const table = await readMassTablePaced(await uploadTable(upload, sheet), { ...columns, series: parts.map(part => part.options) } as MassTableOptions, { pause: () => setImmediate() })
  const readings = table.series.map((read, i) => ({ ...parts[i]!, read }))
  refuseBadRows(readings.flatMap(({ read }) => read.issues), readings.reduce((sum, { read }) => sum + read.rowsRead, 0), body.leaveOutBadRows)
  const empty = readings.flatMap(({ read, region }, i) => read.mjd.length ? [] : [{ path: `series/${i}`, code: 'empty', message: `No row has a value for ${region.name}.` }])
  if (empty.length) throw new InputError('Some columns have no value at all. Nothing was stored.', empty)
  await keepOriginal(context, upload)
  const items = context.db.transaction(() => readings.map(({ region, ...reading }) => ({
    ...storeVersion(context, principal, { region, ...reading, upload, body: { ...body, name: region.name, decisions: [] } }), regionId: region.id,
  })), { behavior: 'immediate' })
  return { items, nextCursor: null }
}

function refuseDoubles(series: NewTable['series']) {
  const issues = series.flatMap(({ regionId }, i) => series.findIndex(other => other.regionId === regionId) < i ? [{ path: `series/${i}/regionId`, code: 'duplicate', message: 'is named twice' }] : [])
  if (issues.length) throw new InputError('A region takes one column.', issues)
}

function refuseBadRows(issues: Issue[], rowsRead: number, leaveOut: boolean) {
  if (issues.length && !leaveOut) throw new InputError(`${issues.length} of ${rowsRead} rows cannot be used. Nothing was stored.`, issues)
}

interface Reading {
  region: RegionRow
  outline: ReturnType<typeof latestOutline>
  read: MassSeriesReading
  options: MassSeriesOptions
  upload: Upload
  body: Omit<NewSeries, 'columns'> & { columns: { sheet?: string } }
}

/** Writes what was read as a new version, with its recipe, its checks and its log entry. */
function storeVersion(context: Context, principal: Principal | null, { region, outline, read, options, upload, body }: Reading) {
  const values = { mjd: read.mjd, massGt: read.massGt, sigmaGt: read.sigmaGt }
  // Errors of the conversion that all epochs share are errors of the trend, by name like those that were entered.
  const shared = sumBySource([...body.sharedRates, ...systematicRates(read.replayed, region.name)])
  const dataSha256 = sha256Hex(canonicalJson({ ...values, sharedRates: shared }))
  const { sheet } = body.columns
  const recipe = {
    options: { ...options, ...read.chosen }, steps: read.conversion.steps, stepsDone: read.replayed.steps, conversion: body.conversion, ...(sheet === undefined ? {} : { sheet }), outlineSha256: outline.sha256,
    checks: checksOf(context, region.id, read, outline.areaM2, body.decisions), edited: read.edited, leftOutOnPurpose: read.leftOut,
    rowsRead: read.rowsRead, rowsStored: read.mjd.length, leftOut: read.issues.slice(0, 1000), leftOutCount: read.issues.length, leftOutBySteps: read.replayed.leftOut.slice(0, 1000), notices: read.notices,
  }
  const versionId = newId()
  change(context, principal, {
    action: 'region.write', verb: 'series version stored', entity: 'series', id: versionId, workspaceId: region.workspaceId, resource: { kind: region.kind },
  }, (tx) => {
    const createdBy = principal!.userId
    rememberOriginal(context, tx, upload)
    const existing = seriesOfRegion(context, region.id)
    const seriesId = existing?.id ?? newId()
    if (!existing) {
      tx.insert(schema.series).values({ id: seriesId, workspaceId: region.workspaceId, regionId: region.id, quantity: 'mass', name: body.name, createdAt: context.now(), createdBy }).run()
    }
    const n = nextVersion(tx, seriesId)
    tx.insert(schema.seriesVersion).values({
      id: versionId, seriesId, n, originalSha256: upload.sha256, originalName: upload.name, dataSha256, recipe: canonicalJson(recipe),
      reason: body.reason, source: body.source, licence: body.licence, independence: body.independence, facts: body.facts && canonicalJson(body.facts),
      firstMjd: read.mjd[0]!, lastMjd: read.mjd.at(-1)!, count: read.mjd.length, createdAt: context.now(), createdBy,
    }).run()
    tx.insert(schema.seriesData).values({ versionId, mjd: floats(read.mjd), value: floats(read.massGt), sigma: read.sigmaGt ? floats(read.sigmaGt) : null }).run()
    for (const { source, sigmaGtPerYear } of shared) {
      tx.insert(schema.seriesError).values({ versionId, sourceId: errorSourceId(context, tx, region.workspaceId, source), sigmaGtPerYear }).run()
    }
    return { result: undefined, after: { region: region.id, n, dataSha256, originalSha256: upload.sha256, rowsStored: read.mjd.length, rowsLeftOut: read.issues.length + read.leftOut.length, cellsCorrected: read.edited.length, reason: body.reason } }
  })
  return versionView(context, versionRow(context, versionId))
}

/** The parser of units is loaded when the first unit is asked for. */
async function recipeFor(choice: NonNullable<NewSeries['conversion']>, areaM2: number, withdrawalPositive: boolean | undefined, stored: StoredSeries[]) {
  const { recipeOfChoice } = await import('#shared/series/conversionChoice')
  return recipeOfChoice(choice, areaM2, withdrawalPositive, stored)
}

/** The versions that a conversion takes off, as far as they are of this workspace. */
function storedSeries(context: Context, workspaceId: string, { subtract = [] }: NonNullable<NewSeries['conversion']>): StoredSeries[] {
  const known = subtract.length ? listVersions(context, workspaceId).items : []
  return known.filter(({ id }) => subtract.some(({ versionId }) => versionId === id)).map(version => ({
    versionId: version.id, dataSha256: version.dataSha256, name: `${regionRow(context, version.regionId).name}, version ${version.n}`, series: massSeries(context, version.id),
  }))
}

/** Systematic rates in order of their names; the same source twice is one error, and adds up with its sign. */
function sumBySource(rates: readonly SystematicRate[]): SystematicRate[] {
  const sums = new Map<string, number>()
  for (const { source, sigmaGtPerYear } of rates) sums.set(source, (sums.get(source) ?? 0) + sigmaGtPerYear)
  return [...sums].map(([source, sigmaGtPerYear]) => ({ source, sigmaGtPerYear })).sort((a, b) => a.source.localeCompare(b.source))
}

export function errorSourceId(context: Context, tx: Reader, workspaceId: string, name: string): string {
  const known = tx.select().from(schema.errorSource).where(eq(schema.errorSource.workspaceId, workspaceId)).all().find(s => s.name === name)
  if (known) return known.id
  const id = newId()
  tx.insert(schema.errorSource).values({ id, workspaceId, name, createdAt: context.now() }).run()
  return id
}

export function listErrorSources(context: Context, workspaceId: string) {
  const items = context.db.select({ id: schema.errorSource.id, name: schema.errorSource.name }).from(schema.errorSource)
    .where(eq(schema.errorSource.workspaceId, workspaceId)).orderBy(schema.errorSource.name).all()
  return { items, nextCursor: null }
}

function versionInWorkspace(context: Context, principal: Principal | null, id: string) {
  const version = versionRow(context, id)
  const series = context.db.select().from(schema.series).where(eq(schema.series.id, version.seriesId)).get()!
  authorise(principal, 'region.read', { workspaceId: series.workspaceId })
  return { version, series }
}

export function readSeriesVersion(context: Context, principal: Principal | null, id: string) {
  const { version, series } = versionInWorkspace(context, principal, id)
  if (!series.regionId) throw new Problem(404, 'not-found', 'This is not a version of a mass series.')
  const { mjd, massGt, sigmaGt, sharedRates } = massSeries(context, id)
  return { ...versionView(context, version), regionId: series.regionId, mjd, massGt, sigmaGt, sharedRates, recipe: JSON.parse(version.recipe) as Record<string, unknown> }
}

/** The original of a version, byte for byte as a stream, with its name: a grid may have half a gigabyte. */
export function readVersionOriginal(context: Context, principal: Principal | null, id: string) {
  const { version } = versionInWorkspace(context, principal, id)
  return { name: version.originalName, bytes: createReadStream(originalPath(context.dataDir, version.originalSha256)) }
}
