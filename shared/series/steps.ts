/** Work that stops now and then to say how far it is, from 0 to 1, and ends with a result. */
export type Steps<T> = Generator<number, T, void>

/** Goes through all steps at once. */
export function allAtOnce<T>(steps: Steps<T>): T {
  for (;;) {
    const { done, value } = steps.next()
    if (done) return value as T
  }
}

export interface PaceOptions {
  /** Lets others in before the next step: a timer in a page, `setImmediate` on a server. */
  pause: () => Promise<void>
  /** Called with the part that is done, 0 to 1. */
  onProgress?: (done: number) => void
  /** Ends the work; the reason of the signal is thrown. */
  signal?: AbortSignal
}

/** Goes through the steps with a pause after each, so that a page stays alive and a server answers others. */
export async function withPauses<T>(steps: Steps<T>, { pause, onProgress, signal }: PaceOptions): Promise<T> {
  for (;;) {
    signal?.throwIfAborted()
    const { done, value } = steps.next()
    if (done) return value as T
    onProgress?.(value as number)
    await pause()
  }
}
