import { beforeAll, describe, expect, it } from 'vitest'
import { attributionBudget } from '../../../shared/attribution/budget.ts'
import type { AttributionBudget, ObservedRates } from '../../../shared/attribution/budget.ts'
import { closingResidual } from '../../../shared/attribution/residual.ts'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { computeRun } from '../../../shared/earth/time/run.ts'
import type { BackgroundRow, RunInput, RunResult } from '../../../shared/types/run.ts'
import { box, everyMonth, normals, region, runInput } from '../time/runFixtures.ts'

const mjd = everyMonth(121)
const gia: BackgroundRow = { key: 'gia', name: 'Rebound', source: 'gia', core: 'decoupled', lodMsPerCentury: { value: -0.8, sigma: 0.1 }, chi1MasPerYear: { value: 0.5, sigma: 0.1 }, chi2MasPerYear: { value: -2.5, sigma: 0.2 } }
const rest: BackgroundRow = { ...gia, key: 'rest', name: 'Rest of the world', source: 'guess', lodMsPerCentury: { value: 0, sigma: 0.3 }, chi1MasPerYear: { value: 0, sigma: 0.3 }, chi2MasPerYear: { value: 0, sigma: 0.3 } }
const observed: ObservedRates = { lod: { value: 15, sigma: 8 }, chi1: { value: 3.4, sigma: 0.2 }, chi2: { value: -3.2, sigma: 0.2 } }
let input: RunInput
let run: RunResult
let budget: AttributionBudget
beforeAll(() => {
  const normal = normals(9)
  const series = (rate: number, source: string, sigmaRate: number) => ({
    series: { mjd, massGt: mjd.map(t => rate * (t - 53000) / 365.25 + 4 * normal()), sigmaGt: mjd.map(() => 4), sharedRates: [{ source, sigmaGtPerYear: sigmaRate }] }
  })
  input = runInput([
    region('g', box(-50, 65, -40, 75), 0, series(-250, 'gia', 8)), region('w', box(-110, -78, -100, -74), 0, series(-120, 'gia', 12)), region('i', box(72, 26, 82, 31), 0, series(-40, 'grid', 4)),
    region('off', box(0, 0, 5, 5), 0, { scale: 0 })
  ], { background: [gia], restOfWorld: rest })
  run = computeRun(input, loadEarthModel())
  budget = attributionBudget(input, run, observed)
})

