import { expect, it } from 'vitest'
import { assembleAttribution } from '../../../shared/attribution/assemble.ts'
import { attributionBudget } from '../../../shared/attribution/budget.ts'
import { closingResidual } from '../../../shared/attribution/residual.ts'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { computeRun } from '../../../shared/earth/time/run.ts'
import { box, everyMonth, region, runInput } from '../time/runFixtures.ts'

const mjd = everyMonth(61)
const input = runInput([
  region('a', box(70, 25, 80, 32), -80, { fractionToOcean: 0.4, restTo: 'b', series: { mjd, massGt: mjd.map(t => -80 * (t - 53000) / 365.25), sigmaGt: mjd.map(() => 5), sharedRates: [{ source: 'head', sigmaGtPerYear: 6 }] } }),
  region('b', box(20, -10, 30, 0), 10)
])
const run = computeRun(input, loadEarthModel())

it('what is kept on land belongs to its region, so that signatures and budget add up to the run’s own sum', () => {
  expect(run.regions).toHaveLength(3)
  const lodMs = run.epochsMjd.map((_, j) => j / 1000)
  const { groups, blocks } = assembleAttribution(input, run, { mjd: run.epochsMjd, lodMs })
  expect(groups.map(({ key }) => key)).toEqual(['a', 'b'])
  const byEpoch = new Map(run.epochsMjd.map((t, j) => [t, run.total.series.lodMicroseconds[j]!]))
  blocks[0]!.mjd.forEach((t, k) => expect(groups[0]!.signatures[0]![k]! + groups[1]!.signatures[0]![k]!).toBeCloseTo(byEpoch.get(t)!, 9))

  const observed = { lod: { value: 1, sigma: 1 }, chi1: { value: 1, sigma: 0.1 }, chi2: { value: 1, sigma: 0.1 } }
  const budget = attributionBudget(input, run, observed)
  expect(budget.rows.map(({ key }) => key)).toEqual(['a', 'b'])
  for (const field of ['lodMicrosecondsPerYear', 'chi1MasPerYear', 'chi2MasPerYear'] as const) {
    expect(budget.model[field]!.value).toBeCloseTo(run.total[field]!.value, 9)
    expect(budget.model[field]!.sigma).toBeCloseTo(run.total[field]!.sigma, 9)
  }
  expect(closingResidual(input, run, observed).regions).toHaveLength(2)
})
