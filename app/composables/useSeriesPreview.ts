import { previewOf, type ColumnChoices, type Preview, type Refusal } from '~/series/preview'
import type { PreviewAnswer, PreviewTask } from '~/series/previewWorker'

/** Texts longer than this are read beside the page, in a worker. */
const longText = 200_000

/** Reads a text whenever it or a choice changes; answers to a text that has changed meanwhile are dropped. */
export function useSeriesPreview(text: Ref<string>, choices: Ref<ColumnChoices>, areaM2: Ref<number>) {
  const preview = shallowRef<Preview | Refusal | null>(null)
  const busy = ref(false)
  let ticket = 0
  let worker: Worker | null = null
  let timer: ReturnType<typeof setTimeout> | undefined

  function workerOf(): Worker {
    if (worker) return worker
    worker = new Worker(new URL('../series/previewWorker.ts', import.meta.url), { type: 'module' })
    worker.onmessage = (event: MessageEvent<PreviewAnswer>) => {
      if (event.data.ticket === ticket) take(event.data.preview)
    }
    worker.onerror = () => {
      preview.value = { state: 'refused', message: 'The file could not be read in this browser. Cut it into parts.', issues: [], columns: [] }
      busy.value = false
    }
    return worker
  }

  function take(next: Preview | Refusal | null) {
    preview.value = next
    busy.value = false
  }

  function read() {
    const mine = ++ticket
    if (text.value.trim() === '') return take(null)
    const task: PreviewTask = { ticket: mine, text: text.value, choices: JSON.parse(JSON.stringify(choices.value)) as ColumnChoices, areaM2: areaM2.value }
    if (text.value.length > longText) workerOf().postMessage(task)
    else take(previewOf(task.text, task.choices, task.areaM2))
  }

  if (import.meta.client) {
    watch([text, choices, areaM2], () => {
      busy.value = text.value.trim() !== ''
      clearTimeout(timer)
      timer = setTimeout(read, text.value.length > 20_000 ? 250 : 60)
    }, { deep: true, immediate: true })
    onScopeDispose(() => {
      clearTimeout(timer)
      worker?.terminate()
    })
  }
  return { preview, busy }
}
