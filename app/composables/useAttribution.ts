import type { AttributionReport } from '#shared/attribution/report'
import type { Issue } from '#shared/types/issue'

/**
 * A run attributed to the observed series and reduction in the address. Fetched by the browser alone, since it takes a second or two;
 * what was asked last is what is shown.
 */
export function useAttribution(runId: string, observedId: () => string | null) {
  const api = useApi()
  const route = useRoute()
  const report = shallowRef<AttributionReport | null>(null)
  const fault = shallowRef<{ text: string, issues: readonly Issue[] } | null>(null)
  const pending = ref(false)
  const chain = computed(() => typeof route.query.chain === 'string' ? route.query.chain : undefined)
  const prior = computed(() => {
    const asked = Number(route.query.prior)
    return route.query.prior !== undefined && asked >= 0.01 && asked <= 100 ? asked : 0.5
  })
  const groups = computed(() => typeof route.query.groups === 'string' && route.query.groups ? route.query.groups : undefined)
  let asked: AbortController | null = null

  async function load() {
    asked?.abort()
    const observed = observedId()
    fault.value = null
    if (!observed) {
      report.value = null
      return
    }
    const own = asked = new AbortController()
    pending.value = true
    try {
      const answer = await api('runAttribution', { params: { id: runId }, query: { observed, chain: chain.value, prior: prior.value, groups: groups.value }, signal: own.signal })
      if (!own.signal.aborted) report.value = answer
    }
    catch (error) {
      if (!own.signal.aborted) fault.value = { text: problemText(error), issues: error instanceof ApiProblem ? error.issues : [] }
    }
    finally {
      if (asked === own) pending.value = false
    }
  }
  onMounted(() => void load())
  watch([observedId, chain, prior, groups], () => void load())
  onScopeDispose(() => asked?.abort())
  return { report, fault, pending, chain, prior, groups, load }
}
