import { describe, expect, it } from 'vitest'
import { identifiability } from '../../../shared/attribution/identifiability.ts'
import type { Signatures } from '../../../shared/attribution/signatures.ts'
import { noiseOf, seriesSignatures, trendSignatures } from '../../../shared/attribution/signatures.ts'
import { world } from './syntheticWorld.ts'

const group = (key: string, lod: number, chi1: number, chi2: number) => ({ key, name: key.toUpperCase(), rates: { lod, chi1, chi2 } })
const sigma = { lod: 1, chi1: 1, chi2: 1 }

describe('angles', () => {
  it('are those of plane geometry where the noise is alike, to the smallest', () => {
    const degree = Math.PI / 180
    for (const angle of [1e-5, 1, 45, 90, 135, 179.99999]) {
      const { pairs: [pair] } = identifiability(trendSignatures([group('a', 0, 7, 0), group('b', 0, 3 * Math.cos(angle * degree), 3 * Math.sin(angle * degree))], sigma))
      expect(Math.abs(pair!.pole!.angleDeg - angle)).toBeLessThan(1e-9)
      expect(pair!.pole!.foldedDeg).toBeCloseTo(Math.min(angle, 180 - angle), 8)
    }
  })

  it('follow the noise: an observable that is noisy counts less', () => {
    const pair = (s: typeof sigma) => identifiability(trendSignatures([group('a', 10, 10, 0), group('b', -10, 10, 0)], s)).pairs[0]!
    expect(pair(sigma).all.angleDeg).toBeCloseTo(90, 9)
    expect(pair({ ...sigma, lod: 100 }).all.angleDeg).toBeLessThan(2)
    expect(pair({ ...sigma, lod: 100 }).day!.angleDeg).toBeCloseTo(180, 9)
  })

  it('need a separation beyond the noise, whatever the angle', () => {
    const { pairs: [pair], sentences } = identifiability(trendSignatures([group('a', 0, 1, 0), group('b', 0, 0, 1)], sigma))
    expect(pair!.all).toMatchObject({ told: false, separation: 1 })
    expect(sentences[0]).toBe('Nothing observed here can tell “A” from “B” (90° apart, but only 1.0 σ).')
  })

  it('count groups that work against each other as alike up to a sign', () => {
    const { pairs: [pair] } = identifiability(trendSignatures([group('a', 0, 50, 1), group('b', 0, -50, 0)], sigma))
    expect(pair!.pole!.angleDeg).toBeGreaterThan(178)
    expect(pair!.pole!.told).toBe(false)
  })
})

describe('shared errors', () => {
  it('take away what they could have made themselves', () => {
    const plain: Signatures = trendSignatures([group('a', 0, 30, 0), group('b', 0, 30, 20)], sigma)
    const loaded: Signatures = { ...plain, blocks: plain.blocks.map(b => ({ ...b, sources: [Float64Array.of(b.quantity === 'chi2' ? 1e4 : 0)] })) }
    expect(identifiability(plain).pairs[0]!.all.told).toBe(true)
    expect(identifiability(loaded).pairs[0]!.all.told).toBe(false)
  })
})

describe('whole series', () => {
  const { data } = world(3, { strength: 3 })

  it('tell more apart than trends do: as many combinations as there are groups', () => {
    const { spectra, groups, sentences } = identifiability(seriesSignatures(data))
    const all = spectra.find(({ set }) => set === 'all')!
    expect(all.rank).toBe(4)
    expect(all.values).toHaveLength(4)
    expect(all.values.reduce((sum, v) => sum + v * v, 0)).toBeCloseTo(4, 9)
    groups.forEach(g => expect(g.resolution).toBeGreaterThan(0))
    expect(sentences.every(s => s.endsWith('.'))).toBe(true)
  })

  it('name a group whose mark is below the noise, and the combination that is seen worst', () => {
    const weak = { ...data, groups: [...data.groups, { key: 'w', name: 'Puddle', signatures: data.groups[0]!.signatures.map(s => s.map(v => v * 1e-4)) }] }
    const { sentences } = identifiability(seriesSignatures(weak, noiseOf(data)))
    expect(sentences.join(' ')).toContain('“Puddle” does less to the pole and the day than their noise')
    expect(sentences.join(' ')).toContain('The combination seen worst is')
    expect(sentences.join(' ')).toContain('Nothing observed here can tell “Group 0” from “Puddle” (0.0°).')
  })

  it('are no longer told apart where their difference is a trend that is taken out', () => {
    const straight = data.blocks[0]!.mjd.map(t => (t - 49000) / 100)
    const pair = { ...data, sources: [], groups: [data.groups[0]!, { key: 'p', name: 'P', signatures: data.groups[0]!.signatures.map(s => s.map((v, k) => v + straight[k]!)) }] }
    const noise = noiseOf(data)
    expect(identifiability(seriesSignatures(pair, noise, 'all', 'in')).pairs[0]!.all.told).toBe(true)
    expect(identifiability(seriesSignatures(pair, noise, 'all', 'out')).pairs[0]!.all.foldedDeg).toBeLessThan(1e-6)
  })

  it('refuse to speak of nothing', () => {
    expect(() => identifiability({ groups: [], blocks: [] })).toThrow(RangeError)
    expect(() => trendSignatures([group('a', 1, 1, 1)], { lod: 0 })).toThrow(RangeError)
  })
})
