import type { AnswerOf } from '#shared/api/contract'
import type { contracts } from '#shared/api/contracts'
import { jobEnded } from '~/scenario/job'

export type JobState = AnswerOf<typeof contracts.jobRead>

/** Follows a job until it ends: server-sent events, and polling where they do not come through. */
export function useJob(ended: (job: JobState) => void) {
  const api = useApi()
  const job = shallowRef<JobState | null>(null)
  const fault = ref('')
  let source: EventSource | null = null
  let timer: ReturnType<typeof setTimeout> | undefined
  let told: string | null = null

  function take(next: JobState) {
    job.value = next
    if (!jobEnded(next.state) || told === next.id) return
    told = next.id
    stop()
    ended(next)
  }

  async function poll(id: string) {
    try {
      take(await api('jobRead', { params: { id } }))
      fault.value = ''
    }
    catch (error) {
      fault.value = problemText(error)
      // A job that is not there, or not ours, will not come back; a server that is away may.
      if (error instanceof ApiProblem && [401, 403, 404].includes(error.status)) return stop()
    }
    if (!jobEnded(job.value?.state)) timer = setTimeout(() => void poll(id), 1000)
  }

  function follow(start: JobState | string) {
    stop()
    told = null
    const id = typeof start === 'string' ? start : start.id
    if (typeof start !== 'string') take(start)
    if (jobEnded(job.value?.state) && job.value?.id === id) return
    if (typeof EventSource === 'undefined') return void poll(id)
    source = new EventSource(`/api/v1/jobs/${encodeURIComponent(id)}/events`)
    source.onmessage = event => take(JSON.parse(event.data as string) as JobState)
    source.onerror = () => {
      stop()
      void poll(id)
    }
  }

  function stop() {
    source?.close()
    source = null
    clearTimeout(timer)
  }

  async function cancel() {
    if (!job.value) return
    try {
      take(await api('jobCancel', { params: { id: job.value.id } }))
    }
    catch (error) {
      fault.value = problemText(error)
    }
  }

  onScopeDispose(stop)
  return { job, fault, follow, cancel, running: computed(() => job.value !== null && !jobEnded(job.value.state)), forget: () => { job.value = null } }
}
