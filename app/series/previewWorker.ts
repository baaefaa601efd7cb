import { previewOf, type ColumnChoices, type Preview, type Refusal } from './preview'

/** Reads large texts beside the page, which stays answering. */
export interface PreviewTask { ticket: number, text: string, choices: ColumnChoices, areaM2: number }
export interface PreviewAnswer { ticket: number, preview: Preview | Refusal }

self.onmessage = (event: MessageEvent<PreviewTask>) => {
  const { ticket, text, choices, areaM2 } = event.data
  self.postMessage({ ticket, preview: previewOf(text, choices, areaM2) } satisfies PreviewAnswer)
}
