import { InputError, type Issue } from '#shared/types/issue'

/** What leaves a worker: a result, or what is wrong with what it got. An error loses its issues on the way out of a thread. */
export type WorkerAnswer<T> = { result: T } | { fault: { message: string, issues: Issue[], status: 413 | 422 } }

/** Does the work; faults of the input are an answer, anything else fails. */
export async function answerOf<T>(work: () => Promise<T>): Promise<WorkerAnswer<T>> {
  try {
    return { result: await work() }
  }
  catch (error) {
    if (!(error instanceof InputError)) throw error
    return { fault: { message: error.message, issues: error.issues, status: error.status } }
  }
}
