import { eq } from 'drizzle-orm'
import { movedPart, type CellPattern } from '#shared/earth/cellPattern'
import { patternSentences } from '#shared/text/gridPattern'
import { schema } from '../database/client'
import type { Context } from './context'
import type { PerGt } from './predictions'

/** How the mass of a version lies in its region; null for a version that is not from a grid, and where the outline is another one by now. */
export function patternOfVersion(context: Context, versionId: string | null, outlineSha256: string): CellPattern | null {
  const row = versionId === null ? undefined : context.db.select().from(schema.gridPattern).where(eq(schema.gridPattern.versionId, versionId)).get()
  return row && row.outlineSha256 === outlineSha256 ? JSON.parse(row.pattern) as CellPattern : null
}

/** Whether a version has a pattern that belongs to an earlier outline. */
export function patternIsOfOtherOutline(context: Context, versionId: string, outlineSha256: string): boolean {
  const row = context.db.select({ outlineSha256: schema.gridPattern.outlineSha256 }).from(schema.gridPattern).where(eq(schema.gridPattern.versionId, versionId)).get()
  return row !== undefined && row.outlineSha256 !== outlineSha256
}

/** What a pattern changes, with the effect of an even spread. */
export function evenSpreadOf({ basis, excess }: CellPattern, pattern: PerGt, even: PerGt) {
  const facts = { basis, cells: excess.length, movedPart: movedPart({ excess }) }
  return { ...facts, perGt: even, sentences: patternSentences({ ...facts, pattern, even }) }
}
