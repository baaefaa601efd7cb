import { describe, expect, it } from 'vitest'
import { mjdFromIsoDate } from '../../../shared/earth/time/epochs.ts'
import { diffVersions, type VersionToCompare } from '../../../shared/series/versions.ts'

const mjd = Array.from({ length: 48 }, (_, i) => mjdFromIsoDate('2002-01-16') + Math.round(i * 30.4375))
const version = (part: Partial<VersionToCompare> = {}): VersionToCompare => ({
  mjd, massGt: mjd.map((t, i) => -2 * i + 10 * Math.sin(2 * Math.PI * t / 365.25) + (i * 7 % 5) / 10), sigmaGt: mjd.map(() => 1),
  sharedRates: [{ source: 'isostatic ensemble', sigmaGtPerYear: 2 }], steps: ['Values are gigatonnes.'], facts: { licence: 'CC BY' }, ...part
})
const old = version()

describe('two versions of a series', () => {
  it('are the same where nothing differs', () => {
    expect(diffVersions(old, version())).toMatchObject({ same: true, changed: [], largest: null, rmsGt: 0, sentences: ['Nothing differs.'] })
  })

  it('differ in epochs', () => {
    const diff = diffVersions(old, version({ mjd: [...mjd.slice(1), mjd.at(-1)! + 30], massGt: [...Array.from(old.massGt).slice(1), -90], sigmaGt: mjd.map(() => 1) }))
    expect(diff.epochs).toMatchObject({ before: 48, after: 48, removed: [mjd[0]], added: [mjd.at(-1)! + 30] })
    expect(diff.sentences).toContain('One epoch removed, 2002-01-16.')
  })

  it('differ in values: root mean square and the largest, with its date', () => {
    const diff = diffVersions(old, version({ massGt: Array.from(old.massGt, (m, i) => i === 10 ? m + 3 : i === 20 ? m - 4 : m) }))
    expect(diff.changed.map(c => c.mjd)).toEqual([mjd[10], mjd[20]])
    expect(diff.rmsGt).toBeCloseTo(Math.sqrt(25 / 48), 12)
    expect(diff.largest).toMatchObject({ mjd: mjd[20], changeGt: expect.closeTo(-4, 12) })
    expect(diff.sentences[1]).toBe('2 values of 48 changed, by 0.72 Gt in the root mean square and at most −4.00 Gt, on 2003-09-17.')
  })

  it('differ by another zero, which is no change of the trend', () => {
    const diff = diffVersions(old, version({ massGt: Array.from(old.massGt, m => m + 12.5) }))
    expect(diff.shiftGt).toBeCloseTo(12.5, 9)
    expect(diff.largest).toBeNull()
    expect(diff.sentences).toEqual(['All 48 common epochs are shifted by +12.50 Gt: another zero.'])
  })

  it('differ in trend, errors, steps and what is said of them', () => {
    const diff = diffVersions(old, version({
      massGt: Array.from(old.massGt, (m, i) => m - i), sigmaGt: mjd.map((_, i) => i < 3 ? 2 : 1), sharedRates: [{ source: 'isostatic ensemble', sigmaGtPerYear: 3 }, { source: 'C₂₀', sigmaGtPerYear: 1 }],
      steps: ['Values are gigatonnes.', 'Less leakage.'], facts: { licence: 'CC BY', instrument: 'wells' }
    }))
    expect(diff.trends.after!.value - diff.trends.before!.value).toBeCloseTo(-12, 1)
    expect(diff.sentences[0]!.replace(/\s/g, ' ')).toMatch(/^The trend goes from −2\d\.\d+.* to −3\d\.\d+.* Gt\/yr\.$/)
    expect(diff.sentences).toEqual(expect.arrayContaining([
      '3 one-sigmas changed.', 'Systematic error of the trend, “isostatic ensemble”: 2.00 Gt/yr, now 3.00 Gt/yr.',
      'Systematic error of the trend, “C₂₀”: none, now 1.00 Gt/yr.', 'New: Less leakage.', 'instrument: “” is now “wells”.'
    ]))
  })
})
