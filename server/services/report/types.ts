import type { SeriesFacts } from '#shared/series/facts'
import type { Outline, RegionKind } from '#shared/types/domain'
import type { Comparison, RunResult } from '#shared/types/run'

/** Where a region's figures come from. */
export interface ReportSource {
  key: string
  name: string
  kind: RegionKind
  agency: string
  outlineSha256: string
  seriesVersion: number
  seriesSha256: string
  source: string
  /** Fields of the series version, where some were given. */
  facts?: SeriesFacts
  geometry: Outline
  /** Where its water goes, where not all of it counts and reaches the sea; `restTo` is the key of another source. */
  fractionToOcean?: number
  restTo?: string | null
  groundedFraction?: number
}

/** Everything that a report is made of; the same data make the same bytes. */
export interface ReportData {
  result: RunResult
  comparison: Comparison | null
  scenarioName: string
  workspaceName: string
  runNumber: number
  /** SHA-256 of the result. */
  runHash: string
  inputSha256: string
  preparedBy: string
  /** ISO instant. */
  preparedAt: string
  sources: ReportSource[]
  /** The observed series of the comparison. */
  observed?: { name: string, source: string, originalSha256: string } | null
  /** Demo: marked on every page. */
  invented: boolean
  /** Of a published edition: what it is called and where it is read; a withdrawal is marked on every page. ISO instants. */
  edition?: { title: string, slug: string, n: number, licence: string, createdAt: string, withdrawn: { reason: string, at: string } | null } | null
}

/** Font files of a report, absolute paths of TrueType files. */
export interface ReportFonts { normal: string, bold: string, italics: string }

/** A piece of a page as the PDF writer takes it. */
export type Block = { [key: string]: unknown }
