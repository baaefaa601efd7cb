import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'

type ObservedData = AnswerOf<typeof contracts.observedRead>

/** Values of an observed series, fetched by the browser alone: tens of thousands of days do not belong in a page's text. */
export function useObservedData(id: () => string | null) {
  const api = useApi()
  const data = shallowRef<ObservedData | null>(null)
  const fault = ref('')
  let asked: AbortController | null = null

  async function load() {
    asked?.abort()
    const wanted = id()
    data.value = null
    fault.value = ''
    if (!wanted) return
    const own = asked = new AbortController()
    try {
      const answer = await api('observedRead', { params: { id: wanted }, signal: own.signal })
      if (!own.signal.aborted) data.value = answer
    }
    catch (error) {
      if (!own.signal.aborted) fault.value = problemText(error)
    }
  }
  onMounted(() => void load())
  watch(id, () => void load())
  onScopeDispose(() => asked?.abort())
  return { data, fault, load }
}
