import { and, desc, eq, inArray, isNull, lt } from 'drizzle-orm'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import { parseObserved } from '#shared/observed/parse'
import { can, type Principal } from '#shared/permissions'
import type { PhysicsSettings } from '#shared/types/domain'
import { InputError, type Issue } from '#shared/types/issue'
import type { ObservedSeries } from '#shared/types/run'
import { schema } from '../database/client'
import type { Upload } from '../utils/body'
import { Problem } from '../utils/problem'
import { authorise, change, newId } from './change'
import type { Context } from './context'
import { gravityExcitation, gravityOf } from './gravity'
import { canonicalJson, sha256Hex } from './hash'
import { keepOriginal, rememberOriginal, uploadText } from './originals'
import { pageOf } from './paging'
import { floats, fromFloats, versionsOf, versionView } from './seriesStore'

interface ObservedRecipe { format: ObservedSeries['format'], predictedRows: number, emptyRows: number, rowsRead: number, pole: boolean, lod: boolean, excitation?: boolean, ut1?: boolean, from?: ObservedSeries['from'], understood: string[], leftOut: Issue[], leftOutCount: number, csv?: unknown }
const columns = ['xMas', 'yMas', 'lodMs', 'sigmaXMas', 'sigmaYMas', 'sigmaLodMs'] as const
/** Behind the others, where a file holds excitation in place of the pole; UT1 − TAI comes last, where it is there. */
const excitationColumns = ['chi1Mas', 'chi2Mas'] as const

export async function createObserved(context: Context, principal: Principal | null, workspaceId: string, upload: Upload, body: BodyOf<typeof contracts.observedCreate>) {
  const actor = authorise(principal, 'observed.write', { workspaceId })
  const parsed = parseObserved(await uploadText(upload), body.csv ? { csv: body.csv } : {})
  if (parsed.issues.length && !body.leaveOutBadRows) {
    throw new InputError(`${parsed.issues.length} of ${parsed.rowsRead} rows cannot be used. Nothing was stored.`, parsed.issues)
  }
  const id = newId()
  const versionId = newId()
  const excitation = parsed.chi1Mas && parsed.chi2Mas ? [parsed.chi1Mas, parsed.chi2Mas] : []
  const ut1 = parsed.ut1MinusTaiMs ? [parsed.ut1MinusTaiMs] : []
  const value = joined([...columns.map(name => parsed[name]), ...excitation, ...ut1])
  const recipe: ObservedRecipe = {
    format: parsed.format, predictedRows: parsed.predicted.reduce((sum, flag) => sum + flag, 0), emptyRows: parsed.emptyRows, rowsRead: parsed.rowsRead,
    pole: parsed.xMas.some(Number.isFinite) && parsed.yMas.some(Number.isFinite), lod: parsed.lodMs.some(Number.isFinite), excitation: excitation.length > 0, ut1: ut1.length > 0, ...(parsed.from ? { from: parsed.from } : {}),
    understood: parsed.understood, leftOut: parsed.issues.slice(0, 1000), leftOutCount: parsed.issues.length, ...(body.csv ? { csv: body.csv } : {}),
  }
  await keepOriginal(context, upload)
  change(context, principal, { action: 'observed.write', verb: 'observed series stored', entity: 'observed series', id, workspaceId }, (tx) => {
    rememberOriginal(context, tx, upload)
    tx.insert(schema.series).values({ id, workspaceId, regionId: null, quantity: 'earth-orientation', name: body.name, createdAt: context.now(), createdBy: actor.userId }).run()
    tx.insert(schema.seriesVersion).values({
      id: versionId, seriesId: id, n: 1, originalSha256: upload.sha256, originalName: upload.name, dataSha256: sha256Hex(value), recipe: canonicalJson(recipe),
      reason: body.reason, source: body.source, licence: body.licence, independence: body.independence,
      firstMjd: parsed.mjd[0]!, lastMjd: parsed.mjd.at(-1)!, count: parsed.mjd.length, createdAt: context.now(), createdBy: actor.userId,
    }).run()
    tx.insert(schema.seriesData).values({ versionId, mjd: floats(parsed.mjd), value, sigma: null, flags: Buffer.from(parsed.predicted) }).run()
    return { result: undefined, after: { name: body.name, format: parsed.format, days: parsed.mjd.length, originalSha256: upload.sha256 } }
  })
  return observedSummary(context, principal, observedRow(context, id))
}

