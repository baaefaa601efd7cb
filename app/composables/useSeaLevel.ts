import { placesText, questionOf, type SeaLevelQuestion } from '~/seaLevel/question'

/** The question of a sea-level map, kept in the address; `ask` is what the interface takes. */
export function useSeaLevel() {
  const route = useRoute()
  const router = useRouter()
  const question = computed(() => questionOf(route.query))
  const put = (query: Record<string, string | undefined>) => router.replace({ query: { ...route.query, ...query }, hash: route.hash })

  return {
    question,
    ask: computed(() => ({ feedback: question.value.feedback, at: placesText(question.value.places) })),
    change(part: Partial<SeaLevelQuestion>) {
      const next = { ...question.value, ...part }
      return put({ feedback: next.feedback ? undefined : 'off', as: next.as === 'mm' ? undefined : 'mean', at: placesText(next.places) })
    },
  }
}
