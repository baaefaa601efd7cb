import { describe, expect, it } from 'vitest'
import { cautions, cautionsFor } from '../../../shared/text/cautions.ts'
import { findingSentence, remainderSentences } from '../../../shared/text/finding.ts'
import { methodSections, settingsLine } from '../../../shared/text/method.ts'
import { counted, listed } from '../../../shared/text/words.ts'
import { emptyRow, sampleComparison, sampleRun, sixRegions, withPhysics } from '../figures/sampleRun.ts'

/** Spaces of any width as plain ones, so that a sentence can be read here. */
const plain = (text: string) => text.replace(/[\u00a0\u202f]/g, ' ')
const say = (regions = sixRegions, toMjd = 60675) => plain(findingSentence(sampleRun(regions, 53005, toMjd)))

describe('findingSentence', () => {
  it('says what six regions do to day and pole', () => {
    // χ = (1.73, −1.00) mas: length 1.998 mas = 6.17 cm, direction atan2(−1.00, 1.73) = −30.0°; errors from the covariance by hand.
    expect(say()).toBe('Reported mass change in six regions, 2004–2024, is calculated to lengthen the day by 9.63 ± 0.60 µs per year (1σ) '
      + 'and to move the pole 6.17 ± 0.40 cm per year towards 30° ± 7° W.')
  })
  it('shortens the day for mass that moves inwards and names a single region', () => {
    expect(say([{ name: 'High Weir', mass: 40, lod: -1.2, chi1: -0.4, chi2: -0.3 }]))
      .toMatch(/^Reported mass change in one region \(High Weir\), 2004–2024, is calculated to shorten the day by 1\.20 ± 0\.12 µs per year \(1σ\) and to move the pole .* W\.$/)
  })
  it('counts regions and not the water that they keep on land', () => {
    expect(plain(findingSentence(withPhysics()))).toMatch(/^Reported mass change in six regions/)
  })
  it('claims nothing within two sigma', () => {
    const text = say([{ name: 'A', mass: 1, lod: 0.1, chi1: 0.01, chi2: 0, sigma: 0.8 }])
    expect(text).toContain('to leave the length of the day unchanged within its uncertainty (+0.100 ± 0.080 µs per year, 1σ)')
    expect(text).toContain('to leave the pole in place within its uncertainty')
    expect(text).not.toMatch(/lengthen|shorten|towards/)
  })
  it('gives no direction to a zero drift', () => {
    expect(say([{ name: 'A', mass: -1, lod: 0.5, chi1: 0, chi2: 0 }])).toMatch(/and to leave the pole in place\.$/)
  })
  it('says when there is no trend at all', () => {
    const run = sampleRun()
    const silent = { ...run, total: { ...run.total, ...emptyRow('total', 'Model') } }
    expect(plain(findingSentence(silent))).toContain('too short a record')
  })
  it('does not count a region that is switched off', () => {
    const run = sampleRun()
    const fewer = { ...run, regions: run.regions.map((region, i) => ({ ...region, scale: i === 0 ? 0 : 1 })) }
    expect(findingSentence(fewer)).toContain('in five regions')
  })
})

describe('remainderSentences', () => {
  it('gives observed and residual with errors, and names the core', () => {
    const [day, pole] = remainderSentences(sampleComparison(sampleRun())).map(plain)
    expect(day).toContain('The observed length of day changed by −21 ± 12 µs per year; −31 ± 12 µs per year is left')
    expect(day).toContain('core')
    // The residual is below two sigma, so it is given no direction.
    expect(pole).toMatch(/^The observed pole moved 8\.0 ± 2\.0 cm per year towards 41° ± \d+° W; 2\.3 ± 2\.2 cm per year is left when the model is taken away\.$/)
  })
  it('is silent on what the series does not hold', () => {
    expect(remainderSentences({ ...sampleComparison(sampleRun()), lod: null, chi2: null })).toEqual([])
  })
})

describe('cautions', () => {
  it('always hold core, law and time keeping', () => {
    expect(cautionsFor(sampleRun())).toEqual(['calculated', 'core', 'restOfWorld', 'legal', 'operational'])
  })
  it('name what applies', () => {
    const run = sampleRun()
    const hostile = { ...run, settings: { ...run.settings, ocean: 'none' as const }, overlaps: [{ a: 'r1', b: 'r2', areaKm2: 1, shareOfA: 1, shareOfB: 1 }] }
    const keys = cautionsFor(hostile, { comparison: sampleComparison(run), invented: true, projected: true })
    expect(keys.toSorted()).toEqual(Object.keys(cautions).toSorted())
  })
})

describe('method', () => {
  it('names the settings and only compares when something was compared', () => {
    const { settings } = sampleRun()
    expect(settingsLine(settings)).toBe('uniform ocean response, core decoupled, Gross (2007)')
    const headings = methodSections(settings, false).map(section => section.heading)
    expect(headings).not.toContain('Comparison')
    expect(methodSections(settings, true).map(section => section.heading)).toEqual([...headings, 'Comparison'])
  })
  it('counts and lists in words', () => {
    expect([counted(1, 'region'), counted(12, 'region'), counted(13, 'region'), listed(['a', 'b', 'c'])]).toEqual(['one region', 'twelve regions', '13 regions', 'a, b and c'])
  })
})
