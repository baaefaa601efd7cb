import { previewOf, type ColumnChoices, type Preview, type PreviewSetting, type Refusal } from './preview'
import type { TableSource } from '#shared/series/table'

/** Reads large tables beside the page, which stays answering. */
export interface PreviewTask { ticket: number, source: TableSource, choices: ColumnChoices, areaM2: number, setting: PreviewSetting }
export interface PreviewAnswer { ticket: number, preview: Preview | Refusal }

self.onmessage = (event: MessageEvent<PreviewTask>) => {
  const { ticket, source, choices, areaM2, setting } = event.data
  self.postMessage({ ticket, preview: previewOf(source, choices, areaM2, setting) } satisfies PreviewAnswer)
}
