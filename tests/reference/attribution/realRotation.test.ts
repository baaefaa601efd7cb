import { readFileSync } from 'node:fs'
import { gunzipSync } from 'node:zlib'
import { beforeAll, describe, expect, it } from 'vitest'
import { attributionBudget } from '../../../shared/attribution/budget.ts'
import { assembleAttribution } from '../../../shared/attribution/assemble.ts'
import { forwardPole } from '../../../shared/attribution/forward.ts'
import { identifiability } from '../../../shared/attribution/identifiability.ts'
import { observedMonths, observedTrends } from '../../../shared/attribution/observedMonths.ts'
import { closingResidual } from '../../../shared/attribution/residual.ts'
import { estimateScaling } from '../../../shared/attribution/scaling.ts'
import { seriesSignatures } from '../../../shared/attribution/signatures.ts'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { calendarMonth } from '../../../shared/earth/time/epochs.ts'
import { computeRun } from '../../../shared/earth/time/run.ts'
import { runChain } from '../../../shared/observed/chain.ts'
import type { Chain, ChainResult } from '../../../shared/observed/chainTypes.ts'
import { parseObserved } from '../../../shared/observed/parse.ts'
import type { ParsedObserved } from '../../../shared/observed/parse.ts'
import type { RunInput, RunResult } from '../../../shared/types/run.ts'
import { box, normals, region, runInput } from '../../unit/time/runFixtures.ts'

// The real EOP 14 C04 series (fixtures/README.md names the source) beside invented masses of published size: Greenland −169 Gt per year
// and the rest of 1992–2020 after Otosaka et al. (2023), placed in boxes.
let c04: ParsedObserved
let input: RunInput
let run: RunResult
let reduced: ChainResult
const chain = (set: 'all' | 'under-35-days'): Chain => ({
  schemaVersion: 1, from: '1994-01-01', to: '2020-12-31', includePredictions: false,
  steps: [{ kind: 'zonal-tides', on: true, set }, { kind: 'excitation', on: true, periodDays: 433, q: 179 }, { kind: 'monthly', on: true }]
})
beforeAll(() => {
  c04 = parseObserved(gunzipSync(readFileSync(new URL('../../fixtures/eop14c04_1962_2022.txt.gz', import.meta.url))).toString('latin1'))
  const mjd = Array.from({ length: 288 }, (_, i) => calendarMonth(1995 + Math.floor(i / 12), 1 + i % 12).middleMjd)
  const normal = normals(1)
  const series = (rate: number, seasonGt: number) => ({
    series: { mjd, massGt: mjd.map(t => rate * (t - 53000) / 365.25 + seasonGt * Math.cos(2 * Math.PI * (t - 53050) / 365.25) + 15 * normal()), sigmaGt: mjd.map(() => 15), sharedRates: [{ source: 'rebound', sigmaGtPerYear: 15 }] }
  })
  input = runInput([region('g', box(-50, 62, -30, 82), 0, series(-169, 100)), region('w', box(-130, -80, -80, -72), 0, series(-82, 0)), region('s', box(70, 15, 95, 31), 0, series(-40, 150))])
  run = computeRun(input, loadEarthModel())
  reduced = runChain(c04, chain('all'))
})

describe('real rotation through the chain and the attribution', () => {
  it('takes UT1 through the tides too: the 18.6-year term alone is 162 ms either way', () => {
    const tides = reduced.steps[0]!.panels.find(panel => panel.quantity === 'ut1')!
    const removed = [...tides.removed!.value]
    // Table 8.1, last term: 1617.2681e-4 s; the semiannual and annual terms add up to 7 ms.
    expect(Math.max(...removed)).toBeGreaterThan(155)
    expect(Math.max(...removed)).toBeLessThan(172)
    expect(tides.after.value[100]).toBe(tides.before.value[100]! - removed[100]!)
  })

  it('gives months on the run’s epochs and trends with the error that their noise asks for', () => {
    const months = observedMonths(reduced, run.epochsMjd)
    expect(months.leftOut).toEqual([])
    expect(months.lodMs!.filter(v => v !== null)).toHaveLength(288)
    const { rates, noise } = observedTrends(months)
    // Tens of µs a year over these decades (2.33 ms in 1962–72, 0.63 ms in 2013–22); the residuals are far from white.
    expect(Math.abs(rates.lod!.value)).toBeLessThan(80)
    expect(noise.lod!.quote).not.toBe('white')
    expect(rates.lod!.sigma).toBeGreaterThan(3 * noise.lod!.models[0]!.sigma * 1000)
    // After the 1990s the pole drifted by some 3 mas a year eastwards of 64° W (Deng et al. 2021: 3.28 mas per year towards 26° E).
    const drift = Math.hypot(rates.chi1!.value, rates.chi2!.value)
    expect(drift).toBeGreaterThan(1)
    expect(drift).toBeLessThan(6)
  })

  it('leaves the day out where only short tides are removed, unless trends do not matter', () => {
    const short = runChain(c04, chain('under-35-days'))
    const months = observedMonths(short, run.epochsMjd)
    expect([months.lodMs, months.leftOut.map(l => l.quantity)]).toEqual([null, ['lod']])
    expect(observedTrends(months).rates.lod).toBeNull()
    expect(observedMonths(short, run.epochsMjd, 'out').lodMs).not.toBeNull()
  })

  it('makes the same months from days', () => {
    const days = runChain(c04, { ...chain('all'), steps: chain('all').steps.slice(0, 2) })
    observedMonths(days, run.epochsMjd).chi2Mas!.forEach((v, j) => expect(v).toBeCloseTo(observedMonths(reduced, run.epochsMjd).chi2Mas![j]!, 9))
  })

  it('goes through budget, closing masses, scaling and identifiability with figures that can be', () => {
    const months = observedMonths(reduced, run.epochsMjd)
    const { rates } = observedTrends(months)
    const budget = attributionBudget(input, run, rates)
    expect(budget.closure).toMatchObject({ quoted: false })
    expect(closingResidual(input, run, rates).regions).toHaveLength(3)
    const data = assembleAttribution(input, run, months)
    const scaling = estimateScaling(data, { band: 'interannual' })
    scaling.factors.forEach((f) => {
      expect(Number.isFinite(f.posterior.value) && f.posterior.sigma > 0 && f.posterior.sigma <= 0.5 + 1e-9).toBe(true)
    })
    // Decadal length of day is strongly correlated from month to month.
    expect(scaling.noise.lod!.phi).toBeGreaterThan(0.8)
    expect(identifiability(seriesSignatures(data)).groups).toHaveLength(3)
  })

  it('fits a wobble to the real pole that keeps within the real one', () => {
    const { stretches: [stretch] } = forwardPole({ mjd: run.epochsMjd, chi1Mas: run.total.series.chi1Mas, chi2Mas: run.total.series.chi2Mas }, c04)
    // The Chandler wobble has some 100 to 250 mas; the regions drive a drift and leave the wobble's changes unexplained.
    expect(stretch!.freeWobbleMas).toBeGreaterThan(20)
    expect(stretch!.freeWobbleMas).toBeLessThan(300)
    expect(stretch!.rmsMas).toBeLessThan(200)
    expect(stretch!.observedXMas.filter(v => !Number.isNaN(v)).length).toBe(stretch!.mjd.length)
  })
})
