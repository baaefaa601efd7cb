import type { RegionKind } from '#shared/types/domain'
import type { Draft } from './drawing/draft'

/** An outline that was not saved, as this browser keeps it. */
export interface KeptOutline {
  version: 1
  /** The region whose outline it is to become; null for a new one. */
  region: { id: string, revision: number, name: string } | null
  draft: Draft
  form: { name: string, kind: RegionKind, agencyId: string, note: string } | null
  /** When it was last touched, ISO. */
  at: string
}

const keyOf = (workspace: string): string => `counterpoise.outline.${workspace}`

/** Browsers may refuse storage, or hold what an older page left: an outline that cannot be kept or read is none. */
export function keepOutline(workspace: string, kept: KeptOutline | null): boolean {
  try {
    if (kept) localStorage.setItem(keyOf(workspace), JSON.stringify(kept))
    else localStorage.removeItem(keyOf(workspace))
    return true
  }
  catch {
    return false
  }
}

export function keptOutline(workspace: string): KeptOutline | null {
  try {
    const kept = JSON.parse(localStorage.getItem(keyOf(workspace)) ?? 'null') as KeptOutline | null
    return kept?.version === 1 && isDraft(kept.draft) ? kept : null
  }
  catch {
    return null
  }
}

function isDraft(draft: Draft | undefined): boolean {
  return Array.isArray(draft?.rings) && draft.rings.length > 0
    && draft.rings.every(ring => Array.isArray(ring) && ring.every(place => Number.isFinite(place[0]) && Number.isFinite(place[1])))
}
