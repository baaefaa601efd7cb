import { and, desc, eq, inArray, isNotNull, isNull, lt, sql } from 'drizzle-orm'
import type { contracts } from '#shared/api/contracts'
import type { BodyOf } from '#shared/api/contract'
import { contourOf } from '#shared/earth/contour'
import { overlapsOf } from '#shared/geo/overlap'
import { requireOutline } from '#shared/geo/outline'
import { patternLeftOut } from '#shared/text/gridPattern'
import { can, type Principal } from '#shared/permissions'
import type { OceanMode, Outline } from '#shared/types/domain'
import { schema, type Db, type Reader } from '../database/client'
import { prepared } from '../database/prepared'
import { Problem } from '../utils/problem'
import { authorise, change, nameOfUser, newId } from './change'
import type { Context } from './context'
import { evenSpreadOf, patternIsOfOtherOutline, patternOfVersion } from './gridPatterns'
import { canonicalJson, sha256Hex } from './hash'
import { pageOf } from './paging'
import { requireAgency } from './people'
import { defaultSettings, effectsByOcean, perGigatonne, trendOf, trendView, type PerGt } from './predictions'
import { latestVersion, massSeries, versionRow, versionsOf, versionView } from './seriesStore'

export type RegionRow = typeof schema.region.$inferSelect
type OutlineRow = typeof schema.outlineVersion.$inferSelect

export function regionRow(context: Context, id: string, { inBin = false } = {}): RegionRow {
  const row = context.db.select().from(schema.region).where(eq(schema.region.id, id)).get()
  if (!row || (row.deletedAt && !inBin)) throw new Problem(404, 'not-found', 'There is no such region.')
  return row
}

export function outlinesOf(context: Context, regionId: string): OutlineRow[] {
  return context.db.select().from(schema.outlineVersion).where(eq(schema.outlineVersion.regionId, regionId)).orderBy(desc(schema.outlineVersion.n)).all()
}

const outlineStatement = (db: Db) => db.select().from(schema.outlineVersion).where(eq(schema.outlineVersion.regionId, sql.placeholder('regionId')))
  .orderBy(desc(schema.outlineVersion.n)).limit(1).prepare()
const seriesStatement = (db: Db) => db.select().from(schema.series)
  .where(and(eq(schema.series.regionId, sql.placeholder('regionId')), isNull(schema.series.deletedAt))).prepare()
const agencyStatement = (db: Db) => db.select().from(schema.agency).where(eq(schema.agency.id, sql.placeholder('id'))).prepare()

export function latestOutline(context: Context, regionId: string): OutlineRow & { geometry: Outline } {
  const row = prepared(context.db, outlineStatement).get({ regionId })
  if (!row) throw new Problem(404, 'not-found', 'This region has no outline.')
  return { ...row, geometry: JSON.parse(row.geojson) as Outline }
}

export function seriesOfRegion(context: Context, regionId: string) {
  return prepared(context.db, seriesStatement).get({ regionId }) ?? null
}

interface Derived { perGt: PerGt, centroid: [number, number], trend: ReturnType<typeof trendOf> }
const derivedCache = new WeakMap<Context, Map<string, Derived>>()

/** What follows from outline, series version and Earth model alone: kept, since a list asks for it again and again. */
export function derivedOfRegion(context: Context, outline: OutlineRow & { geometry: Outline }, versionId: string | null): Derived {
  const cache = derivedCache.get(context) ?? new Map<string, Derived>()
  derivedCache.set(context, cache)
  const key = `${outline.sha256} ${versionId}`
  let value = cache.get(key)
  if (!value) {
    const perGt = perGigatonne(context, outline.geometry, defaultSettings(context), patternOfVersion(context, versionId, outline.sha256))
    const [lon, lat] = contourOf(outline.geometry).centroid
    value = { perGt, centroid: [lon, lat], trend: versionId ? trendOf(massSeries(context, versionId), perGt) : null }
    if (cache.size > 5000) cache.clear()
    cache.set(key, value)
  }
  return value
}