describe('the budget of an attribution', () => {
  it('adds up: model and residual are the observed, in value and along and across its drift', () => {
    for (const field of ['lodMicrosecondsPerYear', 'chi1MasPerYear', 'chi2MasPerYear'] as const) {
      expect(budget.rows.reduce((sum, row) => sum + row[field]!.value, 0)).toBeCloseTo(budget.model[field]!.value, 9)
      expect(budget.model[field]!.value + budget.residual[field]!.value).toBeCloseTo(budget.observed[field]!.value, 9)
    }
    const shares = [...budget.rows, budget.residual].map(row => row.ofObservedDrift!)
    expect(shares.reduce((sum, s) => sum + s.shareAlong.value, 0)).toBeCloseTo(1, 9)
    expect(shares.reduce((sum, s) => sum + s.shareAcross.value, 0)).toBeCloseTo(0, 9)
    expect(budget.rows.reduce((sum, row) => sum + row.shareOfModel.pole!, 0)).toBeCloseTo(1, 9)
    expect(budget.rows.reduce((sum, row) => sum + row.shareOfModel.lod!, 0)).toBeCloseTo(1, 9)
    expect(budget.rows.map(row => row.key)).toEqual(['g', 'w', 'i', 'gia', 'rest'])
  })

  it('has the errors of the run for each region, and no share of the observed length of day anywhere', () => {
    for (const key of ['g', 'w', 'i']) {
      const row = budget.rows.find(r => r.key === key)!
      const own = run.regions.find(r => r.key === key)!
      expect(row.lodMicrosecondsPerYear!.sigma).toBeCloseTo(own.lodMicrosecondsPerYear!.sigma, 9)
      expect(row.driftCovariance!.c12).toBeCloseTo(own.driftCovariance!.c12, 12)
    }
    expect(JSON.stringify(budget)).not.toMatch(/shareOfObserved|lodShare/)
    expect(budget.sentences.join(' ')).toContain('No share of the observed trend is given')
  })

  it('correlates rows that share a source, regions and background alike, with the signs of their responses', () => {
    const [g, w, i, b] = [0, 1, 2, 3]
    expect(budget.correlation.lod[g!]![g!]).toBeCloseTo(1, 12)
    // Both regions lengthen the day when they lose mass; a rebound that is stronger raises both.
    expect(budget.correlation.lod[g!]![w!]!).toBeGreaterThan(0.5)
    expect(Math.abs(budget.correlation.lod[g!]![b!]!)).toBeGreaterThan(0.5)
    expect(budget.correlation.lod[g!]![i!]!).toBe(0)
    // The error of the sum is that of all pairs, not the root of the summed squares.
    const sigma = budget.rows.map(row => row.lodMicrosecondsPerYear!.sigma)
    const pairs = sigma.reduce((sum, si, k) => sum + sigma.reduce((inner, sj, m) => inner + budget.correlation.lod[k]![m]! * si * sj, 0), 0)
    expect(budget.model.lodMicrosecondsPerYear!.sigma).toBeCloseTo(Math.sqrt(pairs), 9)
    expect(Math.abs(pairs / sigma.reduce((sum, si) => sum + si * si, 0) - 1)).toBeGreaterThan(0.05)
  })

  it('puts a drift that turns by a right angle across and not along', () => {
    const turned = attributionBudget(input, run, { chi1: { value: -budget.rows[0]!.chi2MasPerYear!.value, sigma: 0.01 }, chi2: { value: budget.rows[0]!.chi1MasPerYear!.value, sigma: 0.01 } })
    const share = turned.rows[0]!.ofObservedDrift!
    expect(share.along.value).toBeCloseTo(0, 9)
    // The row's drift lies a quarter turn to the west of the observed one: negative.
    expect(share.shareAcross.value).toBeCloseTo(-1, 9)
  })

  it('has errors of shares as simulation gives them', () => {
    const { chi1, chi2, driftCovariance: c, ofObservedDrift } = { ...budget.rows[0]!, chi1: budget.rows[0]!.chi1MasPerYear!, chi2: budget.rows[0]!.chi2MasPerYear! }
    const normal = normals(4)
    const draws = Array.from({ length: 4000 }, () => {
      const [a, b] = [normal(), normal()]
      const v1 = chi1.value + Math.sqrt(c!.c11) * a
      const v2 = chi2.value + c!.c12 / Math.sqrt(c!.c11) * a + Math.sqrt(Math.max(0, c!.c22 - c!.c12 ** 2 / c!.c11)) * b
      const [u1, u2] = [3.4 + 0.2 * normal(), -3.2 + 0.2 * normal()]
      return { s: (v1 * u1 + v2 * u2) / (u1 * u1 + u2 * u2), w: (u1 * v2 - u2 * v1) / (u1 * u1 + u2 * u2) }
    })
    const spread = (pick: (d: { s: number, w: number }) => number): number => {
      const mean = draws.reduce((sum, d) => sum + pick(d), 0) / draws.length
      return Math.sqrt(draws.reduce((sum, d) => sum + (pick(d) - mean) ** 2, 0) / draws.length)
    }
    expect(Math.abs(ofObservedDrift!.shareAlong.sigma / spread(d => d.s) - 1)).toBeLessThan(0.06)
    expect(Math.abs(ofObservedDrift!.shareAcross.sigma / spread(d => d.w) - 1)).toBeLessThan(0.06)
  })

  it('draws the drifts head to tail up to the model', () => {
    expect(budget.driftChain.map(link => link.key)).toEqual(['g', 'w', 'i', 'gia', 'rest'])
    budget.driftChain.slice(1).forEach((link, i) => expect(link.from).toEqual(budget.driftChain[i]!.to))
    const last = budget.driftChain.at(-1)!
    expect(last.to[0]).toBeCloseTo(budget.model.chi1MasPerYear!.value, 9)
    expect(last.covariance.c12).toBeCloseTo(budget.model.driftCovariance!.c12, 12)
  })

  it('quotes closure with both rows, and gives no share of a drift within its error', () => {
    expect(budget.closure).toMatchObject({ quoted: true, degreesOfFreedom: 3 })
    expect(attributionBudget({ ...input, restOfWorld: null }, run, observed).closure).toMatchObject({ quoted: false })
    const lost = attributionBudget(input, run, { ...observed, chi1: { value: 0.1, sigma: 0.2 }, chi2: { value: 0, sigma: 0.2 } })
    expect(lost.rows[0]!.ofObservedDrift).toBeNull()
    expect(lost.sentences.join(' ')).toContain('no share of it is given')
    expect(attributionBudget(input, run, {}).closure).toMatchObject({ quoted: false })
  })
})

