import { describe, expect, it } from 'vitest'
import { identifiability } from '../../../shared/attribution/identifiability.ts'
import { seriesSignatures, trendSignatures } from '../../../shared/attribution/signatures.ts'
import type { AttributionData } from '../../../shared/attribution/types.ts'
import { loadEarthModel } from '../../../shared/earth/earthModel.ts'
import { contourOf } from '../../../shared/earth/contour.ts'
import { responseOf } from '../../../shared/earth/response.ts'
import { monthMiddles } from '../../unit/attribution/series.ts'
import { box } from '../../unit/time/runFixtures.ts'

// Two losses that drive the pole to 73.1° E and 75.8° E: 100 Gt a year at 76° S 105° W and at 29° N 77° E (independent reference
// implementation at degree 128, uniform ocean: 0.2666, 0.8763 mas and +2.317 µs; 0.3853, 1.5189 mas and −0.2899 µs).
const published = [
  { key: 's', name: 'South', rates: { lod: 2.317, chi1: 0.2666, chi2: 0.8763 } },
  { key: 'n', name: 'North', rates: { lod: -0.2899, chi1: 0.3853, chi2: 1.5189 } }
]
const sigma = { lod: 0.5, chi1: 0.05, chi2: 0.05 }

describe('two losses 2.7° apart at the pole', () => {
  it('are told apart only by the length of day, from published rates', () => {
    const { pairs: [pair], sentences, spectra } = identifiability(trendSignatures(published, sigma))
    expect(pair!.pole!.angleDeg).toBeCloseTo(2.7, 1)
    expect([pair!.pole!.told, pair!.all.told]).toEqual([false, true])
    expect(sentences[0]).toBe('The pole cannot tell “South” from “North” (2.7°); the day can.')
    expect(Object.fromEntries(spectra.map(s => [s.set, s.rank]))).toEqual({ pole: 2, day: 1, all: 2 })
  })

  it('are not told apart where the day is not observed, or is too noisy to say', () => {
    const without = identifiability(trendSignatures(published, { chi1: 0.05, chi2: 0.05 }))
    expect(without.sentences[0]).toBe('Nothing observed here can tell “South” from “North” (2.7°).')
    // Decadal change of the core of a hundred µs a year hides both.
    const noisy = identifiability(trendSignatures(published, { ...sigma, lod: 100 }))
    expect(noisy.pairs[0]!.all.told).toBe(false)
  })

  it('have the same angle from outlines and the engine’s own responses, over the whole series', () => {
    const model = loadEarthModel()
    const settings = { ocean: 'uniform', coefficients: 'gross-2007', core: 'decoupled' } as const
    const responses = [box(-105.2, -76.1, -104.8, -75.9), box(76.9, 28.9, 77.1, 29.1)].map(outline => responseOf(contourOf(outline), model, settings))
    const mjd = Float64Array.from(monthMiddles(180))
    // The same shape in time: a loss that grows, so that nothing but place tells them apart.
    const mass = mjd.map((_, i) => -100 * i / 12 - 2 * (i / 12) ** 2)
    const data: AttributionData = {
      stepDays: 30.4, sources: [],
      groups: ['South', 'North'].map((name, g) => ({ key: name, name, signatures: (['lodMicroseconds', 'chi1Mas', 'chi2Mas'] as const).map(q => mass.map(m => m * responses[g]![q])) })),
      blocks: (['lod', 'chi1', 'chi2'] as const).map(quantity => ({ quantity, mjd, value: new Float64Array(180) }))
    }
    const { pairs: [pair], sentences } = identifiability(seriesSignatures(data, [{ sigma: 20, phi: 0.6 }, { sigma: 2, phi: 0.4 }, { sigma: 2, phi: 0.4 }]))
    expect(pair!.pole!.angleDeg).toBeCloseTo(2.7, 1)
    expect(pair!.all.told).toBe(true)
    expect(sentences[0]).toBe('The pole cannot tell “South” from “North” (2.7°); the day can.')
  })
})

describe('rank from trends alone', () => {
  const many = [...published, { key: 'g', name: 'Greenland', rates: { lod: 2.179, chi1: 0.845, chi2: -0.5868 } }, { key: 'a', name: 'Alaska', rates: { lod: 1.661, chi1: -1.1673, chi2: -0.7763 } }]

  it('is three at most, two without the length of day', () => {
    const rank = (s: Partial<typeof sigma>): number => identifiability(trendSignatures(many, s)).spectra.find(({ set }) => set === 'all')!.rank
    expect(rank(sigma)).toBe(3)
    expect(rank({ chi1: 0.05, chi2: 0.05 })).toBe(2)
    expect(rank({ lod: 0.5 })).toBe(1)
  })

  it('leaves the resolution of four groups at three in sum', () => {
    const { groups } = identifiability(trendSignatures(many, sigma))
    const sum = groups.reduce((total, g) => total + g.resolution, 0)
    expect(sum).toBeLessThanOrEqual(3)
    expect(sum).toBeGreaterThan(2.5)
  })
})
