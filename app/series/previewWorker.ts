import { previewPaced, type ColumnChoices, type Preview, type PreviewSetting, type Refusal } from './preview'
import type { TableSource } from '#shared/series/table'

/** Reads large tables beside the page, which stays answering. */
export interface PreviewTask { ticket: number, source: TableSource, choices: ColumnChoices, areaM2: number, setting: PreviewSetting }
/** How far it is, 0 to 1, or what came of it. */
export type PreviewAnswer = { ticket: number, progress: number } | { ticket: number, preview: Preview | Refusal }

let latest = 0

self.onmessage = async (event: MessageEvent<PreviewTask>) => {
  const { ticket, source, choices, areaM2, setting } = event.data
  latest = ticket
  const abort = new AbortController()
  const answer = (message: PreviewAnswer) => self.postMessage(message)
  try {
    const preview = await previewPaced(source, choices, areaM2, setting, {
      // A pause lets the next question in; it ends this one.
      pause: () => new Promise(resolve => setTimeout(resolve)),
      onProgress: (progress) => {
        if (ticket !== latest) abort.abort()
        answer({ ticket, progress })
      },
      signal: abort.signal,
    })
    answer({ ticket, preview })
  }
  catch (error) {
    // Thrown from here it would be a refused promise, of which the page hears nothing.
    if (!abort.signal.aborted) setTimeout(() => { throw error })
  }
}
