import { chainOfText, textOfChain, withStep } from '~/observed/reduction'
import type { Issue } from '#shared/types/issue'
import type { PlainChainResult } from '#shared/observed/chainPlain'
import type { Chain, ChainStep } from '#shared/observed/chainTypes'

/**
 * The chain in the address and what it makes of an observed series. Fetched by the browser alone: the small multiples are too many
 * points for a page's text. What was asked last is what is shown.
 */
export function useReduction(id: string) {
  const api = useApi()
  const route = useRoute()
  const router = useRouter()
  const reading = computed(() => chainOfText(route.query.chain))
  const data = shallowRef<PlainChainResult | null>(null)
  const fault = shallowRef<{ text: string, issues: readonly Issue[] } | null>(null)
  const pending = ref(false)
  let asked: AbortController | null = null

  async function load() {
    asked?.abort()
    fault.value = reading.value.fault
    if (!reading.value.chain) return
    const own = asked = new AbortController()
    pending.value = true
    try {
      const answer = await api('observedChain', { params: { id }, query: { chain: JSON.stringify(reading.value.chain), points: 400 }, signal: own.signal })
      if (!own.signal.aborted) data.value = answer
    }
    catch (error) {
      if (!own.signal.aborted) fault.value = { text: problemText(error), issues: error instanceof ApiProblem ? error.issues : [] }
    }
    finally {
      if (asked === own) pending.value = false
    }
  }
  const put = (chain: Chain) => router.replace({ query: { ...route.query, chain: textOfChain(chain) }, hash: route.hash })

  onMounted(() => void load())
  watch(() => route.query.chain, () => void load())
  onScopeDispose(() => asked?.abort())
  return {
    reading, data, fault, pending, load, put,
    reset: () => router.replace({ query: { ...route.query, chain: undefined }, hash: route.hash }),
    change: (at: number, part: Partial<ChainStep>) => reading.value.chain ? put(withStep(reading.value.chain, at, part)) : undefined,
    changeSpan: (part: Partial<Chain>) => reading.value.chain ? put({ ...reading.value.chain, ...part }) : undefined,
  }
}
