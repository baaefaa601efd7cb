import { z } from 'zod'
import { epochFormats } from '../series/epochColumn.ts'
import { answers, waterKinds } from '../series/facts.ts'
import { quantities } from '../series/quantityKinds.ts'
import { correctionKinds, materials } from '../series/recipe.ts'
import { coefficientSetIds, coreChoices, oceanModes, regionKinds, roles } from '../types/domain.ts'
import { gravityFields } from './gravitySchemas.ts'

/** Limits guard the server against bodies that cannot be meant; each says what it guards. */
export const limits = {
  /** A name has to fit a table row and a PDF line. */
  nameLength: 120,
  /** Notes and reasons are prose, not files. */
  textLength: 4000,
  /** Regions in one calculation or scenario. */
  regions: 1000,
  /** Epochs in one JSON series. */
  epochs: 20000,
  /** Body of `evaluate`: 8 MiB, as architecture.md fixes. */
  evaluateBytes: 8 * 1024 * 1024,
  /** Outlines stored in one go, as many as are read from one file. */
  outlines: 500,
  /** Body that holds them: 200 000 vertices with all their digits. */
  outlinesBytes: 16 * 1024 * 1024,
  /** An original file: sixty years of daily Earth orientation are 3.5 MB. */
  originalBytes: 32 * 1024 * 1024,
} as const

export const ulid = z.string().regex(/^[0-9A-HJKMNP-TV-Z]{26}$/, 'is not an identifier')
export const sha256 = z.string().regex(/^[0-9a-f]{64}$/)
export const name = z.string().trim().min(1, 'is empty').max(limits.nameLength)
export const prose = z.string().trim().max(limits.textLength)
export const revision = z.int().min(1)
const finite = z.number()

// Coordinates are counted and checked by the geometry reader, far quicker than a schema could.
export const geometry = z.object({ type: z.enum(['Polygon', 'MultiPolygon']), coordinates: z.array(z.unknown()) })
  .meta({ description: 'GeoJSON Polygon or MultiPolygon (RFC 7946), WGS 84' })

export const physicsSettings = z.object({
  ocean: z.enum(oceanModes),
  coefficients: z.enum(coefficientSetIds),
  core: z.enum(coreChoices),
})

export const measured = z.object({ value: finite, sigmaWhite: finite, sigma: finite })
export const warning = z.object({ code: z.string(), message: z.string(), regions: z.array(z.string()) })
export const issue = z.object({
  path: z.string().optional(), row: z.number().optional(), column: z.string().optional(), value: z.string().optional(),
  lines: z.array(z.array(z.tuple([z.number(), z.number()]))).optional(),
  code: z.string(), message: z.string(),
})
export const problem = z.object({
  type: z.string(), title: z.string(), status: z.int(), detail: z.string().optional(), code: z.string(),
  issues: z.array(issue).optional(),
}).meta({ id: 'Problem', description: 'RFC 9457 problem details' })

export const page = z.object({
  limit: z.coerce.number().int().min(1).max(500).default(200),
  cursor: z.string().max(64).optional(),
})
export const listOf = <T extends z.ZodType>(item: T) => z.object({ items: z.array(item), nextCursor: z.string().nullable() })

export const role = z.enum(roles)
export const agency = z.object({ id: ulid, name: z.string() })
export const membershipView = z.object({
  workspaceId: ulid, workspaceName: z.string(), invented: z.boolean(),
  agencyId: ulid.nullable(), agencyName: z.string().nullable(), role,
})
export const me = z.object({
  user: z.object({ id: ulid, name: z.string(), email: z.string(), operator: z.boolean() }).nullable(),
  memberships: z.array(membershipView),
  /** True on a demo instance: its accounts are shown on the sign-in page. */
  demo: z.boolean(),
})

export const regionKind = z.enum(regionKinds)
export const trendSummary = z.object({
  massGtPerYear: measured, lodMicrosecondsPerYear: measured, driftCmPerYear: measured,
  directionDegEast: z.number().nullable(), fromMjd: finite, toMjd: finite,
})
/** What is known of a mass series besides its values, in fields that report, comparison and overlaps read. */
export const seriesFacts = z.object({
  citation: prose.default(''), method: prose.default(''), instrument: prose.default(''),
  contains: z.array(z.enum(waterKinds)).max(waterKinds.length).default([]),
  gravimetry: z.enum(answers).default('unknown'), pole: z.enum(answers).default('unknown'), lengthOfDay: z.enum(answers).default('unknown'),
})
export const versionSummary = z.object({
  id: ulid, n: z.int(), reason: z.string(), source: z.string(), licence: z.string(), independence: z.string(), facts: seriesFacts.nullable(),
  originalName: z.string(), originalSha256: sha256, dataSha256: sha256,
  firstMjd: finite, lastMjd: finite, count: z.int(), createdAt: z.string(), createdBy: z.string().nullable(),
})
export const region = z.object({
  id: ulid, revision, name: z.string(), kind: regionKind, note: z.string(), agency,
  outline: z.object({ n: z.int(), sha256, areaKm2: finite, centroid: z.tuple([finite, finite]) }),
  geometry,
  series: z.object({ seriesId: ulid, latest: versionSummary }).nullable(),
  trend: trendSummary.nullable(),
  createdAt: z.string(), createdBy: z.string().nullable(),
  canWrite: z.boolean(),
})
export const perGt = z.object({
  chi1Mas: finite, chi2Mas: finite, chi3: finite, lodMicroseconds: finite, barystaticMm: finite, deltaJ2: finite,
})

