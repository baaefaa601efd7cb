import { InputError } from '../types/issue.ts'
import type { ObservedSeries } from '../types/run.ts'
import { c04LayoutOf, parseC04 } from './c04.ts'
import type { ParsedObserved } from './columns.ts'
import { isFinalsLine, parseFinals2000a } from './finals2000a.ts'
import { parseObservedCsv } from './observedCsv.ts'
import type { ObservedCsvOptions } from './observedCsv.ts'

export type { ParsedObserved } from './columns.ts'
export type ObservedFormat = ObservedSeries['format']

export interface ObservedOptions {
  /** Reads the text in this format; absent: recognised by content. */
  format?: ObservedFormat
  csv?: ObservedCsvOptions
}

/** Guards memory; sixty years of daily C04 are 3.5 MB. */
export const observedLimits = { bytes: 32 * 1024 * 1024 }
/** Lines within which the first data row must appear. */
const HEADER_LINES = 200

/**
 * Format of an observed series by its content, whatever the file is called: the first line that has the date, the MJD and
 * the fields of a C04 or finals2000A row decides; anything else is taken as a table.
 */
export function recogniseObserved(text: string): ObservedFormat {
  let start = 0
  for (let n = 0; n < HEADER_LINES && start < text.length; n++) {
    const end = text.indexOf('\n', start)
    const line = text.slice(start, end < 0 ? text.length : end).replace(/^\uFEFF/, '').replace(/\r$/, '')
    const layout = c04LayoutOf(line)
    if (layout) return layout
    if (isFinalsLine(line)) return 'finals2000a'
    if (end < 0) break
    start = end + 1
  }
  return 'csv'
}

/**
 * Reads an observed series of Earth rotation: IERS EOP 14 C04, EOP 20 C04, finals2000A, or a table (CSV). Pole in mas, excess
 * length of day in ms, epochs in MJD (UTC); NaN where a quantity is missing. Rows that cannot be used are in `issues`.
 *
 * @throws InputError for an empty or oversized text, for a table without epochs or quantities, and when no row can be used
 */
export function parseObserved(text: string, options: ObservedOptions = {}): ParsedObserved {
  if (text.length > observedLimits.bytes) {
    throw new InputError('The file is larger than 32 MB', [{ code: 'too-large', message: 'An observed series may have up to 32 MB.' }], 413)
  }
  const body = text.charCodeAt(0) === 0xFEFF ? text.slice(1) : text
  const format = options.format ?? recogniseObserved(body)
  const parsed = format === 'csv'
    ? parseObservedCsv(body, options.csv)
    : format === 'finals2000a' ? parseFinals2000a(body) : parseC04(body, format)
  if (parsed.mjd.length === 0) {
    throw new InputError('No row of the file could be used', parsed.issues.length > 0
      ? parsed.issues.slice(0, 100)
      : [{ code: 'no-rows', message: `No row was found in the format ${format}.` }])
  }
  return parsed
}
