import { z } from 'zod'
import { ulid, versionSummary, warning } from './schemas.ts'

const yes = (byDefault: 'true' | 'false') => z.enum(['true', 'false']).default(byDefault).transform(text => text === 'true')
const day = z.string().regex(/^\d{4}-\d{2}-\d{2}$/, 'must be a date like 2016-03-01')
const finite = z.number()
const noiseModel = z.enum(['white', 'ar1', 'power-law'])

export const fitQuery = z.object({
  version: ulid.optional(),
  acceleration: yes('false'), annual: yes('true'), semiannual: yes('true'),
  /** The period of 161 days, alias of the S₂ tide in satellite gravimetry. */
  alias: yes('false'),
  /** Days from which on a step is fitted, with commas between. */
  step: z.string().regex(/^\d{4}-\d{2}-\d{2}(,\d{4}-\d{2}-\d{2}){0,9}$/, 'must be up to ten dates like 2016-03-01 with commas between').optional(),
  from: day.optional(), to: day.optional(),
  /** Distance of epochs, days, from which on nothing is joined. */
  maxGap: z.coerce.number().int().min(1).max(2000).default(62),
})
export type FitQuery = z.output<typeof fitQuery>

export const fitAnswer = z.object({
  version: versionSummary,
  settings: z.object({
    acceleration: z.boolean(), annual: z.boolean(), semiannual: z.boolean(), aliasDays: finite.nullable(), stepsMjd: z.array(finite),
    fromMjd: finite.nullable(), toMjd: finite.nullable(), maxGapDays: finite,
  }),
  mjd: z.array(finite), massGt: z.array(finite), sigmaGt: z.array(finite).nullable(), modelGt: z.array(finite), residualGt: z.array(finite),
  referenceMjd: finite, trend: z.object({ value: finite, sigmaWhite: finite, sigma: finite, r1: finite }),
  terms: z.array(z.object({
    kind: z.enum(['trend', 'acceleration', 'annual', 'semiannual', 'alias', 'step']), unit: z.enum(['Gt/yr', 'Gt/yr²', 'Gt']),
    at: finite.nullable(), highestDay: finite.nullable(),
    under: z.array(z.object({ model: z.enum([...noiseModel.options, 'inflated']), value: finite, sigma: finite })),
  })),
  noise: z.object({ models: z.array(z.object({ model: noiseModel, parameter: finite.nullable(), aic: finite })), quote: noiseModel, sentence: z.string() }),
  gaps: z.array(z.object({ fromMjd: finite, toMjd: finite, days: finite })),
  correlogram: z.object({ stepDays: finite, lags: z.array(z.object({ lag: z.int(), value: finite.nullable(), pairs: z.int() })), band: finite }),
  spectrum: z.object({ frequencyPerYear: z.array(finite), amplitudeGt: z.array(finite), expected: z.array(z.object({ model: z.enum(['white', 'ar1']), amplitudeGt: z.array(finite) })) }),
  residualSigmaGt: finite, warnings: z.array(warning.omit({ regions: true })),
})
export type FitAnswer = z.output<typeof fitAnswer>
