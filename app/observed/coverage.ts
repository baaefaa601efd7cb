import type { SeriesData } from '#shared/figures/series/data'

/** Distance between epochs beyond which a line is broken. Missing values break it too; points of a thinned series are unevenly apart. */
export function longestStep(mjd: readonly number[]): number {
  const steps = mjd.slice(1).map((t, i) => t - mjd[i]!).sort((a, b) => a - b)
  return Math.max(3, 3.5 * (steps[Math.floor(0.75 * steps.length)] ?? 1))
}

/** Stretches of time that hold values, MJD. */
export function coveredSpans({ mjd, value }: { mjd: readonly number[], value: readonly (number | null)[] }): [number, number][] {
  const limit = longestStep(mjd)
  const spans: [number, number][] = []
  mjd.forEach((t, i) => {
    if (value[i] === null || value[i] === undefined) return
    const last = spans.at(-1)
    if (last && t - last[1] <= limit) last[1] = t
    else spans.push([t, t])
  })
  return spans
}

/** Panels over one time axis with one strip for each quantity below them all, or a single one where all cover the same. */
export function withSharedCoverage(panels: SeriesData[]): SeriesData[] {
  const rows = panels.flatMap(panel => (panel.coverage ?? []).map(row => ({ ...row, label: panel.unit.split(',')[0]! })))
  const same = new Set(rows.map(row => JSON.stringify(row.spans))).size < 2
  const coverage = same ? rows.slice(0, 1).map(row => ({ ...row, label: 'values' })) : rows
  return panels.map((panel, i) => ({ ...panel, coverage: i === 0 ? coverage : undefined }))
}