export function regionView(context: Context, principal: Principal | null, row: RegionRow) {
  const outline = latestOutline(context, row.id)
  const agency = prepared(context.db, agencyStatement).get({ id: row.agencyId })!
  const series = seriesOfRegion(context, row.id)
  const latest = series ? latestVersion(context, series.id) : null
  const { centroid, trend } = derivedOfRegion(context, outline, latest?.id ?? null)
  return {
    id: row.id, revision: row.revision, name: row.name, kind: row.kind, note: row.note,
    agency: { id: agency.id, name: agency.name },
    outline: { n: outline.n, sha256: outline.sha256, areaKm2: outline.areaM2 / 1e6, centroid },
    geometry: outline.geometry as { type: 'Polygon' | 'MultiPolygon', coordinates: unknown[] },
    series: series && latest ? { seriesId: series.id, latest: versionView(context, latest) } : null,
    trend: trendView(trend),
    createdAt: row.createdAt, createdBy: nameOfUser(context, row.createdBy),
    canWrite: can(principal, 'region.write', { workspaceId: row.workspaceId, kind: row.kind }),
  }
}

export function listRegions(context: Context, principal: Principal | null, workspaceId: string, { limit, cursor, bin }: { limit: number, cursor?: string, bin?: 'only' }) {
  const rows = context.db.select().from(schema.region)
    .where(and(eq(schema.region.workspaceId, workspaceId), bin ? isNotNull(schema.region.deletedAt) : isNull(schema.region.deletedAt), cursor ? lt(schema.region.id, cursor) : undefined))
    .orderBy(desc(schema.region.id)).limit(limit + 1).all()
  return pageOf(rows, limit, row => regionView(context, principal, row))
}

function storeOutline(context: Context, tx: Reader, regionId: string, n: number, geometry: Outline, createdBy: string) {
  const geojson = canonicalJson(geometry)
  const areaM2 = contourOf(geometry).areaM2
  const outline = { id: newId(), regionId, n, geojson, sha256: sha256Hex(geojson), areaM2, createdAt: context.now(), createdBy }
  tx.insert(schema.outlineVersion).values(outline).run()
  return outline
}

export function createRegion(context: Context, principal: Principal | null, workspaceId: string, body: BodyOf<typeof contracts.regionCreate>) {
  const actor = authorise(principal, 'region.write', { workspaceId, kind: body.kind })
  requireAgency(context, workspaceId, body.agencyId)
  const geometry = requireOutline(body.geometry, 'geometry')
  const id = newId()
  const row = change(context, principal, { action: 'region.write', verb: 'region added', entity: 'region', id, workspaceId, resource: { kind: body.kind } }, (tx) => {
    const values = { id, workspaceId, agencyId: body.agencyId, kind: body.kind, name: body.name, note: body.note, createdAt: context.now(), createdBy: actor.userId }
    tx.insert(schema.region).values(values).run()
    const outline = storeOutline(context, tx, id, 1, geometry, actor.userId)
    return { result: id, after: { name: body.name, kind: body.kind, agencyId: body.agencyId, outline: outline.sha256 } }
  })
  return regionView(context, principal, regionRow(context, row))
}

export function readRegion(context: Context, principal: Principal | null, id: string) {
  const row = regionRow(context, id)
  authorise(principal, 'region.read', { workspaceId: row.workspaceId })
  const view = regionView(context, principal, row)
  const outline = latestOutline(context, id)
  const others = context.db.select().from(schema.region).where(and(eq(schema.region.workspaceId, row.workspaceId), isNull(schema.region.deletedAt))).all()
  const names = new Map(others.map(r => [r.id, r.name]))
  const overlaps = overlapsOf(others.map(r => ({ id: r.id, geometry: latestOutline(context, r.id).geometry })))
    .filter(o => o.a === id || o.b === id)
    .map(o => o.a === id ? { id: o.b, areaKm2: o.areaKm2, share: o.shareOfA, shareOfOther: o.shareOfB } : { id: o.a, areaKm2: o.areaKm2, share: o.shareOfB, shareOfOther: o.shareOfA })
  const series = seriesOfRegion(context, id)
  const pattern = patternOfVersion(context, view.series?.latest.id ?? null, outline.sha256)
  return {
    ...view,
    patterned: Boolean(pattern),
    perGt: derivedOfRegion(context, outline, view.series?.latest.id ?? null).perGt,
    settings: { ...defaultSettings(context) },
    effects: effectsByOcean(context, outline.geometry, pattern),
    outlines: outlinesOf(context, id).map(o => ({ n: o.n, areaKm2: o.areaM2 / 1e6, sha256: o.sha256, createdAt: o.createdAt, createdBy: nameOfUser(context, o.createdBy) })),
    versions: series ? versionsOf(context, series.id).map(v => versionView(context, v)) : [],
    overlaps: overlaps.map(o => ({ ...o, name: names.get(o.id) ?? '' })),
  }
}

