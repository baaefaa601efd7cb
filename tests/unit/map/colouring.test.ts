import { describe, expect, it } from 'vitest'
import { colouringOf, largestOf, measuredWords, paintOf, tintOf } from '../../../app/map/colouring/colouring'
import { legendOf, scaleWords } from '../../../app/map/colouring/legend'
import { largestAnomaly, massInMonth, monthFigure, monthIndex, monthPaint, monthText } from '../../../app/map/colouring/months'
import { listRows, listUnit } from '../../../app/map/colouring/regionList'
import { sharedGrounds } from '../../../app/map/overlapShapes'
import type { RegionItem } from '../../../app/regions/types'
import { polygonsOf } from '../../../shared/geo/parts'
import type { Outline, Position } from '../../../shared/types/domain'

const measured = (value: number, sigma: number) => ({ value, sigma, sigmaWhite: sigma })
const region = (id: string, mass: number | null, more: Partial<RegionItem> = {}) => ({
  id, name: id, kind: 'basin', agency: { id: 'a', name: 'Water Office' }, series: mass === null ? null : {},
  trend: mass === null ? null : { massGtPerYear: measured(mass, 1), lodMicrosecondsPerYear: measured(-mass / 40, 0.02), driftCmPerYear: measured(Math.abs(mass) / 100, 0.01), directionDegEast: -40, fromMjd: 52000, toMjd: 58000 },
  ...more,
}) as unknown as RegionItem
const regions = [region('Loser', -200), region('Gainer', 50), region('Quiet', 0.5), region('Bare', null)]
const paint = (item: RegionItem, colouring: 'mass' | 'day' | 'pole' | 'kind') => paintOf(item, colouring, largestOf(regions, colouring))

describe('the colouring of the regions', () => {
  it('is by mass unless the address names another', () => {
    expect([undefined, 'x', 'pole'].map(colouringOf)).toEqual(['mass', 'mass', 'pole'])
  })

  it('never tells a sign by colour alone: a fall is hatched, and the figure has its sign and unit', () => {
    expect(paint(regions[0]!, 'mass')).toMatchObject({ tone: 'loss', pattern: 'hatch-loss', figure: '−200\u00A0Gt/yr' })
    expect(paint(regions[1]!, 'mass')).toMatchObject({ tone: 'gain', pattern: '', figure: '+50\u00A0Gt/yr' })
    expect(paint(regions[0]!, 'day')).toMatchObject({ tone: 'model', pattern: '', figure: '+5.0\u00A0µs/yr' })
    expect(paint(regions[1]!, 'day')).toMatchObject({ tone: 'model', pattern: 'hatch-model', figure: '−1.3\u00A0µs/yr' })
    expect(paint(regions[0]!, 'pole').figure).toBe('2.0\u00A0cm/yr to 40°\u00A0W')
    expect(paint(regions[0]!, 'kind')).toMatchObject({ pattern: 'kind-basin', figure: 'basin' })
  })

  it('says where there is no series, and leaves ink what does not stand out', () => {
    expect(paint(regions[3]!, 'day')).toMatchObject({ tone: 'ink', figure: 'no series' })
    expect(paint(region('Short', null, { series: {} as RegionItem['series'] }), 'mass').figure).toBe('series too short for a trend')
    expect(paint(regions[2]!, 'mass')).toMatchObject({ tone: 'ink', pattern: '' })
    expect(measuredWords(regions[3]!, 'pole')).toBe('no series')
  })

  it('darkens with size and says how far the scale goes', () => {
    expect(tintOf(200, 200)).toBeGreaterThan(tintOf(50, 200))
    expect(scaleWords(regions, 'day')).toBe('darker is more, up to 5.0\u00A0µs/yr')
    expect(scaleWords(regions, 'mass')).toBe('')
    expect(legendOf(regions, 'mass').map(entry => entry.text)).toEqual(['mass lost', 'mass gained', 'no trend that stands out, or no series'])
    expect(legendOf(regions, 'kind').map(entry => entry.text)).toEqual(['basin'])
  })

  it('is the list’s too', () => {
    expect(listUnit('pole')).toBe('cm/yr ± 1σ')
    expect(listRows(regions, 'day', () => null).map(row => [row.name, row.figure?.value ?? row.without])).toEqual([['Bare', 'no series'], ['Gainer', '−1.25'], ['Loser', '+5.00'], ['Quiet', '−0.013']])
  })
})

describe('the months', () => {
  const data = { maxGapDays: 62, months: ['2002-04', '2002-05'], regions: [{ id: 'Loser', first: 0, massGt: [120, -120], sigmaGt: [1, 1] }, { id: 'Gainer', first: 1, massGt: [3.25], sigmaGt: [1] }] }
  it('say a gap and a missing series, and draw neither as a figure', () => {
    expect([0, 1].map(at => monthPaint(massInMonth(data, 'Gainer', at), largestAnomaly(data)))).toMatchObject([{ tone: 'ink', tint: 0, figure: 'no data this month' }, { tone: 'gain', figure: '+3.3\u00A0Gt' }])
    expect(monthFigure(massInMonth(data, 'Bare', 0))).toBe('no series')
    expect(monthPaint(-120, largestAnomaly(data))).toMatchObject({ tone: 'loss', pattern: 'hatch-loss', figure: '−120\u00A0Gt' })
    expect(listRows(regions, 'month', id => massInMonth(data, id, 0)).map(row => row.figure?.value ?? row.without)).toEqual(['no series', 'no data this month', '+120', 'no series'])
  })
  it('are found by the address, the last unless it names one', () => {
    expect([monthIndex(data.months, '2002-04'), monthIndex(data.months, '1999-01'), monthIndex([], undefined)]).toEqual([0, 1, -1])
    expect(monthText('2002-05')).toBe('May 2002')
  })
})

describe('common ground', () => {
  const square = (west: number, south: number, side: number): Outline => {
    const ring: Position[] = [[west, south], [west + side, south], [west + side, south + side], [west, south + side], [west, south]]
    return { type: 'Polygon', coordinates: [ring] }
  }
  it('is the square that two squares share, on both sides of the antimeridian', async () => {
    const pairs = await sharedGrounds([{ id: 'a', geometry: square(10, 0, 10) }, { id: 'b', geometry: square(15, 5, 10) }, { id: 'c', geometry: square(175, -30, 10) }, { id: 'd', geometry: square(-185, -25, 10) }])
    expect(pairs.map(({ a, b }) => a + b)).toEqual(['ab', 'cd'])
    const reach = (k: number) => polygonsOf(pairs[k]!.shape!.geometry as Outline).flat(2).map(([lon, lat]) => [Math.abs(lon), lat] as const)
    expect([Math.min(...reach(0).map(p => p[0])), Math.max(...reach(0).map(p => p[0])), Math.min(...reach(0).map(p => p[1])), Math.max(...reach(0).map(p => p[1]))]).toEqual([15, 20, 5, 10])
    expect([Math.min(...reach(1).map(p => p[1])), Math.max(...reach(1).map(p => p[1])), Math.min(...reach(1).map(p => p[0]))]).toEqual([-25, -20, 175])
  })
})
