import { describe, expect, it } from 'vitest'
import { comparisonStatistics, comparisonTrends } from '../../../shared/attribution/comparisonStatistics.ts'
import { bestLag, correlationOf, lagOne } from '../../../shared/attribution/correlation.ts'
import { bandVariance, periodogramOf } from '../../../shared/attribution/spectra.ts'
import { ar1Noise, monthMiddles, normals } from './series.ts'

const mjd = monthMiddles(360)
const wave = (period: number, phase = 0) => mjd.map((_, i) => Math.sin(2 * Math.PI * i / period + phase))
const sum = (...parts: number[][]): number[] => mjd.map((_, i) => parts.reduce((total, part) => total + part[i]!, 0))
const times = (k: number, x: number[]): number[] => x.map(v => k * v)

describe('bands', () => {
  it('keep the variance of a wave in its own band', () => {
    const variance = (x: number[], low: number, high: number): number => bandVariance(periodogramOf([x]), low / 12, high / 12)
    expect(variance(wave(12), 0.74, 1.35)).toBeCloseTo(0.5, 2)
    expect(variance(wave(12), 1 / 8, 0.74)).toBeLessThan(1e-4)
    expect(variance(wave(40), 1 / 8, 0.74)).toBeCloseTo(0.5, 2)
    expect(variance(wave(180), 0, 1 / 8)).toBeGreaterThan(0.4)
    // All of it is somewhere.
    expect(variance(wave(7.3), 0, 6.1)).toBeCloseTo(0.5, 2)
    // Straight lines are taken off first.
    expect(variance(mjd.map((_, i) => i), 0, 1 / 8)).toBeLessThan(1e-12)
  })

  it('explain what the model holds and nothing else', () => {
    const normal = normals(11)
    const observed = sum(times(3, wave(12)), times(2, wave(40)), ar1Noise(360, 0.3, 0.2, normal))
    const model = sum(times(3, wave(12)), ar1Noise(360, 0.3, 0.2, normal))
    const { bands, varianceExplained, sentences } = comparisonStatistics({ mjd, observed, model })!
    const of = Object.fromEntries(bands.map(b => [b.band, b]))
    expect(of.annual!.varianceExplained!).toBeGreaterThan(0.97)
    expect(Math.abs(of.interannual!.varianceExplained!)).toBeLessThan(0.05)
    expect(of.annual!.coherence!).toBeGreaterThan(0.95)
    expect(of.interannual!.coherence!).toBeLessThan(of.interannual!.coherenceThreshold95!)
    expect(varianceExplained!).toBeCloseTo(4.5 / 6.5, 1)
    expect(sentences[0]).toContain('annual 100 %, interannual')
    // A model with the wrong sign doubles the residual: 1 − 4.
    const wrong = comparisonStatistics({ mjd, observed: times(3, wave(12)), model: times(-3, wave(12)) })!
    expect(wrong.bands.find(b => b.band === 'annual')!.varianceExplained!).toBeCloseTo(-3, 6)
  })

  it('say nothing about decades in a short record', () => {
    const short = comparisonStatistics({ mjd: mjd.slice(0, 120), observed: wave(30).slice(0, 120), model: wave(30).slice(0, 120) })!
    expect(short.bands.find(b => b.band === 'decadal')).toMatchObject({ varianceExplained: null, coherence: null, reason: '10 years hold too few decadal swings.' })
  })

  it('has coherence below its 95 % threshold in 95 % of unrelated series', () => {
    let [below, count] = [0, 0]
    for (let seed = 1; seed <= 300; seed++) {
      const normal = normals(seed)
      const { bands } = comparisonStatistics({ mjd: mjd.slice(0, 240), observed: ar1Noise(240, 0.5, 1, normal), model: ar1Noise(240, 0.5, 1, normal) })!
      const band = bands.find(b => b.band === 'interannual')!
      count++
      if (band.coherence! < band.coherenceThreshold95!) below++
    }
    // 300 series scatter by √(0.95 · 0.05/300) = 1.3 %: three of them, and 2 % for the approximation of independent values.
    expect(Math.abs(below / count - 0.95)).toBeLessThan(3 * 0.0126 + 0.02)
  })
})