export function changeRegion(context: Context, principal: Principal | null, id: string, body: BodyOf<typeof contracts.regionChange>) {
  const row = regionRow(context, id)
  const actor = authorise(principal, 'region.write', { workspaceId: row.workspaceId, kind: row.kind })
  if (body.kind) authorise(principal, 'region.write', { workspaceId: row.workspaceId, kind: body.kind })
  if (body.agencyId) requireAgency(context, row.workspaceId, body.agencyId)
  const geometry = body.geometry ? requireOutline(body.geometry, 'geometry') : null
  const target = { action: 'region.write' as const, verb: geometry ? 'outline changed' : 'region changed', entity: 'region', id, workspaceId: row.workspaceId, resource: { kind: row.kind }, row, revision: body.revision }
  change(context, principal, target, (tx) => {
    const before = { name: row.name, kind: row.kind, agencyId: row.agencyId, note: row.note, outline: latestOutline(context, id).sha256 }
    const values = { name: body.name ?? row.name, kind: body.kind ?? row.kind, agencyId: body.agencyId ?? row.agencyId, note: body.note ?? row.note }
    tx.update(schema.region).set({ ...values, revision: row.revision + 1 }).where(eq(schema.region.id, id)).run()
    const outline = geometry ? storeOutline(context, tx, id, latestOutline(context, id).n + 1, geometry, actor.userId).sha256 : before.outline
    return { result: undefined, before, after: { ...values, outline } }
  })
  return regionView(context, principal, regionRow(context, id))
}

export function binRegion(context: Context, principal: Principal | null, id: string, revision: number, restore: boolean) {
  const row = regionRow(context, id, { inBin: restore })
  const next = row.revision + 1
  return change(context, principal, { action: 'region.write', verb: restore ? 'taken out of the bin' : 'put in the bin', entity: 'region', id, workspaceId: row.workspaceId, resource: { kind: row.kind }, row, revision }, (tx) => {
    tx.update(schema.region).set({ deletedAt: restore ? null : context.now(), revision: next }).where(eq(schema.region.id, id)).run()
    return { result: { revision: next }, before: { name: row.name }, after: { inBin: !restore } }
  })
}

export function regionNames(context: Context, ids: string[]): Map<string, string> {
  if (!ids.length) return new Map()
  return new Map(context.db.select({ id: schema.region.id, name: schema.region.name }).from(schema.region).where(inArray(schema.region.id, ids)).all().map(r => [r.id, r.name]))
}

/** One region's prediction from one version of its series, under the default settings or another ocean. */
export function predictRegion(context: Context, principal: Principal | null, id: string, versionId: string | undefined, ocean: OceanMode | undefined) {
  const row = regionRow(context, id)
  authorise(principal, 'region.read', { workspaceId: row.workspaceId })
  const series = seriesOfRegion(context, id)
  const version = versionId ? versionRow(context, versionId) : series ? versionsOf(context, series.id)[0] : undefined
  if (!series || !version || version.seriesId !== series.id) throw new Problem(404, 'not-found', 'This region has no mass series yet.')
  const settings = { ...defaultSettings(context), ...(ocean ? { ocean } : {}) }
  const outline = latestOutline(context, id)
  const pattern = patternOfVersion(context, version.id, outline.sha256)
  const perGt = perGigatonne(context, outline.geometry, settings, pattern)
  const mass = massSeries(context, version.id)
  const mean = mass.massGt.reduce((sum, m) => sum + m, 0) / mass.massGt.length
  const relative = mass.massGt.map(m => m - mean)
  const trend = trendOf(mass, perGt)
  return {
    version: versionView(context, version), settings: { ...settings }, perGt,
    mjd: mass.mjd, massGt: mass.massGt, sigmaMassGt: mass.sigmaGt ?? mass.mjd.map(() => null),
    lodMicroseconds: relative.map(m => m * perGt.lodMicroseconds),
    chi1Mas: relative.map(m => m * perGt.chi1Mas), chi2Mas: relative.map(m => m * perGt.chi2Mas),
    trend: trendView(trend),
    warnings: [
      ...trend ? trend.warnings.map(w => w.message) : ['Fewer than three epochs: no trend.'],
      ...patternIsOfOtherOutline(context, version.id, outline.sha256) ? [patternLeftOut] : [],
    ],
    evenSpread: pattern && evenSpreadOf(pattern, perGt, perGigatonne(context, outline.geometry, settings)),
  }
}
