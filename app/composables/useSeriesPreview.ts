import { previewOf, type ColumnChoices, type Preview, type PreviewSetting, type Refusal } from '~/series/preview'
import type { PreviewAnswer, PreviewTask } from '~/series/previewWorker'
import type { TableSource } from '#shared/series/table'

/** Texts longer than this are read beside the page, in a worker. */
const longText = 200_000

/** Characters of a table, near enough to tell a large one. */
function sizeOf(source: TableSource): number {
  return typeof source === 'string' ? source.length : source.cells.length * (source.cells[0]?.length ?? 1) * 8
}
const isEmpty = (source: TableSource) => typeof source === 'string' ? source.trim() === '' : source.cells.length === 0

/** Reads a table whenever it, a choice or the setting changes; answers to what has changed meanwhile are dropped. */
export function useSeriesPreview(source: Ref<TableSource>, choices: Ref<ColumnChoices>, areaM2: Ref<number>, setting: Ref<PreviewSetting>) {
  const preview = shallowRef<Preview | Refusal | null>(null)
  const busy = ref(false)
  /** Part of a long table that is read, 0 to 1; null where it is not known. */
  const progress = ref<number | null>(null)
  let ticket = 0
  let worker: Worker | null = null
  let timer: ReturnType<typeof setTimeout> | undefined

  function workerOf(): Worker {
    if (worker) return worker
    worker = new Worker(new URL('../series/previewWorker.ts', import.meta.url), { type: 'module' })
    worker.onmessage = (event: MessageEvent<PreviewAnswer>) => {
      if (event.data.ticket !== ticket) return
      if ('progress' in event.data) progress.value = event.data.progress
      else take(event.data.preview)
    }
    worker.onerror = () => {
      preview.value = { state: 'refused', message: 'The file could not be read in this browser. Cut it into parts.', issues: [], columns: [], chosen: null }
      busy.value = false
    }
    return worker
  }

  function take(next: Preview | Refusal | null) {
    preview.value = next
    busy.value = false
    progress.value = null
  }

  function read() {
    const mine = ++ticket
    if (isEmpty(source.value)) return take(null)
    const task: PreviewTask = { ticket: mine, source: toRaw(source.value), areaM2: areaM2.value, choices: JSON.parse(JSON.stringify(choices.value)) as ColumnChoices, setting: setting.value }
    if (sizeOf(task.source) > longText) workerOf().postMessage(task)
    else take(previewOf(task.source, task.choices, task.areaM2, task.setting))
  }

  if (import.meta.client) {
    watch([source, choices, areaM2, setting], () => {
      busy.value = !isEmpty(source.value)
      clearTimeout(timer)
      timer = setTimeout(read, sizeOf(source.value) > 20_000 ? 250 : 60)
    }, { immediate: true })
    onScopeDispose(() => {
      clearTimeout(timer)
      worker?.terminate()
    })
  }
  return { preview, busy, progress }
}
