import { z } from 'zod'
import { chainText } from '../chainSchemas.ts'
import { name, prose, revision, ulid } from '../schemas.ts'

export const inWorkspace = z.object({ workspace: ulid })
export const byId = z.object({ id: ulid })
export const changed = z.object({ revision })
export const nothing = z.void()
export const bytes = z.unknown()
export const versionFacts = z.object({
  name, reason: prose.default(''), source: prose, licence: prose.default(''), independence: prose.default(''),
})
export const columnIndex = z.int().min(0)
/** How an observed series is treated before a run is held against it: its tides alone, or a whole chain, which then says all. */
export const comparedBy = z.object({ zonalTides: z.enum(['none', 'all']).default('none'), chain: chainText.optional() })
