import type { WidePreview, WideTask } from '~/series/widePreview'
import type { WideAnswer } from '~/series/wideWorker'

/** Reads the chosen columns of a wide table in a worker whenever the table or a choice changes; late answers are dropped. */
export function useWidePreview(task: Ref<Omit<WideTask, 'ticket'> | null>) {
  const preview = shallowRef<WidePreview | null>(null)
  const busy = ref(false)
  let ticket = 0
  let worker: Worker | null = null
  let timer: ReturnType<typeof setTimeout> | undefined

  function workerOf(): Worker {
    if (worker) return worker
    worker = new Worker(new URL('../series/wideWorker.ts', import.meta.url), { type: 'module' })
    worker.onmessage = (event: MessageEvent<WideAnswer>) => {
      if (event.data.ticket !== ticket) return
      preview.value = event.data.preview
      busy.value = false
    }
    worker.onerror = () => {
      preview.value = { rows: [], issues: [], badRows: 0, fault: 'The table could not be read in this browser. Cut it into parts.' }
      busy.value = false
    }
    return worker
  }
  function read() {
    const mine = ++ticket
    if (!task.value) {
      preview.value = null
      busy.value = false
      return
    }
    workerOf().postMessage({ ticket: mine, ...JSON.parse(JSON.stringify({ series: task.value.series, withdrawalPositive: task.value.withdrawalPositive })) as Omit<WideTask, 'ticket' | 'source'>, source: toRaw(task.value.source) } satisfies WideTask)
  }
  if (import.meta.client) {
    watch(task, () => {
      busy.value = task.value !== null
      clearTimeout(timer)
      timer = setTimeout(read, 150)
    }, { immediate: true })
    onScopeDispose(() => {
      clearTimeout(timer)
      worker?.terminate()
    })
  }
  return { preview, busy }
}
