import { eq } from 'drizzle-orm'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import { movedPart, withPattern, type CellPattern } from '#shared/earth/cellPattern'
import { contourOf } from '#shared/earth/contour'
import { responseOf } from '#shared/earth/response'
import { fitTrend } from '#shared/earth/time/trend'
import type { Principal } from '#shared/permissions'
import type { SeriesFacts } from '#shared/series/facts'
import { productSentences } from '#shared/text/gridProduct'
import type { PhysicsSettings } from '#shared/types/domain'
import { InputError, type Issue } from '#shared/types/issue'
import { schema, type Reader } from '../database/client'
import { Problem } from '../utils/problem'
import { authorise, change, newId } from './change'
import type { Context } from './context'
import type { GridSeriesAnswer, GridSeriesJobInput } from './gridJobs'
import { gridRow } from './grids'
import { canonicalJson, sha256Hex } from './hash'
import { errorSourceId } from './massSeries'
import { latestOutline, regionRow, seriesOfRegion } from './regions'
import { checksOf } from './seriesChecks'
import { floats, nextVersion, versionRow, versionView } from './seriesStore'

type Acceptance = BodyOf<typeof contracts.gridSeriesAccept>
type Taken = GridSeriesAnswer['regions'][number]
type Asked = GridSeriesJobInput['regions'][number]

/** A finished job of this kind with what it was asked and what it found. */
function finishedJob(context: Context, id: string) {
  const row = context.jobs.row(id)
  if (row.kind !== 'grid-series') throw new Problem(404, 'not-found', 'This job takes no series from a grid.')
  if (row.state !== 'done') throw new Problem(409, 'not-done', `The job is ${row.state}: there are no series yet.`)
  return { row, input: JSON.parse(row.input) as GridSeriesJobInput, answer: JSON.parse(row.answer!) as GridSeriesAnswer }
}

/** Effect of a gigatonne with a pattern and without, for screens. */
export function patternBesideEven(context: Context, geometry: Asked['geometry'], pattern: CellPattern, settings: PhysicsSettings) {
  const contour = contourOf(geometry)
  const pick = ({ chi1Mas, chi2Mas, lodMicroseconds }: ReturnType<typeof responseOf>) => ({ chi1Mas, chi2Mas, lodMicroseconds })
  return { pattern: pick(responseOf(withPattern(contour, pattern), context.earth, settings)), even: pick(responseOf(contour, context.earth, settings)) }
}

export function readGridSeries(context: Context, principal: Principal | null, id: string) {
  const { row, input, answer } = finishedJob(context, id)
  authorise(principal, 'region.read', { workspaceId: row.workspaceId })
  return {
    gridId: input.gridId, accepted: Boolean(answer.accepted),
    regions: answer.regions.map((taken) => {
      const asked = input.regions.find(region => region.id === taken.id)!
      const { mjd, massGt, areaM2, usedM2, seaM2, missingM2, outsideM2, cells, steps, pattern: found } = taken
      return {
        regionId: taken.id, name: asked.name, mjd, massGt, trend: trendOf(taken), areaM2, usedM2, seaM2, missingM2, outsideM2, cells, steps,
        issues: taken.issues.slice(0, 200), issueCount: taken.issues.length,
        pattern: found && {
          basis: found.pattern.basis, cells: found.pattern.excess.length, movedPart: movedPart(found.pattern), agreement: found.agreement,
          perGt: patternBesideEven(context, asked.geometry, found.pattern, input.settings),
        },
      }
    }),
  }
}

function trendOf({ mjd, massGt }: Taken) {
  if (mjd.length < 3) return null
  const { value, sigma } = fitTrend({ mjd, value: massGt, sigma: null })
  return { value, sigma }
}

/** Stores a version for each region with its pattern, in one transaction: all of them or none. A job’s series are stored once. */
export function acceptGridSeries(context: Context, principal: Principal | null, id: string, body: Acceptance) {
  const { row, input, answer } = finishedJob(context, id)
  const actor = authorise(principal, 'region.write', { workspaceId: row.workspaceId })
  const taken = answer.regions.filter(region => !body.regionIds || body.regionIds.includes(region.id))
  const regions = taken.map(series => ({ series, asked: input.regions.find(region => region.id === series.id)!, region: regionRow(context, series.id) }))
  for (const { region } of regions) authorise(principal, 'region.write', { workspaceId: region.workspaceId, kind: region.kind })
  if (answer.accepted) throw new Problem(409, 'accepted', 'The series of this job are stored already.')
  const issues: Issue[] = regions.flatMap(({ series, asked, region }) => [
    ...latestOutline(context, region.id).sha256 === asked.outlineSha256 ? [] : [{ path: `regions/${region.id}`, code: 'outline-changed', message: `The outline of ${region.name} was changed meanwhile: take its series again.` }],
    ...series.mjd.length > 0 ? [] : [{ path: `regions/${region.id}`, code: 'empty', message: `${region.name} has no month with a value.` }],
  ])
  if (issues.length > 0 || regions.length === 0) throw new InputError(issues[0]?.message ?? 'No region is chosen. Nothing was stored.', issues)

  const grid = gridRow(context, input.gridId, { inBin: true })
  const stored = change(context, principal, {
    action: 'region.write', verb: 'series stored from a grid', entity: 'grid', id: grid.id, workspaceId: row.workspaceId, resource: {},
  }, (tx) => {
    const versions = regions.map(({ series, asked, region }) => storeOne(context, tx, { series, asked, region, input, body, grid, actorId: actor.userId }))
    tx.update(schema.job).set({ answer: JSON.stringify({ ...answer, accepted: versions.map(v => v.id) }) }).where(eq(schema.job.id, row.id)).run()
    return { result: versions, after: { grid: grid.name, originalSha256: grid.originalSha256, versions: versions.map(v => ({ region: v.regionId, n: v.n, dataSha256: v.dataSha256 })), reason: body.reason } }
  })
  return { items: stored.map(({ id: versionId, regionId }) => ({ ...versionView(context, versionRow(context, versionId)), regionId })), nextCursor: null }
}

