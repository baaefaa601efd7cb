import { describe, expect, it } from 'vitest'
import { basesOfVersion, watersInCommon, type SeriesFacts } from '../../../shared/series/facts.ts'
import { differentWater, waterOnGround, type NamedPair } from '../../../shared/text/overlaps.ts'
import { factRows } from '../../../shared/text/seriesFacts.ts'

const facts = (more: Partial<SeriesFacts> = {}): SeriesFacts => ({ citation: '', method: '', instrument: '', contains: [], gravimetry: 'unknown', pole: 'unknown', lengthOfDay: 'unknown', ...more })

describe('what a version was made from', () => {
  it('is what its fields answer; where they do not, what the notes say', () => {
    const version = { independence: 'Trend adjusted to the observed pole', source: 'Satellite gravimetry' }
    expect(basesOfVersion({ ...version, facts: null })).toEqual(['gravimetry', 'pole'])
    expect(basesOfVersion({ ...version, facts: facts() })).toEqual(['gravimetry', 'pole'])
    expect(basesOfVersion({ ...version, facts: facts({ gravimetry: 'no', lengthOfDay: 'yes' }) })).toEqual(['pole', 'length-of-day'])
  })

  it('stands in rows, of what is said only', () => {
    expect(factRows(null)).toEqual([])
    expect(factRows(facts())).toEqual([])
    expect(factRows(facts({ instrument: 'Pressure gauges', contains: ['groundwater', 'snow'], gravimetry: 'no', pole: 'no' }))).toEqual([
      { name: 'instrument', text: 'Pressure gauges' }, { name: 'holds', text: 'groundwater and snow' }, { name: 'made', text: 'not from gravimetry and not adjusted to the pole' },
    ])
  })
})

describe('the waters of two series', () => {
  it('are apart, one in the other, or cross', () => {
    expect(watersInCommon(['groundwater'], ['surface-water', 'snow'])).toBe('none')
    expect(watersInCommon(['all'], ['ice'])).toBe('all')
    expect(watersInCommon(['groundwater', 'snow'], ['snow'])).toBe('all')
    expect(watersInCommon(['groundwater', 'snow'], ['snow', 'ice'])).toBe('some')
    expect(watersInCommon([], ['snow'])).toBeNull()
  })

  it('give a reason to keep both only where they are apart', () => {
    const pair = (a: SeriesFacts['contains'], b: SeriesFacts['contains']): NamedPair => ({ a: 'a', b: 'b', aName: 'Basin', bName: 'Dam', areaKm2: 1, shareOfA: 0.1, shareOfB: 1, contains: { a, b } })
    expect(differentWater(pair(['groundwater'], ['surface-water']))).toBe('Different water: groundwater in Basin, surface water in Dam.')
    expect(differentWater(pair(['all'], ['surface-water']))).toBeNull()
    expect(waterOnGround(pair(['all'], ['surface-water']))).toBe('Basin holds all water of the column, Dam surface water: the same water, which counts twice.')
    expect(waterOnGround(pair([], ['surface-water']))).toBe('')
  })
})
