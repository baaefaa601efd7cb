import { readFileSync } from 'node:fs'
import { describe, expect, it } from 'vitest'
import { DAY_SECONDS, MAS } from '../../../shared/earth/constants.ts'
import { poleFromExcitation } from '../../../shared/earth/time/polarMotion.ts'
import { secularPole } from '../../../shared/earth/time/secularPole.ts'
import { zonalTideLodMs } from '../../../shared/earth/time/zonalTides.ts'
import type { AngularMomentumFields } from '../../../shared/observed/angularMomentumTypes.ts'
import { runChain } from '../../../shared/observed/chain.ts'
import { plainChain, thinned } from '../../../shared/observed/chainPlain.ts'
import type { Chain, ChainStep, FluidCorrection } from '../../../shared/observed/chainTypes.ts'
import { onEpochs } from '../../../shared/observed/fluidCorrection.ts'
import type { GravityFields } from '../../../shared/observed/gravityTypes.ts'
import { parseObserved } from '../../../shared/observed/parse.ts'
import { chainOf, defaultChain, readChain } from '../../../shared/observed/readChain.ts'
import { reduceObserved } from '../../../shared/observed/reduce.ts'
import type { ReduceOptions } from '../../../shared/observed/reduceOptions.ts'
import { InputError } from '../../../shared/types/issue.ts'
import type { ObservedSeries } from '../../../shared/types/run.ts'

const finals = parseObserved(readFileSync(new URL('../../fixtures/finals2000A_excerpt.txt', import.meta.url), 'latin1'))
const year = 365.25
const season = (t: number): number => Math.cos(2 * Math.PI * t / year)

/** Ten years of days: straight lines, tides, and a fluid that is known exactly. */
const fluid = (t: number): number => 0.3 * season(t) + 0.1 * Math.sin(2 * Math.PI * t / 47) + 0.01 * (t - 52000) / year
function world(): ObservedSeries {
  const mjd = Float64Array.from({ length: 3660 }, (_, i) => 52000 + i)
  const tide = zonalTideLodMs(mjd)
  const { xMas, yMas } = poleFromExcitation(mjd, mjd.map(t => 40 + (t - 52000) / year + 20 * fluid(t)), mjd.map(t => -300 - 10 * fluid(t)), { xMas: 100, yMas: 250 })
  const nan = mjd.map(() => Number.NaN)
  return {
    format: 'csv', mjd, xMas, yMas, sigmaXMas: nan, sigmaYMas: nan, sigmaLodMs: nan, predicted: new Uint8Array(mjd.length), emptyRows: 0, rowsRead: mjd.length,
    lodMs: mjd.map((t, i) => 1 + 0.02 * (t - 52000) / year + fluid(t) + tide[i]!)
  }
}

/** The same fluid every six hours, half of it mass and half motion. */
function correction(fields: Partial<AngularMomentumFields> = {}): FluidCorrection {
  const mjd = Float64Array.from({ length: 4 * 3700 }, (_, i) => 51980 + i / 4)
  const half = { chi1: mjd.map(t => 10 * MAS * fluid(t)), chi2: mjd.map(t => -5 * MAS * fluid(t)), chi3: mjd.map(t => 0.5e-3 * fluid(t) / DAY_SECONDS) }
  return {
    name: 'Invented air', source: 'invented',
    fields: { component: 'atmosphere', model: 'Air 1', pairedWith: null, invertedBarometer: 'yes', coefficients: 'gross-2007', subtracted: 'nothing', barystatic: 'no', ...fields },
    series: { mjd, mass: half, motion: half, stepDays: 0.25, rowsRead: mjd.length, emptyRows: 0, issues: [], understood: [], suggestedComponent: null }
  }
}
const sea = (fields: Partial<AngularMomentumFields> = {}): FluidCorrection => ({ ...correction({ component: 'ocean', model: 'Sea 1', pairedWith: 'Air 1', ...fields }), name: 'Invented sea' })
const air: ChainStep = { kind: 'angular-momentum', on: true, correction: 'air', mass: true, motion: true, trend: true }
const tides: ChainStep = { kind: 'zonal-tides', on: true, set: 'all' }
const excitation: ChainStep = { kind: 'excitation', on: true, periodDays: 433, q: 179 }
const chain = (...steps: ChainStep[]): Chain => ({ schemaVersion: 1, from: null, to: null, includePredictions: false, steps })
const codesOf = (fn: () => unknown): string[] => {
  try {
    fn()
  } catch (error) {
    if (error instanceof InputError) return error.issues.map(issue => issue.code)
    throw error
  }
  return []
}

