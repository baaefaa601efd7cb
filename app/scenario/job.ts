export type JobPhase = 'waiting' | 'running' | 'done' | 'failed' | 'cancelled'

export function jobEnded(state: JobPhase | undefined): boolean {
  return state === 'done' || state === 'failed' || state === 'cancelled'
}

/** State of a job in words. */
export function jobText(state: JobPhase, progress: number): string {
  switch (state) {
    case 'waiting': return 'Waiting for its turn'
    case 'running': return progress >= 0.9 ? 'Storing the result' : 'Calculating'
    case 'done': return 'Done'
    case 'failed': return 'The run failed; nothing was stored'
    case 'cancelled': return 'Cancelled; nothing was stored'
  }
}
