import { describe, expect, it } from 'vitest'
import { coveredSpans } from '../../../app/observed/coverage'
import { afterChart, chainOfText, pageChain, panelCharts, reductionSentence, textOfChain, withFluid, withoutStep, withStep } from '../../../app/observed/reduction'
import { fieldsOf, noAnswers, openQuestions, readFluidText } from '../../../app/observed/fluidDraft'
import { readChain } from '#shared/observed/readChain'

const measured = (value: number, sigma: number) => ({ value, sigmaWhite: sigma / 2, sigma })
const track = (mjd: number[], value: (number | null)[]) => ({ mjd, value })
const step = (on: boolean, panels: number) => ({ on, panels: Array.from({ length: panels }, () => ({})) }) as never

describe('the chain of the page', () => {
  it('holds every step that needs no further series, in an order that the reader accepts even with all of them on', () => {
    const all = { ...pageChain(), steps: pageChain().steps.map(s => ({ ...s, on: true })) }
    expect(readChain(JSON.parse(JSON.stringify(all))).steps).toHaveLength(7)
  })
  it('goes through an address and back, and the usual one needs no words there', () => {
    expect(textOfChain(pageChain())).toBeUndefined()
    const changed = withStep(pageChain(), 0, { set: 'under-35-days' })
    expect(chainOfText(textOfChain(changed)).chain).toEqual(changed)
    expect(chainOfText(undefined).chain).toEqual(pageChain())
  })
  it('keeps what is wrong with an address, with its place', () => {
    expect(chainOfText('{"').fault!.issues[0]!.code).toBe('json')
    const outside = JSON.stringify(withStep(pageChain(), 1, { periodDays: 500 }))
    expect(chainOfText(outside).fault!.issues).toMatchObject([{ path: 'steps/1/periodDays', code: 'chandler-band' }])
  })
})

describe('the sentence of a reduction', () => {
  const trends = { lod: measured(0.0123, 0.0045), chi1: measured(3.41, 0.22), chi2: measured(-3.2, 0.2) }
  it('tells both trends in their units', () => {
    expect(reductionSentence('C04', { steps: [step(true, 1), step(true, 2), step(true, 0), step(false, 0)], trends, noTrend: [] }))
      .toBe('After two steps of reduction, in “C04”, the length of day changes by +12.3 ± 4.5 µs per year and the excitation of the pole drifts by +3.41 ± 0.22 (χ₁) and −3.20 ± 0.20 (χ₂) mas per year.'.replaceAll(' ± ', '\u00a0±\u00a0').replace('4.5 µs', '4.5\u00a0µs'))
  })
  it('says where no trend is quoted', () => {
    const text = reductionSentence('C04', { steps: [step(true, 1)], trends: { ...trends, lod: null }, noTrend: [{ quantity: 'lod', reason: '…' }] })
    expect(text).toMatch(/; no trend of the length of day is quoted\.$/)
    expect(text).not.toMatch(/µs/)
  })
})

describe('small multiples', () => {
  it('have three charts, the middle one empty where nothing is subtracted', () => {
    const panel = { quantity: 'lod' as const, unit: 'ms' as const, before: track([1, 2], [1, 2]), removed: null, after: track([1.5], [1.5]) }
    const charts = panelCharts(panel, 'Monthly means')
    expect(charts.map(({ part, data }) => [part, data?.unit ?? null])).toEqual([['before', 'ΔLOD, ms'], ['removed', null], ['after', 'ΔLOD, ms']])
  })
  it('show the time that is covered, gaps left out', () => {
    const months = [0, 30, 61, 91, 365, 396, 426]
    expect(coveredSpans(track(months, [1, 2, 3, 4, 5, null, 7]))).toEqual([[0, 91], [365, 426]])
    expect(afterChart('chi1', track(months, months)).coverage).toEqual([{ label: 'values', spans: [[0, 91], [365, 426]] }])
  })
})

describe('series of air and sea', () => {
  it('are subtracted behind the excitation, one after another, in an order that the reader accepts', () => {
    const two = withFluid(withFluid(pageChain(), 'air'), 'sea')
    expect(two.steps.slice(1, 4).map(s => s.kind === 'angular-momentum' ? s.correction : s.kind)).toEqual(['excitation', 'air', 'sea'])
    expect(readChain(JSON.parse(JSON.stringify(two))).steps).toHaveLength(9)
    expect(withoutStep(withFluid(pageChain(), 'air'), 2)).toEqual(pageChain())
  })
  it('are stored only once their questions are answered, the pairing for an ocean alone', () => {
    const answers = { ...noAnswers(), component: 'ocean', model: ' m ', invertedBarometer: 'yes', coefficients: 'unknown', barystatic: 'no' }
    expect(openQuestions(answers)).toEqual(['Which atmosphere drove the ocean?'])
    expect(openQuestions({ ...answers, component: 'atmosphere' })).toEqual([])
    expect(fieldsOf({ ...answers, component: 'atmosphere', pairedWith: 'typed before' })).toMatchObject({ pairedWith: null, model: 'm' })
    expect(readFluidText('mjd,lod\n1,2\n').fault!.issues[0]!.code).toBe('no-rows')
  })
})