describe('a chain of reductions', () => {
  it('shows what was there, what was taken away and what is left, step by step', () => {
    const result = runChain(world(), chain(tides, excitation, air, { kind: 'seasons', on: true }, { kind: 'monthly', on: true }), { corrections: { air: correction() } })
    for (const { kind, panels } of result.steps) {
      for (const { quantity, before, removed, after } of panels) {
        if (!removed || kind === 'excitation') continue
        before.value.forEach((v, i) => expect(after.value[i]).toBe(v - removed.value[i]!))
        expect(quantity).toMatch(/lod|chi/)
      }
    }
    // Each step begins with what the last one left.
    const lod = result.steps.flatMap(step => step.panels.filter(panel => panel.quantity === 'lod'))
    lod.slice(1).forEach((panel, i) => expect(panel.before).toBe(lod[i]!.after))
    expect(result.after.lod).toBe(lod.at(-1)!.after)
    expect(result.steps.every(step => step.sentence.endsWith('.') && step.source !== '')).toBe(true)
    expect(result.chartNote).toBe('trend left in, seasons removed, zonal tides removed, monthly means')
  })

  it('brings back the world that tides and fluid were added to', () => {
    const result = runChain(world(), chain(tides, excitation, air), { corrections: { air: correction() } })
    const mean = 0.01 * 5
    result.after.lod!.value.forEach((v, i) => {
      if (i > 0 && i < 3659) expect(Math.abs(v - 1 - 0.02 * i / year - mean)).toBeLessThan(2e-3)
    })
    result.after.chi1!.value.forEach((v, i) => {
      if (i > 0 && i < 3658) expect(Math.abs(v - 40 - (i + 0.5) / year - 20 * mean)).toBeLessThan(0.05)
    })
    expect(result.trends.lod!.value).toBeCloseTo(0.02, 4)
  })

  it('leaves the trend of a fluid in unless asked', () => {
    const kept = runChain(world(), chain(tides, excitation, { ...air, trend: false } as ChainStep), { corrections: { air: correction() } })
    // The wave of 47 days has a little trend of its own, which stays in too.
    expect(kept.trends.lod!.value).toBeCloseTo(0.03, 3)
    expect(kept.trends.chi1!.value).toBeCloseTo(1.2, 2)
    expect(kept.notRemoved).toContain('trends of atmosphere and ocean')
    expect(kept.steps[2]!.sentence).toContain('The trend is not subtracted')
  })

  it('multiplies the values of a rigid Earth by the factors of Gross (2007), mass and motion apart', () => {
    const removed = (mass: boolean, motion: boolean, coefficients: 'rigid' | 'gross-2007') => {
      const result = runChain(world(), chain(tides, excitation, { ...air, mass, motion } as ChainStep), { corrections: { air: correction({ coefficients }) } })
      return ['lod', 'chi1'].map(quantity => result.steps[2]!.panels.find(panel => panel.quantity === quantity)!.removed!.value[100]!)
    }
    const [plain, rigidMass, rigidMotion] = [removed(true, false, 'gross-2007'), removed(true, false, 'rigid'), removed(false, true, 'rigid')]
    expect(rigidMass[0]! / plain[0]!).toBeCloseTo(0.74775, 9)
    expect(rigidMass[1]! / plain[1]!).toBeCloseTo(1.608 * 0.684, 9)
    expect(rigidMotion[0]! / plain[0]!).toBeCloseTo(0.997, 9)
    expect(rigidMotion[1]! / plain[1]!).toBeCloseTo(1.608, 9)
  })

  it('carries no fluid beyond its own record, nor across its gaps', () => {
    const short = correction()
    const end = short.series.mjd.findIndex(t => t > 54000)
    const cut = (value: Float64Array): Float64Array => value.slice(0, end)
    const terms = { chi1: cut(short.series.mass.chi1), chi2: cut(short.series.mass.chi2), chi3: cut(short.series.mass.chi3) }
    const result = runChain(world(), chain(tides, excitation, air), { corrections: { air: { ...short, series: { ...short.series, mjd: cut(short.series.mjd), mass: terms, motion: terms } } } })
    expect(result.after.lod!.value[1900]).not.toBeNaN()
    expect(result.after.lod!.value.slice(2001).every(Number.isNaN)).toBe(true)
    expect(result.steps[2]!.sentence).toContain('Where it has no value')
    const gap = onEpochs({ mjd: Float64Array.from([0, 1, 2, 10, 11]), stepDays: 1 }, Float64Array.from([0, 1, 2, 10, 11]), [1.5, 2, 5, 10, 12], 0)
    expect([...gap]).toEqual([1.5, 2, Number.NaN, 10, Number.NaN])
    // A straight line averaged over a day is its value at the middle.
    const mean = onEpochs({ mjd: Float64Array.from({ length: 41 }, (_, i) => i / 4), stepDays: 0.25 }, Float64Array.from({ length: 41 }, (_, i) => i / 4), [0.4, 0.5, 5.1, 9.5, 9.6], 1)
    expect([...mean].map(v => Math.round(v * 1e9) / 1e9)).toEqual([Number.NaN, 0.5, 5.1, 9.5, Number.NaN])
  })
})

