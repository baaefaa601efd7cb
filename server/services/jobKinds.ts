import type { RunResult } from '#shared/types/run'
import type { GridDescription, GridTask } from '../workers/grid'
import type { Context } from './context'
import { describeGridTask, gridSeriesTask, keepGridSeries, storeGrid, type GridJobInput, type GridSeriesJobInput, type GridSeriesResult } from './gridJobs'
import type { JobRow } from './jobs'
import { monteCarloTask, type MonteCarloJobInput } from './monteCarlo'
import { storeRun, type RunJobInput } from './runStore'
import type { MonteCarloResult } from '#shared/earth/time/monteCarlo'

/** A kind of job: the worker that does it, the task from the input, and what becomes of the result. */
interface JobKind<Input, Result> {
  worker: string
  /** Whether the worker tells how far it is. */
  progress: boolean
  task: (context: Context, input: Input, fieldsPath: string | null) => object
  /** Keeps the result; what it gives is kept with the job. */
  store: (context: Context, row: JobRow, input: Input, result: Result) => object
}

const kind = <Input, Result>(of: JobKind<Input, Result>) => of

export const jobKinds = {
  'run': kind<RunJobInput, RunResult>({
    worker: 'run', progress: false,
    task: (_, { input }, fieldsPath) => ({ input, fieldsPath }),
    store: (context, row, input, result) => ({ runId: storeRun(context, row.workspaceId, input, result) }),
  }),
  'grid': kind<GridJobInput, GridDescription>({ worker: 'grid', progress: true, task: (context, input) => describeGridTask(context, input) satisfies GridTask, store: storeGrid }),
  'grid-series': kind<GridSeriesJobInput, GridSeriesResult>({ worker: 'grid', progress: true, task: (context, input, fieldsPath) => gridSeriesTask(context, input, fieldsPath) satisfies GridTask, store: keepGridSeries }),
  'monte-carlo': kind<MonteCarloJobInput, MonteCarloResult>({ worker: 'monteCarlo', progress: true, task: monteCarloTask, store: (_, __, ___, result) => result }),
}
export type JobKindName = keyof typeof jobKinds
export type JobOf<K extends JobKindName> = Parameters<(typeof jobKinds)[K]['task']>[1]
