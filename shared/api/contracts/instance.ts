import { z } from 'zod'
import { oceanModes } from '../../types/domain.ts'
import { contract } from '../contract.ts'

/** What the instance says of itself. */
export const instanceContracts = {
  validationRead: contract({
    id: 'validationRead', method: 'GET', path: '/api/v1/validation', action: 'public.read', summary: 'The engine beside published and independent references, computed by the engine that runs',
    answer: z.object({
      engineVersion: z.string(), earthModelChecksum: z.string(), passed: z.int(), failed: z.int(),
      checks: z.array(z.object({
        id: z.string(), group: z.string(), title: z.string(), unit: z.string(), computed: z.number(), reference: z.number(),
        ratio: z.number().nullable(), deviation: z.number(), within: z.boolean(),
        tolerance: z.looseObject({ kind: z.enum(['relative', 'scale', 'absolute', 'factor']), within: z.number() }),
        source: z.string(), origin: z.enum(['published', 'independent', 'arithmetic']), cause: z.string(),
      })),
    }),
  }),
  openapi: contract({ id: 'openapi', method: 'GET', path: '/api/v1/openapi.json', action: 'public.read', summary: 'This interface as OpenAPI 3.1', answer: z.looseObject({}) }),
  health: contract({
    id: 'health', method: 'GET', path: '/api/v1/health', action: 'public.read', summary: 'Whether the server is ready, and which ocean responses it computes',
    answer: z.object({ status: z.literal('ok'), version: z.string(), oceans: z.array(z.enum(oceanModes)), defaultOcean: z.enum(oceanModes) }),
  }),
}