describe('the same JSON', () => {
  it('is read back as it was written and gives the same digits', () => {
    const written = { ...chain(tides, excitation, air, { kind: 'background', on: true, rows: [{ key: 'b', name: 'Braking', source: 's', core: 'coupled', lodMsPerCentury: { value: 2.3, sigma: 0.1 }, chi1MasPerYear: null, chi2MasPerYear: null }] }, { kind: 'smoothing', on: true, smoothing: { kind: 'gaussian', widthDays: 60 } }), from: '2001-01-01' } as Chain
    const read = readChain(JSON.parse(JSON.stringify(written)))
    expect(read).toEqual(written)
    const inputs = { corrections: { air: correction() } }
    expect(plainChain(runChain(world(), read, inputs))).toEqual(plainChain(runChain(world(), written, inputs)))
    expect(readChain(JSON.parse(JSON.stringify(defaultChain())))).toEqual(defaultChain())
  })

  const cases: ReduceOptions[] = [
    {}, { zonalTides: true }, { zonalTides: 'under-35-days', monthly: true }, { zonalTides: true, removeSeasons: true, smoothing: { kind: 'gaussian', widthDays: 90 }, monthly: true },
    { excitation: false, removeSeasons: true }, { zonalTides: true, chandlerPeriodDays: 430, q: 100, from: '2003-01-01', to: '2008-12-31' }
  ]
  it.each(cases)('as a chain gives what the reduction %j gives', (options) => {
    const reduced = reduceObserved(world(), options)
    const { after, trends, excitationValidFromDays, warnings } = runChain(world(), chainOf(options))
    const plain = (value: Float64Array | undefined): (number | null)[] => value ? Array.from(value, v => Number.isNaN(v) ? null : v) : []
    expect(plain(after.lod!.value)).toEqual(reduced.lodReducedMs)
    expect(Array.from(after.lod!.mjd)).toEqual(reduced.mjd)
    expect(plain(after.chi1?.value)).toEqual(reduced.chi1Mas)
    expect(plain(after.chi2?.value)).toEqual(reduced.chi2Mas)
    expect(plain(after.x!.value)).toEqual(reduced.xMas)
    expect(trends.lod ?? null).toEqual(reduced.trends.lodMsPerYear)
    expect(trends.chi2 ?? null).toEqual(reduced.trends.chi2MasPerYear)
    expect(excitationValidFromDays).toBe(reduced.excitationValidFromDays)
    expect(warnings.map(w => w.code)).toEqual(reduced.warnings.map(w => w.code))
  })

  it('leaves predictions out unless asked', () => {
    expect(runChain(finals, chainOf({})).after.x!.mjd).toHaveLength(53)
    expect(runChain(finals, chainOf({ includePredictions: true })).warnings.map(w => w.code)).toEqual(['tides-in', 'predictions-in'])
  })
})

