import initSqlJs, { type SqlJsStatic } from 'sql.js'
import wasmUrl from 'sql.js/dist/sql-wasm-browser.wasm?url'

let loading: Promise<SqlJsStatic> | undefined

/** SQLite for files that are databases. It runs inside the page: such a file never reaches the server. */
export function loadSqlite(): Promise<SqlJsStatic> {
  loading ??= initSqlJs(typeof window === 'undefined' ? {} : { locateFile: () => wasmUrl })
  return loading
}
