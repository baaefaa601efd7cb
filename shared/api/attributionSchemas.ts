import { z, type ZodType } from 'zod'
import type { AttributionReport } from '../attribution/report.ts'
import { chainText } from './chainSchemas.ts'
import { ulid, warning } from './schemas.ts'

export const attributionQuery = z.object({
  observed: ulid,
  /** The reduction of the observed series: “usual”, the id of a kept one, or JSON; the usual one where it is left out. */
  chain: chainText.optional(),
  /** One-sigma of the prior, about 1, of every factor that has none of its own. */
  prior: z.coerce.number().min(0.01, 'must be at least 0.01').max(100).default(0.5),
  /** Regions taken together and priors, as JSON: [{ "name", "regions": [keys of the run], "prior": { "mean", "sigma" } or null }]. */
  groups: z.string().max(6000).optional(),
})

const column = z.array(z.number().nullable())
const rate = z.object({ value: z.number(), sigma: z.number() })
const row = z.looseObject({
  key: z.string(), name: z.string(), kind: z.enum(['region', 'background', 'rest', 'model', 'observed', 'residual']),
  lodMicrosecondsPerYear: rate.nullable(), chi1MasPerYear: rate.nullable(), chi2MasPerYear: rate.nullable(),
  ofObservedDrift: z.object({ along: rate, across: rate, shareAlong: rate, shareAcross: rate }).nullable(),
})
const scaling = z.looseObject({
  reason: z.string().nullable(),
  scaling: z.looseObject({
    factors: z.array(z.looseObject({ key: z.string(), name: z.string(), prior: z.looseObject({}), posterior: rate, dataOnly: rate.nullable(), resolution: z.number(), pull: z.number() })),
    correlation: z.array(z.array(z.number())), condition: z.number().nullable(), sentences: z.array(z.string()),
  }).nullable(),
})

/** The engine's own types say the rest; the schema documents the parts that readers of the API need. */
export const attributionAnswer = z.looseObject({
  chain: z.looseObject({}), chainName: z.string().nullable(), from: z.enum(['rotation', 'gravity']), chartNote: z.string(), notRemoved: z.array(z.string()), epochsMjd: z.array(z.number()),
  compared: z.record(z.string(), z.looseObject({ unit: z.enum(['ms', 'mas']), observed: column, model: column, residual: column })),
  leftOut: z.array(z.object({ quantity: z.enum(['lod', 'chi1', 'chi2']), reason: z.string() })),
  budget: z.looseObject({ rows: z.array(row), model: row, observed: row, residual: row, closure: z.looseObject({ quoted: z.boolean() }), sentences: z.array(z.string()) }),
  closing: z.looseObject({ regions: z.array(z.looseObject({ key: z.string(), sentence: z.string() })), reason: z.string().nullable() }),
  scaling: z.object({ 'interannual': scaling, 'interannual-without-trend': scaling, 'annual': scaling }),
  identifiability: z.looseObject({ sentences: z.array(z.string()) }).nullable(), identifiabilityReason: z.string().nullable(),
  forward: z.looseObject({ sentence: z.string() }), ut1: z.looseObject({ caution: z.string() }),
  circularity: z.array(warning), warnings: z.array(warning),
}).meta({ id: 'Attribution' }) as unknown as ZodType<AttributionReport>
