import { sql } from 'drizzle-orm'
import { blob, index, integer, primaryKey, real, sqliteTable, text, uniqueIndex } from 'drizzle-orm/sqlite-core'
import type { TokenScope } from '#shared/permissions'
import type { Role, RegionKind } from '#shared/types/domain'

const id = () => text().primaryKey()
const instant = () => text()
/** Columns of every row that people change: who made it, when, which state it is in, and the bin. */
const mutable = () => ({
  revision: integer().notNull().default(1),
  createdAt: instant().notNull(),
  createdBy: text().references(() => user.id),
  deletedAt: instant(),
})

export const user = sqliteTable('user', {
  id: id(),
  email: text().notNull(),
  name: text().notNull(),
  passwordHash: text().notNull(),
  operator: integer({ mode: 'boolean' }).notNull().default(false),
  createdAt: instant().notNull(),
}, t => [uniqueIndex('user_email').on(sql`lower(${t.email})`)])

export const session = sqliteTable('session', {
  hash: text().primaryKey(),
  userId: text().notNull().references(() => user.id, { onDelete: 'cascade' }),
  createdAt: instant().notNull(),
  expiresAt: instant().notNull(),
  lastSeenAt: instant().notNull(),
})

export const workspace = sqliteTable('workspace', {
  id: id(),
  name: text().notNull(),
  invented: integer({ mode: 'boolean' }).notNull().default(false),
  createdAt: instant().notNull(),
})

export const agency = sqliteTable('agency', {
  id: id(),
  workspaceId: text().notNull().references(() => workspace.id),
  name: text().notNull(),
  createdAt: instant().notNull(),
}, t => [index('agency_workspace').on(t.workspaceId)])

export const membership = sqliteTable('membership', {
  id: id(),
  workspaceId: text().notNull().references(() => workspace.id),
  userId: text().notNull().references(() => user.id),
  agencyId: text().references(() => agency.id),
  role: text().$type<Role>().notNull(),
  ...mutable(),
}, t => [uniqueIndex('membership_one').on(t.workspaceId, t.userId, t.role).where(sql`${t.deletedAt} is null`)])

/** One-time links: the first operator of an instance, people asked into a workspace, and people who need a new password. */
export const invitation = sqliteTable('invitation', {
  hash: text().primaryKey(),
  kind: text().$type<'operator' | 'member' | 'password'>().notNull(),
  email: text(),
  workspaceId: text().references(() => workspace.id),
  agencyId: text().references(() => agency.id),
  role: text().$type<Role>(),
  createdAt: instant().notNull(),
  createdBy: text().references(() => user.id),
  expiresAt: instant().notNull(),
  usedAt: instant(),
})

/** What a program signs in with. The secret itself is not kept. */
export const token = sqliteTable('token', {
  id: id(),
  hash: text().notNull(),
  userId: text().notNull().references(() => user.id, { onDelete: 'cascade' }),
  name: text().notNull(),
  scope: text().$type<TokenScope>().notNull(),
  createdAt: instant().notNull(),
  expiresAt: instant().notNull(),
  lastUsedAt: instant(),
}, t => [uniqueIndex('token_hash').on(t.hash), index('token_user').on(t.userId)])

/** Mail on its way: stored with the change that it tells of, sent afterwards. The text goes once it is sent, for it may hold a link. */
export const outbox = sqliteTable('outbox', {
  id: id(),
  recipient: text().notNull(),
  subject: text().notNull(),
  text: text().notNull(),
  createdAt: instant().notNull(),
  sentAt: instant(),
  tries: integer().notNull().default(0),
  nextTryAt: instant().notNull(),
  fault: text(),
}, t => [index('outbox_open').on(t.sentAt, t.nextTryAt)])

export const region = sqliteTable('region', {
  id: id(),
  workspaceId: text().notNull().references(() => workspace.id),
  agencyId: text().notNull().references(() => agency.id),
  kind: text().$type<RegionKind>().notNull(),
  name: text().notNull(),
  note: text().notNull().default(''),
  ...mutable(),
}, t => [index('region_workspace').on(t.workspaceId)])