describe('honesty about trends', () => {
  it('quotes none of the day with only the short tides out, and none of anything detrended', () => {
    const short = runChain(world(), chain({ ...tides, set: 'under-35-days' } as ChainStep, excitation))
    expect([short.trends.lod, short.noTrend.map(n => n.quantity)]).toEqual([null, ['lod']])
    expect(short.trends.chi1).not.toBeNull()
    const flat = runChain(world(), chain(tides, excitation, { kind: 'detrend', on: true }))
    expect([flat.trends.lod, flat.trends.chi1, flat.trends.chi2]).toEqual([null, null, null])
    expect(flat.chartNote).toContain('trend removed')
    expect(flat.trends.x).not.toBeNull()
  })

  it('keeps background rates as rows and takes nothing away for them', () => {
    const rows = [{ key: 'b', name: 'Braking', source: 's', core: 'coupled' as const, lodMsPerCentury: { value: 2.3, sigma: 0.1 }, chi1MasPerYear: null, chi2MasPerYear: null }]
    const result = runChain(world(), chain(tides, { kind: 'background', on: true, rows }))
    expect(result.background).toEqual(rows)
    expect(result.after.lod!.value).toEqual(runChain(world(), chain(tides)).after.lod!.value)
    expect(codesOf(() => readChain(chain({ kind: 'background', on: true, rows: [{ ...rows[0]!, name: 'Secular pole' }] })))).toEqual(['secular-pole'])
    expect(runChain(world(), chain({ kind: 'background', on: true, rows: [rows[0]!, { ...rows[0]!, core: 'decoupled' }] })).warnings.map(w => w.code)).toContain('core-mixed')
  })

  it('draws the secular pole where the Conventions put it', () => {
    // IERS Conventions (2010), ch. 7, 2018 update: 55.0, 320.5 mas at 2000.0.
    expect(secularPole(51544.5)).toEqual({ xMas: 55, yMas: 320.5 })
    expect(secularPole(51544.5 + 10 * year).xMas).toBeCloseTo(55 + 16.77, 9)
  })
})

