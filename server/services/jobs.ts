import { EventEmitter } from 'node:events'
import { dirname, join } from 'node:path'
import { eq, inArray } from 'drizzle-orm'
import Piscina from 'piscina'
import type { Principal } from '#shared/permissions'
import { InputError } from '#shared/types/issue'
import type { RunInput, RunResult } from '#shared/types/run'
import { schema } from '../database/client'
import { Problem, problemBody, type ProblemBody } from '../utils/problem'
import type { RunAnswer } from '../workers/run'
import { appendLog, authorise, newId } from './change'
import type { Context } from './context'
import { canonicalJson, sha256Hex } from './hash'

type JobRow = typeof schema.job.$inferSelect
interface RunJobInput { scenarioId: string, name: string, actor: { id: string, name: string }, input: RunInput }

export interface JobView { id: string, kind: string, state: JobRow['state'], progress: number, answer: { runId: string } | null, problem: ProblemBody | null, createdAt: string }

export function jobView(row: JobRow): JobView {
  return {
    id: row.id, kind: row.kind, state: row.state, progress: row.progress, createdAt: row.createdAt,
    answer: row.answer ? JSON.parse(row.answer) as { runId: string } : null,
    problem: row.problem ? JSON.parse(row.problem) as ProblemBody : null,
  }
}

/** Heavy work in the background: a row in the database, a worker thread, and events for those who watch. */
export class Jobs {
  private readonly pool: Piscina
  private readonly events = new EventEmitter().setMaxListeners(0)
  private readonly aborts = new Map<string, AbortController>()
  private context!: Context

  constructor(private readonly workerFile: string, private readonly fieldsPath: string | null) {
    this.pool = new Piscina({ filename: workerFile, minThreads: 0, maxThreads: 1, idleTimeout: 60_000 })
  }

  /** Takes up what an earlier process left waiting or half done: a run is pure, so it starts again from its frozen input. */
  resume(context: Context) {
    this.context = context
    const left = context.db.select().from(schema.job).where(inArray(schema.job.state, ['waiting', 'running'])).all()
    for (const row of left) void this.execute(row.id)
  }

  startRun(principal: Principal, workspaceId: string, job: Omit<RunJobInput, 'actor'>): JobView {
    const id = newId()
    const input: RunJobInput = { ...job, actor: { id: principal.userId, name: principal.name } }
    this.context.db.insert(schema.job).values({
      id, workspaceId, kind: 'run', state: 'waiting', input: JSON.stringify(input), createdAt: this.context.now(), createdBy: principal.userId,
    }).run()
    void this.execute(id)
    return jobView(this.row(id))
  }

  /** Work of seconds in a worker thread, waited for: `worker` names a file of server/workers. */
  async compute<T>(worker: string, task: unknown, signal?: AbortSignal): Promise<T> {
    return await this.pool.run(task, { filename: join(dirname(this.workerFile), `${worker}.mjs`), signal }) as T
  }

  /** A run that is waited for, as at first start. Fails where the job fails. */
  async runNow(principal: Principal, workspaceId: string, job: Omit<RunJobInput, 'actor'>): Promise<string> {
    const result = resultOf(await this.pool.run({ input: job.input, fieldsPath: this.fieldsPath }) as RunAnswer)
    return storeRun(this.context, workspaceId, { ...job, actor: { id: principal.userId, name: principal.name } }, result)
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
    await this.pool.destroy()
  }

  private set(id: string, values: Partial<JobRow>) {
    this.context.db.update(schema.job).set(values).where(eq(schema.job.id, id)).run()
    this.events.emit(id, jobView(this.row(id)))
  }

  private async execute(id: string) {
    const abort = new AbortController()
    this.aborts.set(id, abort)
    try {
      const job = JSON.parse(this.row(id).input) as RunJobInput
      this.set(id, { state: 'running', progress: 0.1 })
      const result = resultOf(await this.pool.run({ input: job.input, fieldsPath: this.fieldsPath }, { signal: abort.signal }) as RunAnswer)
      if (this.row(id).state === 'cancelled') return
      this.set(id, { progress: 0.9 })
      const runId = storeRun(this.context, this.row(id).workspaceId, job, result)
      this.set(id, { state: 'done', progress: 1, answer: JSON.stringify({ runId }), finishedAt: this.context.now() })
    }
    catch (error) {
      if (this.row(id).state === 'cancelled') return
      this.set(id, { state: 'failed', problem: JSON.stringify(problemBody(error)), finishedAt: this.context.now() })
      if (problemBody(error).status === 500) console.error('[counterpoise] job failed:', error)
    }
    finally {
      this.aborts.delete(id)
    }
  }
}

function resultOf(answer: RunAnswer): RunResult {
  if ('fault' in answer) throw new InputError(answer.fault.message, answer.fault.issues, answer.fault.status)
  return answer.result
}

/** Writes an immutable run: input and result in canonical JSON with the hash of each. */
export function storeRun(context: Context, workspaceId: string, job: RunJobInput, result: RunResult): string {
  const id = newId()
  const input = canonicalJson({ input: job.input, engine: result.engineVersion, earthModel: result.earthModelChecksum })
  const text = canonicalJson(result)
  context.db.transaction((tx) => {
    const runs = tx.select({ n: schema.run.n }).from(schema.run).where(eq(schema.run.scenarioId, job.scenarioId)).all()
    const n = Math.max(0, ...runs.map(r => r.n)) + 1
    const row = { id, scenarioId: job.scenarioId, workspaceId, n, name: job.name, input, inputSha256: sha256Hex(input), result: text, resultSha256: sha256Hex(text), engine: result.engineVersion, node: `${process.version} ${process.arch}`, createdAt: context.now(), createdBy: job.actor.id }
    tx.insert(schema.run).values(row).run()
    appendLog(context, tx, {
      actorId: job.actor.id, actor: job.actor.name, after: { scenario: job.name, n, inputSha256: row.inputSha256, resultSha256: row.resultSha256 },
      target: { verb: 'run stored', entity: 'run', id, workspaceId },
    })
  }, { behavior: 'immediate' })
  return id
}