function joined(parts: readonly Float64Array[]): Buffer {
  const all = new Float64Array(parts.reduce((sum, part) => sum + part.length, 0))
  let at = 0
  for (const part of parts) {
    all.set(part, at)
    at += part.length
  }
  return floats(all)
}

/** Series that a run may be held against. */
const comparable = ['earth-orientation', 'gravity'] as const
/** Kinds of series that go into the bin and out of it by the same routes. */
const binned = ['earth-orientation', 'gravity', 'angular-momentum'] as const

export function observedRow(context: Context, id: string, { inBin = false, quantities = comparable as typeof comparable | typeof binned } = {}) {
  const row = context.db.select().from(schema.series).where(and(eq(schema.series.id, id), inArray(schema.series.quantity, [...quantities]))).get()
  if (!row || (row.deletedAt && !inBin)) throw new Problem(404, 'not-found', 'There is no such observed series.')
  return row
}

export function observedSummary(context: Context, principal: Principal | null, row: ReturnType<typeof observedRow>) {
  const version = versionsOf(context, row.id)[0]!
  const facts = { id: row.id, revision: row.revision, name: row.name, latest: versionView(context, version), canWrite: can(principal, 'observed.write', { workspaceId: row.workspaceId }) }
  if (row.quantity === 'gravity') {
    const { excitation, observed } = gravityExcitation(version, dataOf(context, version.id))
    const holds = (values: Float64Array | undefined) => values?.some(Number.isFinite) ?? false
    return {
      ...facts, format: 'gravity', has: { pole: false, lod: holds(observed.lodMs), excitation: holds(observed.chi1Mas) && holds(observed.chi2Mas) }, predictedRows: 0, emptyRows: observed.emptyRows,
      gravity: { fields: gravityOf(version, dataOf(context, version.id)).fields, stated: excitation.stated, warnings: excitation.warnings },
    }
  }
  const recipe = JSON.parse(version.recipe) as ObservedRecipe
  return {
    ...facts, format: recipe.format, has: { pole: recipe.pole, lod: recipe.lod, excitation: recipe.excitation ?? false }, predictedRows: recipe.predictedRows, emptyRows: recipe.emptyRows, gravity: null,
  }
}

const dataOf = (context: Context, versionId: string) => context.db.select().from(schema.seriesData).where(eq(schema.seriesData.versionId, versionId)).get()!

/** The answers stored with gravity coefficients; undefined for a series of rotation. */
export function gravityFieldsOf(context: Context, row: ReturnType<typeof observedRow>) {
  if (row.quantity !== 'gravity') return undefined
  const version = versionsOf(context, row.id)[0]!
  return gravityOf(version, dataOf(context, version.id)).fields
}

