import { describe, expect, it } from 'vitest'
import { estimateScaling } from '../../../shared/attribution/scaling.ts'
import { julianYearsFromMjd } from '../../../shared/earth/time/epochs.ts'
import type { AttributionData } from '../../../shared/attribution/types.ts'
import { InputError } from '../../../shared/types/issue.ts'
import { monthMiddles } from './series.ts'
import { world } from './syntheticWorld.ts'

const { data, noise } = world(5, { strength: 3 })

describe('a scaling estimate', () => {
  const scaling = estimateScaling(data, { band: 'interannual' })

  it('gives each group its factor with prior, posterior, resolution, pull and the observables that carry it', () => {
    expect(scaling.factors.map(f => f.key)).toEqual(['g0', 'g1', 'g2', 'g3'])
    for (const { prior, posterior, resolution, pull, carriedBy, sigmaWithout, dataOnly } of scaling.factors) {
      expect(prior).toEqual({ mean: 1, sigma: 0.5 })
      expect(posterior.sigma).toBeLessThan(prior.sigma)
      expect(resolution).toBeCloseTo(1 - (posterior.sigma / prior.sigma) ** 2, 9)
      expect(pull).toBeCloseTo((posterior.value - 1) / Math.sqrt(0.25 - posterior.sigma ** 2), 9)
      expect(Object.values(carriedBy).reduce((a, b) => a! + b!, 0)).toBeCloseTo(1, 9)
      for (const sigma of Object.values(sigmaWithout)) expect(sigma!).toBeGreaterThanOrEqual(posterior.sigma * (1 - 1e-9))
      expect(dataOnly!.sigma).toBeGreaterThan(posterior.sigma)
    }
    expect(scaling.sentences[0]).toContain('without seasons')
    expect(scaling.condition).toBeGreaterThanOrEqual(1)
  })

  it('estimates the noise that the world was made with', () => {
    for (const quantity of ['lod', 'chi1', 'chi2'] as const) {
      expect(Math.abs(scaling.noise[quantity]!.phi - noise[quantity].phi)).toBeLessThan(0.25)
      expect(Math.abs(scaling.noise[quantity]!.sigma / noise[quantity].sigma - 1)).toBeLessThan(0.3)
    }
  })

  it('keeps to the prior where the data say nothing, and follows the data where the prior is wide', () => {
    const tight = estimateScaling(data, { band: 'interannual', priors: Object.fromEntries(data.groups.map(g => [g.key, { mean: 1, sigma: 1e-4 }])) })
    tight.factors.forEach((f) => {
      expect(f.posterior.value).toBeCloseTo(1, 3)
      expect(f.resolution).toBeLessThan(0.01)
    })
    expect(tight.sentences.join(' ')).toContain('the data say nothing about it')
    const wide = estimateScaling(data, { band: 'interannual', priors: Object.fromEntries(data.groups.map(g => [g.key, { mean: 1, sigma: 1e3 }])) })
    wide.factors.forEach(f => expect(f.posterior.value).toBeCloseTo(f.dataOnly!.value, 4))
  })

  it('does not depend on the units of an observable', () => {
    const inMs: AttributionData = {
      ...data,
      blocks: data.blocks.map(b => b.quantity === 'lod' ? { ...b, value: b.value.map(v => v / 1000) } : b),
      groups: data.groups.map(g => ({ ...g, signatures: g.signatures.map((s, b) => b === 0 ? s.map(v => v / 1000) : s) })),
      sources: data.sources.map(s => ({ ...s, loadings: s.loadings.map((l, b) => b === 0 ? l.map(v => v / 1000) : l) }))
    }
    estimateScaling(inMs, { band: 'interannual' }).factors.forEach((f, g) => expect(f.posterior.value).toBeCloseTo(scaling.factors[g]!.posterior.value, 6))
  })
})

describe('bands apart', () => {
  // One group whose season is right and whose trend is reported at half its size.
  const mjd = Float64Array.from(monthMiddles(120))
  const t = mjd.map(epoch => julianYearsFromMjd(epoch) + 5)
  const season = t.map(years => 10 * Math.cos(2 * Math.PI * years))
  const made = (quantity: 'chi1' | 'chi2', sign: number) => ({ quantity, mjd, value: t.map((years, i) => sign * (season[i]! + 4 * years) + 0.05 * Math.sin(i * i)) })
  const seasonal: AttributionData = {
    stepDays: 30.4, sources: [], blocks: [made('chi1', 1), made('chi2', -1)],
    groups: [{ key: 'a', name: 'A', signatures: [1, -1].map(sign => t.map((years, i) => sign * (season[i]! + 2 * years))) }]
  }
  const factor = (band: 'interannual' | 'annual' | 'all', trend: 'in' | 'out' = 'in'): number => estimateScaling(seasonal, { band, trend, priors: { a: { mean: 1, sigma: 2 } } }).factors[0]!.posterior.value

  it('scales a trend by the trend and a season by the season', () => {
    expect(factor('annual')).toBeCloseTo(1, 2)
    expect(factor('interannual')).toBeCloseTo(2, 2)
    // Together, neither is right: that is why they are apart.
    expect(factor('all')).toBeGreaterThan(1.05)
    expect(factor('all')).toBeLessThan(1.95)
  })

  it('says nothing of a trend that is fitted beside the factors', () => {
    const out = estimateScaling(seasonal, { band: 'interannual', trend: 'out', priors: { a: { mean: 1, sigma: 2 } } })
    expect(out.factors[0]!.resolution).toBeLessThan(0.05)
  })
})

describe('groups that cannot be told apart', () => {
  // The group that the data know best, twice.
  const best = estimateScaling(data, { band: 'interannual' }).factors.reduce((most, f) => f.resolution > most.resolution ? f : most).key
  const one = data.groups.find(g => g.key === best)!
  const twins: AttributionData = { ...data, groups: [one, { ...one, key: 'twin', name: 'Twin' }] }
  const scaling = estimateScaling(twins, { band: 'interannual' })

  it('share what is known: no estimate without priors, infinite condition, and a sentence', () => {
    expect(scaling.condition).toBe(Infinity)
    expect(scaling.factors[0]!.dataOnly).toBeNull()
    expect(scaling.factors[0]!.posterior.value).toBeCloseTo(scaling.factors[1]!.posterior.value, 6)
    expect(scaling.correlation[0]![1]!).toBeLessThan(-0.9)
    expect(scaling.sentences.join(' ')).toContain('their sum is known far better')
    expect(scaling.sentences.at(-1)).toContain('condition infinite')
  })
})

describe('what a scaling estimate refuses', () => {
  it('is a prior without a width and an empty account', () => {
    expect(() => estimateScaling(data, { band: 'interannual', priors: { g0: { mean: 1, sigma: 0 } } })).toThrow(InputError)
    expect(() => estimateScaling({ ...data, groups: [] }, { band: 'annual' })).toThrow(InputError)
  })
})
