import type { Issue } from '#shared/types/issue'

interface RunOptions { id: string, revision: Ref<number>, dirty: Ref<boolean>, save: () => Promise<boolean>, reload: () => Promise<unknown> }

/** Running a scenario: what is not saved is saved first, the job is followed, and a finished one opens its result. */
export function useScenarioRun({ id, revision, dirty, save, reload }: RunOptions) {
  const api = useApi()
  const route = useRoute()
  const router = useRouter()
  const fault = shallowRef<{ text: string, issues: readonly Issue[] } | null>(null)
  const starting = ref(false)

  const { job, fault: jobFault, follow, cancel, running } = useJob(async (ended) => {
    await note(null)
    if (ended.state === 'done' && ended.answer) await navigateTo(`/runs/${ended.answer.runId}`)
    else await reload()
  })
  /** The job stands in the address while it runs, so that a reload finds it again. */
  const note = (jobId: string | null) => router.replace({ query: { ...route.query, job: jobId ?? undefined } })

  async function run() {
    if (starting.value || running.value) return
    starting.value = true
    fault.value = null
    try {
      if (dirty.value && !await save()) return
      const started = await api('runCreate', { params: { id }, body: { revision: revision.value } })
      await note(started.id)
      follow(started)
    }
    catch (error) {
      fault.value = { text: problemText(error), issues: error instanceof ApiProblem ? error.issues : [] }
    }
    finally {
      starting.value = false
    }
  }

  onMounted(() => {
    if (typeof route.query.job === 'string') follow(route.query.job)
  })
  return { job, jobFault, fault, running, starting, run, cancel }
}
