import { describe, expect, it } from 'vitest'
import { alignedRows } from '~/attribution/aligned'
import { belongsUnder, navLinks } from '~/shell/needs'
import { alignedOnDecimal, alignedSigmas, filteredRegions, queryOfSorting, sortedRegions, sortingOfQuery } from '~/regions/regionRows'
import { gapDays, predictionPanels, valueRows } from '~/regions/predictionFigures'
import { poleDirection, regionSentence, totalNotes, totalSentence } from '~/regions/sentences'
import type { Prediction, RegionItem, RegionTotal } from '~/regions/types'

const measured = (value: number, sigma: number) => ({ value, sigmaWhite: sigma, sigma })

function region(name: string, mass: number | null, more: Partial<RegionItem> = {}): RegionItem {
  return {
    name, kind: 'aquifer', agency: { id: 'a', name: 'Water Office' }, outline: { n: 1, sha256: '', areaKm2: 10, centroid: [0, 0] },
    trend: mass === null ? null : { massGtPerYear: measured(mass, 1), lodMicrosecondsPerYear: measured(-mass / 10, 0.1), driftCmPerYear: measured(1, 0.1), directionDegEast: 35, fromMjd: 53005, toMjd: 60310 },
    series: null, ...more,
  } as unknown as RegionItem
}

describe('order of regions', () => {
  const regions = [region('b', -5), region('c', null), region('a', 2), region('d', -200)]

  it('puts the largest loss first and regions without a trend last, either way', () => {
    expect(sortedRegions(regions, { key: 'mass', descending: false }).map(r => r.name)).toEqual(['d', 'b', 'a', 'c'])
    expect(sortedRegions(regions, { key: 'mass', descending: true }).map(r => r.name)).toEqual(['a', 'b', 'd', 'c'])
  })

  it('lives in the address, and leaves out what is the default', () => {
    expect(sortingOfQuery('-area')).toEqual({ key: 'area', descending: true })
    expect(queryOfSorting(sortingOfQuery('-area'))).toBe('-area')
    expect(sortingOfQuery('<script>')).toEqual({ key: 'mass', descending: false })
    expect(queryOfSorting({ key: 'mass', descending: false })).toBeUndefined()
  })
})

describe('finding regions', () => {
  const regions = [region('Tessel Plain', -1), region('Northern ice dome', -2, { kind: 'ice-sector', agency: { id: 'b', name: 'Ice Survey' } })]

  it('looks for every word in name, agency and kind', () => {
    expect(filteredRegions(regions, null, 'ice survey').map(r => r.name)).toEqual(['Northern ice dome'])
    expect(filteredRegions(regions, null, 'AQUIFER plain').map(r => r.name)).toEqual(['Tessel Plain'])
    expect(filteredRegions(regions, null, 'plain survey')).toEqual([])
  })

  it('narrows by kind', () => {
    expect(filteredRegions(regions, 'aquifer', '').map(r => r.name)).toEqual(['Tessel Plain'])
  })
})

describe('figures in a column', () => {
  it('stand on their decimal sign: every text ends as far to the right of it', () => {
    const texts = alignedOnDecimal(['\u2212214.3', '\u2212130', '+18.89', '\u2013'])
    const behind = (text: string) => text.split(/[.\u2008]/)[1]?.length ?? 0
    expect(texts.slice(0, 3).map(behind)).toEqual([2, 2, 2])
    expect(texts[3]).toBe('\u2013')
    expect(texts.map(text => text.replace(/[\u2007\u2008]/g, ''))).toEqual(['\u2212214.3', '\u2212130', '+18.89', '\u2013'])
  })

  it('have errors of one width, on both sides of the decimal sign and before a unit', () => {
    const texts = alignedSigmas(['± 8.4', '± 15', '± <0.01', ''])
    expect(texts).toEqual(['\u2007± 8.4\u2007', '± 15\u2008\u2007\u2007', '± <0.01', ''])
    expect(alignedSigmas(['± 3.6 %', '± 12 %'])).toEqual(['\u2007± 3.6 %', '± 12\u2008\u2007 %'])
    expect(alignedRows([['+5.16 ± 0.20', '–'], ['−42 ± 24', '+21 %']])).toEqual([
      [{ value: '+5.16', sigma: '\u2007± 0.20' }, { value: '–', sigma: '' }],
      [{ value: '−42\u2008\u2007\u2007', sigma: '± 24\u2008\u2007\u2007' }, { value: '+21 %', sigma: '' }],
    ])
  })
})

describe('pages in the head', () => {
  it('mark the part that a page belongs to, and no other', () => {
    const marked = (path: string) => navLinks.filter(link => belongsUnder(link, path)).map(link => link.label)
    expect(marked('/regions/01ARZ3NDEKTSV4RRFFQ69G5FAV/series')).toEqual(['Regions'])
    expect(marked('/grids')).toEqual(['Regions'])
    expect(marked('/runs/01ARZ3NDEKTSV4RRFFQ69G5FAV/attribution')).toEqual(['Scenarios'])
    expect(marked('/')).toEqual([])
    expect(marked('/mapping')).toEqual([])
  })
})

