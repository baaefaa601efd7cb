import type { RegionItem } from '~/regions/types'

/** Every region of a workspace, page after page. */
export function useRegions() {
  const api = useApi()
  return async (workspace: string, bin = false): Promise<RegionItem[]> => {
    const items: RegionItem[] = []
    let cursor: string | undefined
    do {
      const page = await api('regionList', { params: { workspace }, query: { limit: 500, cursor, ...(bin ? { bin: 'only' as const } : {}) } })
      items.push(...page.items)
      cursor = page.nextCursor ?? undefined
    } while (cursor)
    return items
  }
}