describe('correlation', () => {
  it('is that of scipy.stats.pearsonr', () => {
    const x = Array.from({ length: 180 }, (_, i) => Math.sin(2 * Math.PI * i / 12) + 0.7 * Math.cos(2 * Math.PI * i / 31 + 1) + 0.3 * ((i * 7919) % 97 / 97 - 0.5) + 0.002 * i)
    const y = Array.from({ length: 180 }, (_, i) => 0.8 * Math.sin(2 * Math.PI * (i - 2) / 12) + 0.5 * Math.cos(2 * Math.PI * i / 31 + 1.4) + 0.6 * ((i * 6271) % 89 / 89 - 0.5))
    // scipy 1.17.1: statistic 0.588858974628494; its p-value takes all 180 as independent.
    expect(correlationOf(x, y)!.value).toBeCloseTo(0.588858974628494, 12)
    expect(correlationOf(x, y)!.pValue).toBeGreaterThan(3.5e-18)
  })

  it('calls 5 % of unrelated red series significant, and would call many more so if it took the months as independent', () => {
    let [significant, naive] = [0, 0]
    for (let seed = 1; seed <= 400; seed++) {
      const normal = normals(seed + 1000)
      const found = correlationOf(ar1Noise(240, 0.8, 1, normal), ar1Noise(240, 0.8, 1, normal))!
      if (found.pValue < 0.05) significant++
      if (Math.abs(found.value) > 1.96 / Math.sqrt(240)) naive++
    }
    // √(0.05 · 0.95/400) = 1.1 %; three of them.
    expect(Math.abs(significant / 400 - 0.05)).toBeLessThan(0.033)
    expect(naive / 400).toBeGreaterThan(0.25)
  })

  it('knows the lag-one correlation of what it was made with, without the bias of short records', () => {
    let mean = 0
    for (let seed = 1; seed <= 300; seed++) mean += lagOne(ar1Noise(60, 0.7, 1, normals(seed))) / 300
    expect(Math.abs(mean - 0.7)).toBeLessThan(0.02)
  })

  it('finds a lag with its sign and a fraction, and says when it is the longest', () => {
    const x = wave(50)
    const late = mjd.map((_, i) => Math.sin(2 * Math.PI * (i - 3.4) / 50))
    expect(bestLag(x, late, 24)!.steps).toBeCloseTo(3.4, 1)
    expect(bestLag(late, x, 24)!.steps).toBeCloseTo(-3.4, 1)
    expect(bestLag(x, mjd.map((_, i) => Math.sin(2 * Math.PI * (i - 9) / 50)), 5)!.atEdge).toBe(true)
  })
})

describe('statistics of a comparison', () => {
  const normal = normals(5)
  const observed = sum(times(2, wave(12)), times(1, wave(50)), mjd.map((_, i) => 0.01 * i), ar1Noise(360, 0.5, 0.3, normal))
  const model = sum(times(2, wave(12)), times(0.9, wave(50, -0.5)), mjd.map((_, i) => 0.008 * i))

  it('keep to the span, bridge short gaps for the bands and cut at long ones', () => {
    const holes: (number | null)[] = observed.map((v, i) => i === 50 || i === 51 || (i >= 200 && i < 210) ? null : v)
    const statistics = comparisonStatistics({ mjd, observed: holes, model })!
    expect([statistics.months, statistics.missing, statistics.bridged]).toEqual([348, 12, 2])
    expect(statistics.sentences.at(-1)).toContain('12 months between have no value; 2 of them')
    const part = comparisonStatistics({ mjd, observed, model }, { fromMjd: mjd[24]!, toMjd: mjd[143]! })!
    expect([part.months, part.span.fromMjd]).toEqual([120, mjd[24]])
  })

  it('tell how late the model is', () => {
    const { lagMonths, correlation, sentences } = comparisonStatistics({ mjd, observed, model })!
    // A phase of half a radian at 50 months is 4.0 months.
    expect(lagMonths!.steps).toBeCloseTo(0.5 / (2 * Math.PI) * 50, 0)
    expect(correlation!.effectivePairs).toBeLessThan(200)
    expect(sentences.join(' ')).toContain('months late')
  })

  it('put trends side by side under three kinds of noise; those of observed and model differ by that of the residual', () => {
    const trends = comparisonTrends({ mjd: mjd.slice(0, 120), observed: observed.slice(0, 120), model: model.slice(0, 120) })!
    expect(trends.observed.models.map(m => m.model)).toEqual(['white', 'ar1', 'power-law'])
    expect(trends.observed.simple.value - trends.model.simple.value).toBeCloseTo(trends.residual.simple.value, 10)
  })

  it('need a year of months, one epoch each', () => {
    expect(comparisonStatistics({ mjd: mjd.slice(0, 11), observed: observed.slice(0, 11), model: model.slice(0, 11) })).toBeNull()
    expect(() => comparisonStatistics({ mjd: mjd.map(t => t / 2), observed, model })).toThrow(RangeError)
  })
})
