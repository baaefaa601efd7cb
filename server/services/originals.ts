import { existsSync } from 'node:fs'
import { copyFile, mkdir, readFile, rename, rm } from 'node:fs/promises'
import { dirname, join } from 'node:path'
import { decodeText } from '#shared/series/decodeText'
import type { TableSource } from '#shared/series/table'
import { InputError } from '#shared/types/issue'
import { schema, type Reader } from '../database/client'
import type { Upload } from '../utils/body'
import type { Context } from './context'

/** Where an original lies: beside the database, under its checksum. */
export function originalPath(dataDir: string, sha256: string) {
  return join(dataDir, 'originals', sha256.slice(0, 2), sha256)
}

/**
 * Moves an upload to its place; the same bytes are kept once. The row that names it is written by `rememberOriginal`
 * inside the change that refers to it, so a file without a row is only ever a left-over.
 */
export async function keepOriginal(context: Context, upload: Upload) {
  const target = originalPath(context.dataDir, upload.sha256)
  if (existsSync(target)) return
  await mkdir(dirname(target), { recursive: true, mode: 0o700 })
  try {
    await rename(upload.path, target)
  }
  catch {
    await copyFile(upload.path, `${target}.part`)
    await rename(`${target}.part`, target)
    await rm(upload.path, { force: true })
  }
}

export function rememberOriginal(context: Context, tx: Reader, upload: Upload) {
  tx.insert(schema.original).values({ sha256: upload.sha256, bytes: upload.bytes, type: upload.type, createdAt: context.now() }).onConflictDoNothing().run()
}

/** Rows of an uploaded table: its text, or the cells of one sheet where it is a workbook; the first sheet with rows unless told. */
export async function uploadTable(upload: Upload, sheetName?: string): Promise<TableSource> {
  const bytes = await readFile(upload.path)
  const { isWorkbook, readWorkbook } = await import('#shared/series/workbook')
  if (!isWorkbook(bytes)) return decodeText(bytes)
  const sheets = await readWorkbook(bytes)
  const sheet = sheetName === undefined ? sheets.find(s => s.cells.length > 0) ?? sheets[0] : sheets.find(s => s.name === sheetName)
  if (sheet) return { cells: sheet.cells }
  const message = `The workbook has no sheet “${sheetName}”; it has ${sheets.map(s => `“${s.name}”`).join(', ')}.`
  throw new InputError(message, [{ path: 'columns/sheet', code: 'no-such-sheet', message }])
}

/** Text of an uploaded file. */
export async function uploadText(upload: Upload): Promise<string> {
  return decodeText(await readFile(upload.path))
}
