import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'

export type SavedChain = AnswerOf<typeof contracts.chainList>['items'][number]

/** The reductions that a workspace keeps under a name, fetched by the browser. */
export function useChains(workspaceId: () => string | undefined) {
  const api = useApi()
  const items = shallowRef<SavedChain[] | null>(null)
  const fault = ref('')

  async function load() {
    const workspace = workspaceId()
    fault.value = ''
    if (!workspace) return
    try {
      items.value = (await api('chainList', { params: { workspace } })).items
    }
    catch (error) {
      fault.value = problemText(error)
    }
  }
  onMounted(() => void load())
  watch(workspaceId, () => void load())
  return { items, fault, load }
}
