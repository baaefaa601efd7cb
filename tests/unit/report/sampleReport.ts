import { sampleComparison, sampleOutlines, sampleRun, sixRegions } from '../figures/sampleRun'
import type { SampleRegion } from '../figures/sampleRun'
import type { ReportData } from '../../../server/services/report/types'

const hex = (seed: string) => Array.from({ length: 64 }, (_, i) => ((seed.charCodeAt(i % seed.length) * (i + 7)) % 16).toString(16)).join('')

/** An invented report in full. */
export function sampleReport(regions: SampleRegion[] = sixRegions, compared = true): ReportData {
  const result = sampleRun(regions)
  const outlines = sampleOutlines(regions)
  return {
    result,
    comparison: compared ? sampleComparison(result) : null,
    scenarioName: 'All regions, 2004–2023',
    workspaceName: 'Halcyon Compact',
    runNumber: 14,
    runHash: hex('result'),
    inputSha256: hex('input'),
    preparedBy: 'M. Arden',
    preparedAt: '2026-03-16T14:05:00Z',
    sources: regions.map((region, i) => ({
      key: `r${i + 1}`,
      name: region.name,
      kind: i < 3 ? 'ice-sector' : 'basin',
      agency: i < 3 ? 'Halcyon Ice Survey' : 'Halcyon Water Office',
      outlineSha256: hex(`outline ${i}`),
      seriesVersion: 2,
      seriesSha256: hex(`series ${i}`),
      source: 'Invented for the demonstration, monthly mass relative to the mean',
      geometry: outlines[i]!.geometry,
    })),
    observed: compared ? { name: 'Synthetic rotation', source: 'Synthetic, made from seed 7', originalSha256: hex('observed') } : null,
    invented: true,
  }
}