describe('what would close the residual', () => {
  /** Observed drift that leaves a residual of `mass` Gt per year of region `key`, and something across its line. */
  const leaving = (key: string, mass: number, across = 0): ObservedRates => {
    const { perGt } = run.regions.find(r => r.key === key)!
    const size = Math.hypot(perGt.chi1Mas, perGt.chi2Mas)
    return {
      lod: { value: budget.model.lodMicrosecondsPerYear!.value + mass * perGt.lodMicroseconds, sigma: 1 },
      chi1: { value: budget.model.chi1MasPerYear!.value + mass * perGt.chi1Mas - across * perGt.chi2Mas / size, sigma: 0.02 },
      chi2: { value: budget.model.chi2MasPerYear!.value + mass * perGt.chi2Mas + across * perGt.chi1Mas / size, sigma: 0.02 }
    }
  }
  const precise = (): RunInput => ({ ...input, background: [], restOfWorld: null, regions: input.regions.map(r => ({ ...r, series: { ...r.series, sharedRates: [] } })) })

  it('finds the mass of the region that is short, and only the component that it can close', () => {
    const exact = computeRun(precise(), loadEarthModel())
    const model = attributionBudget(precise(), exact, {}).model
    const { perGt } = exact.regions[0]!
    const size = Math.hypot(perGt.chi1Mas, perGt.chi2Mas)
    const seen: ObservedRates = {
      chi1: { value: model.chi1MasPerYear!.value - 60 * perGt.chi1Mas - 0.8 * perGt.chi2Mas / size, sigma: 0.02 },
      chi2: { value: model.chi2MasPerYear!.value - 60 * perGt.chi2Mas + 0.8 * perGt.chi1Mas / size, sigma: 0.02 }
    }
    const [g] = closingResidual(precise(), exact, seen).regions
    // The other regions' errors are small and nearly even here: the weighted estimate is the projection to a few per cent.
    expect(Math.abs(g!.extraGtPerYear.value / -60 - 1)).toBeLessThan(0.05)
    expect(g!.closes.length / (60 * size)).toBeCloseTo(1, 1)
    expect(g!.remains.length).toBeCloseTo(0.8, 1)
    expect(g!.offLineDeg).toBeCloseTo(Math.atan2(0.8, 60 * size) * 180 / Math.PI, 6)
    expect(g!.verdict).toBe('not-plausible')
    expect(g!.sentence).toContain('would have to lose')
    expect(g!.sentence).toContain('do not leave room')
  })

  it('leaves nothing where the region explains all of it, and shows the day beside, without a share', () => {
    const [g] = closingResidual(input, run, leaving('g', -60)).regions
    expect(g!.extraGtPerYear.value).toBeCloseTo(-60, 6)
    expect(g!.remains.length).toBeLessThan(1e-9)
    expect(g!.lodMicrosecondsPerYear).toBeCloseTo(-60 * run.regions[0]!.perGt.lodMicroseconds, 6)
    expect(g!.residualLodMicrosecondsPerYear!.value).toBeCloseTo(g!.lodMicrosecondsPerYear, 6)
    expect(Object.keys(g!).filter(key => /share/i.test(key))).toEqual([])
  })

  it('holds the mass against the region’s own data', () => {
    const { massGtPerYear } = run.regions[0]!
    const verdict = (mass: number) => closingResidual(precise(), run, (() => {
      const model = attributionBudget(precise(), run, {}).model
      const { perGt } = run.regions[0]!
      return { chi1: { value: model.chi1MasPerYear!.value + mass * perGt.chi1Mas, sigma: 0.001 }, chi2: { value: model.chi2MasPerYear!.value + mass * perGt.chi2Mas, sigma: 0.001 } }
    })()).regions[0]!
    expect(verdict(1.5 * massGtPerYear!.sigma).verdict).toBe('plausible')
    expect(verdict(1.5 * massGtPerYear!.sigma).sigmasFromData).toBeCloseTo(1.5, 6)
    expect(verdict(4 * massGtPerYear!.sigma).verdict).toBe('not-plausible')
    expect(verdict(0).verdict).toBe('none')
    expect(verdict(0).sentence).toContain('nothing along its line')
  })

  it('closes no length of day', () => {
    const { regions, reason } = closingResidual(input, run, { lod: observed.lod })
    expect(regions).toEqual([])
    expect(reason).toContain('core')
    expect(closingResidual(input, run, {}).reason).toBe('Nothing is observed that a region could close.')
  })
})