/** The stored series as the engine takes it; gravity coefficients as excitation, with the coefficients and core of the settings. */
export function loadObserved(context: Context, id: string, settings?: PhysicsSettings): ObservedSeries {
  const version = versionsOf(context, id)[0]!
  const data = dataOf(context, version.id)
  if (observedRow(context, id, { inBin: true }).quantity === 'gravity') return gravityExcitation(version, data, settings).observed
  const recipe = JSON.parse(version.recipe) as ObservedRecipe
  const mjd = fromFloats(data.mjd)
  const all = fromFloats(data.value)
  const column = (i: number) => all.subarray(i * mjd.length, (i + 1) * mjd.length)
  const [xMas, yMas, lodMs, sigmaXMas, sigmaYMas, sigmaLodMs] = columns.map((_, i) => column(i)) as [Float64Array, Float64Array, Float64Array, Float64Array, Float64Array, Float64Array]
  const [chi1Mas, chi2Mas] = recipe.excitation ? excitationColumns.map((_, i) => column(columns.length + i)) : []
  const ut1MinusTaiMs = recipe.ut1 ? column(columns.length + (recipe.excitation ? excitationColumns.length : 0)) : null
  return {
    format: recipe.format, mjd, xMas, yMas, lodMs, sigmaXMas, sigmaYMas, sigmaLodMs,
    predicted: new Uint8Array(data.flags ?? new Uint8Array(mjd.length)), emptyRows: recipe.emptyRows, rowsRead: recipe.rowsRead,
    ...(chi1Mas && chi2Mas ? { chi1Mas, chi2Mas } : {}), ...(ut1MinusTaiMs ? { ut1MinusTaiMs } : {}), ...(recipe.from ? { from: recipe.from } : {}),
  }
}

export function listObserved(context: Context, principal: Principal | null, workspaceId: string, { limit, cursor }: { limit: number, cursor?: string }) {
  const rows = context.db.select().from(schema.series)
    .where(and(eq(schema.series.workspaceId, workspaceId), inArray(schema.series.quantity, [...comparable]), isNull(schema.series.deletedAt), cursor ? lt(schema.series.id, cursor) : undefined))
    .orderBy(desc(schema.series.id)).limit(limit + 1).all()
  return pageOf(rows, limit, row => observedSummary(context, principal, row))
}

const nullable = (values: Float64Array) => Array.from(values, v => Number.isFinite(v) ? v : null)

export function readObserved(context: Context, principal: Principal | null, id: string) {
  const row = observedRow(context, id)
  authorise(principal, 'observed.read', { workspaceId: row.workspaceId })
  const data = loadObserved(context, id)
  return {
    ...observedSummary(context, principal, row), mjd: [...data.mjd],
    xMas: nullable(data.xMas), yMas: nullable(data.yMas), lodMs: nullable(data.lodMs),
    sigmaXMas: nullable(data.sigmaXMas), sigmaYMas: nullable(data.sigmaYMas), sigmaLodMs: nullable(data.sigmaLodMs),
    chi1Mas: data.chi1Mas ? nullable(data.chi1Mas) : null, chi2Mas: data.chi2Mas ? nullable(data.chi2Mas) : null,
    predicted: [...data.predicted], coefficients: coefficientsOf(context, row),
  }
}

/** ΔC₂₀, ΔC₂₁, ΔS₂₁ as they were sent; null for a series of rotation. */
function coefficientsOf(context: Context, row: ReturnType<typeof observedRow>) {
  if (row.quantity !== 'gravity') return null
  const version = versionsOf(context, row.id)[0]!
  const { c20, c21, s21, sigmaC20, sigmaC21, sigmaS21 } = gravityOf(version, dataOf(context, version.id)).series
  return { c20: nullable(c20), c21: nullable(c21), s21: nullable(s21), sigmaC20: nullable(sigmaC20), sigmaC21: nullable(sigmaC21), sigmaS21: nullable(sigmaS21) }
}

export function binObserved(context: Context, principal: Principal | null, id: string, revision: number, restore = false) {
  const row = observedRow(context, id, { inBin: restore, quantities: binned })
  const next = row.revision + 1
  return change(context, principal, { action: 'observed.write', verb: restore ? 'taken out of the bin' : 'put in the bin', entity: 'observed series', id, workspaceId: row.workspaceId, row, revision }, (tx) => {
    tx.update(schema.series).set({ deletedAt: restore ? null : context.now(), revision: next }).where(eq(schema.series.id, id)).run()
    return { result: { revision: next }, before: { name: row.name }, after: { inBin: !restore } }
  })
}

/** How an edition and a report name the series that they were compared with. */
export function observedLabelOf(context: Context, id: string) {
  const row = observedRow(context, id)
  const version = versionsOf(context, row.id)[0]!
  return { name: row.name, source: version.source, originalSha256: version.originalSha256 }
}
