import { largestAnomaly, massInMonth, monthIndex, type RegionMonths } from './colouring/months'

/** Milliseconds that a month stands while they play. */
const beat = 350

/** The months of the regions, which one is shown, and their play. The address keeps the month once the play rests. */
export function useMonths(workspace: () => string | undefined, wanted: () => boolean) {
  const api = useApi()
  const route = useRoute()
  const router = useRouter()
  const data = shallowRef<RegionMonths | null>(null)
  const failure = ref('')
  const at = ref(0)
  const playing = ref(false)
  const still = ref(false)
  let clock: ReturnType<typeof setInterval> | undefined
  let rest: ReturnType<typeof setTimeout> | undefined

  async function load(): Promise<void> {
    const id = workspace()
    if (!id) return
    failure.value = ''
    try {
      data.value = await api('regionMonths', { params: { workspace: id } })
      at.value = Math.max(0, monthIndex(data.value.months, route.query.month))
    }
    catch (error) {
      failure.value = error instanceof Error ? error.message : 'The months could not be read.'
    }
  }
  onMounted(() => {
    still.value = matchMedia('(prefers-reduced-motion: reduce)').matches
    watch(wanted, now => now ? void (data.value ?? load()) : pause(), { immediate: true })
  })
  onBeforeUnmount(() => {
    pause()
    clearTimeout(rest)
  })

  const last = computed(() => (data.value?.months.length ?? 0) - 1)
  /** The address is written once the slider rests, so that a play does not fill the browser's history of addresses. */
  function write(): void {
    clearTimeout(rest)
    rest = setTimeout(() => {
      if (wanted() && !playing.value && month.value) void router.replace({ query: { ...route.query, month: month.value } })
    }, 200)
  }
  function go(to: number): void {
    at.value = Math.max(0, Math.min(last.value, to))
    write()
  }
  function pause(): void {
    clearInterval(clock)
    playing.value = false
  }
  function stop(): void {
    pause()
    go(at.value)
  }
  function play(): void {
    if (at.value >= last.value) at.value = 0
    playing.value = true
    clock = setInterval(() => at.value < last.value ? at.value++ : stop(), beat)
  }
  watch(() => route.query.month, (named) => {
    if (data.value && named && !playing.value) at.value = monthIndex(data.value.months, named)
  })

  const largest = computed(() => data.value ? largestAnomaly(data.value) : 0)
  const month = computed(() => data.value?.months[at.value] ?? null)
  const massOf = (id: string) => data.value ? massInMonth(data.value, id, at.value) : null
  return { data, failure, load, at, last, month, largest, massOf, go, playing, play, stop, still }
}
export type Months = ReturnType<typeof useMonths>