const total = (more: Partial<RegionTotal>): RegionTotal => ({
  regions: 6, withTrend: 6, withoutSeries: 0, massGtPerYear: measured(-429, 28), lodMicrosecondsPerYear: measured(8.75, 0.59), fromMjd: 53005, toMjd: 60676, oneSpan: true, overlaps: [], ...more,
})

describe('sentence over all regions', () => {
  it('says loss, size, error and span', () => {
    expect(totalSentence(total({}))).toBe('Six regions lose 429\u00a0±\u00a028\u00a0Gt per year together, 2004–2024 (1σ).')
  })

  it('says neither where the sum is within its uncertainty', () => {
    expect(totalSentence(total({ massGtPerYear: measured(-20, 28) }))).toMatch(/neither lose nor gain mass within the uncertainty: \u221220/)
  })

  it('does not hide that spans differ, that series are missing, that there is none', () => {
    expect(totalSentence(total({ oneSpan: false }))).toContain('each over its own span within')
    expect(totalNotes(total({ regions: 8, withoutSeries: 1 })).join(' ')).toMatch(/One region has no mass series yet\. One region has a series too short/)
    expect(totalNotes(total({ overlaps: [{ a: '1', b: '2', areaKm2: 5, shareOfA: 0.1, shareOfB: 0.2, aName: 'x', bName: 'y', onGroundGtPerYear: { a: null, b: null } }] }))[0]).toMatch(/^One pair of regions shares ground/)
    expect(totalSentence(total({ regions: 0, withTrend: 0, massGtPerYear: null }))).toBe('No region is in this account yet.')
    expect(totalSentence(total({ regions: 2, withTrend: 0, massGtPerYear: null }))).toMatch(/^Two regions are in this account; none has/)
  })
})

describe('sentence of a region', () => {
  const perGt = { chi1Mas: -0.01, chi2Mas: 0.01, chi3: 0, lodMicroseconds: -0.02, barystaticMm: -0.00276, deltaJ2: 0 }
  const trend = { massGtPerYear: measured(-214, 8), lodMicrosecondsPerYear: measured(4.67, 0.18), driftCmPerYear: measured(6.39, 0.25), directionDegEast: -36, fromMjd: 53005, toMjd: 60676 }

  it('says what was lost and what that is calculated to do', () => {
    expect(regionSentence({ name: 'Dome', hasSeries: true, trend, perGt })).toBe(
      'Dome lost 214\u00a0±\u00a08\u00a0Gt per year, 2004–2024; that is calculated to lengthen the day by 4.67\u00a0±\u00a00.18\u00a0µs per year and to move the pole 6.39\u00a0±\u00a00.25\u00a0cm per year towards 36°\u00a0W (1σ).',
    )
  })

  it('claims no effect where the mass did not change beyond its error', () => {
    const text = regionSentence({ name: 'Dome', hasSeries: true, trend: { ...trend, massGtPerYear: measured(3, 8) }, perGt })
    expect(text).toContain('neither lost nor gained mass')
    expect(text).not.toContain('calculated')
  })

  it('tells the effect of a gigatonne lost, with the sign turned, where there is no series', () => {
    expect(regionSentence({ name: 'Dome', hasSeries: false, trend: null, perGt })).toMatch(/lengthen the day by 0\.020\u00a0µs and move the pole 0\.44\u00a0mm towards 45°\u00a0W/)
  })

  it('turns the direction about with the sign of the mass', () => {
    expect(poleDirection(perGt, 1)).toBeCloseTo(135, 12)
    expect(poleDirection(perGt, -1)).toBeCloseTo(-45, 12)
    expect(poleDirection(perGt, 0)).toBeNull()
  })
})

describe('figures of a prediction', () => {
  const prediction = {
    mjd: [0, 30, 60, 200], massGt: [1, 2, 3, 4], sigmaMassGt: [0.5, 0.5, null, 0.5], lodMicroseconds: [-2, -4, -6, -8], chi1Mas: [1, 2, 3, 4], chi2Mas: [5, 6, 7, 8],
    perGt: { lodMicroseconds: -2 }, trend: null,
  } as unknown as Prediction

  it('carries the one-sigma of each epoch to the length of day, without sign', () => {
    const [mass, day] = predictionPanels(prediction)
    expect(mass!.series[0]!.sigma).toEqual([0.5, 0.5, null, 0.5])
    expect(day!.series[0]!.sigma).toEqual([1, 1, null, 1])
  })

  it('does not join across a gap, and joins months', () => {
    expect(gapDays(prediction.mjd)).toBeLessThan(140)
    expect(gapDays(prediction.mjd)).toBeGreaterThan(31)
    expect(gapDays(Array.from({ length: 20 }, (_, i) => i * 365.25))).toBeGreaterThan(366)
  })

  it('cuts values into pages that miss none', () => {
    const rows = [0, 1].flatMap(page => valueRows(prediction, page, 3))
    expect(rows.map(row => row.massGt)).toEqual([1, 2, 3, 4])
    expect(rows[3]).toMatchObject({ mjd: 200, chi2Mas: 8 })
  })
})