interface One { series: Taken, asked: Asked, region: ReturnType<typeof regionRow>, input: GridSeriesJobInput, body: Acceptance, grid: ReturnType<typeof gridRow>, actorId: string }

/** Gt per mm of mean height over the cells in use. */
const gtPerMm = (series: Taken) => series.usedM2 * 1e-12

function storeOne(context: Context, tx: Reader, { series, asked, region, input, body, grid, actorId }: One) {
  const { mjd, massGt } = series
  const sigmaGt = body.sigmaMm === null ? null : massGt.map(() => body.sigmaMm! * gtPerMm(series))
  const sharedRates = sumBySource(body.sharedRates).map(({ source, sigmaMmPerYear }) => ({ source, sigmaGtPerYear: sigmaMmPerYear * gtPerMm(series) }))
  const dataSha256 = sha256Hex(canonicalJson({ mjd, massGt, sigmaGt, sharedRates }))
  const product = body.product ? productSentences(body.product) : []
  const facts: SeriesFacts | null = body.facts && { ...body.facts, method: [body.facts.method, ...product].filter(Boolean).join(' ') }
  const recipe = {
    grid: { id: grid.id, ...input.source }, product: body.product, steps: [...series.steps, ...product], outlineSha256: asked.outlineSha256, sigmaMm: body.sigmaMm, sharedRatesMm: body.sharedRates,
    areas: { areaM2: series.areaM2, usedM2: series.usedM2, seaM2: series.seaM2, missingM2: series.missingM2, outsideM2: series.outsideM2 },
    checks: checksOf(context, region.id, { mjd, massGt, sigmaGt, lineOf: null }, series.areaM2, []),
    leftOut: series.issues, leftOutCount: series.issues.length, rowsStored: mjd.length,
  }
  const existing = seriesOfRegion(context, region.id)
  const seriesId = existing?.id ?? newId()
  if (!existing) tx.insert(schema.series).values({ id: seriesId, workspaceId: region.workspaceId, regionId: region.id, quantity: 'mass', name: body.name, createdAt: context.now(), createdBy: actorId }).run()
  const [id, n] = [newId(), nextVersion(tx, seriesId)]
  tx.insert(schema.seriesVersion).values({
    id, seriesId, n, originalSha256: grid.originalSha256, originalName: grid.originalName, dataSha256, recipe: canonicalJson(recipe),
    reason: body.reason, source: body.source, licence: body.licence, independence: body.independence, facts: facts && canonicalJson(facts),
    firstMjd: mjd[0]!, lastMjd: mjd.at(-1)!, count: mjd.length, createdAt: context.now(), createdBy: actorId,
  }).run()
  tx.insert(schema.seriesData).values({ versionId: id, mjd: floats(mjd), value: floats(massGt), sigma: sigmaGt && floats(sigmaGt) }).run()
  for (const { source, sigmaGtPerYear } of sharedRates) {
    tx.insert(schema.seriesError).values({ versionId: id, sourceId: errorSourceId(context, tx, region.workspaceId, source), sigmaGtPerYear }).run()
  }
  if (series.pattern) {
    const pattern = canonicalJson(series.pattern.pattern)
    tx.insert(schema.gridPattern).values({ versionId: id, gridId: grid.id, pattern, sha256: sha256Hex(pattern), outlineSha256: asked.outlineSha256 }).run()
  }
  return { id, n, regionId: region.id, dataSha256 }
}

function sumBySource(rates: Acceptance['sharedRates']) {
  const sums = new Map<string, number>()
  for (const { source, sigmaMmPerYear } of rates) sums.set(source, (sums.get(source) ?? 0) + sigmaMmPerYear)
  return [...sums].map(([source, sigmaMmPerYear]) => ({ source, sigmaMmPerYear })).sort((a, b) => a.source.localeCompare(b.source))
}
