import { loadEarthModel } from '../../shared/earth/earthModel.ts'
import { computeRun } from '../../shared/earth/time/run.ts'
import { fitTrend } from '../../shared/earth/time/trend.ts'
import { trendNoise } from '../../shared/earth/time/trendNoise.ts'
import { region, runInput } from '../unit/time/runFixtures.ts'
import { fastest, type Figure } from './measure.ts'
import { wavyOutline } from './outlines.ts'

/** Runs and fits. */
export function run(): Figure[] {
  const model = loadEarthModel()
  const mjd = Array.from({ length: 300 }, (_, i) => 50000 + i * 30.4375)
  const regions = Array.from({ length: 200 }, (_, i) => region(`r${i}`, wavyOutline(200, -170 + 17 * (i % 20), -60 + 12 * Math.floor(i / 20), 2), 0, {
    series: { mjd, massGt: mjd.map((t, k) => -t / 100 + Math.sin(k * (i + 1))), sigmaGt: mjd.map(() => 2), sharedRates: [{ source: `gia ${i % 5}`, sigmaGtPerYear: 1 }] }
  }))
  const input = runInput(regions)
  const epochs = Array.from({ length: 600 }, (_, i) => 40000 + i * 30.4375)
  const values = epochs.map((t, i) => t / 50 + Math.sin(i))
  return [
    { name: 'run of 200 regions × 300 months, outlines of 200 vertices', value: fastest(() => computeRun(input, model)), unit: 'ms', note: 'limit 300 ms' },
    { name: 'trend with seasons of 600 epochs', value: fastest(() => fitTrend({ mjd: epochs, value: values })), unit: 'ms', note: 'limit 5 ms' },
    { name: 'trend of 600 epochs under white, AR(1) and power-law noise', value: fastest(() => trendNoise({ mjd: epochs, value: values }), 3), unit: 'ms' }
  ]
}
