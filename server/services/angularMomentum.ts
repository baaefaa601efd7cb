import { and, desc, eq, isNull } from 'drizzle-orm'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import { readAngularMomentum } from '#shared/observed/angularMomentum'
import type { AngularMomentumFields, ChiTerms } from '#shared/observed/angularMomentumTypes'
import type { Chain, FluidCorrection } from '#shared/observed/chainTypes'
import { can, type Principal } from '#shared/permissions'
import { InputError, type Issue } from '#shared/types/issue'
import { schema } from '../database/client'
import type { Upload } from '../utils/body'
import { authorise, change, newId } from './change'
import type { Context } from './context'
import { canonicalJson, sha256Hex } from './hash'
import { keepOriginal, rememberOriginal, uploadText } from './originals'
import { floats, fromFloats, versionsOf, versionView } from './seriesStore'

interface FluidRecipe { fields: AngularMomentumFields, order?: 'mass-first' | 'motion-first', stepDays: number, rowsRead: number, emptyRows: number, understood: string[], leftOut: Issue[], leftOutCount: number }
const columnsOf = (mass: ChiTerms, motion: ChiTerms) => [mass.chi1, mass.chi2, mass.chi3, motion.chi1, motion.chi2, motion.chi3]
const quantity = 'angular-momentum'

/** Keeps a series of angular momentum of air or sea with the answers to what its numbers do not say. */
export async function createFluid(context: Context, principal: Principal | null, workspaceId: string, upload: Upload, body: BodyOf<typeof contracts.fluidCreate>) {
  const actor = authorise(principal, 'observed.write', { workspaceId })
  const read = readAngularMomentum(await uploadText(upload), body.order ? { order: body.order } : {})
  if (read.issues.length && !body.leaveOutBadRows) throw new InputError(`${read.issues.length} of ${read.rowsRead} rows cannot be used. Nothing was stored.`, read.issues)
  const [id, versionId] = [newId(), newId()]
  const value = Buffer.concat(columnsOf(read.mass, read.motion).map(floats))
  const recipe: FluidRecipe = {
    fields: body.fields, ...(body.order ? { order: body.order } : {}), stepDays: read.stepDays, rowsRead: read.rowsRead, emptyRows: read.emptyRows,
    understood: read.understood, leftOut: read.issues.slice(0, 1000), leftOutCount: read.issues.length,
  }
  await keepOriginal(context, upload)
  change(context, principal, { action: 'observed.write', verb: 'angular momentum stored', entity: 'angular-momentum series', id, workspaceId }, (tx) => {
    rememberOriginal(context, tx, upload)
    tx.insert(schema.series).values({ id, workspaceId, regionId: null, quantity, name: body.name, createdAt: context.now(), createdBy: actor.userId }).run()
    tx.insert(schema.seriesVersion).values({
      id: versionId, seriesId: id, n: 1, originalSha256: upload.sha256, originalName: upload.name, dataSha256: sha256Hex(value), recipe: canonicalJson(recipe),
      reason: '', source: body.source, licence: body.licence, independence: '', firstMjd: read.mjd[0]!, lastMjd: read.mjd.at(-1)!, count: read.mjd.length, createdAt: context.now(), createdBy: actor.userId,
    }).run()
    tx.insert(schema.seriesData).values({ versionId, mjd: floats(read.mjd), value, sigma: null, flags: null }).run()
    return { result: undefined, after: { name: body.name, component: body.fields.component, rows: read.mjd.length, originalSha256: upload.sha256 } }
  })
  return summaryOf(context, principal, rowsOf(context, workspaceId).find(row => row.id === id)!)
}

function rowsOf(context: Context, workspaceId: string) {
  return context.db.select().from(schema.series).where(and(eq(schema.series.workspaceId, workspaceId), eq(schema.series.quantity, quantity), isNull(schema.series.deletedAt))).orderBy(desc(schema.series.id)).all()
}

function summaryOf(context: Context, principal: Principal | null, row: ReturnType<typeof rowsOf>[number]) {
  const version = versionsOf(context, row.id)[0]!
  const { fields, stepDays, understood } = JSON.parse(version.recipe) as FluidRecipe
  return { id: row.id, revision: row.revision, name: row.name, latest: versionView(context, version), fields, stepDays, understood, canWrite: can(principal, 'observed.write', { workspaceId: row.workspaceId }) }
}

export function listFluids(context: Context, principal: Principal | null, workspaceId: string) {
  authorise(principal, 'observed.read', { workspaceId })
  return { items: rowsOf(context, workspaceId).map(row => summaryOf(context, principal, row)), nextCursor: null }
}

/** The series that the steps of a chain subtract, by their ids; those that are not of this workspace are left for the chain to refuse. */
export function correctionsOf(context: Context, workspaceId: string, chain: Chain): Record<string, FluidCorrection> {
  const wanted = new Set(chain.steps.flatMap(step => step.on && step.kind === 'angular-momentum' ? [step.correction] : []))
  return Object.fromEntries(rowsOf(context, workspaceId).filter(row => wanted.has(row.id)).map((row) => {
    const version = versionsOf(context, row.id)[0]!
    const data = context.db.select().from(schema.seriesData).where(eq(schema.seriesData.versionId, version.id)).get()!
    const recipe = JSON.parse(version.recipe) as FluidRecipe
    const mjd = fromFloats(data.mjd)
    const all = fromFloats(data.value)
    const column = (i: number) => all.subarray(i * mjd.length, (i + 1) * mjd.length)
    const series = {
      mjd, mass: { chi1: column(0), chi2: column(1), chi3: column(2) }, motion: { chi1: column(3), chi2: column(4), chi3: column(5) },
      stepDays: recipe.stepDays, rowsRead: recipe.rowsRead, emptyRows: recipe.emptyRows, issues: [], understood: recipe.understood, suggestedComponent: null,
    }
    return [row.id, { name: row.name, source: version.source, fields: recipe.fields, series }]
  }))
}
