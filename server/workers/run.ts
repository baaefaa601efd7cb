import { computeRun } from '#shared/earth/time/run'
import type { RunInput, RunResult } from '#shared/types/run'
import { earthModelFrom } from '../services/earthModelFile'

/** One run, away from the thread that answers requests. Gets and returns plain data; knows no database. */
export default function run({ input, fieldsPath }: { input: RunInput, fieldsPath: string | null }): RunResult {
  return computeRun(input, earthModelFrom(fieldsPath))
}
