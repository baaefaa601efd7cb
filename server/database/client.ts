import { mkdirSync } from 'node:fs'
import { join } from 'node:path'
import Database from 'better-sqlite3'
import { drizzle, type BetterSQLite3Database } from 'drizzle-orm/better-sqlite3'
import { migrate } from 'drizzle-orm/better-sqlite3/migrator'
import * as schema from './schema'

export type Db = BetterSQLite3Database<typeof schema>
/** A transaction or the database itself: repositories take either. */
export type Reader = Pick<Db, 'select' | 'insert' | 'update' | 'delete'>

export interface Store { db: Db, sqlite: Database.Database, dataDir: string, close: () => void }

/** Opens the one connection, brings the schema up to date and hands both back. */
export function openStore(dataDir: string, migrations: string): Store {
  mkdirSync(join(dataDir, 'originals'), { recursive: true, mode: 0o700 })
  const sqlite = new Database(join(dataDir, 'counterpoise.db'))
  sqlite.pragma('journal_mode = WAL')
  sqlite.pragma('busy_timeout = 5000')
  sqlite.pragma('foreign_keys = ON')
  sqlite.pragma('synchronous = NORMAL')
  const db = drizzle(sqlite, { schema })
  migrate(db, { migrationsFolder: migrations })
  return { db, sqlite, dataDir, close: () => sqlite.close() }
}

export { schema }