export const massColumns = z.object({
  epochColumn: z.int().min(0).optional(), valueColumn: z.int().min(0).optional(), sigmaColumn: z.int().min(0).nullable().optional(),
  epochFormat: z.enum(epochFormats).optional(),
  /** Name of the sheet of a workbook; the first with rows unless told. */
  sheet: z.string().min(1).max(200).optional(),
  /** Where each row's period ends, for rates and balances; null: rows have no end though a column looks like one. */
  endColumn: z.int().min(0).nullable().optional(), endDayIncluded: z.boolean().optional(),
  /** Month, and day, in columns of their own beside the year in `epochColumn`; null: none though a column looks like one. */
  monthColumn: z.int().min(0).nullable().optional(), dayColumn: z.int().min(0).nullable().optional(),
  /** Gigatonnes and heights of water; every other quantity and unit goes into `conversion`. */
  unit: z.enum(['Gt', 'mm-we', 'cm-we']).optional(),
  withdrawalPositive: z.boolean().optional(), delimiter: z.string().max(1).optional(), decimalComma: z.boolean().optional(),
  header: z.boolean().optional(),
  /** Marks of a missing value besides the usual ones; a mark is a cell, not a text. */
  missingValues: z.array(z.string().trim().min(1).max(20)).max(10).optional(),
  /** Cells put right by hand and rows left out on purpose, by their line in the file, which itself stays as it is. */
  edits: z.array(z.object({ row: z.int().min(1), column: z.int().min(0).max(10_000), text: z.string().trim().max(200) })).max(2000).optional(),
  leaveOut: z.array(z.object({ row: z.int().min(1), reason: z.string().trim().max(400) })).max(5000).optional(),
})
/** Decisions on what the checks of a series found, by the finding's id. */
export const markDecisions = z.array(z.object({ id: z.string().min(1).max(300), choice: z.enum(['accepted', 'corrected']), note: z.string().trim().max(800) })).max(5000)

/** A number of a conversion; its error is the same at every epoch. The same `source` in two series is the same error. */
const parameter = z.object({ value: finite, sigma: finite.min(0).default(0), source: name.nullable().default(null) })
/** How the values of a file become gigatonnes. What is missing for the quantity is answered with an issue for each. */
export const massConversion = z.object({
  quantity: z.enum(quantities),
  /** As people write it: km³, 10⁶ m³, acre-feet, m w.e. per year. */
  unit: z.string().trim().min(1).max(60),
  /** kg/m³, for volumes and ice thickness. */
  density: parameter.extend({ material: z.enum(materials) }).nullable().optional(),
  /** For groundwater heads. */
  storage: parameter.extend({ coefficient: z.enum(['specific-yield', 'storativity']) }).nullable().optional(),
  /** One-sigma of the outline's area. */
  area: z.object({ sigmaKm2: finite.min(0), source: name.nullable().default(null) }).nullable().optional(),
  /** Rates that are taken off, Gt per year, gain positive; `on: false` keeps a step without carrying it out. */
  corrections: z.array(z.object({ on: z.boolean().default(true), what: z.enum(correctionKinds), name, gtPerYear: parameter })).max(20).optional(),
  /** Stored versions of mass series of the same account, taken off at the epochs of this one, between theirs where they are near enough. */
  subtract: z.array(z.object({ on: z.boolean().default(true), what: z.enum(correctionKinds), versionId: ulid, maxGapDays: z.int().min(1).max(2000).default(62) })).max(10).optional(),
})

