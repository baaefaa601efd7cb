interface ClosedSpan { fromMjd: number, toMjd: number }

/**
 * The stretch of time that a chart shows. It changes at once; the address follows when the hand rests, so that a reload or a link
 * shows the same stretch.
 */
export function useSpanInAddress() {
  const route = useRoute()
  const router = useRouter()
  const span = shallowRef<ClosedSpan | null>(closedSpan(spanOfQuery(route.query)))
  const written = () => JSON.stringify(queryOfSpan(span.value ?? { fromMjd: null, toMjd: null }))
  let timer: ReturnType<typeof setTimeout> | undefined

  watch(span, () => {
    clearTimeout(timer)
    timer = setTimeout(() => {
      void router.replace({ query: { ...route.query, from: undefined, to: undefined, ...queryOfSpan(span.value ?? { fromMjd: null, toMjd: null }) }, hash: route.hash })
    }, 400)
  })
  /** Back and forward, or a link: the address says another stretch than the chart shows. */
  watch(() => [route.query.from, route.query.to], () => {
    const asked = closedSpan(spanOfQuery(route.query))
    if (JSON.stringify(queryOfSpan(asked ?? { fromMjd: null, toMjd: null })) !== written()) span.value = asked
  })
  onScopeDispose(() => clearTimeout(timer))
  return span
}
