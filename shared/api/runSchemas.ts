import { z, type ZodType } from 'zod'
import type { Comparison, RunResult } from '../types/run.ts'
import { edition, measured, runSummary, seriesFacts, sha256, ulid, warning } from './schemas.ts'

const nullableMeasured = measured.nullable()
const column = z.array(z.number().nullable())

const budgetRow = z.looseObject({
  key: z.string(), name: z.string(), massGtPerYear: nullableMeasured, lodMicrosecondsPerYear: nullableMeasured,
  lodMsPerCentury: nullableMeasured, chi1MasPerYear: nullableMeasured, chi2MasPerYear: nullableMeasured,
  driftMasPerYear: nullableMeasured, driftCmPerYear: nullableMeasured,
  directionDegEast: z.object({ value: z.number(), sigma: z.number().nullable() }).nullable(),
  barystaticMmPerYear: nullableMeasured, deltaJ2PerYear: nullableMeasured,
  shareOfModelLod: z.number().nullable(), shareOfModelPole: z.number().nullable(),
}).meta({ id: 'BudgetRow' })

/** The engine's own types say the rest; the schema documents the parts that readers of the API need. */
export const runResult = z.looseObject({
  schemaVersion: z.literal(1), engineVersion: z.string(), earthModelChecksum: z.string(), settings: z.looseObject({}),
  span: z.object({ fromMjd: z.number(), toMjd: z.number() }), epochsMjd: z.array(z.number()),
  regions: z.array(budgetRow), total: budgetRow, background: z.array(budgetRow), restOfWorld: budgetRow,
  overlaps: z.array(z.looseObject({})), warnings: z.array(warning),
  modelUncertainty: z.array(z.object({
    id: z.string(), name: z.string(), text: z.string(), chi1MasPerYear: z.number(), chi2MasPerYear: z.number(), lodMicrosecondsPerYear: z.number(),
  })).optional(),
}).meta({ id: 'RunResult' }) as unknown as ZodType<RunResult>

const quantity = z.looseObject({
  unit: z.enum(['ms', 'mas']), observed: column, model: column, residual: column,
  trends: z.object({ observed: measured, model: measured, residual: measured }),
}).nullable()
export const comparison = z.looseObject({
  from: z.literal('gravity').optional(),
  span: z.object({ fromMjd: z.number(), toMjd: z.number() }), epochsMjd: z.array(z.number()),
  lod: quantity, chi1: quantity, chi2: quantity, notRemoved: z.array(z.string()), warnings: z.array(warning),
  reduction: z.looseObject({ name: z.string().nullable(), chain: z.looseObject({}), chartNote: z.string(), steps: z.array(z.object({ title: z.string(), sentence: z.string(), source: z.string() })) }).optional(),
}).meta({ id: 'Comparison' }) as unknown as ZodType<Comparison>

const regionSource = z.object({
  key: z.string(), name: z.string(), kind: z.string(), agency: z.string(), outlineSha256: sha256, seriesVersion: z.int(),
  seriesSha256: sha256, source: z.string(), geometry: z.object({ type: z.enum(['Polygon', 'MultiPolygon']), coordinates: z.array(z.unknown()) }),
  facts: seriesFacts.optional(),
  /** Where its water goes, where not all of it counts and reaches the sea; restTo is the key of another source. */
  fractionToOcean: z.number().optional(), restTo: z.string().nullable().optional(), groundedFraction: z.number().optional(),
})
export type RegionSource = z.output<typeof regionSource>

export const runView = runSummary.extend({
  scenarioName: z.string(), workspaceId: ulid, workspaceName: z.string(), invented: z.boolean(), node: z.string(),
  result: runResult, sources: z.array(regionSource), observedId: ulid.nullable(),
  editions: z.array(edition), canPublish: z.boolean(),
})

export const observedLabel = z.object({ name: z.string(), source: z.string(), originalSha256: sha256 })
export const editionView = edition.extend({
  sentence: z.string(), unexplained: z.string().nullable(), observed: observedLabel.nullable(), comparison: comparison.nullable(),
  run: z.object({
    inputSha256: sha256, resultSha256: sha256, engine: z.string(), node: z.string(), createdAt: z.string(), n: z.int(),
  }),
  result: runResult, sources: z.array(regionSource),
  editions: z.array(z.object({ n: z.int(), createdAt: z.string(), withdrawn: z.boolean() })),
})
