import { describe, expect, it } from 'vitest'
import { computeRun } from '../../../shared/earth/time/run.ts'
import { namedPairs, massOnGround, settledSentence, sharedGround } from '../../../shared/text/overlaps.ts'
import type { BudgetRow, OverlapChoice } from '../../../shared/types/run.ts'
import { netRegions } from '../../../shared/attribution/netRegions.ts'
import { shippedModel } from '../../reference/earth/shippedModel.ts'
import { box, region, runInput } from './runFixtures.ts'

const model = await shippedModel()
// In one band of latitude the shares of area are those of longitude: 2° of 10° and 2° of 4°.
const wide = box(20, 0, 30, 10)
const narrow = box(28, 0, 32, 10)
const regions = (ofWide = -100, more: Parameters<typeof region>[3] = {}) => [region('a', wide, ofWide, more), region('b', narrow, 8)]
const run = (list: ReturnType<typeof regions>, overlapChoices?: OverlapChoice[]) =>
  computeRun(runInput(list, { settings: { ...runInput([]).settings, ocean: 'fingerprint' }, ...(overlapChoices ? { overlapChoices } : {}) }), model)
const choice = (more: Partial<OverlapChoice>): OverlapChoice[] => [{ a: 'b', b: 'a', choice: 'subtract', from: 'a', reason: 'A reason', ...more }]
const figures = (row: BudgetRow) => [row.massGtPerYear, row.lodMicrosecondsPerYear, row.chi1MasPerYear, row.chi2MasPerYear, row.barystaticMmPerYear, row.deltaJ2PerYear].map(m => m!.value)

describe('common ground that is counted once', () => {
  it('gives the sum that the series with the other written out of it gives', () => {
    const once = run(regions(), choice({}))
    const written = run(regions(-104))
    figures(once.total).forEach((value, i) => expect(value).toBeCloseTo(figures(written.total)[i]!, 8))
    expect(once.total.derived!.geocentreMmPerYear!.x.value / written.total.derived!.geocentreMmPerYear!.x.value).toBeCloseTo(1, 8)
    once.total.series.chi2Mas.forEach((chi, i) => expect(chi).toBeCloseTo(written.total.series.chi2Mas[i]!, 8))
    once.modelUncertainty!.forEach((line, i) => expect(line.chi1MasPerYear).toBeCloseTo(written.modelUncertainty![i]!.chi1MasPerYear, 8))
    const other = run(regions(), choice({ from: 'b' }))
    expect(other.total.massGtPerYear!.value).toBeCloseTo(-100 + 8 - 0.2 * -100, 8)
  })

  it('keeps both own rows, adds one of the part, and the rows sum to the total', () => {
    const plain = run(regions())
    const once = run(regions(), choice({}))
    expect(once.regions.map(r => r.key)).toEqual(['a', 'b', 'b-off-a'])
    expect(figures(once.regions[0]!)).toEqual(figures(plain.regions[0]!))
    figures(once.total).forEach((value, i) => expect(value).toBeCloseTo(once.regions.reduce((sum, row) => sum + figures(row)[i]!, 0), 9))
    expect(netRegions(once).map(r => r.key)).toEqual(['a', 'b'])
    // The part is the other's own series: half of its error goes with it.
    const [a, b] = once.regions.map(r => r.massGtPerYear!.sigma)
    expect(once.total.massGtPerYear!.sigma).toBeCloseTo(Math.hypot(a!, b! / 2), 9)
  })

  it('goes with the factor and the way of the water of the region that is counted less', () => {
    const once = run(regions(-100, { scale: 0.5, fractionToOcean: 0.25 }), choice({}))
    const written = run(regions(-104, { scale: 0.5, fractionToOcean: 0.25 }))
    figures(once.total).forEach((value, i) => expect(value).toBeCloseTo(figures(written.total)[i]!, 8))
  })

  it('is said with what lies there; both in full keeps the sum and its warning goes', () => {
    const plain = run(regions())
    const kept = run(regions(), choice({ choice: 'keep', from: null }))
    expect(figures(kept.total)).toEqual(figures(plain.total))
    expect([plain, kept].map(r => r.warnings.some(w => w.code === 'overlap'))).toEqual([true, false])
    const [pair] = namedPairs(run(regions(), choice({})))
    expect(pair!.onGroundGtPerYear!.a!.value).toBeCloseTo(-20, 8)
    expect(pair!.onGroundGtPerYear!.b!.value).toBeCloseTo(4, 8)
    expect(sharedGround(pair!)).toMatch(/20\s% of the first and 50\s% of the second/)
    expect(massOnGround(pair!)).toMatch(/the series of Region a holds −20\.0.*that of Region b \+4\.0/)
    expect(settledSentence(pair!)).toBe('Counted once: what the series of Region b holds on the common ground is taken off Region a. A reason.')
  })

  it('warns where three on common ground are taken off each other, which takes the smallest off twice', () => {
    const pair = (a: string, b: string): OverlapChoice => ({ a, b, choice: 'subtract', from: a, reason: '' })
    const three = [...regions(), region('c', box(29, 2, 29.5, 3), 1)]
    const warned = run(three, [pair('a', 'b'), pair('a', 'c'), pair('b', 'c')]).warnings.find(w => w.code === 'taken-twice')
    expect(warned!.regions).toEqual(['a', 'b', 'c'])
    expect(run(three, [pair('a', 'b'), { ...pair('a', 'c'), choice: 'keep', from: null }, pair('b', 'c')]).warnings.some(w => w.code === 'taken-twice')).toBe(false)
  })
})
