import type { Outline, RegionKind } from '#shared/types/domain'
import type { RegionItem } from '~/regions/types'

export interface NewRegion { name: string, kind: RegionKind, agencyId: string, note: string }

/** Stores outlines. When somebody else changed the region meanwhile, `conflict` holds what it is now, and saving again replaces that. */
export function useOutlineSave() {
  const api = useApi()
  const { workspace } = useAccount()
  const busy = ref(false)
  const error = shallowRef<unknown>(null)
  const conflict = shallowRef<{ id: string, revision: number, outline: RegionItem['outline'] } | null>(null)

  async function attempt(store: () => Promise<RegionItem>): Promise<RegionItem | null> {
    if (busy.value) return null
    busy.value = true
    error.value = null
    try {
      const stored = await store()
      conflict.value = null
      return stored
    }
    catch (caught) {
      error.value = caught
      return null
    }
    finally {
      busy.value = false
    }
  }

  return {
    busy, error, conflict,
    create: (form: NewRegion, geometry: Outline) => attempt(() =>
      api('regionCreate', { params: { workspace: workspace.value!.id }, body: { ...form, geometry } })),
    async replace(region: { id: string, revision: number }, geometry: Outline): Promise<RegionItem | null> {
      const revision = conflict.value?.id === region.id ? conflict.value.revision : region.revision
      const stored = await attempt(() => api('regionChange', { params: { id: region.id }, body: { revision, geometry } }))
      if (error.value instanceof ApiProblem && error.value.status === 409) {
        conflict.value = await api('regionRead', { params: { id: region.id } }).catch(() => null)
      }
      return stored
    },
    clear: () => { error.value = conflict.value = null },
  }
}
