import { describe, expect, it } from 'vitest'
import { correlogramFigure } from '../../../shared/figures/fit/correlogramFigure.ts'
import { spectrumFigure } from '../../../shared/figures/fit/spectrumFigure.ts'
import { ALIAS_DAYS, fitSeries } from '../../../shared/series/fit/fitSeries.ts'
import { fitSentence, gapSentence, termName } from '../../../shared/text/fit.ts'
import { choiceOfQuery, queryOfChoice } from '../../../app/fit/settings'
import reference from '../../fixtures/series/fit-reference.json'
import { expectSound, readSvg } from './expectSound.ts'
import { widths } from './hostile.ts'

const settings = { acceleration: true, annual: true, semiannual: true, aliasDays: ALIAS_DAYS, stepsMjd: [reference.stepMjd], fromMjd: null, toMjd: null, maxGapDays: 62 }
const fit = fitSeries(reference, settings)
const options = (width: number) => ({ width, theme: 'light' as const, id: 'f' })
const few = fitSeries({ mjd: [53000, 53400, 53900, 54100], massGt: [1, 3, 2, 5], sigmaGt: null }, { ...settings, acceleration: false, aliasDays: null, stepsMjd: [] })
const exact = fitSeries({ mjd: reference.mjd, massGt: reference.mjd.map(t => t - 52000), sigmaGt: null }, { ...settings, annual: false, semiannual: false, aliasDays: null, stepsMjd: [] })

describe('figures of a fit', () => {
  it.each(widths)('are sound at %d px, for long, short and exact series', (width) => {
    for (const each of [fit, few, exact]) {
      expectSound(correlogramFigure(each.correlogram, options(width)))
      expectSound(spectrumFigure(each.spectrum, options(width)))
    }
  })

  it('say in words what they show', () => {
    expect(readSvg(correlogramFigure(fit.correlogram, options(640)).svg)).toBeTruthy()
    expect(correlogramFigure(fit.correlogram, options(640)).svg).toMatch(/At one step \+0\.\d\d\. \d+ of 36 lags lie outside/)
    expect(spectrumFigure(fit.spectrum, options(640)).svg).toMatch(/the largest is [\d.]+ Gt at \d+/)
  })
})

describe('words of a fit', () => {
  it('state the trend with the error to quote, the terms, and the gap', () => {
    expect(fitSentence('The basin', fit)).toMatch(/^The basin lost 26\.\d\s±\s\d\.\d+\sGt per year, .* \(1σ, (AR\(1\)|power law)\)\.$/)
    expect(termName(fit.terms.find(t => t.kind === 'annual')!).detail).toMatch(/^highest about (1\d|2\d)\sApril$/)
    expect(gapSentence(fit.gaps, 62)).toMatch(/the longest of 365 days from .*2017.* to .*2018/)
  })
})

describe('the address of a fit', () => {
  it('keeps every choice, and says nothing of what is the default', () => {
    expect(queryOfChoice(choiceOfQuery({}))).toEqual({ acceleration: undefined, annual: undefined, semiannual: undefined, alias: undefined, step: undefined, from: undefined, to: undefined, maxGap: undefined, version: undefined })
    const query = { acceleration: 'true', annual: 'false', semiannual: 'false', alias: 'true', step: '2009-06-12,2011-01-01', from: '2003-01-01', to: '2019-01-01', maxGap: '40', version: 'x' }
    expect(queryOfChoice(choiceOfQuery(query))).toEqual(query)
    expect(choiceOfQuery({ maxGap: 'many' }).maxGap).toBe(62)
  })
})
