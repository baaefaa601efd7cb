import type { MessagePort } from 'node:worker_threads'
import type { PaceOptions } from '#shared/series/steps'

/** Least time between two reports of progress, ms: a page redraws no faster. */
const REPORT_MS = 100

/**
 * Pace of work in a worker: after each step the thread takes in messages, of which `'cancel'` ends the work; progress goes out as
 * `{ progress }`, from 0 to 1. Without a port nothing is said and nothing heard.
 */
export function paceOf(port?: MessagePort): PaceOptions & { done: () => void } {
  const abort = new AbortController()
  let reported = 0
  port?.on('message', (message: unknown) => {
    if (message === 'cancel') abort.abort(new Error('The work was cancelled.'))
  })
  return {
    signal: abort.signal,
    pause: () => new Promise(resolve => setImmediate(resolve)),
    onProgress: (progress) => {
      if (!port || (performance.now() - reported < REPORT_MS && progress < 1)) return
      reported = performance.now()
      port.postMessage({ progress })
    },
    done: () => port?.close(),
  }
}