describe('water that would be counted twice', () => {
  const run = (fields: Partial<AngularMomentumFields>, step: Partial<ChainStep> = {}, series = world(), gravity?: GravityFields) =>
    runChain(series, chain(tides, excitation, { ...air, ...step } as ChainStep), { corrections: { air: correction(fields) }, gravity })

  it('is refused: sea level, water on land, an ocean that holds it, one fluid twice', () => {
    expect(codesOf(() => run({ component: 'sea-level' }))).toEqual(['counted-twice'])
    expect(codesOf(() => run({ component: 'land-water' }))).toEqual(['counted-twice'])
    expect(codesOf(() => run({ component: 'ocean', barystatic: 'yes' }))).toEqual(['counted-twice'])
    expect(codesOf(() => run({ component: 'ocean', barystatic: 'yes' }, { mass: false }))).toEqual([])
    expect(codesOf(() => runChain(world(), chain(tides, excitation, air, { ...air, correction: 'more' } as ChainStep), { corrections: { air: correction(), more: correction() } }))).toEqual(['counted-twice'])
    expect(codesOf(() => run({}, { correction: 'gone' }))).toEqual(['no-series'])
    const gravity: GravityFields = { solidPoleTide: 'removed', oceanPoleTide: 'removed', permanentTide: 'zero-tide', meanPole: 'secular-2018', radiusM: 6378137, dealiasing: 'not-restored', axialLoadFactor: 0.695 }
    expect(codesOf(() => run({}, {}, { ...world(), from: 'gravity' }, gravity))).toEqual(['counted-twice'])
  })

  it('is warned of where it is not known, and where atmosphere and ocean do not belong together', () => {
    const codes = (a: Partial<AngularMomentumFields>, o: Partial<AngularMomentumFields> | null, trend = false) => runChain(world(), chain(tides, excitation, { ...air, trend } as ChainStep, ...(o ? [{ ...air, correction: 'sea', trend } as ChainStep] : [])), {
      corrections: { air: correction(a), sea: sea(o ?? {}) }
    }).warnings.map(w => w.code)
    expect(codes({}, {})).toEqual([])
    expect(codes({}, { barystatic: 'unknown' })).toEqual(['barystatic-unknown'])
    expect(codes({}, { pairedWith: 'Air 2' })).toEqual(['pairing'])
    expect(codes({}, { pairedWith: null })).toEqual(['pairing-unknown'])
    expect(codes({}, { invertedBarometer: 'no' })).toEqual(['inverted-barometer'])
    expect(codes({ invertedBarometer: 'no' }, null)).toEqual(['no-inverted-barometer'])
    expect(codes({ coefficients: 'unknown' }, {})).toEqual(['coefficients-unknown'])
    expect(codes({}, {}, true)).toEqual(['fluid-trend', 'ocean-trend'])
  })

  it('takes no tide and no motion off excitation from gravity', () => {
    const series = { ...world(), from: 'gravity' as const }
    const result = runChain(series, chain(tides, excitation, air), { corrections: { air: correction() } })
    expect(result.steps[0]!.panels).toEqual([])
    expect(result.steps[0]!.sentence).toContain('hold no tide')
    expect(result.steps[2]!.sentence).toContain('The mass term')
  })
})

describe('a chain that does not hold', () => {
  it('names each setting and its place', () => {
    expect(codesOf(() => readChain(5))).toEqual(['not-a-chain'])
    expect(codesOf(() => readChain({ schemaVersion: 2, steps: [] }))).toEqual(['unknown-version'])
    expect(codesOf(() => readChain({ ...chain(), from: 'soon' }))).toEqual(['bad-date'])
    expect(codesOf(() => readChain(chain({ kind: 'boil', on: true } as unknown as ChainStep)))).toEqual(['unknown-step'])
    expect(codesOf(() => readChain(chain({ ...excitation, periodDays: 300 } as ChainStep)))).toEqual(['chandler-band'])
    expect(codesOf(() => readChain(chain({ ...tides, size: 2 } as unknown as ChainStep)))).toEqual(['unknown-setting'])
    expect(codesOf(() => readChain(chain(tides, tides)))).toEqual(['twice'])
    expect(codesOf(() => readChain(chain({ kind: 'monthly', on: true }, excitation)))).toEqual(['order'])
    expect(codesOf(() => readChain(chain({ kind: 'monthly', on: false }, excitation)))).toEqual([])
  })
})

describe('thinning for small multiples', () => {
  it('keeps extremes, ends and gaps', () => {
    const mjd = Float64Array.from({ length: 20000 }, (_, i) => i)
    const value = mjd.map(t => Math.sin(t / 700))
    value[7777] = 9
    value.fill(Number.NaN, 12000, 13000)
    const thin = thinned({ mjd, value }, 400)
    expect(thin.mjd.length).toBeLessThan(520)
    expect(Math.max(...[...thin.value].filter(v => !Number.isNaN(v)))).toBe(9)
    expect([thin.mjd[0], thin.mjd.at(-1)]).toEqual([0, 19999])
    expect(thin.value.some(Number.isNaN)).toBe(true)
    expect([...thin.mjd].every((t, i) => i === 0 || t > thin.mjd[i - 1]!)).toBe(true)
  })
})
