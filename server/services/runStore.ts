import { eq } from 'drizzle-orm'
import type { RunInput, RunResult } from '#shared/types/run'
import { schema } from '../database/client'
import { appendLog, newId } from './change'
import type { Context } from './context'
import { canonicalJson, sha256Hex } from './hash'

export interface Actor { id: string, name: string }
export interface RunJobInput { scenarioId: string, name: string, actor: Actor, input: RunInput }

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
