import type { Db } from './client'

const kept = new WeakMap<Db, Map<(db: Db) => unknown, unknown>>()

/** A statement that is built once for each database: a list of hundreds of rows else spends its time on building the same small ones anew. */
export function prepared<Statement>(db: Db, build: (db: Db) => Statement): Statement {
  const statements = kept.get(db) ?? new Map<(db: Db) => unknown, unknown>()
  kept.set(db, statements)
  if (!statements.has(build)) statements.set(build, build(db))
  return statements.get(build) as Statement
}
