import readXlsx from 'read-excel-file/universal'
import { isoDateFromMjd } from '../earth/time/epochs.ts'
import { InputError } from '../types/issue.ts'

export interface Sheet { name: string, cells: string[][] }

/** Guards memory: a sheet is packed, and unpacks to many times its size. */
export const workbookLimits = { packedBytes: 16 * 1024 * 1024, unpackedBytes: 128 * 1024 * 1024, entries: 2000 }

/** Whether bytes begin as an XLSX file does (a ZIP archive). */
export function isWorkbook(bytes: Uint8Array): boolean {
  return bytes[0] === 0x50 && bytes[1] === 0x4b && bytes[2] === 3 && bytes[3] === 4
}

/**
 * The sheets of an XLSX workbook as cells of text: numbers with all their digits, dates as ISO. Formulas give the value that was last
 * computed. What a workbook says it unpacks to is checked first.
 *
 * @throws InputError (413) for a workbook that is too large, InputError (422) for bytes that are none
 */
export async function readWorkbook(bytes: Uint8Array): Promise<Sheet[]> {
  checkArchive(bytes)
  let sheets: Awaited<ReturnType<typeof readXlsx>>
  try {
    sheets = await readXlsx(bytes.slice().buffer)
  } catch (error) {
    throw notReadable(error instanceof Error ? error.message : String(error))
  }
  return sheets.map(({ sheet, data }) => ({ name: sheet, cells: data.map(row => row.map(textOf)) }))
}

function textOf(value: unknown): string {
  if (value === null || value === undefined) return ''
  if (!(value instanceof Date)) return String(value)
  const mjd = value.getTime() / 86_400_000 + 40587
  const seconds = Math.round((mjd - Math.floor(mjd)) * 86_400)
  const two = (n: number): string => String(n).padStart(2, '0')
  return seconds === 0 ? isoDateFromMjd(mjd) : `${isoDateFromMjd(mjd)}T${two(Math.floor(seconds / 3600))}:${two(Math.floor(seconds / 60) % 60)}:${two(seconds % 60)}`
}

/** Sizes as the archive's directory states them; an entry that unpacks to more than it says fails in the unpacker. */
function checkArchive(bytes: Uint8Array): void {
  if (bytes.length > workbookLimits.packedBytes) throw tooLarge('The workbook is larger than 16 MB')
  if (!isWorkbook(bytes)) throw notReadable('it does not begin as one')
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength)
  let end = bytes.length - 22
  while (end >= 0 && view.getUint32(end, true) !== 0x06054b50) end--
  if (end < 0) throw notReadable('its directory is missing')
  const entries = view.getUint16(end + 10, true)
  if (entries > workbookLimits.entries) throw tooLarge(`The workbook has ${entries} parts`)
  let at = view.getUint32(end + 16, true)
  let unpacked = 0
  for (let i = 0; i < entries; i++) {
    if (at + 46 > bytes.length || view.getUint32(at, true) !== 0x02014b50) throw notReadable('its directory is damaged')
    unpacked += view.getUint32(at + 24, true)
    at += 46 + view.getUint16(at + 28, true) + view.getUint16(at + 30, true) + view.getUint16(at + 32, true)
  }
  if (unpacked > workbookLimits.unpackedBytes) throw tooLarge('The workbook unpacks to more than 128 MB')
}

function tooLarge(message: string): InputError {
  return new InputError(message, [{ path: 'bytes', code: 'too-large', message: `${message}; save the sheet that is needed as CSV.` }], 413)
}

function notReadable(why: string): InputError {
  return new InputError('The workbook cannot be read', [{ path: 'bytes', code: 'not-a-workbook', message: `This is not an XLSX workbook that can be read: ${why}.` }])
}
