import { checkSeries, settleMarks, type MarkDecision } from '#shared/series/checks'
import type { MassSeriesReading } from '#shared/series/readMassSeries'
import type { Context } from './context'
import { seriesOfRegion } from './regions'
import { massSeries, versionsOf } from './seriesStore'

/** Findings that are kept with a version; their count is kept whole. */
const mostKept = 500

/**
 * What checks find in a series that is about to be stored, held against the version before it, with the decisions that were taken.
 * A decision whose finding is gone was a correction; open findings are kept as open.
 */
export function checksOf(context: Context, regionId: string, read: MassSeriesReading, areaM2: number, decisions: readonly MarkDecision[]) {
  const series = seriesOfRegion(context, regionId)
  const last = series ? versionsOf(context, series.id)[0] : undefined
  const others = last ? [{ name: `version ${last.n}`, ...massSeries(context, last.id) }] : []
  const { marks, gone } = settleMarks(checkSeries({ mjd: read.mjd, massGt: read.massGt, sigmaGt: read.sigmaGt, rows: read.lineOf, areaM2, others }), decisions)
  const kept = marks.slice(0, mostKept).map(mark => ({ ...mark, rows: mark.rows.slice(0, 20) }))
  return {
    found: marks.length, open: marks.filter(mark => mark.state === 'open').length, marks: kept,
    corrected: gone.filter(decision => decision.choice === 'corrected').map(({ id, note }) => ({ id, note })),
  }
}