export const outlineVersion = sqliteTable('outline_version', {
  id: id(),
  regionId: text().notNull().references(() => region.id),
  n: integer().notNull(),
  geojson: text().notNull(),
  sha256: text().notNull(),
  areaM2: real().notNull(),
  createdAt: instant().notNull(),
  createdBy: text().references(() => user.id),
}, t => [uniqueIndex('outline_version_n').on(t.regionId, t.n)])

/** Originals, kept beside the database under their SHA-256. */
export const original = sqliteTable('blob', {
  sha256: text().primaryKey(),
  bytes: integer().notNull(),
  type: text().notNull(),
  createdAt: instant().notNull(),
})

export const series = sqliteTable('series', {
  id: id(),
  workspaceId: text().notNull().references(() => workspace.id),
  /** Null: an observed series, of rotation, of gravity, or of the angular momentum of air and sea. */
  regionId: text().references(() => region.id),
  quantity: text().$type<'mass' | 'earth-orientation' | 'gravity' | 'angular-momentum'>().notNull(),
  name: text().notNull(),
  ...mutable(),
}, t => [index('series_region').on(t.regionId), index('series_workspace').on(t.workspaceId)])

export const seriesVersion = sqliteTable('series_version', {
  id: id(),
  seriesId: text().notNull().references(() => series.id),
  n: integer().notNull(),
  state: text().$type<'stored'>().notNull().default('stored'),
  originalSha256: text().notNull().references(() => original.sha256),
  originalName: text().notNull(),
  /** SHA-256 of the canonical values: what a run quotes. */
  dataSha256: text().notNull(),
  /** How the original was read, as JSON: enough to read it again. */
  recipe: text().notNull(),
  reason: text().notNull(),
  source: text().notNull(),
  licence: text().notNull(),
  independence: text().notNull(),
  /** Fields of a mass series, as JSON; null for versions from before they were asked for, and for observed series. */
  facts: text(),
  firstMjd: real().notNull(),
  lastMjd: real().notNull(),
  count: integer().notNull(),
  createdAt: instant().notNull(),
  createdBy: text().references(() => user.id),
}, t => [uniqueIndex('series_version_n').on(t.seriesId, t.n)])

/** Float64 little-endian blobs in canonical units; the columns of an Earth-orientation series lie one behind the other. */
export const seriesData = sqliteTable('series_data', {
  versionId: text().primaryKey().references(() => seriesVersion.id),
  mjd: blob({ mode: 'buffer' }).notNull(),
  value: blob({ mode: 'buffer' }).notNull(),
  sigma: blob({ mode: 'buffer' }),
  flags: blob({ mode: 'buffer' }),
})

export const errorSource = sqliteTable('error_source', {
  id: id(),
  workspaceId: text().notNull().references(() => workspace.id),
  name: text().notNull(),
  createdAt: instant().notNull(),
}, t => [uniqueIndex('error_source_name').on(t.workspaceId, t.name)])

/** Systematic trend error of a series version, Gt per year one-sigma; the same source is fully correlated. */
export const seriesError = sqliteTable('series_error', {
  versionId: text().notNull().references(() => seriesVersion.id),
  sourceId: text().notNull().references(() => errorSource.id),
  sigmaGtPerYear: real().notNull(),
}, t => [primaryKey({ columns: [t.versionId, t.sourceId] })])

/** A file of gridded heights of water, read once; its original lies with the others. */
export const grid = sqliteTable('grid', {
  id: id(),
  workspaceId: text().notNull().references(() => workspace.id),
  name: text().notNull(),
  originalSha256: text().notNull().references(() => original.sha256),
  originalName: text().notNull(),
  bytes: integer().notNull(),
  /** How a table is read, as JSON. */
  options: text().notNull(),
  /** What the file holds, as JSON. */
  description: text().notNull(),
  ...mutable(),
}, t => [index('grid_workspace').on(t.workspaceId)])

