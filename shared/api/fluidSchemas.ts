import { z } from 'zod'
import { answers, appliedCoefficients, fluidComponents } from '../observed/angularMomentumTypes.ts'
import { name, prose, revision, ulid, versionSummary } from './schemas.ts'

const short = z.string().max(400)

/** What the numbers of a series of angular momentum do not say; asked when it is stored. */
export const fluidFields = z.strictObject({
  component: z.enum(fluidComponents), model: short, pairedWith: short.nullable(), invertedBarometer: z.enum(answers),
  coefficients: z.enum(appliedCoefficients), subtracted: short, barystatic: z.enum(answers),
})

export const fluidOptions = z.object({
  name, source: prose, licence: prose.default(''), fields: fluidFields,
  /** Which three columns come first; as the header lines say where it is left out. */
  order: z.enum(['mass-first', 'motion-first']).optional(),
  leaveOutBadRows: z.boolean().default(false),
})

export const fluidSummary = z.object({
  id: ulid, revision, name: z.string(), latest: versionSummary, fields: fluidFields, stepDays: z.number(), understood: z.array(z.string()), canWrite: z.boolean(),
})
