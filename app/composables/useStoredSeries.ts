import type { StoredSeries } from '#shared/series/conversionChoice'
import { kindTexts } from '#shared/text/kinds'
import { formatSpan } from '#shared/format/numbers'

/** Stored versions of other series that one may take off, and their values, each fetched once. */
export function useStoredSeries(workspaceId: () => string | undefined) {
  const api = useApi()
  const choices = shallowRef<{ id: string, regionId: string, name: string, text: string }[]>([])
  const fault = ref('')
  const kept = new Map<string, Promise<StoredSeries>>()
  let loading: Promise<void> | null = null

  async function fetchChoices() {
    const workspace = workspaceId()
    if (!workspace) return
    try {
      const [regions, versions] = await Promise.all([api('regionList', { params: { workspace }, query: { limit: 500 } }), api('seriesVersionList', { params: { workspace } })])
      const byId = new Map(regions.items.map(region => [region.id, region]))
      choices.value = versions.items.flatMap((version) => {
        const region = byId.get(version.regionId)
        const name = region && `${region.name}, version ${version.n}`
        return region && name ? [{ id: version.id, regionId: region.id, name, text: `${name} (${kindTexts[region.kind]}, ${formatSpan(version.firstMjd, version.lastMjd)})` }] : []
      })
    }
    catch (error) {
      fault.value = problemText(error)
      loading = null
    }
  }
  const load = () => loading ??= fetchChoices()

  async function fetchStored(versionId: string): Promise<StoredSeries> {
    const { dataSha256, mjd, massGt, sigmaGt, sharedRates } = await api('seriesVersionRead', { params: { id: versionId } })
    return { versionId, dataSha256, name: choices.value.find(choice => choice.id === versionId)?.name ?? '', series: { mjd, massGt, sigmaGt, sharedRates } }
  }
  async function storedOf(versionIds: string[]): Promise<StoredSeries[]> {
    if (versionIds.length === 0) return []
    await load()
    return Promise.all(versionIds.map((id) => {
      const known = kept.get(id) ?? fetchStored(id)
      kept.set(id, known)
      known.catch(() => kept.delete(id))
      return known
    }))
  }
  return { choices, fault, load, storedOf }
}
