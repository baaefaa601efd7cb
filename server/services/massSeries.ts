import { setImmediate } from 'node:timers/promises'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import type { Principal } from '#shared/permissions'
import type { StoredSeries } from '#shared/series/conversionChoice'
import { readMassSeriesPaced, type MassSeriesOptions } from '#shared/series/readMassSeries'
import { systematicRates, type SystematicRate } from '#shared/series/uncertainty'
import { InputError } from '#shared/types/issue'
import { eq } from 'drizzle-orm'
import { schema, type Reader } from '../database/client'
import type { Upload } from '../utils/body'
import { Problem } from '../utils/problem'
import { authorise, change, newId } from './change'
import type { Context } from './context'
import { canonicalJson, sha256Hex } from './hash'
import { keepOriginal, readOriginal, rememberOriginal, uploadTable } from './originals'
import { latestOutline, regionRow, seriesOfRegion } from './regions'
import { checksOf } from './seriesChecks'
import { floats, listVersions, massSeries, nextVersion, versionRow, versionView } from './seriesStore'

type NewSeries = BodyOf<typeof contracts.seriesCreate>

/** Reads an uploaded file into a new version of a region's mass series. Either all of it is stored or nothing. */
export async function createSeriesVersion(context: Context, principal: Principal | null, regionId: string, upload: Upload, body: NewSeries) {
  const region = regionRow(context, regionId)
  const actor = authorise(principal, 'region.write', { workspaceId: region.workspaceId, kind: region.kind })
  const outline = latestOutline(context, regionId)
  const { sigmaColumn, sheet, ...columns } = body.columns
  const recipeAsked = body.conversion && await recipeFor(body.conversion, outline.areaM2, columns.withdrawalPositive, storedSeries(context, region.workspaceId, body.conversion))
  const options = {
    ...columns, ...(sigmaColumn === undefined ? {} : { sigmaColumn }), areaM2: outline.areaM2, ...(recipeAsked ? { recipe: recipeAsked } : {}),
  } as MassSeriesOptions
  const read = await readMassSeriesPaced(await uploadTable(upload, sheet), options, { pause: () => setImmediate() })
  if (read.issues.length && !body.leaveOutBadRows) {
    throw new InputError(`${read.issues.length} of ${read.rowsRead} rows cannot be used. Nothing was stored.`, read.issues)
  }
  if (read.mjd.length === 0) throw new InputError('No row of this file can be used. Nothing was stored.', read.issues)

  const values = { mjd: read.mjd, massGt: read.massGt, sigmaGt: read.sigmaGt }
  // Errors of the conversion that all epochs share are errors of the trend, by name like those that were entered.
  const shared = sumBySource([...body.sharedRates, ...systematicRates(read.replayed, region.name)])
  const dataSha256 = sha256Hex(canonicalJson({ ...values, sharedRates: shared }))
  const recipe = {
    options: { ...options, ...read.chosen }, steps: read.conversion.steps, stepsDone: read.replayed.steps, conversion: body.conversion, ...(sheet === undefined ? {} : { sheet }), outlineSha256: outline.sha256,
    checks: checksOf(context, regionId, read, outline.areaM2, body.decisions), edited: read.edited, leftOutOnPurpose: read.leftOut,
    rowsRead: read.rowsRead, rowsStored: read.mjd.length, leftOut: read.issues.slice(0, 1000), leftOutCount: read.issues.length, leftOutBySteps: read.replayed.leftOut.slice(0, 1000), notices: read.notices,
  }
  await keepOriginal(context, upload)
  const versionId = newId()
  change(context, principal, {
    action: 'region.write', verb: 'series version stored', entity: 'series', id: versionId, workspaceId: region.workspaceId, resource: { kind: region.kind },
  }, (tx) => {
    rememberOriginal(context, tx, upload)
    const existing = seriesOfRegion(context, regionId)
    const seriesId = existing?.id ?? newId()
    if (!existing) {
      tx.insert(schema.series).values({ id: seriesId, workspaceId: region.workspaceId, regionId, quantity: 'mass', name: body.name, createdAt: context.now(), createdBy: actor.userId }).run()
    }
    const n = nextVersion(tx, seriesId)
    tx.insert(schema.seriesVersion).values({
      id: versionId, seriesId, n, originalSha256: upload.sha256, originalName: upload.name, dataSha256, recipe: canonicalJson(recipe),
      reason: body.reason, source: body.source, licence: body.licence, independence: body.independence, facts: body.facts && canonicalJson(body.facts),
      firstMjd: read.mjd[0]!, lastMjd: read.mjd.at(-1)!, count: read.mjd.length, createdAt: context.now(), createdBy: actor.userId,
    }).run()
    tx.insert(schema.seriesData).values({ versionId, mjd: floats(read.mjd), value: floats(read.massGt), sigma: read.sigmaGt ? floats(read.sigmaGt) : null }).run()
    for (const { source, sigmaGtPerYear } of shared) {
      tx.insert(schema.seriesError).values({ versionId, sourceId: errorSourceId(context, tx, region.workspaceId, source), sigmaGtPerYear }).run()
    }
    return { result: undefined, after: { region: regionId, n, dataSha256, originalSha256: upload.sha256, rowsStored: read.mjd.length, rowsLeftOut: read.issues.length + read.leftOut.length, cellsCorrected: read.edited.length, reason: body.reason } }
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

function errorSourceId(context: Context, tx: Reader, workspaceId: string, name: string): string {
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

/** The original of a version, byte for byte, with its name. */
export async function readVersionOriginal(context: Context, principal: Principal | null, id: string) {
  const { version } = versionInWorkspace(context, principal, id)
  return { name: version.originalName, bytes: await readOriginal(context, version.originalSha256) }
}
