import { describe, expect, it } from 'vitest'
import { chiSquareTail, logGamma, studentTail } from '../../../shared/attribution/distributions.ts'
import { coherenceOf, crossSpectrum } from '../../../shared/attribution/spectra.ts'

const index = Array.from({ length: 180 }, (_, i) => i)
const x = index.map(i => Math.sin(2 * Math.PI * i / 12) + 0.7 * Math.cos(2 * Math.PI * i / 31 + 1) + 0.3 * ((i * 7919) % 97 / 97 - 0.5) + 0.002 * i)
const y = index.map(i => 0.8 * Math.sin(2 * Math.PI * (i - 2) / 12) + 0.5 * Math.cos(2 * Math.PI * i / 31 + 1.4) + 0.6 * ((i * 6271) % 89 / 89 - 0.5))

describe('coherence against scipy 1.17.1', () => {
  // signal.coherence(x, y, window='hann', nperseg=60, noverlap=30, detrend=…) and the angle of signal.csd with the same settings.
  const scipy = {
    constant: [
      [1, 0.9974440548965434, 0.46456541499857984], [2, 0.9996500849081179, 0.41055375673347094], [5, 0.989230188943947, -1.0731436539201986], [6, 0.9943493434630863, -1.0738761311332377],
      [10, 0.007349497724005992, 2.1730081153115406], [21, 0.21565348654272634, -2.6175722909344232], [29, 0.10843648306283935, 2.4316534821680613]
    ],
    linear: [
      [1, 0.9663213093711785, 0.4600483591228875], [2, 0.9991760395004304, 0.41263050503859117], [5, 0.9892578552340785, -1.0731797567732884], [6, 0.9943536410485877, -1.0738756110610492],
      [10, 0.007311115686645534, 2.2022750593392826], [21, 0.2156334245276794, -2.618237509902698], [29, 0.10842946682753146, 2.431548005739401]
    ]
  } as const

  it.each(['constant', 'linear'] as const)('agrees in coherence and phase, %s detrending', (detrend) => {
    const spectrum = crossSpectrum([{ x, y }], 60, detrend)
    const coherence = coherenceOf(spectrum)
    for (const [k, value, phase] of scipy[detrend]) {
      expect(spectrum.frequency[k]).toBeCloseTo(k / 60, 15)
      expect(Math.abs(coherence[k]! - value)).toBeLessThan(1e-11)
      expect(Math.abs(Math.atan2(spectrum.crossIm[k]!, spectrum.crossRe[k]!) - phase)).toBeLessThan(1e-9)
    }
    expect(spectrum.segments).toBe(5)
  })

  it('agrees for segments of odd length: nperseg=61, noverlap=30', () => {
    const coherence = coherenceOf(crossSpectrum([{ x, y }], 61))
    const values: [number, number][] = [[2, 0.9996781746226493], [5, 0.9914635515114028], [10, 0.07746262957583906], [30, 0.19232083178184015]]
    for (const [k, value] of values) expect(Math.abs(coherence[k]! - value)).toBeLessThan(1e-11)
  })
})

describe('distributions against scipy 1.17.1', () => {
  it('has the tail of χ²: stats.chi2.sf', () => {
    const cases: [number, number, number][] = [[3, 2, 0.22313016014842982], [10, 5.5, 0.09807919293420538], [1800, 1750, 0.19808558922167185], [0.2, 7, 0.9999748437491691], [1600, 1750, 0.9953443216177232]]
    for (const [value, degrees, tail] of cases) expect(Math.abs(chiSquareTail(value, degrees) - tail)).toBeLessThan(1e-11)
    expect(chiSquareTail(0, 3)).toBe(1)
    expect(() => chiSquareTail(1, 0)).toThrow(RangeError)
  })

  it('has the two tails of Student’s t: 2 · stats.t.sf', () => {
    const cases: [number, number, number][] = [[2, 5, 0.10193947882985835], [0.3, 12.4, 0.7691470001056396], [4.5, 200, 1.151878126287533e-05], [10, 3, 0.0021283990584141503]]
    for (const [t, degrees, tail] of cases) {
      expect(Math.abs(studentTail(t, degrees) / tail - 1)).toBeLessThan(1e-9)
      expect(studentTail(-t, degrees)).toBe(studentTail(t, degrees))
    }
  })

  it('has the logarithm of Γ: special.gammaln', () => {
    const cases: [number, number][] = [[0.3, 1.0957979948180756], [1.5, -0.12078223763524526], [10, 12.801827480081469], [875, 5049.97782239103]]
    for (const [value, log] of cases) expect(Math.abs(logGamma(value) - log)).toBeLessThan(1e-11 * Math.max(1, Math.abs(log)))
  })
})
