import { describe, expect, it } from 'vitest'
import { broughtRows, distinctNames, groundShared, nameAttributes, nameFault } from '../../../app/map/files/broughtRows'
import { readOutlineFeatures } from '../../../shared/geo/outline'
import { box, geographicLibAreaM2 } from '../geo/geodesicArea'

const polygon = (west: number) => ({ type: 'Polygon' as const, coordinates: [box(west, 0, west + 2, 2)] })
const feature = (properties: object, geometry: object) => ({ type: 'Feature', properties, geometry })

describe('outlines of one file', () => {
  it('with a fault stand apart and do not hold up the others', () => {
    const crossed = { type: 'Polygon', coordinates: [[[0, 0], [1, 1], [1, 0], [0, 1], [0, 0]]] }
    const found = readOutlineFeatures({ type: 'FeatureCollection', features: [feature({ name: 'A', rank: 2, open: true }, polygon(0)), feature({ name: 'B' }, crossed), feature({}, { type: 'Point', coordinates: [0, 0] })] })
    expect(found.outlines).toEqual([{ name: 'A', attributes: { name: 'A', rank: '2' }, geometry: polygon(0) }])
    expect(found.faulty).toMatchObject([{ name: 'B', issues: [{ path: expect.stringContaining('features/1/geometry') }] }])
    expect(found.leftOut).toBe(1)
    expect(() => readOutlineFeatures(feature({}, crossed))).toThrow('cross')
  })

  it('get names of their own, whatever stands in the file and the account', () => {
    expect(distinctNames(['Orla', '', 'orla ', 'Bruma', 'Orla'], ['Bruma'])).toEqual(['Orla', 'Outline 2', 'orla (2)', 'Bruma (2)', 'Orla (3)'])
    const long = 'x'.repeat(200)
    const [first, second] = distinctNames([long, long], [])
    expect([first!.length, second!.length, second!.endsWith(' (2)')]).toEqual([120, 120, true])
  })

  it('say which name does not hold', () => {
    const rows = broughtRows([{ name: 'A', geometry: polygon(0) }, { name: 'B', geometry: polygon(5) }], 'basin', [])
    rows[1]!.name = ' a'
    expect(nameFault(rows[0]!, rows, [])).toMatch('Another outline')
    rows[1]!.ticked = false
    expect(nameFault(rows[0]!, rows, [])).toBeNull()
    expect(nameFault(rows[0]!, rows, ['a'])).toMatch('A region has')
  })

  it('offer the attributes that most of them have', () => {
    const attributes = (list: Record<string, string>[]) => nameAttributes(list.map(item => ({ attributes: item, geometry: polygon(0) }))).map(({ key }) => key)
    expect(attributes([{ code: '1', rare: 'x' }, { code: '2' }, { code: '3' }])).toEqual(['code'])
  })

  it('tell the ground that they share, with each other and with regions', async () => {
    const rows = broughtRows([{ name: 'A', geometry: polygon(0) }, { name: 'B', geometry: polygon(1) }, { name: 'C', geometry: polygon(40) }], 'basin', [])
    const shared = await groundShared(rows, [{ id: 'kept', geometry: polygon(41) }], () => false)
    const overlap = geographicLibAreaM2(box(1, 0, 2, 2), 0.05) / 1e6
    for (const [key, other] of [['brought-0', 'brought-1'], ['brought-1', 'brought-0'], ['brought-2', 'kept']] as const) {
      const [found] = shared.get(key)!
      expect(found!.b).toBe(other)
      expect(Math.abs(found!.areaKm2 / overlap - 1)).toBeLessThan(1e-6)
      expect(found!.shareOfA).toBeCloseTo(0.5, 6)
    }
  })
})
