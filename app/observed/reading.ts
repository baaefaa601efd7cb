import { parseObserved, type ParsedObserved } from '#shared/observed/parse'
import { InputError, type Issue } from '#shared/types/issue'
import type { CsvChoice } from './csvChoice'
import type { ObservedColumns } from './panels'

/** What a text turned out to be: a series with the rows that fell out, or the reasons why it is none. */
export type Reading = { parsed: ParsedObserved, fault: null } | { parsed: null, fault: { text: string, issues: readonly Issue[] } }

/** Reads a text as the server will, before anything is sent. */
export function readObservedText(text: string, csv: CsvChoice | null): Reading {
  try {
    return { parsed: parseObserved(text, csv ? { csv } : {}), fault: null }
  }
  catch (error) {
    if (error instanceof InputError) return { parsed: null, fault: { text: `${error.message}.`.replace(/\.\.$/, '.'), issues: error.issues } }
    throw error
  }
}

/** The columns of a reading as charts take them. */
export function columnsOf(parsed: ParsedObserved): ObservedColumns {
  const plain = (values: Float64Array): (number | null)[] => Array.from(values, v => Number.isFinite(v) ? v : null)
  return {
    mjd: Array.from(parsed.mjd), lodMs: plain(parsed.lodMs), xMas: plain(parsed.xMas), yMas: plain(parsed.yMas),
    sigmaLodMs: [], sigmaXMas: [], sigmaYMas: [], predicted: Array.from(parsed.predicted),
    chi1Mas: parsed.chi1Mas ? plain(parsed.chi1Mas) : null, chi2Mas: parsed.chi2Mas ? plain(parsed.chi2Mas) : null,
  }
}

/** Whether a reading holds anything that a run can be held against. */
export function isUseful(parsed: ParsedObserved): boolean {
  const holds = (values: Float64Array | undefined) => values?.some(v => Number.isFinite(v)) ?? false
  return holds(parsed.lodMs) || (holds(parsed.xMas) && holds(parsed.yMas)) || (holds(parsed.chi1Mas) && holds(parsed.chi2Mas))
}
