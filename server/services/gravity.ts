import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import { readGravityCoefficients } from '#shared/observed/gravityCoefficients'
import { excitationFromGravity, observedFromGravity, type GravityExcitation } from '#shared/observed/gravityExcitation'
import type { GravityFields, GravitySeries } from '#shared/observed/gravityTypes'
import type { Principal } from '#shared/permissions'
import type { PhysicsSettings } from '#shared/types/domain'
import { InputError, type Issue } from '#shared/types/issue'
import type { ObservedSeries } from '#shared/types/run'
import { schema } from '../database/client'
import type { Upload } from '../utils/body'
import { authorise, change, newId } from './change'
import type { Context } from './context'
import { canonicalJson, sha256Hex } from './hash'
import { keepOriginal, rememberOriginal, uploadText } from './originals'
import { floats, fromFloats, type VersionRow } from './seriesStore'

/** How the original was read, and the answers to what its numbers do not say. */
export interface GravityRecipe { fields: GravityFields, exponent?: number, rowsRead: number, emptyRows: number, understood: string[], leftOut: Issue[], leftOutCount: number }
const columns = ['c20', 'c21', 's21', 'sigmaC20', 'sigmaC21', 'sigmaS21'] as const

/** Keeps changes of C₂₀, C₂₁, S₂₁ as they were sent; they become excitation with the settings of whatever they are held against. Gives the id. */
export async function createGravity(context: Context, principal: Principal | null, workspaceId: string, upload: Upload, body: BodyOf<typeof contracts.gravityCreate>) {
  const actor = authorise(principal, 'observed.write', { workspaceId })
  const read = readGravityCoefficients(await uploadText(upload), body.exponent === undefined ? {} : { exponent: body.exponent })
  if (read.issues.length && !body.leaveOutBadRows) throw new InputError(`${read.issues.length} of ${read.rowsRead} rows cannot be used. Nothing was stored.`, read.issues)
  const [id, versionId] = [newId(), newId()]
  const value = Buffer.concat(columns.map(name => floats(read[name])))
  const recipe: GravityRecipe = {
    fields: body.fields, ...(body.exponent === undefined ? {} : { exponent: body.exponent }), rowsRead: read.rowsRead, emptyRows: read.emptyRows,
    understood: read.understood, leftOut: read.issues.slice(0, 1000), leftOutCount: read.issues.length,
  }
  await keepOriginal(context, upload)
  change(context, principal, { action: 'observed.write', verb: 'gravity coefficients stored', entity: 'observed series', id, workspaceId }, (tx) => {
    rememberOriginal(context, tx, upload)
    tx.insert(schema.series).values({ id, workspaceId, regionId: null, quantity: 'gravity', name: body.name, createdAt: context.now(), createdBy: actor.userId }).run()
    tx.insert(schema.seriesVersion).values({
      id: versionId, seriesId: id, n: 1, originalSha256: upload.sha256, originalName: upload.name, dataSha256: sha256Hex(value), recipe: canonicalJson(recipe),
      reason: '', source: body.source, licence: body.licence, independence: body.independence, firstMjd: read.mjd[0]!, lastMjd: read.mjd.at(-1)!, count: read.mjd.length,
      createdAt: context.now(), createdBy: actor.userId,
    }).run()
    tx.insert(schema.seriesData).values({ versionId, mjd: floats(read.mjd), value, sigma: null, flags: null }).run()
    return { result: undefined, after: { name: body.name, rows: read.mjd.length, fields: body.fields, originalSha256: upload.sha256 } }
  })
  return id
}

/** What a stored series holds, by its recipe and values: the coefficients with their answers. */
export function gravityOf(version: VersionRow, data: { mjd: Buffer, value: Buffer }): { series: GravitySeries, fields: GravityFields } {
  const recipe = JSON.parse(version.recipe) as GravityRecipe
  const mjd = fromFloats(data.mjd)
  const all = fromFloats(data.value)
  const [c20, c21, s21, sigmaC20, sigmaC21, sigmaS21] = columns.map((_, i) => all.subarray(i * mjd.length, (i + 1) * mjd.length)) as [Float64Array, Float64Array, Float64Array, Float64Array, Float64Array, Float64Array]
  return { fields: recipe.fields, series: { mjd, c20, c21, s21, sigmaC20, sigmaC21, sigmaS21, rowsRead: recipe.rowsRead, emptyRows: recipe.emptyRows, issues: [], understood: recipe.understood } }
}

/** Coefficients and core of a view that belongs to no run. */
const usual: PhysicsSettings = { ocean: 'fingerprint', coefficients: 'gross-2007', core: 'decoupled' }

/**
 * The coefficients as excitation, with the coefficient set and core of a run. The factor of the pole is that of an Earth with its ocean
 * whatever the ocean of the run: the pole tide is asked for by itself.
 */
export function gravityExcitation(version: VersionRow, data: { mjd: Buffer, value: Buffer }, settings: PhysicsSettings = usual): { excitation: GravityExcitation, observed: ObservedSeries } {
  const { series, fields } = gravityOf(version, data)
  const excitation = excitationFromGravity(series, fields, { ...settings, ocean: 'fingerprint' })
  return { excitation, observed: observedFromGravity(excitation, series) }
}