/** How the mass of a version lies in its region, of a version that was taken from a grid; canonical JSON. */
export const gridPattern = sqliteTable('grid_pattern', {
  versionId: text().primaryKey().references(() => seriesVersion.id),
  gridId: text().notNull().references(() => grid.id),
  pattern: text().notNull(),
  sha256: text().notNull(),
  /** Of the outline that the cells were cut with. */
  outlineSha256: text().notNull(),
})

/** A reduction under a name: the chain as JSON, used on any observed series of the workspace. */
export const chain = sqliteTable('chain', {
  id: id(),
  workspaceId: text().notNull().references(() => workspace.id),
  name: text().notNull(),
  chain: text().notNull(),
  ...mutable(),
}, t => [index('chain_workspace').on(t.workspaceId)])

export const scenario = sqliteTable('scenario', {
  id: id(),
  workspaceId: text().notNull().references(() => workspace.id),
  name: text().notNull(),
  draft: text().notNull(),
  ...mutable(),
}, t => [index('scenario_workspace').on(t.workspaceId)])

export const run = sqliteTable('run', {
  id: id(),
  scenarioId: text().notNull().references(() => scenario.id),
  workspaceId: text().notNull().references(() => workspace.id),
  n: integer().notNull(),
  name: text().notNull(),
  input: text().notNull(),
  inputSha256: text().notNull(),
  result: text().notNull(),
  resultSha256: text().notNull(),
  engine: text().notNull(),
  node: text().notNull(),
  createdAt: instant().notNull(),
  createdBy: text().references(() => user.id),
}, t => [uniqueIndex('run_n').on(t.scenarioId, t.n)])

export const edition = sqliteTable('edition', {
  id: id(),
  workspaceId: text().notNull().references(() => workspace.id),
  runId: text().notNull().references(() => run.id),
  slug: text().notNull(),
  n: integer().notNull(),
  title: text().notNull(),
  /** Frozen text and comparison, as JSON. */
  content: text().notNull(),
  licence: text().notNull(),
  createdAt: instant().notNull(),
  createdBy: text().references(() => user.id),
}, t => [uniqueIndex('edition_n').on(t.slug, t.n), index('edition_workspace').on(t.workspaceId)])

/** A withdrawal is a row of its own: the edition itself never changes. */
export const withdrawal = sqliteTable('withdrawal', {
  editionId: text().primaryKey().references(() => edition.id),
  reason: text().notNull(),
  createdAt: instant().notNull(),
  createdBy: text().references(() => user.id),
})

export const job = sqliteTable('job', {
  id: id(),
  workspaceId: text().notNull().references(() => workspace.id),
  kind: text().$type<'run' | 'grid' | 'grid-series' | 'monte-carlo'>().notNull(),
  state: text().$type<'waiting' | 'running' | 'done' | 'failed' | 'cancelled'>().notNull(),
  progress: real().notNull().default(0),
  input: text().notNull(),
  answer: text(),
  problem: text(),
  createdAt: instant().notNull(),
  createdBy: text().notNull().references(() => user.id),
  finishedAt: instant(),
}, t => [index('job_state').on(t.state)])

export const idempotency = sqliteTable('idempotency', {
  userId: text().notNull(),
  key: text().notNull(),
  request: text().notNull(),
  status: integer().notNull(),
  answer: text().notNull(),
  createdAt: instant().notNull(),
}, t => [primaryKey({ columns: [t.userId, t.key] })])

/** Every change, chained by hashes. */
export const log = sqliteTable('log', {
  seq: integer().primaryKey({ autoIncrement: true }),
  at: instant().notNull(),
  workspaceId: text(),
  actorId: text(),
  actor: text().notNull(),
  action: text().notNull(),
  entity: text().notNull(),
  entityId: text().notNull(),
  before: text(),
  after: text(),
  previousHash: text().notNull(),
  hash: text().notNull(),
}, t => [index('log_workspace').on(t.workspaceId, t.seq)])
