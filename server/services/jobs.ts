import { EventEmitter } from 'node:events'
import { dirname, join } from 'node:path'
import { MessageChannel } from 'node:worker_threads'
import { eq, inArray } from 'drizzle-orm'
import Piscina from 'piscina'
import type { Principal } from '#shared/permissions'
import { InputError } from '#shared/types/issue'
import { schema } from '../database/client'
import { Problem, problemBody, type ProblemBody } from '../utils/problem'
import type { WorkerAnswer } from '../workers/parts/answer'
import { authorise, newId } from './change'
import type { Context } from './context'
import { jobKinds, type JobKindName, type JobOf } from './jobKinds'
import { storeRun, type RunJobInput } from './runStore'

export type JobRow = typeof schema.job.$inferSelect

export interface JobView {
  id: string
  kind: string
  state: JobRow['state']
  progress: number
  answer: { runId: string } | null
  gridId: string | null
  problem: ProblemBody | null
  createdAt: string
}

export function jobView(row: JobRow): JobView {
  return {
    id: row.id, kind: row.kind, state: row.state, progress: row.progress, createdAt: row.createdAt,
    answer: row.kind === 'run' && row.answer ? JSON.parse(row.answer) as { runId: string } : null,
    gridId: row.kind === 'grid' && row.answer ? (JSON.parse(row.answer) as { gridId: string }).gridId : null,
    problem: row.problem ? JSON.parse(row.problem) as ProblemBody : null,
  }
}

/** Parts of a job before and after the worker’s own. */
const [STARTED, WORKED] = [0.1, 0.9]

/** Heavy work in the background: a row in the database, a worker thread, and events for those who watch. */
export class Jobs {
  /** Jobs wait for one another; what a page waits for does not wait for them. */
  private readonly pool: Piscina
  private readonly waitedFor: Piscina
  private readonly events = new EventEmitter().setMaxListeners(0)
  private readonly aborts = new Map<string, AbortController>()
  private context!: Context

  constructor(private readonly workerFile: string, private readonly fieldsPath: string | null) {
    const options = { filename: workerFile, minThreads: 0, maxThreads: 1, idleTimeout: 60_000 }
    this.pool = new Piscina(options)
    this.waitedFor = new Piscina(options)
  }

  /** Takes up what an earlier process left waiting or half done: a job depends on its input alone, so it starts again. */
  resume(context: Context) {
    this.context = context
    const left = context.db.select().from(schema.job).where(inArray(schema.job.state, ['waiting', 'running'])).all()
    for (const row of left) void this.execute(row.id)
  }

  startRun(principal: Principal, workspaceId: string, job: Omit<RunJobInput, 'actor'>): JobView {
    return this.start(principal, workspaceId, 'run', job)
  }

  start<K extends JobKindName>(principal: Principal, workspaceId: string, kind: K, input: Omit<JobOf<K>, 'actor'>): JobView {
    const id = newId()
    this.context.db.insert(schema.job).values({
      id, workspaceId, kind, state: 'waiting', input: JSON.stringify({ ...input, actor: { id: principal.userId, name: principal.name } }), createdAt: this.context.now(), createdBy: principal.userId,
    }).run()
    void this.execute(id)
    return jobView(this.row(id))
  }

  /** Work of seconds in a worker thread, waited for: `worker` names a file of server/workers. */
  async compute<T>(worker: string, task: unknown, signal?: AbortSignal): Promise<T> {
    return await this.waitedFor.run(task, { filename: this.fileOf(worker), signal }) as T
  }

  /** A run that is waited for, as at first start. Fails where the job fails. */
  async runNow(principal: Principal, workspaceId: string, job: Omit<RunJobInput, 'actor'>): Promise<string> {
    const input = { ...job, actor: { id: principal.userId, name: principal.name } }
    const { worker, task } = jobKinds.run
    return storeRun(this.context, workspaceId, input, resultOf(await this.pool.run(await task(this.context, input, this.fieldsPath), { filename: this.fileOf(worker) })))
  }

  row(id: string): JobRow {
    const row = this.context.db.select().from(schema.job).where(eq(schema.job.id, id)).get()
    if (!row) throw new Problem(404, 'not-found', 'There is no such job.')
    return row
  }

  view(principal: Principal | null, id: string): JobView {
    const row = this.row(id)
    authorise(principal, 'run.read', { workspaceId: row.workspaceId })
    return jobView(row)
  }

  cancel(principal: Principal | null, id: string): JobView {
    const row = this.row(id)
    authorise(principal, 'run.create', { workspaceId: row.workspaceId, ownerId: row.createdBy })
    if (row.state === 'waiting' || row.state === 'running') {
      this.set(id, { state: 'cancelled', finishedAt: this.context.now() })
      this.aborts.get(id)?.abort()
    }
    return jobView(this.row(id))
  }

  /** Calls back at every change of a job until the returned function is called. */
  watch(id: string, seen: (view: JobView) => void): () => void {
    this.events.on(id, seen)
    return () => this.events.off(id, seen)
  }

  async close() {
    await Promise.all([this.pool.destroy(), this.waitedFor.destroy()])
  }

  private fileOf(worker: string): string {
    return join(dirname(this.workerFile), `${worker}.mjs`)
  }

  private set(id: string, values: Partial<JobRow>) {
    this.context.db.update(schema.job).set(values).where(eq(schema.job.id, id)).run()
    this.events.emit(id, jobView(this.row(id)))
  }

  private async execute(id: string) {
    const abort = new AbortController()
    this.aborts.set(id, abort)
    const { port1, port2 } = new MessageChannel()
    try {
      const row = this.row(id)
      const kind = jobKinds[row.kind] as typeof jobKinds[JobKindName] & { task: (context: Context, input: unknown, fieldsPath: string | null) => object, store: (context: Context, row: JobRow, input: unknown, result: unknown) => object }
      const input = JSON.parse(row.input) as unknown
      this.set(id, { state: 'running', progress: STARTED })
      port1.on('message', ({ progress }: { progress: number }) => {
        if (this.aborts.has(id) && !abort.signal.aborted) this.set(id, { progress: STARTED + (WORKED - STARTED) * progress })
      })
      const task = { ...kind.task(this.context, input, this.fieldsPath), ...(kind.progress ? { port: port2 } : {}) }
      const result = resultOf(await this.pool.run(task, { filename: this.fileOf(kind.worker), signal: abort.signal, transferList: kind.progress ? [port2] : [] }))
      if (this.row(id).state === 'cancelled') return
      this.set(id, { progress: WORKED })
      const answer = kind.store(this.context, this.row(id), input, result)
      this.set(id, { state: 'done', progress: 1, answer: JSON.stringify(answer), finishedAt: this.context.now() })
    }
    catch (error) {
      if (this.row(id).state === 'cancelled') return
      this.set(id, { state: 'failed', problem: JSON.stringify(problemBody(error)), finishedAt: this.context.now() })
      if (problemBody(error).status === 500) console.error('[counterpoise] job failed:', error)
    }
    finally {
      port1.close()
      this.aborts.delete(id)
    }
  }
}

/** What a worker found, or its fault as an error. */
export function resultOf<T>(answer: WorkerAnswer<T>): T {
  if ('fault' in answer) throw new InputError(answer.fault.message, answer.fault.issues, answer.fault.status)
  return answer.result
}
