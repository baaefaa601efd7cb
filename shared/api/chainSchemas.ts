import { z, type ZodType } from 'zod'
import type { PlainChainResult } from '../observed/chainPlain.ts'
import type { Chain } from '../observed/chainTypes.ts'
import { measured, name, revision, ulid, warning } from './schemas.ts'

/** A chain in an address: “usual”, the id of a saved one, or the chain as JSON, no longer than a request line that every proxy lets through. */
export const chainText = z.string().max(6000)
const stored = z.looseObject({ schemaVersion: z.literal(1), steps: z.array(z.looseObject({ kind: z.string(), on: z.boolean() })) })
  .meta({ id: 'Chain' }) as unknown as ZodType<Chain>
/** A chain that is sent to be kept; its reader checks it step by step and names each fault. */
export const chainBody = z.object({ name, chain: z.record(z.string(), z.unknown()) })
export const savedChain = z.object({
  id: ulid, revision, name: z.string(), chain: stored, createdAt: z.string(), createdBy: z.string().nullable(), canWrite: z.boolean(),
})

export const chainQuery = z.object({
  /** The chain as JSON; the usual one where it is left out. Checked step by step by its reader, which names each fault. */
  chain: chainText.optional(),
  /** About how many points of each small multiple. */
  points: z.coerce.number().int().min(50).max(5000).default(600),
})

const track = z.object({ mjd: z.array(z.number()), value: z.array(z.number().nullable()) })
const quantity = z.enum(['lod', 'ut1', 'x', 'y', 'chi1', 'chi2'])

/** What every step of a chain found, and what is left: ms for the day and UT1, mas for pole and excitation. */
export const chainAnswer = z.looseObject({
  chain: stored,
  steps: z.array(z.looseObject({
    kind: z.string(), on: z.boolean(), title: z.string(), sentence: z.string(), source: z.string(),
    panels: z.array(z.object({ quantity, unit: z.enum(['ms', 'mas']), before: track, removed: track.nullable(), after: track })),
  })),
  after: z.partialRecord(quantity, track), trends: z.partialRecord(quantity, measured.nullable()),
  noTrend: z.array(z.object({ quantity, reason: z.string() })), excitationValidFromDays: z.number().nullable(),
  chartNote: z.string(), notRemoved: z.array(z.string()), warnings: z.array(warning),
}).meta({ id: 'ChainResult' }) as unknown as ZodType<PlainChainResult>
