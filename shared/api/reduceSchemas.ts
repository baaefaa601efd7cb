import { z, type ZodType } from 'zod'
import type { ReducedSeries } from '../observed/reduce.ts'
import type { ReduceOptions } from '../observed/reduceOptions.ts'
import { measured, warning } from './schemas.ts'

const column = z.array(z.number().nullable())
const trend = measured.nullable()

/** Options are checked one by one by the reducer itself, which names each that it does not know. */
export const reduceOptions = z.looseObject({
  zonalTides: z.union([z.boolean(), z.enum(['all', 'under-35-days'])]).optional(),
  excitation: z.boolean().optional(), monthly: z.boolean().optional(), removeSeasons: z.boolean().optional(), includePredictions: z.boolean().optional(),
  chandlerPeriodDays: z.number().optional(), q: z.number().optional(), from: z.string().optional(), to: z.string().optional(),
  smoothing: z.object({ kind: z.enum(['gaussian', 'boxcar']), widthDays: z.number() }).nullable().optional(),
}) as unknown as ZodType<ReduceOptions & Record<string, unknown>>

export const reducedSeries = z.looseObject({
  format: z.enum(['eop14c04', 'eop20c04', 'finals2000a', 'csv']), from: z.string(), to: z.string(), count: z.int(), settings: z.looseObject({}),
  mjd: z.array(z.number()), lodMs: column, tideMs: column, lodReducedMs: column, xMas: column, yMas: column,
  chiMjd: z.array(z.number()), chi1Mas: column, chi2Mas: column,
  trends: z.object({ lodMsPerYear: trend, xMasPerYear: trend, yMasPerYear: trend, chi1MasPerYear: trend, chi2MasPerYear: trend }),
  warnings: z.array(warning),
}) as unknown as ZodType<ReducedSeries>