export const measuredPlain = z.object({ value: finite, sigma: finite.min(0) })
export const backgroundRow = z.object({
  key: z.string().min(1).max(40), name, source: prose, core: z.enum(coreChoices).nullable(),
  lodMsPerCentury: measuredPlain.nullable(), chi1MasPerYear: measuredPlain.nullable(), chi2MasPerYear: measuredPlain.nullable(),
})
/** `keep`: both count in full, with the reason. `subtract`: what the other's series holds on the common ground is taken off `from`. */
export const overlapChoice = z.object({
  a: ulid, b: ulid, choice: z.enum(['keep', 'subtract']), from: ulid.nullable(), reason: prose,
})
export const scenarioDraft = z.object({
  schemaVersion: z.literal(1),
  settings: physicsSettings.extend({
    fromMjd: finite.nullable(), toMjd: finite.nullable(), maxGapDays: finite.min(1).max(2000),
  }),
  regions: z.array(z.object({
    regionId: ulid, versionId: ulid, scale: finite.min(-1000).max(1000),
    /** Part of the mass change that reaches the sea; the rest goes to another region of the draft, or to all land evenly (null). */
    fractionToOcean: finite.min(0).max(1).optional(), restTo: ulid.nullable().optional(),
    /** Ice: the part that is grounded above flotation and so changes a load. */
    groundedFraction: finite.min(0).max(1).optional(),
  })).max(limits.regions),
  /** How each pair of regions that share ground is counted; every pair that counts must be settled before a run. */
  overlaps: z.array(overlapChoice).max(5000).optional(),
  background: z.array(backgroundRow).max(50),
  restOfWorld: backgroundRow.nullable(),
  /** Observed series that the result page opens with; not part of the run. */
  observedId: ulid.nullable(),
})
export type ScenarioDraft = z.output<typeof scenarioDraft>

export const overlap = z.object({ a: z.string(), b: z.string(), areaKm2: finite, shareOfA: finite, shareOfB: finite })
/** Two regions on common ground, the mass trend that each series holds there, and what a scenario decided of them. */
export const namedOverlap = overlap.extend({
  aName: z.string(), bName: z.string(),
  onGroundGtPerYear: z.object({ a: measuredPlain.nullable(), b: measuredPlain.nullable() }),
})
export const draftOverlap = namedOverlap.extend({
  /** What each series holds; empty where its version does not say. */
  contains: z.object({ a: seriesFacts.shape.contains, b: seriesFacts.shape.contains }),
  settled: overlapChoice.pick({ choice: true, from: true, reason: true }).nullable() })
/** Latest trends of all regions, summed; each trend is over its own span. Nothing is settled here: overlaps count twice. */
export const regionTotal = z.object({
  regions: z.int(), withTrend: z.int(), withoutSeries: z.int(),
  massGtPerYear: measured.nullable(), lodMicrosecondsPerYear: measured.nullable(),
  fromMjd: finite.nullable(), toMjd: finite.nullable(), oneSpan: z.boolean(),
  overlaps: z.array(namedOverlap),
})
/** Monthly mass of regions on one row of months (2004-03); a region's values start at `first` of them. */
export const regionMonths = z.object({
  maxGapDays: finite, months: z.array(z.string()),
  regions: z.array(z.object({ id: ulid, first: z.int(), massGt: z.array(finite.nullable()), sigmaGt: z.array(finite.nullable()) })),
})
export const runSummary = z.object({
  id: ulid, scenarioId: ulid, n: z.int(), name: z.string(), inputSha256: sha256, resultSha256: sha256, engine: z.string(),
  createdAt: z.string(), createdBy: z.string().nullable(),
})
export const scenario = z.object({
  id: ulid, revision, name: z.string(), draft: scenarioDraft, createdAt: z.string(), createdBy: z.string().nullable(),
  canWrite: z.boolean(), latestRun: runSummary.nullable(),
})
export const jobView = z.object({
  id: ulid, kind: z.string(), state: z.enum(['waiting', 'running', 'done', 'failed', 'cancelled']), progress: finite,
  answer: z.object({ runId: ulid }).nullable(),
  /** The grid that a job has read. */
  gridId: ulid.nullable(), problem: problem.nullable(), createdAt: z.string(),
})

export const observedSummary = z.object({
  id: ulid, revision, name: z.string(), latest: versionSummary, format: z.string(),
  has: z.object({ pole: z.boolean(), lod: z.boolean(), excitation: z.boolean() }), predictedRows: z.int(), emptyRows: z.int(), canWrite: z.boolean(),
  /** Of gravity coefficients: the answers stored with them, how they became excitation, and what that means for a comparison. */
  gravity: z.object({ fields: gravityFields, stated: z.array(z.string()), warnings: z.array(warning) }).nullable(),
})
const column = z.array(z.number().nullable())
export const observedData = observedSummary.extend({
  mjd: z.array(finite), xMas: column, yMas: column, lodMs: column, sigmaXMas: column, sigmaYMas: column, sigmaLodMs: column,
  chi1Mas: column.nullable(), chi2Mas: column.nullable(),
  predicted: z.array(z.int()),
  /** Changes of the fully normalised coefficients, as they were sent; null for a series of rotation. */
  coefficients: z.object({ c20: column, c21: column, s21: column, sigmaC20: column, sigmaC21: column, sigmaS21: column }).nullable(),
})

export const edition = z.object({
  id: ulid, slug: z.string(), n: z.int(), title: z.string(), licence: z.string(), workspaceName: z.string(), invented: z.boolean(),
  runId: ulid, createdAt: z.string(), publishedBy: z.string().nullable(),
  withdrawn: z.object({ reason: z.string(), at: z.string() }).nullable(),
  latest: z.boolean(),
})
