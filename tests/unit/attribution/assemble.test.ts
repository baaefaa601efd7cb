import { beforeAll, describe, expect, it } from 'vitest'
import { assembleAttribution, rateOf } from '../../../shared/attribution/assemble.ts'
import { estimateScaling } from '../../../shared/attribution/scaling.ts'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { computeRun } from '../../../shared/earth/time/run.ts'
import { InputError } from '../../../shared/types/issue.ts'
import type { BackgroundRow, RunInput, RunResult } from '../../../shared/types/run.ts'
import { box, everyMonth, normals, region, runInput } from '../time/runFixtures.ts'

const mjd = everyMonth(121)
const gia: BackgroundRow = { key: 'gia', name: 'Rebound', source: 'gia', core: 'decoupled', lodMsPerCentury: { value: -0.8, sigma: 0.1 }, chi1MasPerYear: { value: 0.5, sigma: 0.1 }, chi2MasPerYear: null }
const rest: BackgroundRow = { ...gia, key: 'rest', name: 'Rest', source: 'guess', lodMsPerCentury: { value: 0.1, sigma: 0.2 }, chi1MasPerYear: null }
let input: RunInput
let run: RunResult
const masses = (rate: number, wave: number) => mjd.map(t => rate * (t - 53000) / 365.25 + 60 * Math.sin(2 * Math.PI * t / wave))
beforeAll(() => {
  const series = (rate: number, wave: number, source: string) => ({ series: { mjd, massGt: masses(rate, wave), sigmaGt: mjd.map(() => 2), sharedRates: [{ source, sigmaGtPerYear: 10 }] } })
  input = runInput([region('a', box(-50, 65, -40, 75), 0, series(-200, 1500, 'gia')), region('b', box(70, 25, 80, 32), 0, series(-50, 900, 'scale')), region('c', box(-60, -10, -50, 0), 0, { scale: 0 })], { background: [gia], restOfWorld: rest })
  run = computeRun(input, loadEarthModel())
})
/** What the run predicts with factors 1.2 and 0.8, plus background and a little noise. */
const observed = () => {
  const normal = normals(2)
  const sum = (pick: 'lodMicroseconds' | 'chi1Mas' | 'chi2Mas', rate: number) => run.epochsMjd.map((t, j) => 1.2 * run.regions[0]!.perGt[pick] * run.regions[0]!.massGt[j]! + 0.8 * run.regions[1]!.perGt[pick] * run.regions[1]!.massGt[j]! + rate * (t - 53000) / 365.25 + 0.02 * normal())
  return { mjd: run.epochsMjd, lodMs: sum('lodMicroseconds', -7).map(v => v / 1000), chi1Mas: sum('chi1Mas', 0.5), chi2Mas: sum('chi2Mas', 0) }
}

describe('a run beside observed rotation', () => {
  it('becomes blocks in µs and mas with background and rest of the world taken off', () => {
    const data = assembleAttribution(input, run, observed())
    expect(data.blocks.map(b => b.quantity)).toEqual(['lod', 'chi1', 'chi2'])
    expect(data.groups.map(g => g.key)).toEqual(['a', 'b'])
    const { factors } = estimateScaling(data, { band: 'interannual' })
    expect(factors[0]!.posterior.value).toBeCloseTo(1.2, 1)
    expect(factors[1]!.posterior.value).toBeCloseTo(0.8, 1)
    expect(rateOf(gia, 'lod')).toEqual({ value: -8, sigma: 1 })
  })

  it('keeps one source for regions and background that name it alike', () => {
    const { sources, blocks } = assembleAttribution(input, run, observed())
    expect(sources.map(s => s.source)).toEqual(['gia', 'scale', 'Rest, lod'])
    // 10 Gt per year of region a and 1 µs per year of the background, together.
    const years = (blocks[0]!.mjd.at(-1)! - blocks[0]!.mjd[0]!) / 2 / 365.25
    expect(sources[0]!.loadings[0]!.at(-1)!).toBeCloseTo((10 * run.regions[0]!.perGt.lodMicroseconds + 1) * years, 6)
  })

  it('takes regions together, keeps to a span, and leaves out what is not observed', () => {
    const groups = [{ key: 'ice and water', name: 'Both', regions: ['a', 'b'] }]
    const data = assembleAttribution(input, run, { ...observed(), chi1Mas: null }, { groups, span: { fromMjd: run.epochsMjd[12]!, toMjd: run.epochsMjd[59]! } })
    expect([data.groups.length, data.blocks.length, data.blocks[0]!.mjd.length]).toEqual([1, 2, 48])
    const apart = assembleAttribution(input, run, observed())
    expect(data.groups[0]!.signatures[0]![5]).toBeCloseTo(apart.groups[0]!.signatures[0]![17]! + apart.groups[1]!.signatures[0]![17]!, 9)
  })

  it('refuses unknown regions, regions in two groups, and too few months', () => {
    const codes = (fn: () => unknown): string[] => {
      try {
        fn()
      } catch (error) {
        if (error instanceof InputError) return error.issues.map(i => i.code)
        throw error
      }
      return []
    }
    expect(codes(() => assembleAttribution(input, run, observed(), { groups: [{ key: 'x', name: 'X', regions: ['c'] }] }))).toEqual(['unknown-region'])
    expect(codes(() => assembleAttribution(input, run, observed(), { groups: [{ key: 'x', name: 'X', regions: ['a'] }, { key: 'y', name: 'Y', regions: ['a'] }] }))).toEqual(['twice'])
    expect(codes(() => assembleAttribution(input, run, observed(), { span: { fromMjd: mjd[0]!, toMjd: mjd[10]! } }))).toEqual(['too-few-months'])
  })
})
