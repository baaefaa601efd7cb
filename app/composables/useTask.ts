import type { Issue } from '#shared/types/issue'

/** One piece of work at a time, for a form or a dialog: whether it goes on, and what stopped it. */
export function useTask() {
  const busy = ref(false)
  const error = shallowRef<unknown>(null)
  /** Begins it, unless it goes on already; what it throws is kept in `error`. */
  async function run(work: () => Promise<void>): Promise<void> {
    if (busy.value) return
    busy.value = true
    error.value = null
    try {
      await work()
    }
    catch (caught) {
      error.value = caught
    }
    finally {
      busy.value = false
    }
  }
  /** What stopped it in words, with every issue that the server named; null where nothing did. */
  const fault = computed<{ text: string, issues: readonly Issue[] } | null>(() => error.value === null
    ? null
    : { text: problemText(error.value), issues: error.value instanceof ApiProblem ? error.value.issues : [] })
  return { busy, error, fault, run }
}
