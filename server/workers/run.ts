import type { EarthModel } from '#shared/earth/earthModel'
import { computeRun } from '#shared/earth/time/run'
import type { RunInput, RunResult } from '#shared/types/run'
import { earthModelFrom } from '../services/earthModelFile'

// One Earth model for the life of the thread: reading the fields takes longer than most runs.
let earth: Promise<EarthModel> | undefined

/** One run, away from the thread that answers requests. Gets and returns plain data; knows no database. */
export default async function run({ input, fieldsPath }: { input: RunInput, fieldsPath: string | null }): Promise<RunResult> {
  earth ??= earthModelFrom(fieldsPath)
  return computeRun(input, await earth)
}
