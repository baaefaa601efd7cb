import { widePreviewOf, type WidePreview, type WideTask } from './widePreview'

/** Reads wide tables beside the page, which stays answering. */
export interface WideAnswer { ticket: number, preview: WidePreview }

self.onmessage = (event: MessageEvent<WideTask>) => {
  self.postMessage({ ticket: event.data.ticket, preview: widePreviewOf(event.data) } satisfies WideAnswer)
}
