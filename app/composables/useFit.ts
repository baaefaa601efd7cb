import { choiceOfQuery, queryOfChoice, type FitChoice } from '~/fit/settings'

/** The terms of a fit, kept in the address; `ask` is what the interface takes. */
export function useFit() {
  const route = useRoute()
  const router = useRouter()
  const choice = computed(() => choiceOfQuery(route.query))
  return {
    choice,
    ask: computed(() => queryOfChoice(choice.value)),
    change: (part: Partial<FitChoice>) => router.replace({ query: { ...route.query, ...queryOfChoice({ ...choice.value, ...part }) }, hash: route.hash }),
  }
}
