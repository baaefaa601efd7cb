import type { EarthModel } from '#shared/earth/earthModel'
import { computeRun } from '#shared/earth/time/run'
import { InputError, type Issue } from '#shared/types/issue'
import type { RunInput, RunResult } from '#shared/types/run'
import { earthModelFrom } from '../services/earthModelFile'

// One Earth model for the life of the thread: reading the fields takes longer than most runs.
let earth: Promise<EarthModel> | undefined

/** Result of a run, or why its input cannot be used: an error that is thrown loses its issues between threads. */
export type RunAnswer = { result: RunResult } | { fault: { message: string, issues: Issue[], status: 413 | 422 } }

/** One run, away from the thread that answers requests. Gets and returns plain data; knows no database. */
export default async function run({ input, fieldsPath }: { input: RunInput, fieldsPath: string | null }): Promise<RunAnswer> {
  earth ??= earthModelFrom(fieldsPath)
  try {
    return { result: computeRun(input, await earth) }
  }
  catch (error) {
    if (error instanceof InputError) return { fault: { message: error.message, issues: error.issues, status: error.status } }
    throw error
  }
}
