/** What a run can be taken away as, with what each file is good for. */
export const runFiles = [
  { file: 'report.pdf', name: 'Report', type: 'PDF', text: 'finding, map, budget, charts, method and cautions' },
  { file: 'budget.csv', name: 'Budget', type: 'CSV', text: 'every row of the table with both sigmas in full digits' },
  { file: 'series.csv', name: 'Monthly series', type: 'CSV', text: 'ΔLOD, χ₁, χ₂ and each region’s mass by month' },
  { file: 'regions.geojson', name: 'Outlines', type: 'GeoJSON', text: 'the regions as they were run, with their rates' },
  { file: 'map.svg', name: 'Map', type: 'SVG', text: 'the regions on an equal-area map with polar insets, to be set in print' },
  { file: 'map.png', name: 'Map', type: 'PNG', text: 'the same as a picture of 1200 × 630 px, for messages and slides' },
  { file: 'run.json', name: 'Run', type: 'JSON', text: 'inputs, settings, result and hashes: enough to compute it again' },
] as const

/** Address of a file of a run, with the observed series that it is held against and the chain that reduces it. */
export function runFilePath(runId: string, file: string, observedId: string | null, chain: string | null = null): string {
  const query = observedId ? `?observed=${encodeURIComponent(observedId)}${chain ? `&chain=${encodeURIComponent(chain)}` : ''}` : ''
  return `/api/v1/runs/${encodeURIComponent(runId)}/files/${file}${query}`
}

export function editionFilePath(slug: string, n: number, file: string): string {
  return `/api/v1/editions/${encodeURIComponent(slug)}/${n}/${file}`
}
